//! How a defender pushes, by his character, when he goes after a carrier who attacks +x.

use super::body::Body;
use super::league::Character;
use crate::base::V2;
use crate::engine::foresight::{Forecast, Foresight};
use crate::engine::reach::{Drag, State};
use crate::model::{Field, Settings};
use std::f64::consts::PI;

/// The error of those who run too deep or too flat, radians.
pub const TILT_RAD: f64 = 15.0 * PI / 180.0;

/// What defenders expect of a carrier: the foreseeable path at the default settings, met within `reach_yd`.
pub fn expectation(field: Field, reach_yd: f64) -> Forecast {
    let mut forecast = Forecast::of(&Settings::default());
    forecast.field = field;
    forecast.drag = Drag { alpha_per_s: super::body::ALPHA_PER_S, reach_yd };
    forecast
}

/// The carrier as everybody sees him at one moment.
pub struct Quarry {
    body: Body,
    path: Foresight,
}

impl Quarry {
    pub fn seen(carrier: &Body, forecast: &Forecast) -> Quarry {
        let state = State { pos_yd: carrier.pos_yd, vel_yps: carrier.vel_yps };
        Quarry { body: *carrier, path: Foresight::new(std::iter::once(state), carrier.top_speed_yps, forecast) }
    }

    /// The best direction of push that can be known: towards the earliest meeting on the foreseeable path, or where
    /// the least speed is needed when there is none.
    pub fn best_direction(&self, chaser: &Body) -> V2 {
        let state = State { pos_yd: chaser.pos_yd, vel_yps: chaser.vel_yps };
        let meeting = self.path.path(0).aim(0, state, chaser.top_speed_yps);
        meeting.and_then(|m| m.aim_yd.unit()).unwrap_or_else(|| self.bearing(chaser))
    }

    /// Direction to where the carrier is.
    pub fn bearing(&self, chaser: &Body) -> V2 {
        (self.body.pos_yd - chaser.pos_yd).unit().unwrap_or(V2::EAST)
    }

    /// The push of a defender of this character, once he has broken on the ball; its length is the caller's.
    pub fn direction(&self, chaser: &Body, character: Character) -> V2 {
        match character {
            Character::RunsAtMan => self.bearing(chaser),
            Character::Deep => tilted(self.best_direction(chaser), TILT_RAD),
            Character::Flat => tilted(self.best_direction(chaser), -TILT_RAD),
            Character::Sound | Character::Late | Character::Slow => self.best_direction(chaser),
        }
    }
}

/// A direction turned towards downfield (+x) by `deep_rad`, away from it where that is negative; it stops at straight
/// downfield and at straight upfield, where there is nothing deeper or flatter.
pub fn tilted(direction: V2, deep_rad: f64) -> V2 {
    let angle_rad = direction.angle_rad();
    let size_rad = (angle_rad.abs() - deep_rad).clamp(0.0, PI);
    V2::polar(size_rad.copysign(angle_rad))
}
