//! What an audit needs, and what it gives back.

use crate::ingest::IngestOptions;
use crate::model::Settings;
use crate::store::{AuditInfo, PlayerRow, TeamRow};
use std::num::NonZeroUsize;
use std::path::PathBuf;

/// What is counted on the way.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Unit {
    Bytes,
    Games,
    Plays,
}

/// Told how far the work is; called from any thread.
pub trait Progress: Sync {
    fn start(&self, doing: &str, total: Option<u64>, unit: Unit);
    fn advance(&self, by: u64);
    fn finish(&self);
}

/// Tells nobody.
#[derive(Clone, Copy, Debug, Default)]
pub struct Silent;

impl Progress for Silent {
    fn start(&self, _doing: &str, _total: Option<u64>, _unit: Unit) {}
    fn advance(&self, _by: u64) {}
    fn finish(&self) {}
}

/// Which pursuits get their frames written.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum FramesMode {
    None,
    /// Each player's most telling pursuit of each game.
    #[default]
    Told,
    All,
}

impl FramesMode {
    pub fn word(self) -> &'static str {
        match self {
            FramesMode::None => "none",
            FramesMode::Told => "told",
            FramesMode::All => "all",
        }
    }
}

/// An audit to run.
#[derive(Clone, Debug)]
pub struct AuditRequest {
    pub inputs: Vec<PathBuf>,
    pub ingest: IngestOptions,
    pub settings: Settings,
    pub out: PathBuf,
    /// All cores when none is given.
    pub threads: Option<NonZeroUsize>,
    pub frames: FramesMode,
    pub fresh: bool,
    /// Rank again under other settings, to see how much a place hangs on them.
    pub sensitivity: bool,
}

/// An audit that was run.
#[derive(Clone, Debug)]
pub struct AuditSummary {
    pub info: AuditInfo,
    pub players: Vec<PlayerRow>,
    pub teams: Vec<TeamRow>,
    pub page: PathBuf,
    pub games_done: usize,
    pub games_kept: usize,
    /// Charged pursuits without a whole account: listed, but no chance.
    pub broken_accounts: usize,
    /// Pursuits of defenders without a side: in no side's figures.
    pub without_side: usize,
}
