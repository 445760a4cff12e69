//! Smoothed tracks around the carries: only movers and frames that a carry can touch.

use super::prepare::Prepared;
use crate::carry::contacts;
use crate::engine::capability::SpeedBook;
use crate::kinematics::{Boost, OwnCheck, SmoothWork, smooth_range};
use crate::model::{MoverTrack, Noise, Play, Settings, Track};
use std::ops::Range;

/// A play's smoothed tracks and what they say of the players' speeds.
#[derive(Debug, Default)]
pub struct Smoothed {
    /// One for each mover, over the frames around the carries.
    pub tracks: Vec<MoverTrack>,
    pub speeds: SpeedBook,
    pub own: OwnCheck,
}

/// Frames before and after a carry that the smoother takes along, so that its ends are not the track's ends.
const PAD_S: f64 = 1.0;

/// Smooths every mover over the frames around the carries. Where a defender meets the carrier the jerk density rises,
/// for both, so that the blow is not smeared backwards.
///
/// `work`: buffers that may be handed from play to play; what they hold never changes a result.
pub fn smooth_play(play: &Play, prepared: &Prepared, noise: Noise, settings: &Settings, work: &mut SmoothWork) -> Smoothed {
    let windows = windows(play, prepared);
    let mut tracks: Vec<MoverTrack> =
        (0..play.movers.len()).map(|mover| smooth_mover(play, prepared, mover, &windows, noise, &[], work)).collect();

    // Who met whom, as far as the plain tracks tell.
    let mut blows: Vec<Vec<usize>> = vec![Vec::new(); play.movers.len()];
    for carry in &prepared.carries {
        for (defender, frame) in contacts(play, &tracks, carry, &settings.carry) {
            blows[defender].push(frame);
            blows[carry.carrier].push(frame);
        }
    }
    for (mover, frames) in blows.iter_mut().enumerate().filter(|(_, f)| !f.is_empty()) {
        frames.sort_unstable();
        frames.dedup();
        let boosts: Vec<Boost> = frames.iter().map(|f| Boost { frame: *f, factor: settings.smoothing.contact_boost }).collect();
        tracks[mover] = smooth_mover(play, prepared, mover, &windows, noise, &boosts, work);
    }

    let mut speeds = SpeedBook::default();
    let mut own = OwnCheck::default();
    for (index, (mover, track)) in play.movers.iter().zip(&tracks).enumerate() {
        let carried = prepared.carries.iter().any(|c| c.carrier == index);
        for piece in &track.pieces {
            if piece.len() > 1 {
                let dt_s = (play.time_s[piece.end() - 1] - play.time_s[piece.first]) / (piece.len() - 1) as f64;
                speeds.add(&mover.id, &mover.position, speeds_shown(piece), dt_s);
            }
            // The carriers' rows are enough to see whether a file's own speeds and headings agree.
            if carried {
                own.add(&play.tracks[index], piece);
            }
        }
    }
    Smoothed { tracks, speeds, own }
}

/// Speeds less one standard error: a speed counts as shown as far as its error bar allows, so that noise alone makes
/// nobody fast.
fn speeds_shown(piece: &Track) -> impl Iterator<Item = f64> {
    piece.vel_yps.iter().zip(&piece.cov).map(|(v, cov)| (v.norm() - cov.vv.sqrt()).max(0.0))
}

/// Frame ranges around the carries, joined where they overlap.
fn windows(play: &Play, prepared: &Prepared) -> Vec<Range<usize>> {
    let mut out: Vec<Range<usize>> = Vec::new();
    for carry in &prepared.carries {
        let from_s = play.time_s[carry.start] - PAD_S;
        let to_s = play.time_s[carry.end] + PAD_S;
        let start = play.time_s.partition_point(|t| *t < from_s);
        let end = play.time_s.partition_point(|t| *t <= to_s);
        match out.last_mut() {
            Some(last) if start <= last.end => last.end = last.end.max(end),
            _ => out.push(start..end),
        }
    }
    out
}

fn smooth_mover(
    play: &Play,
    prepared: &Prepared,
    mover: usize,
    windows: &[Range<usize>],
    noise: Noise,
    boosts: &[Boost],
    work: &mut SmoothWork,
) -> MoverTrack {
    let mut pieces = Vec::new();
    for window in windows {
        for segment in &prepared.cleaned[mover].segments {
            if segment.first < window.end && segment.end() > window.start {
                pieces.push(smooth_range(segment, window.clone(), &play.time_s, noise, boosts, work));
            }
        }
    }
    pieces.retain(|p| !p.is_empty());
    MoverTrack { pieces }
}
