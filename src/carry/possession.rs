//! A possession: the step between what a source says and a carry.

use crate::model::{CarryEnd, CarryStart};

/// How the ball was gained, as far as the rules differ.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Gain {
    /// Took the snap: a carry only from where he runs across the line of scrimmage.
    Snap,
    /// Had it when the data began, or named by the file: taken as given.
    Held,
    HandOff,
    /// A pass reached him and nothing says that he dropped it.
    Arrived,
    Catch,
    Interception,
    KickReceived,
    Lateral,
    Recovery,
}

/// One player's possession, frames inclusive.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Possession {
    pub mover: usize,
    pub start: usize,
    pub end: usize,
    pub gain: Gain,
    pub start_how: CarryStart,
    /// None: not yet known, to be read from the tracks; `end` is then the last frame that it can be.
    pub end_how: Option<CarryEnd>,
    /// The ball left by a pass or a kick: no carry for the player who took the snap.
    pub thrown: bool,
    pub confidence: f64,
}
