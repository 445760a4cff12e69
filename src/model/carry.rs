//! Carries and pursuits: who had the ball from when to when, and who went after him.

use super::Attack;

/// How the start of a carry was known.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum CarryStart {
    CarrierColumn,
    PlaysTable,
    Event,
    Ball,
}

impl CarryStart {
    pub fn word(self) -> &'static str {
        match self {
            CarryStart::CarrierColumn => "carrier_column",
            CarryStart::PlaysTable => "plays_table",
            CarryStart::Event => "event",
            CarryStart::Ball => "ball",
        }
    }
}

/// How the end of a carry was known, and what it was.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum CarryEnd {
    /// Named by an event mark.
    EventDown,
    EventOut,
    EventScore,
    EventSlide,
    EventFumble,
    EventLateral,
    /// Recognised without a mark.
    SpeedCollapse,
    LeftField,
    CrossedGoal,
    BallLeft,
    /// The carrier column stopped naming him.
    CarrierColumn,
    TrackEnded,
}

impl CarryEnd {
    pub fn word(self) -> &'static str {
        match self {
            CarryEnd::EventDown => "event_down",
            CarryEnd::EventOut => "event_out",
            CarryEnd::EventScore => "event_score",
            CarryEnd::EventSlide => "event_slide",
            CarryEnd::EventFumble => "event_fumble",
            CarryEnd::EventLateral => "event_lateral",
            CarryEnd::SpeedCollapse => "speed_collapse",
            CarryEnd::LeftField => "left_field",
            CarryEnd::CrossedGoal => "crossed_goal",
            CarryEnd::BallLeft => "ball_left",
            CarryEnd::CarrierColumn => "carrier_column",
            CarryEnd::TrackEnded => "track_ended",
        }
    }

    /// Whether the carrier was brought down or out, so that a defender in contact made a stop.
    pub fn is_stop(self) -> bool {
        matches!(self, CarryEnd::EventDown | CarryEnd::EventOut | CarryEnd::SpeedCollapse | CarryEnd::LeftField | CarryEnd::EventFumble)
    }
}

/// One player's possession with the open field ahead. Frame indices are inclusive at both ends.
#[derive(Clone, Debug, PartialEq)]
pub struct Carry {
    /// Counted from 1 within the play.
    pub number: u32,
    /// Mover index.
    pub carrier: usize,
    pub start: usize,
    pub end: usize,
    pub start_how: CarryStart,
    pub end_how: CarryEnd,
    /// 0..1.
    pub confidence: f64,
    pub attack: Attack,
    /// Mover indices in contact when a stop ended the carry.
    pub stopped_by: Vec<usize>,
}

/// From which side of the runner the contact came: the nearer sideline is outside.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SideOfRunner {
    Inside,
    Outside,
}

impl SideOfRunner {
    pub fn word(self) -> &'static str {
        match self {
            SideOfRunner::Inside => "inside",
            SideOfRunner::Outside => "outside",
        }
    }
}

/// How a pursuit ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Ending {
    /// Contact, and the carrier was down or out within a second.
    Stop,
    /// Contact, and the carrier went on.
    ContactLost,
    /// Never in contact, though he had a feasible intercept and let it go.
    ChanceLost,
    /// Never feasible: listed, not charged.
    NoChance,
    /// Held by a blocker for most of the carry: listed, charged to the block.
    OutOfIt,
    /// He still had his chance when a team-mate made the stop, or when the carry ended without a score.
    Covered,
}

impl Ending {
    pub fn word(self) -> &'static str {
        match self {
            Ending::Stop => "stop",
            Ending::ContactLost => "contact_lost",
            Ending::ChanceLost => "chance_lost",
            Ending::NoChance => "no_chance",
            Ending::OutOfIt => "out_of_it",
            Ending::Covered => "covered",
        }
    }
}

/// Where a pursuit came to contact.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Contact {
    pub frame: usize,
    /// Angle between the defender's velocity and the reverse of the carrier's: 0 head-on, π from behind.
    pub angle_rad: Option<f64>,
    pub side: Option<SideOfRunner>,
    pub closing_yps: f64,
    pub carrier_speed_yps: f64,
    pub defender_speed_yps: f64,
}

/// One defender against one carry, frame indices inclusive. Found from the tracks alone; what needs the
/// reach model (chance lost, no chance) is added by the engine.
#[derive(Clone, Debug, PartialEq)]
pub struct Pursuit {
    /// Counted from 1 within the carry's play, in order of (carry, defender, start).
    pub number: u32,
    pub defender: usize,
    pub start: usize,
    pub end: usize,
    pub contact: Option<Contact>,
    /// True when contact ended in the carrier being down or out within the time allowed.
    pub is_stop: bool,
    /// One for each frame from `start` to `end`: held by a blocker.
    pub blocked: Vec<bool>,
}
