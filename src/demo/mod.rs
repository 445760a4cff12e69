//! Invented games: full line-ups of nobody, with the truth about who carried and who was given which fault.
//!
//! Nothing here is taken from a real game. Athletes move by the drag model, defenders pursue by their characters,
//! and tags with noise look on. A game depends on (seed, index) alone.

pub mod ball;
pub mod body;
pub mod carrying;
pub mod chase;
mod convoy;
pub mod event;
pub mod game;
mod job;
mod kicks;
pub mod kind;
pub mod league;
mod lineup;
mod loose;
mod names;
pub mod options;
pub mod parquet;
mod passes;
pub mod plan;
pub mod planted;
pub mod plays;
pub mod recorder;
pub mod row;
mod runs;
pub mod script;
pub mod stage;
pub mod tags;
pub mod text;
pub mod truth;
pub mod untidy;
pub mod write;

pub use carrying::CarryStop;
pub use event::DemoEvent;
pub use game::{CarryTruth, DemoGame, DemoMover, DemoPlay, generate_game};
pub use kind::PlayKind;
pub use league::{Athlete, Character};
pub use options::DemoOptions;
pub use row::{DemoRow, rows};
pub use tags::DemoTrack;
pub use write::{Format, WriteError, Written, write_games};
