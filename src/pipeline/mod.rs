//! The whole job in order; the only place that spreads work over threads.
//!
//! ```text
//! files ──ingest──▶ games ──audit──▶ tables of the game ──▶ OUT/…/game=<id>/
//!                                                    └────▶ rank, page, clips, audit.json
//! ```
//!
//! One thread reads games ahead while the others audit the plays of the game at hand; three games are in memory at
//! most. Results are collected in order of play, so that the number of threads cannot change a byte.

mod brief;
mod demo;
mod error;
mod finish;
mod game;
mod request;
mod run;
mod sensitivity;
mod told;

pub use brief::each_game_in_brief;
pub use demo::{DemoFormat, DemoRequest, DemoSummary, write_demo};
pub use error::PipelineError;
pub use game::{AuditedGame, audit_game};
pub use request::{AuditRequest, AuditSummary, FramesMode, Progress, Silent, Unit};
pub use run::run_audit;
