//! A game as delivered: its plays, what was odd, and what became of every row.

use super::row::{BallSpot, Row};
use super::tables::Tables;
use super::texts::Attribute;
use crate::model::{EventMark, Field, Findings, Play, SetAside, SourceRow};
use std::collections::{BTreeMap, BTreeSet};
use std::path::PathBuf;
use std::sync::{Arc, Mutex};

/// What became of the rows: read = in plays + set aside, always.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct RowAccount {
    pub rows_read: u64,
    pub in_plays: u64,
    pub set_aside: BTreeMap<SetAside, u64>,
}

impl RowAccount {
    pub fn set_aside_total(&self) -> u64 {
        self.set_aside.values().sum()
    }

    /// Whether every row read is accounted for.
    pub fn balances(&self) -> bool {
        self.rows_read == self.in_plays + self.set_aside_total()
    }

    pub fn add(&mut self, other: &RowAccount) {
        self.rows_read += other.rows_read;
        self.in_plays += other.in_plays;
        for (why, count) in &other.set_aside {
            *self.set_aside.entry(*why).or_default() += count;
        }
    }
}

/// A whole game.
#[derive(Clone, Debug, PartialEq)]
pub struct Game {
    pub id: Arc<str>,
    /// In natural order of the play id.
    pub plays: Vec<Play>,
    pub findings: Findings,
    pub account: RowAccount,
    /// In order of source.
    pub set_aside: Vec<(SourceRow, SetAside)>,
    /// This game was delivered earlier and is to be redone, because more of its rows turned up later.
    pub replaces: bool,
}

/// Rows of the input that name no game: they belong to none, and are handed out at the end.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Gameless {
    pub findings: Findings,
    pub account: RowAccount,
    pub set_aside: Vec<(SourceRow, SetAside)>,
}

/// What holds for all games of an input.
#[derive(Debug)]
pub(crate) struct Context {
    pub field: Field,
    /// Further texts for the ball, lower case.
    pub ball: Vec<String>,
    /// Event texts in normal form with their marks, from the mapping file.
    pub events: BTreeMap<String, EventMark>,
    pub frame_rate_hz: Option<f64>,
    pub tables: Tables,
    pub files: Vec<PathBuf>,
    /// Row vectors of games done with: fresh memory costs more than the rows that go into it.
    pub spare: Mutex<Vec<Vec<Row>>>,
}

/// Spare vectors kept.
const SPARES: usize = 3;

impl Context {
    pub fn empty_rows(&self) -> Vec<Row> {
        self.spare.lock().ok().and_then(|mut spare| spare.pop()).unwrap_or_default()
    }

    pub fn give_back(&self, mut rows: Vec<Row>) {
        rows.clear();
        if let Ok(mut spare) = self.spare.lock()
            && spare.len() < SPARES
        {
            spare.push(rows);
        }
    }
}

/// A game's rows, not yet grouped. Reading is one thing after the other, grouping is not: [`RawGame::assemble`] needs
/// nothing but what it holds, so that a pipeline may call it on any thread.
#[derive(Debug)]
pub struct RawGame {
    pub(crate) id: Arc<str>,
    pub(crate) rows: Vec<Row>,
    pub(crate) ball: Vec<BallSpot>,
    pub(crate) texts: Vec<Arc<str>>,
    pub(crate) attributes: Vec<Attribute>,
    pub(crate) context: Arc<Context>,
    pub(crate) is_scattered: bool,
    pub(crate) replaces: bool,
}

impl RawGame {
    pub fn id(&self) -> &Arc<str> {
        &self.id
    }
    pub fn rows(&self) -> usize {
        self.rows.len()
    }
    /// The files its rows came from, as indices into the input's list.
    pub fn files(&self) -> BTreeSet<u16> {
        // Rows of one file lie together, so that the set is asked once a run.
        self.rows.chunk_by(|a, b| a.file == b.file).map(|run| run[0].file).collect()
    }
    /// The input's list of files.
    pub fn paths(&self) -> Vec<PathBuf> {
        self.context.files.clone()
    }
    /// Whether it was delivered earlier and is to be redone.
    pub fn replaces(&self) -> bool {
        self.replaces
    }
}
