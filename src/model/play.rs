//! A play as read: movers, frames, raw tracks, marks and hints. Nothing cleaned, nothing judged.

use super::{EventMark, Field};
use std::sync::Arc;

/// One mover of a play, the ball excluded.
#[derive(Clone, Debug, PartialEq)]
pub struct Mover {
    pub id: Arc<str>,
    pub name: Option<Arc<str>>,
    /// Club or home/away label, as given; two movers are opponents when both have one and they differ.
    pub side: Option<Arc<str>>,
    pub position: Option<Arc<str>>,
    pub jersey: Option<Arc<str>>,
}

impl Mover {
    pub fn opposes(&self, other: &Mover) -> bool {
        matches!((&self.side, &other.side), (Some(a), Some(b)) if a != b)
    }
}

/// One mover's rows in a play, sorted by frame (ties in order of x, then y, so that row order cannot matter).
/// All vectors have the same length; `speed_yps` and `heading_rad` are empty when the file has none,
/// NaN where one row has none.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct RawTrack {
    /// Index into [`Play::frames`].
    pub frame_index: Vec<u32>,
    pub x_yd: Vec<f64>,
    pub y_yd: Vec<f64>,
    pub speed_yps: Vec<f64>,
    /// Counter-clockwise from +x.
    pub heading_rad: Vec<f64>,
    /// Where each row stands in the input.
    pub source: Vec<SourceRow>,
}

/// A row of the input: index of the file in the audit's list of inputs, and the row in it, the first data row being 1.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct SourceRow {
    pub file: u16,
    pub row: u32,
}

/// Why a row was not used.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum SetAside {
    MissingCoordinate,
    MissingKey,
    ExactRepeat,
    ConflictingRepeat,
    Jump,
    TrackTooShort,
}

impl SetAside {
    pub fn word(self) -> &'static str {
        match self {
            SetAside::MissingCoordinate => "missing coordinate",
            SetAside::MissingKey => "missing game, play, frame or mover",
            SetAside::ExactRepeat => "exact repeat of another row",
            SetAside::ConflictingRepeat => "same mover and frame at another place",
            SetAside::Jump => "a place no runner reaches in the time",
            SetAside::TrackTooShort => "track of too few frames",
        }
    }
}

/// Which way a side attacks.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Attack {
    TowardsPlusX,
    TowardsMinusX,
}

/// What the file or a plays table says beyond the coordinates; all of it optional.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct PlayHints {
    /// Carrier column: (frame index, mover index) in order of frame, only rows that name a carrier.
    pub carrier_marks: Vec<(u32, u32)>,
    /// Carrier named for the whole play (plays table): mover index.
    pub carrier: Option<u32>,
    /// Direction in which the side with the ball at the snap attacks.
    pub attack: Option<Attack>,
    pub kind: Option<Arc<str>>,
    /// Film: seconds into the video at which the play's first frame is seen.
    pub film_start_s: Option<f64>,
}

/// A play as read. Movers are sorted by id; `frames` are the file's own numbers, sorted and distinct.
#[derive(Clone, Debug, PartialEq)]
pub struct Play {
    pub game: Arc<str>,
    pub play: Arc<str>,
    pub field: Field,
    pub frames: Vec<i64>,
    /// Seconds from the play's first frame, one for each of `frames`, strictly increasing.
    pub time_s: Vec<f64>,
    pub movers: Vec<Mover>,
    /// One for each of `movers`.
    pub tracks: Vec<RawTrack>,
    pub ball: Option<RawTrack>,
    /// (frame index, mark), each mark once a frame, in order of frame.
    pub events: Vec<(u32, EventMark)>,
    pub hints: PlayHints,
}
