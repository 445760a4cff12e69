//! From pursuits to players and teams: pooling, adjustment for the situation, ranks with intervals, sensitivity.
//! No coordinates here: everything comes from the pursuits table.

pub mod chance;
pub mod measure;
pub mod player;
pub mod position;
pub mod position_effect;
pub mod ranking;
pub mod roster;
pub mod scout;
pub mod sensitivity;
pub mod situation;
pub mod steering;
pub mod team;

pub use chance::own_yd;
pub use measure::{Measured, PoolingReport};
pub use position::Group;
pub use ranking::{Ranking, rank, rank_players};
pub use scout::{SideComparison, SideSplit, compare_sides};
pub use sensitivity::{rank_swing, write_rank_swing};
pub use situation::{SituationFit, Term};
pub use team::rank_teams;
