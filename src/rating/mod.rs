//! From pursuits to players and teams: pooling, adjustment for the situation, ranks with intervals, sensitivity.
//! No coordinates here: everything comes from the pursuits table, which a [`Season`] keeps in packed form.

pub mod chance;
pub mod measure;
mod packed;
mod player;
pub mod position_effect;
pub mod ranking;
mod roster;
pub mod scout;
pub mod season;
pub mod sensitivity;
pub mod situation;
mod steering;
pub mod team;
mod texts;

pub use crate::model::Group;
pub use chance::own_yd;
pub use measure::{Measured, PoolingReport};
pub use ranking::{Ranking, rank, rank_players};
pub use scout::{SideComparison, SideSplit, compare_sides};
pub use season::Season;
pub use sensitivity::{rank_swing, write_rank_swing};
pub use situation::{SituationFit, Term};
pub use team::rank_teams;
