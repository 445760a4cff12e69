//! Bearing: the line of sight from defender to carrier, its rate, the closest point of approach, with error bars.
//!
//! | symbol | meaning |
//! |---|---|
//! | r | carrier less defender, yd |
//! | w | carrier's velocity less defender's, yd/s |
//! | λ | bearing, atan2(r_y, r_x) |
//!
//! Textbook identities: λ̇ = (r × w)/|r|²; closing speed −(r·w)/|r|; t* = −(r·w)/|w|²; miss = (r × w)/|w|.
//! Sigmas by the delta method; both axes of both movers are independent and share one covariance each.

use super::reach::State;
use crate::base::V2;
use crate::model::Cov;

/// Relative motion of carrier and defender at one instant. Signs: counter-clockwise positive, so that a positive
/// miss passes to the defender's left.
///
/// ```
/// use tailchase::{base::V2, engine::bearing::{Sight, Spread}, engine::reach::State};
/// let defender = State { pos_yd: V2::new(0.0, 0.0), vel_yps: V2::new(4.0, 7.0) };
/// let carrier = State { pos_yd: V2::new(30.0, 10.0), vel_yps: V2::new(-2.0, 5.0) };
/// let sight = Sight::new(carrier, defender, Spread::default()).unwrap();
/// assert!(sight.line_rate_radps.abs() < 1e-12); // a steady bearing
/// assert!(sight.miss_yd.abs() < 1e-12 && (sight.cpa_s - 5.0).abs() < 1e-12); // is a collision course
/// ```
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Sight {
    pub range_yd: f64,
    pub bearing_rad: f64,
    pub bearing_sigma_rad: f64,
    pub line_rate_radps: f64,
    pub line_rate_sigma_radps: f64,
    pub closing_yps: f64,
    pub closing_sigma_yps: f64,
    /// Time to the closest point of approach; negative when it has passed. 0 when there is no relative motion.
    pub cpa_s: f64,
    /// Distance there, signed; the present range when it has passed.
    pub miss_yd: f64,
    pub miss_sigma_yd: f64,
    /// Which way the carrier's own motion turns the line: +1 counter-clockwise, −1 clockwise, 0 neither.
    pub carrier_turns: f64,
}

/// Sum of the two movers' covariances of place and velocity, one axis.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Spread {
    pub place_yd2: f64,
    pub cross: f64,
    pub velocity_yps2: f64,
}

impl Spread {
    pub fn of(a: &Cov, b: &Cov) -> Spread {
        Spread { place_yd2: a.pp + b.pp, cross: a.pv + b.pv, velocity_yps2: a.vv + b.vv }
    }

    /// Standard error of a function with gradients `by_place` and `by_velocity`.
    fn sigma(&self, by_place: V2, by_velocity: V2) -> f64 {
        let variance =
            by_place.norm2() * self.place_yd2 + by_velocity.norm2() * self.velocity_yps2 + 2.0 * by_place.dot(by_velocity) * self.cross;
        variance.max(0.0).sqrt()
    }
}

/// 97.5 % point of the standard normal: two-sided tests at 95 %.
pub const TWO_SIDED: f64 = 1.959963984540054;
/// 95 % point: one-sided tests at 95 %.
pub const ONE_SIDED: f64 = 1.6448536269514722;

/// Which way a bearing drifts (common practice, no source).
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Drift {
    /// Ahead, towards where the carrier runs: the defender falls behind, his line is too flat.
    Flat,
    /// Back: he leads too much, his line is too deep.
    Deep,
}

impl Drift {
    pub fn word(self) -> &'static str {
        match self {
            Drift::Flat => "flat",
            Drift::Deep => "deep",
        }
    }
}

impl Sight {
    /// No result when both stand in the same place.
    pub fn new(carrier: State, defender: State, spread: Spread) -> Option<Sight> {
        let r = carrier.pos_yd - defender.pos_yd;
        let w = carrier.vel_yps - defender.vel_yps;
        let range2 = r.norm2();
        if range2 < 1e-18 {
            return None;
        }
        let range_yd = range2.sqrt();
        let cross = r.cross(w);
        let dot = r.dot(w);
        let w_turned = V2::new(w.y, -w.x); // ∂(r × w)/∂r
        let r_turned = r.left(); // ∂(r × w)/∂w
        let line_rate_radps = cross / range2;
        let line_rate_sigma_radps = spread.sigma((w_turned - r * (2.0 * line_rate_radps)) / range2, r_turned / range2);
        let closing_yps = -dot / range_yd;
        let closing_sigma_yps = spread.sigma(-w / range_yd + r * (dot / (range2 * range_yd)), -r / range_yd);
        let speed2 = w.norm2();
        let cpa_s = if speed2 > 1e-18 { -dot / speed2 } else { 0.0 };
        let (miss_yd, miss_sigma_yd) = if cpa_s > 0.0 {
            let speed_yps = speed2.sqrt();
            let miss_yd = cross / speed_yps;
            (miss_yd, spread.sigma(w_turned / speed_yps, r_turned / speed_yps - w * (miss_yd / speed2)))
        } else {
            (range_yd.copysign(cross), spread.place_yd2.max(0.0).sqrt())
        };
        let turn = r.cross(carrier.vel_yps);
        Some(Sight {
            range_yd,
            bearing_rad: r.angle_rad(),
            bearing_sigma_rad: spread.place_yd2.max(0.0).sqrt() / range_yd,
            line_rate_radps,
            line_rate_sigma_radps,
            closing_yps,
            closing_sigma_yps,
            cpa_s,
            miss_yd,
            miss_sigma_yd,
            carrier_turns: if turn.abs() < 1e-12 { 0.0 } else { turn.signum() },
        })
    }

    /// On course: still closing, and a miss beyond the reach cannot be shown at 95 %, one-sided.
    pub fn on_course(&self, reach_yd: f64) -> bool {
        self.cpa_s > 0.0 && self.miss_yd.abs() - ONE_SIDED * self.miss_sigma_yd <= reach_yd
    }

    /// Whether the line rate cannot be told from zero at 95 %, two-sided.
    pub fn rate_is_zero(&self) -> bool {
        self.line_rate_radps.abs() <= TWO_SIDED * self.line_rate_sigma_radps
    }

    /// Steady: rate not distinguishable from zero, or on course (near contact the rate grows without meaning).
    pub fn steady(&self, reach_yd: f64) -> bool {
        self.rate_is_zero() || self.on_course(reach_yd)
    }

    /// No result for a steady bearing, or for a carrier who runs along the line of sight.
    pub fn drift(&self, reach_yd: f64) -> Option<Drift> {
        if self.steady(reach_yd) || self.carrier_turns == 0.0 {
            return None;
        }
        Some(if self.line_rate_radps * self.carrier_turns > 0.0 { Drift::Flat } else { Drift::Deep })
    }

    /// Rate of the carrier's bearing relative to the defender's heading: λ̇ less the heading rate. Rad/s.
    pub fn head_turn_radps(&self, heading_rate_radps: f64) -> f64 {
        self.line_rate_radps - heading_rate_radps
    }
}

/// Heading rate of a mover, (v × a)/|v|². Rad/s. No result below `slow_yps`.
pub fn heading_rate_radps(vel_yps: V2, acc_ypss: V2, slow_yps: f64) -> Option<f64> {
    let speed2 = vel_yps.norm2();
    (speed2 > slow_yps * slow_yps).then(|| vel_yps.cross(acc_ypss) / speed2)
}
