//! What is odd about a play as read: counted, never judged.

use crate::model::{FindingKind, Findings, Play};

/// Yards beyond the lines from which on a mover counts as off the field: a runner pushed out stays within it.
const OFF_FIELD_YD: f64 = 5.0;
/// Movers of a full play.
const FULL: usize = 22;
/// Share by which a step may differ from the usual one.
const UNEVEN: f64 = 0.2;

pub(crate) fn look_at(play: &Play, repeats: u64, findings: &mut Findings) {
    let place = || format!("game {}, play {}", play.game, play.play);
    let of_mover = |i: usize| format!("game {}, play {}, mover {}", play.game, play.play, play.movers[i].id);
    let mut add = |kind: FindingKind, count: u64, first: Option<usize>| {
        findings.add(kind, count, || first.map_or_else(place, of_mover));
    };
    let rows: usize = play.tracks.iter().chain(&play.ball).map(|t| t.frame_index.len()).sum();
    add(FindingKind::ExactRepeat, repeats, None);
    add(FindingKind::PlayGivenTwice, u64::from(repeats > 0 && repeats as f64 >= 0.9 * rows as f64), None);
    add(FindingKind::FewerPlayers, u64::from(play.movers.len() < FULL), None);
    add(FindingKind::NoBall, u64::from(play.ball.is_none()), None);

    let count = |holds: &dyn Fn(usize) -> bool| {
        let mut found = (0..play.movers.len()).filter(|i| holds(*i));
        let first = found.next();
        (first.map_or(0, |_| 1 + found.count() as u64), first)
    };
    let first_of = |i: usize| play.tracks[i].frame_index.first().copied();
    let last_of = |i: usize| play.tracks[i].frame_index.last().copied();
    let first = (0..play.movers.len()).filter_map(first_of).min();
    let last = (0..play.movers.len()).filter_map(last_of).max();
    let (n, at) = count(&|i| play.movers[i].side.is_none());
    add(FindingKind::NoSides, n, at);
    let (n, at) = count(&|i| first_of(i) > first);
    add(FindingKind::RaggedStart, n, at);
    let (n, at) = count(&|i| last_of(i) < last);
    add(FindingKind::RaggedEnd, n, at);
    let (n, at) = count(&|i| is_off_field(play, i));
    add(FindingKind::OffField, n, at);

    let ball_last = play.ball.as_ref().and_then(|b| b.frame_index.last().copied());
    add(FindingKind::BallRunsOn, u64::from(last.is_some() && ball_last > last), None);
    let (missing, uneven) = steps(&play.frames, &play.time_s);
    add(FindingKind::FrameMissingForAll, missing, None);
    add(FindingKind::UnevenSteps, u64::from(uneven), None);
}

fn is_off_field(play: &Play, mover: usize) -> bool {
    let (right, top) = (play.field.length_yd + OFF_FIELD_YD, play.field.width_yd + OFF_FIELD_YD);
    let track = &play.tracks[mover];
    let beyond = |values: &[f64], high: f64| values.iter().fold(false, |off, v| off | (*v < -OFF_FIELD_YD) | (*v > high));
    beyond(&track.x_yd, right) || beyond(&track.y_yd, top)
}

/// Frames absent for everyone, and whether steps are uneven beyond that.
fn steps(frames: &[i64], time_s: &[f64]) -> (u64, bool) {
    let mut jumps: Vec<i64> = frames.windows(2).map(|w| w[1] - w[0]).collect();
    let mut per_frame: Vec<f64> = time_s.windows(2).zip(&jumps).map(|(t, j)| (t[1] - t[0]) / *j as f64).collect();
    if jumps.is_empty() {
        return (0, false);
    }
    per_frame.sort_by(f64::total_cmp);
    let usual_s = per_frame[per_frame.len() / 2];
    let uneven = per_frame.iter().any(|s| (s / usual_s - 1.0).abs() > UNEVEN);
    jumps.sort_unstable();
    let usual = jumps[jumps.len() / 2].max(1);
    let missing = jumps.iter().map(|j| (((*j + usual / 2) / usual) - 1).max(0) as u64).sum();
    (missing, uneven)
}
