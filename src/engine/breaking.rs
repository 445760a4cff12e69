//! The break on the ball: from which frame on a defender was on his way.

use super::chase::Chase;
use super::ledger::Chaser;
use super::path::Meeting;
use crate::base::{V2, wrap_rad};
use crate::model::settings::ClockSettings;

/// A hair, so that three steps of a tenth count as 0.3 s.
const HAIR_S: f64 = 1e-6;

/// First state from which, over the set window, his push averages the set share of full and points into the sector
/// between the carrier's place and the hindsight meeting point, widened on both sides (running at the man is a bad
/// line, not a late break). None when he never does.
///
/// The mean push over a window is the constant push that leads from its first velocity to its last: steadier
/// against noise than the mean of single steps. A window reaches its share before the push itself sets in, so the
/// break is then moved on to the first step of the window whose own push is that large.
pub fn break_frame(chase: &Chase, chaser: &Chaser, meetings: &[Option<Meeting>], settings: &ClockSettings) -> Option<usize> {
    let n = chaser.states.len();
    (0..n.saturating_sub(1)).find_map(|i| {
        let end = window_end(chase, chaser, i, settings.break_window_s);
        let breaking = |from: usize, to: usize| {
            let push = push_over(chase, chaser, from, to);
            push.norm() >= settings.break_push_share && points_at(chase, chaser, from, push, meetings[from], settings)
        };
        breaking(i, end).then(|| (i..end).find(|k| breaking(*k, k + 1)).unwrap_or(i))
    })
}

/// Last state of the window that starts at `from`: at least one step further.
fn window_end(chase: &Chase, chaser: &Chaser, from: usize, window_s: f64) -> usize {
    let t_s = |i: usize| chase.grid.t_s[chaser.first + i];
    let until_s = t_s(from) + window_s - HAIR_S;
    (from + 1..chaser.states.len()).find(|k| t_s(*k) >= until_s).unwrap_or(chaser.states.len() - 1)
}

fn push_over(chase: &Chase, chaser: &Chaser, from: usize, to: usize) -> V2 {
    let dt_s = chase.grid.t_s[chaser.first + to] - chase.grid.t_s[chaser.first + from];
    chase.grid.drag.push_used(chaser.states[from].vel_yps, chaser.states[to].vel_yps, chaser.top.yps, dt_s)
}

fn points_at(chase: &Chase, chaser: &Chaser, from: usize, push: V2, meeting: Option<Meeting>, settings: &ClockSettings) -> bool {
    let place_yd = chaser.states[from].pos_yd;
    let Some(to_carrier) = (chase.carrier[chaser.first + from].pos_yd - place_yd).unit() else {
        return true;
    };
    let ahead = meeting.map_or(chase.end_yd(), |m| m.spot_yd) - place_yd;
    let opening = if ahead.norm() < 1e-9 { 0.0 } else { wrap_rad(ahead.angle_rad() - to_carrier.angle_rad()) };
    let turn = wrap_rad(push.angle_rad() - to_carrier.angle_rad());
    let wide_rad = settings.break_sector_deg.to_radians();
    turn >= opening.min(0.0) - wide_rad && turn <= opening.max(0.0) + wide_rad
}
