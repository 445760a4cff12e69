//! The tackling angle and what else is measured at contact: a geometry of paths, not of technique.

use crate::base::V2;
use crate::model::{Contact, Play, SideOfRunner, Track};

/// Time before contact over which paths are averaged, s.
const BEFORE_S: f64 = 0.3;
/// Speed below which a path has no direction, yd/s.
const STANDING_YPS: f64 = 0.5;
/// Distance across the field below which neither is nearer the sideline, yd.
const ABREAST_YD: f64 = 0.1;

/// Angle, side and speeds averaged over the last 0.3 s before `frame`, not reaching back before `start`.
///
/// Angle: between the mean velocity of the defender and the reverse of the carrier's mean velocity, 0 head-on, π
/// from behind; none when either stands. Side: outside when the defender is nearer than the carrier to the
/// carrier's nearer sideline; none when they are abreast. Both tracks must cover `start..=frame`.
pub(super) fn contact_at(play: &Play, runner: &Track, defender: &Track, start: usize, frame: usize) -> Contact {
    let time_s = |f: usize| play.time_s.get(f).copied().unwrap_or(0.0);
    let from_s = time_s(frame) - BEFORE_S - 1e-6;
    let mut from = frame;
    while from > start && time_s(from - 1) >= from_s {
        from -= 1;
    }
    let n = (frame - from + 1) as f64;
    let (mut runner_v, mut defender_v, mut off) = (V2::ZERO, V2::ZERO, V2::ZERO);
    let (mut closing, mut runner_speed, mut defender_speed) = (0.0, 0.0, 0.0);
    for f in from..=frame {
        let r = runner.pos(f) - defender.pos(f);
        let (v, u) = (runner.vel(f), defender.vel(f));
        runner_v += v / n;
        defender_v += u / n;
        off += r / n;
        closing -= r.unit().map_or(0.0, |r| r.dot(v - u)) / n;
        runner_speed += v.norm() / n;
        defender_speed += u.norm() / n;
    }
    let runs = runner_v.norm() >= STANDING_YPS && defender_v.norm() >= STANDING_YPS;
    let reverse = -runner_v;
    let angle_rad = runs.then(|| reverse.cross(defender_v).abs().atan2(reverse.dot(defender_v)));
    // Positive when the nearer sideline is the one at y = 0 and the defender lies on that side of the carrier.
    let outward_yd = if runner.pos(frame).y <= 0.5 * play.field.width_yd { off.y } else { -off.y };
    let side = (outward_yd.abs() >= ABREAST_YD).then_some(if outward_yd > 0.0 { SideOfRunner::Outside } else { SideOfRunner::Inside });
    Contact { frame, angle_rad, side, closing_yps: closing, carrier_speed_yps: runner_speed, defender_speed_yps: defender_speed }
}
