//! Pursuits packed small: numbers that may be missing in eight bytes, texts as codes, the rest as counters.

use super::chance::Account;
use super::texts::{Code, Recoding};

/// A finite number or nothing, in the room of a number alone.
#[derive(Clone, Copy, Debug)]
pub struct Packed(f64);

impl Packed {
    pub fn of(value: Option<f64>) -> Packed {
        Packed(value.unwrap_or(f64::NAN))
    }

    /// None also for a value that was not finite.
    pub fn get(self) -> Option<f64> {
        Some(self.0).filter(|v| v.is_finite())
    }
}

/// A charged pursuit with a whole account.
#[derive(Clone, Debug)]
pub struct Chance {
    pub account: Account,
    pub start_range_yd: Packed,
    pub start_bearing_deg: Packed,
    pub capability_ratio: Packed,
    pub carrier_speed_yps: Packed,
    pub closing_median_yps: Packed,
    pub line_rate_median_degps: Packed,
    pub on_course_share: Packed,
    pub lean_deg: Packed,
    pub play: Code,
    pub defender: Code,
    pub side: Option<Code>,
    pub position: Option<Code>,
    pub play_kind: Option<Code>,
}

impl Chance {
    pub fn recode(&mut self, codes: &Recoding) {
        (self.play, self.defender) = (codes.of(self.play), codes.of(self.defender));
        (self.side, self.position, self.play_kind) =
            (codes.of_some(self.side), codes.of_some(self.position), codes.of_some(self.play_kind));
    }
}

/// One finite value of a pursuit, chance or not.
#[derive(Clone, Copy, Debug)]
pub struct Sample {
    pub defender: Code,
    pub side: Option<Code>,
    pub value: f64,
}

impl Sample {
    pub fn recode(&mut self, codes: &Recoding) {
        (self.defender, self.side) = (codes.of(self.defender), codes.of_some(self.side));
    }
}

/// How a defender is labelled in some of a game's pursuits.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Label {
    pub defender: Code,
    pub name: Option<Code>,
    pub side: Option<Code>,
    pub position: Option<Code>,
}

impl Label {
    pub fn recoded(&self, codes: &Recoding) -> Label {
        Label {
            defender: codes.of(self.defender),
            name: codes.of_some(self.name),
            side: codes.of_some(self.side),
            position: codes.of_some(self.position),
        }
    }
}

/// Pursuits that carry one label, chances and others.
#[derive(Clone, Copy, Debug, Default)]
pub struct Tally {
    pub pursuits: u32,
    pub stops: u32,
    pub contacts_lost: u32,
    pub chances_lost: u32,
}

impl Tally {
    pub fn add(&mut self, more: &Tally) {
        self.pursuits += more.pursuits;
        self.stops += more.stops;
        self.contacts_lost += more.contacts_lost;
        self.chances_lost += more.chances_lost;
    }
}

/// Finite values added up in order; the mean is that of adding them all at once.
#[derive(Clone, Copy, Debug, Default)]
pub struct RunningMean {
    total: f64,
    n: u32,
}

impl RunningMean {
    pub fn add(&mut self, value: f64) {
        if value.is_finite() {
            self.total += value;
            self.n += 1;
        }
    }

    pub fn append(&mut self, more: &RunningMean) {
        self.total += more.total;
        self.n += more.n;
    }

    pub fn value(self) -> Option<f64> {
        (self.n > 0).then(|| self.total / f64::from(self.n))
    }
}
