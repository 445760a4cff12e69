//! Cleaning and carries: what can be done before the game's noise is known.

use crate::base::Stream;
use crate::carry::find_carries;
use crate::kinematics::{Cleaned, Segment, clean_track, coarse_track, estimate_noise};
use crate::model::settings::SmoothingSettings;
use crate::model::{Carry, EventMark, FindingKind, Findings, MoverTrack, Noise, Play, SetAside, Settings, SourceRow};

/// A play with clean places and its carries.
#[derive(Debug, Default)]
pub struct Prepared {
    /// One for each mover.
    pub cleaned: Vec<Cleaned>,
    pub carries: Vec<Carry>,
    pub findings: Findings,
    pub set_aside: Vec<(SourceRow, SetAside)>,
}

/// Speed above which a place of the ball counts as a jump, yd/s: beyond the fastest kicks (about 40 yd/s; from memory).
const BALL_SPEED_YPS: f64 = 50.0;

/// Cleans every mover and finds the carries.
pub fn prepare(play: &Play, settings: &Settings) -> Prepared {
    let mut findings = Findings::default();
    let place = |frame: i64| {
        let number = usize::try_from(frame).ok().and_then(|f| play.frames.get(f)).copied().unwrap_or(frame);
        format!("game {}, play {}, frame {number}", play.game, play.play)
    };
    let mut cleaned: Vec<Cleaned> =
        play.tracks.iter().map(|raw| clean_track(raw, &play.time_s, &settings.smoothing, &mut findings, &place)).collect();
    let flight = SmoothingSettings { jump_speed_yps: BALL_SPEED_YPS, ..settings.smoothing.clone() };
    let mut ball = play.ball.as_ref().map(|raw| clean_track(raw, &play.time_s, &flight, &mut findings, &place));
    let mut set_aside: Vec<(SourceRow, SetAside)> = cleaned.iter_mut().flat_map(|c| std::mem::take(&mut c.set_aside)).collect();
    if let Some(ball) = &mut ball {
        set_aside.append(&mut ball.set_aside);
    }
    let tracks: Vec<MoverTrack> = cleaned.iter().map(|c| coarse_track(c, &play.time_s)).collect();
    let ball_track = ball.as_ref().map(|b| coarse_track(b, &play.time_s));
    let carries = find_carries(play, &tracks, ball_track.as_ref(), &settings.carry);
    // A pass that fell, a kick that nobody returned: nobody was to carry.
    let explained = play
        .events
        .iter()
        .any(|(_, mark)| matches!(mark, EventMark::Incomplete | EventMark::FairCatch | EventMark::Touchback | EventMark::Sack));
    if carries.is_empty() && !explained {
        findings.add(FindingKind::NoCarry, 1, || format!("game {}, play {}", play.game, play.play));
    }
    Prepared { cleaned, carries, findings, set_aside }
}

/// Tracks that the noise of a game is read off.
const SAMPLE: usize = 48;

/// Noise of a game, from a sample of the carriers' and others' tracks. Which tracks are drawn depends on their names
/// alone, so that the order of rows, plays and files cannot change it.
pub fn noise_of(plays: &[(&Play, &Prepared)], settings: &Settings) -> Noise {
    let mut ranked: Vec<(u64, &Segment, &[f64])> = Vec::new();
    for (play, prepared) in plays {
        if prepared.carries.is_empty() {
            continue;
        }
        for (mover, cleaned) in play.movers.iter().zip(&prepared.cleaned) {
            let lot = Stream::new(0, &format!("{} {} {}", play.game, play.play, mover.id)).next_u64();
            ranked.extend(cleaned.segments.iter().map(|s| (lot.wrapping_add(s.first as u64), s, &play.time_s[..])));
        }
    }
    ranked.sort_by_key(|(lot, segment, _)| (*lot, segment.first));
    let sample: Vec<(&Segment, &[f64])> = ranked.into_iter().take(SAMPLE).map(|(_, s, t)| (s, t)).collect();
    estimate_noise(&sample, &settings.smoothing)
}
