//! Reach: where a player can be after a time, and the speed that a spot asks of him.
//!
//! Bounded push against linear drag, dv/dt = α (V u − v), |u| ≤ 1 (Fujimura & Sugihara 2005, *Systems and
//! Computers in Japan* 36(6)). Along a straight line it is the mono-exponential sprint law of Furusawa, Hill &
//! Parkinson (1927). What can be reached after t is exactly a disc:
//!
//! ```text
//! centre  c(t) = p + v a(t)            a(t) = (1 − e^{−αt}) / α     seconds of coasting
//! radius  R(t) = V b(t) + reach        b(t) = t − a(t)              seconds of driving
//! ```
//!
//! | symbol | meaning | unit |
//! |---|---|---|
//! | p, v | place and velocity now | yd, yd/s |
//! | V | top speed | yd/s |
//! | α | drag rate | 1/s |
//! | u | push, share of full | – |

use crate::base::V2;
use crate::model::settings::Settings;

/// The motion model's constants.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Drag {
    pub alpha_per_s: f64,
    pub reach_yd: f64,
}

/// Place and velocity of a player. Yards, yd/s.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct State {
    pub pos_yd: V2,
    pub vel_yps: V2,
}

impl Drag {
    pub fn of(settings: &Settings) -> Drag {
        Drag { alpha_per_s: settings.motion.alpha_per_s, reach_yd: settings.carry.reach_yd }
    }

    /// Share of a velocity that is left after `t_s`: e^{−αt}.
    #[inline]
    pub fn decay(&self, t_s: f64) -> f64 {
        (-self.alpha_per_s * t_s).exp()
    }

    /// a(t), seconds of coasting: how far a velocity of one carries.
    #[inline]
    pub fn coast_s(&self, t_s: f64) -> f64 {
        -(-self.alpha_per_s * t_s).exp_m1() / self.alpha_per_s
    }

    /// b(t), seconds of driving: how far full push at a top speed of one carries from rest.
    #[inline]
    pub fn drive_s(&self, t_s: f64) -> f64 {
        t_s - self.coast_s(t_s)
    }

    /// Centre and radius of what can be reached after `t_s`, the arm's reach included. Yards.
    ///
    /// ```
    /// use tailchase::{base::V2, engine::reach::{Drag, State}};
    /// // Fujimura & Sugihara's constants in metres: 7.8 (1 − (1 − e^{−1.3})/1.3) = 3.435… after one second.
    /// let drag = Drag { alpha_per_s: 1.3, reach_yd: 0.0 };
    /// let (_, radius) = drag.disc(State { pos_yd: V2::ZERO, vel_yps: V2::ZERO }, 7.8, 1.0);
    /// assert!((radius - 3.4351907582).abs() < 1e-9);
    /// ```
    pub fn disc(&self, from: State, top_yps: f64, t_s: f64) -> (V2, f64) {
        (from.pos_yd + from.vel_yps * self.coast_s(t_s), top_yps * self.drive_s(t_s) + self.reach_yd)
    }

    /// Speed needed to be at `spot_yd` after `t_s`: max(|q − c| − reach, 0) / b. Infinite at t = 0 out of contact.
    pub fn needed_yps(&self, from: State, spot_yd: V2, t_s: f64) -> f64 {
        let centre = from.pos_yd + from.vel_yps * self.coast_s(t_s);
        let short_yd = ((spot_yd - centre).norm() - self.reach_yd).max(0.0);
        if short_yd == 0.0 {
            return 0.0;
        }
        short_yd / self.drive_s(t_s).max(0.0)
    }

    /// The exact state after a step of `dt_s` under a constant push (share of full, may exceed 1 in real data).
    pub fn step(&self, from: State, push: V2, top_yps: f64, dt_s: f64) -> State {
        let coast_s = self.coast_s(dt_s);
        let drive_s = dt_s - coast_s;
        let keep = self.decay(dt_s);
        State {
            pos_yd: from.pos_yd + from.vel_yps * coast_s + push * (top_yps * drive_s),
            vel_yps: from.vel_yps * keep + push * (top_yps * (1.0 - keep)),
        }
    }

    /// The constant push that leads from one velocity to the next: u = (v₁ − v₀ e^{−αΔt}) / (V (1 − e^{−αΔt})).
    pub fn push_used(&self, before_yps: V2, after_yps: V2, top_yps: f64, dt_s: f64) -> V2 {
        let keep = self.decay(dt_s);
        (after_yps - before_yps * keep) / (top_yps * (1.0 - keep))
    }

    /// Least time in which `spot_yd` comes within the reach at `top_yps`; 0 in contact.
    ///
    /// The disc grows past every spot in the end, and |q − c(t)| − R(t) may touch zero more than once only when
    /// coasting carries the player past the spot; the first zero is taken.
    /// No result (infinite) for a top speed that is not positive.
    pub fn time_to_spot_s(&self, from: State, spot_yd: V2, top_yps: f64) -> f64 {
        self.time_to_spot_after_s(from, spot_yd, top_yps, 0.0)
    }

    /// As [`Drag::time_to_spot_s`], the first time at or after `after_s`.
    pub fn time_to_spot_after_s(&self, from: State, spot_yd: V2, top_yps: f64, after_s: f64) -> f64 {
        let short_yd = |t_s: f64| {
            let (centre, radius) = self.disc(from, top_yps, t_s);
            (spot_yd - centre).norm() - radius
        };
        if short_yd(after_s) <= 0.0 {
            return after_s;
        }
        if top_yps <= 0.0 {
            return f64::INFINITY;
        }
        // The gap closes at |v| + V at most, so this step can never jump over the first zero.
        let fastest_yps = from.vel_yps.norm() + top_yps;
        let mut t_s = after_s;
        for _ in 0..10_000 {
            let short = short_yd(t_s);
            if short < 1e-12 {
                break;
            }
            t_s += (short / fastest_yps).max(1e-13);
        }
        t_s
    }
}
