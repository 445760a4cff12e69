//! One play as the search for carries sees it: tracks, sides and the clock.

use crate::base::V2;
use crate::model::settings::CarrySettings;
use crate::model::{MoverTrack, Play};

pub(super) struct Scene<'a> {
    pub play: &'a Play,
    pub tracks: &'a [MoverTrack],
    pub ball: Option<&'a MoverTrack>,
    pub settings: &'a CarrySettings,
    /// For each mover the first mover of his side; none where the file does not say.
    side: Vec<Option<usize>>,
}

impl<'a> Scene<'a> {
    pub fn new(play: &'a Play, tracks: &'a [MoverTrack], ball: Option<&'a MoverTrack>, settings: &'a CarrySettings) -> Scene<'a> {
        let movers = &play.movers;
        let side = movers.iter().map(|m| m.side.as_ref().and_then(|s| movers.iter().position(|o| o.side.as_ref() == Some(s)))).collect();
        let ball = ball.filter(|b| b.pieces.iter().any(|p| !p.is_empty()));
        Scene { play, tracks, ball, settings, side }
    }

    /// Number of frames that have a time.
    pub fn frames(&self) -> usize {
        self.play.time_s.len()
    }

    /// Number of movers that have tracks.
    pub fn movers(&self) -> usize {
        self.tracks.len().min(self.play.movers.len())
    }

    pub fn last(&self) -> usize {
        self.frames().saturating_sub(1)
    }

    pub fn time_s(&self, frame: usize) -> f64 {
        self.play.time_s.get(frame.min(self.last())).copied().unwrap_or(0.0)
    }

    pub fn span_s(&self, from: usize, to: usize) -> f64 {
        self.time_s(to) - self.time_s(from)
    }

    /// Seconds from the frame before to this one (from this to the next, for the first).
    pub fn step_s(&self, frame: usize) -> f64 {
        if frame > 0 { self.span_s(frame - 1, frame) } else { self.span_s(0, 1) }
    }

    /// The last frame not more than `wait_s` later.
    pub fn after(&self, frame: usize, wait_s: f64) -> usize {
        let limit_s = self.time_s(frame) + wait_s + 1e-6;
        self.play.time_s.partition_point(|t| *t <= limit_s).saturating_sub(1).max(frame.min(self.last()))
    }

    /// The first frame not more than `back_s` earlier.
    pub fn before(&self, frame: usize, back_s: f64) -> usize {
        let limit_s = self.time_s(frame) - back_s - 1e-6;
        self.play.time_s.partition_point(|t| *t < limit_s).min(frame.min(self.last()))
    }

    /// The frame nearest to `wait_s` later.
    pub fn nearest(&self, frame: usize, wait_s: f64) -> usize {
        let before = self.after(frame, wait_s);
        let after = (before + 1).min(self.last());
        if self.span_s(frame, after) - wait_s < wait_s - self.span_s(frame, before) { after } else { before }
    }

    pub fn pos(&self, mover: usize, frame: usize) -> Option<V2> {
        self.tracks.get(mover)?.pos(frame)
    }

    pub fn ball_pos(&self, frame: usize) -> Option<V2> {
        self.ball?.pos(frame)
    }

    /// Distance from the ball, yd; none where either is unseen.
    pub fn ball_gap_yd(&self, mover: usize, frame: usize) -> Option<f64> {
        Some((self.ball_pos(frame)? - self.pos(mover, frame)?).norm())
    }

    /// Velocity from the places `half_s` before and after (one frame at least), as far as the piece of track
    /// goes. A wider base than the track's own differences, because those drown in noise at 25 Hz.
    pub fn velocity_yps(&self, track: &MoverTrack, frame: usize, half_s: f64) -> Option<V2> {
        let piece = track.at(frame)?;
        let from = self.before(frame, half_s).min(frame.saturating_sub(1)).max(piece.first);
        let to = self.after(frame, half_s).max(frame + 1).min(piece.end() - 1);
        let dt_s = self.span_s(from, to);
        (dt_s > 0.0).then(|| (piece.pos(to) - piece.pos(from)) / dt_s)
    }

    /// Velocity as the slope of the least-squares line through all places within `half_s` before and after (one
    /// frame at least), as far as the piece of track goes: twice as quiet as the two ends alone.
    pub fn slope_yps(&self, mover: usize, frame: usize, half_s: f64) -> Option<V2> {
        let piece = self.tracks.get(mover)?.at(frame)?;
        let from = self.before(frame, half_s).min(frame.saturating_sub(1)).max(piece.first);
        let to = self.after(frame, half_s).max(frame + 1).min(piece.end() - 1);
        let n = (to - from + 1) as f64;
        let mid_s = (from..=to).map(|f| self.time_s(f)).sum::<f64>() / n;
        let (mut top, mut bottom) = (V2::ZERO, 0.0);
        for f in from..=to {
            let off_s = self.time_s(f) - mid_s;
            top += piece.pos(f) * off_s;
            bottom += off_s * off_s;
        }
        (bottom > 0.0).then(|| top / bottom)
    }

    pub fn side(&self, mover: usize) -> Option<usize> {
        self.side.get(mover).copied().flatten()
    }

    pub fn opposed(&self, a: usize, b: usize) -> bool {
        matches!((self.side(a), self.side(b)), (Some(x), Some(y)) if x != y)
    }

    pub fn mates(&self, a: usize, b: usize) -> bool {
        a != b && self.side(a).is_some() && self.side(a) == self.side(b)
    }

    /// Whether a mover's position label says quarterback.
    pub fn is_quarterback(&self, mover: usize) -> bool {
        self.play.movers.get(mover).and_then(|m| m.position.as_deref()).is_some_and(|p| p.eq_ignore_ascii_case("QB"))
    }
}
