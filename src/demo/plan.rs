//! What a carrier means to run: straight, towards the sideline and up it, with cuts, or weaving. He does not look
//! at the defenders.

use super::body::Body;
use crate::base::{Stream, V2};
use crate::model::Field;
use std::f64::consts::TAU;

/// How close to the sideline a carrier runs who means to stay in, yards.
const HUG_YD: f64 = 1.6;

/// A carrier's plan, in the frame in which he attacks +x.
#[derive(Clone, Debug, PartialEq)]
pub struct Plan {
    /// Directions (radians from downfield, positive to his left) and the seconds after the start until which each holds.
    pub legs: Vec<(f64, f64)>,
    /// Amplitude in radians and period in seconds of a weave; amplitude 0 for none.
    pub weave: (f64, f64),
    /// Whether he runs out rather than turn up at the sideline.
    pub steps_out: bool,
    /// Share of full push.
    pub pace: f64,
}

impl Plan {
    pub fn straight(angle_rad: f64) -> Plan {
        Plan { legs: vec![(f64::INFINITY, angle_rad)], weave: (0.0, 1.0), steps_out: false, pace: 1.0 }
    }

    /// Directions held one after the other; the last one holds on.
    pub fn turning(legs: &[(f64, f64)]) -> Plan {
        let mut clock_s = 0.0;
        let legs = legs.iter().map(|(for_s, angle)| {
            clock_s += for_s;
            (clock_s, *angle)
        });
        Plan { legs: legs.collect(), ..Plan::straight(0.0) }
    }

    /// A plan for open field: one of the four kinds, towards the side `sign` (+1 left, −1 right).
    pub fn open_field(stream: &mut Stream, sign: f64) -> Plan {
        let rad = |deg: f64| deg.to_radians();
        let mut plan = match stream.below(5) {
            0 => Plan::straight(sign * rad(stream.between(-15.0, 25.0))),
            1 => Plan::turning(&[
                (stream.between(0.9, 1.8), sign * rad(stream.between(50.0, 72.0))),
                (9.0, sign * rad(stream.between(15.0, 35.0))),
            ]),
            2 | 3 => {
                let first = sign * rad(stream.between(10.0, 40.0));
                let second = first - sign * rad(stream.between(30.0, 65.0));
                let third = second + sign * rad(stream.between(10.0, 50.0));
                Plan::turning(&[(stream.between(0.8, 1.6), first), (stream.between(0.8, 1.8), second), (9.0, third)])
            }
            _ => Plan {
                weave: (rad(stream.between(15.0, 30.0)), stream.between(1.6, 2.6)),
                ..Plan::straight(sign * rad(stream.between(-10.0, 20.0)))
            },
        };
        plan.steps_out = stream.chance(0.3);
        plan.pace = stream.between(0.9, 1.0);
        plan
    }

    /// The direction meant `since_s` seconds after the start, before the sideline has its say.
    pub fn direction(&self, since_s: f64) -> V2 {
        let leg = self.legs.iter().find(|leg| since_s < leg.0).or(self.legs.last());
        let swing = if self.weave.0 == 0.0 { 0.0 } else { self.weave.0 * (TAU * since_s / self.weave.1).sin() };
        V2::polar(leg.map_or(0.0, |leg| leg.1) + swing)
    }

    /// The will of a carrier `since_s` seconds after the start.
    pub fn will(&self, since_s: f64, body: &Body, field: &Field) -> V2 {
        let meant = self.direction(since_s) * self.pace;
        if self.steps_out {
            return meant;
        }
        // He lets himself drift towards the line only as fast as he can still check before it.
        let left_yd = field.width_yd - HUG_YD - body.pos_yd.y;
        let right_yd = body.pos_yd.y - HUG_YD;
        let limit = |room_yd: f64, out_yps: f64| (1.3 * room_yd - out_yps) * 0.5;
        let across = meant.y.min(limit(left_yd, body.vel_yps.y)).max(-limit(right_yd, -body.vel_yps.y)).clamp(-0.8, 0.8);
        if across == meant.y {
            return meant;
        }
        V2::new((self.pace * self.pace - across * across).max(0.0).sqrt(), across)
    }
}
