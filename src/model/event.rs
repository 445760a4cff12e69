//! Event marks, as far as possession needs them.

/// What a file's event text says about possession.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum EventMark {
    Snap,
    HandOff,
    PassThrown,
    /// A pass reaches its receiver, not yet known whether he holds it.
    PassArrived,
    Catch,
    Incomplete,
    Interception,
    Lateral,
    Kick,
    KickReceived,
    FairCatch,
    Touchback,
    Fumble,
    Recovery,
    FirstContact,
    Down,
    OutOfBounds,
    Score,
    Slide,
    Sack,
    /// A mark with no bearing on possession.
    Other,
}
