//! Event texts of the invented games and what they mean.

use crate::model::EventMark;

/// What happens in an invented play.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum DemoEvent {
    BallSnap,
    Handoff,
    PassForward,
    Caught,
    Incomplete,
    Interception,
    Kick,
    KickReceived,
    Fumble,
    Recovery,
    Lateral,
    FirstContact,
    Tackle,
    OutOfBounds,
    Touchdown,
}

impl DemoEvent {
    /// The text in the file.
    pub fn text(self) -> &'static str {
        use DemoEvent::*;
        match self {
            BallSnap => "ball_snap",
            Handoff => "handoff",
            PassForward => "pass_forward",
            Caught => "caught",
            Incomplete => "incomplete",
            Interception => "interception",
            Kick => "kick",
            KickReceived => "kick_received",
            Fumble => "fumble",
            Recovery => "recovery",
            Lateral => "lateral",
            FirstContact => "first_contact",
            Tackle => "tackle",
            OutOfBounds => "out_of_bounds",
            Touchdown => "touchdown",
        }
    }

    /// What the text says about possession.
    pub fn mark(self) -> EventMark {
        use DemoEvent::*;
        match self {
            BallSnap => EventMark::Snap,
            Handoff => EventMark::HandOff,
            PassForward => EventMark::PassThrown,
            Caught => EventMark::Catch,
            Incomplete => EventMark::Incomplete,
            Interception => EventMark::Interception,
            Kick => EventMark::Kick,
            KickReceived => EventMark::KickReceived,
            Fumble => EventMark::Fumble,
            Recovery => EventMark::Recovery,
            Lateral => EventMark::Lateral,
            FirstContact => EventMark::FirstContact,
            Tackle => EventMark::Down,
            OutOfBounds => EventMark::OutOfBounds,
            Touchdown => EventMark::Score,
        }
    }
}
