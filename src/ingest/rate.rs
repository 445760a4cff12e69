//! A game's frame rate where the stamps do not time its frames one by one.

use super::draft::Draft;
use super::timebase::{span_of_changes, usual_rate_hz};
use crate::model::RawTrack;

/// Slowest speed, yd/s, at which a step is long enough beside the noise of its ends.
const RUNNING_YPS: f64 = 3.0;
/// Fewest steps that an estimate may rest on.
const FEWEST: usize = 50;

/// The rate told by the mapping; else by coarse stamps; else by the file's own speeds against the steps between places.
pub(crate) fn game_rate_hz(drafts: &[Draft], told_hz: Option<f64>) -> Option<f64> {
    told_hz.or_else(|| by_coarse_stamps(drafts)).or_else(|| by_speeds(drafts))
}

fn by_coarse_stamps(drafts: &[Draft]) -> Option<f64> {
    let (mut frames, mut seconds) = (0.0, 0.0);
    for (f, s) in drafts.iter().filter_map(|d| span_of_changes(&d.frames, &d.stamps)) {
        frames += f;
        seconds += s;
    }
    (seconds > 0.0).then_some(frames / seconds).and_then(|r| usual_rate_hz(r, 0.05))
}

fn by_speeds(drafts: &[Draft]) -> Option<f64> {
    let mut rates: Vec<f64> = drafts.iter().flat_map(|d| d.tracks.iter().flat_map(|t| rates_of(t, &d.frames))).collect();
    if rates.len() < FEWEST {
        return None;
    }
    rates.sort_by(f64::total_cmp);
    usual_rate_hz(rates[rates.len() / 2], 0.15)
}

/// Frames a second that make each step's length agree with the speeds at its ends.
fn rates_of(track: &RawTrack, frames: &[i64]) -> Vec<f64> {
    if track.speed_yps.is_empty() {
        return Vec::new();
    }
    let frame = |i: usize| frames[track.frame_index[i] as usize];
    (1..track.frame_index.len())
        .filter_map(|i| {
            let step = (track.x_yd[i] - track.x_yd[i - 1]).hypot(track.y_yd[i] - track.y_yd[i - 1]);
            let speed = (track.speed_yps[i] + track.speed_yps[i - 1]) / 2.0;
            let jump = (frame(i) - frame(i - 1)) as f64;
            (speed >= RUNNING_YPS && step > 0.0 && jump > 0.0).then(|| speed * jump / step)
        })
        .collect()
}
