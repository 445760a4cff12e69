//! Who holds the ball, frame by frame, from the ball's track alone.
//!
//! The cheapest story over the whole play (dynamic programming after Viterbi 1967): in each frame the ball is
//! held by one mover or by nobody. A holder costs by his distance from the ball and by how much faster than he
//! the ball moves; nobody costs a constant; a change of story costs, which is the hysteresis in distance and
//! time. Costs are counted per tenth of a second, so that the frame rate does not matter.

use super::scene::Scene;
use crate::base::V2;
use crate::model::{MoverTrack, Track};
use crate::stats::median_in_place;

/// One mover's hold of the ball, frames inclusive.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Hold {
    pub mover: usize,
    pub start: usize,
    pub end: usize,
}

/// Cost of the ball being nobody's, per tenth of a second.
const FREE_COST: f64 = 2.0;
/// Highest cost of a holder, per tenth of a second.
const CAP_COST: f64 = 6.0;
/// Cost of going from a holder to nobody or back; from holder to holder it is twice that.
const CHANGE_COST: f64 = 1.5;
/// Times the holding distance beyond which a mover costs the cap: it is reached at 1.4 times.
const FAR_FACTOR: f64 = 1.5;
/// Relative speed of ball and holder that costs half a unit, yd/s: well below a pass, above the noise.
const SPEED_SCALE_YPS: f64 = 3.0;
/// Base over which the relative speed is taken, s.
const SPEED_BASE_S: f64 = 0.2;
/// Pauses of one holder's hold that are closed, s.
const PAUSE_S: f64 = 0.3;
/// From this to that long after a change of hands the ball's place in them is looked at, s.
const SETTLED_S: (f64, f64) = (0.4, 1.0);
/// The same before it leaves them: longer, because a lost ball rolls along with him.
const LEAVING_S: (f64, f64) = (0.7, 1.5);
/// How far before and after a first guess the ball's coming to rest is looked for, and the step up to which there is enough to fit, s.
const ARRIVAL_BEFORE_S: f64 = 0.08;
const ARRIVAL_AFTER_S: f64 = 0.24;
const ARRIVAL_STEP_S: f64 = 0.05;
/// Speed at which a ball in somebody's hands may seem to move against him, yd/s.
const GRIP_YPS: f64 = 2.5;
/// Bounds of how far from there a held ball may seem to be, yd.
const GRIP_YD: (f64, f64) = (0.25, 0.6);

/// The holds in order of time; empty without a ball.
pub(super) fn holds(scene: &Scene) -> Vec<Hold> {
    let Some(ball) = scene.ball else { return Vec::new() };
    // Whoever is never near the ball cannot be in the cheapest story.
    let near: Vec<usize> = (0..scene.movers()).filter(|m| comes_near(scene, ball, *m)).collect();
    let (free, frames) = (near.len(), scene.frames());
    if near.is_empty() || near.len() >= usize::from(u16::MAX) {
        return Vec::new();
    }
    let mut cost = vec![0.0_f64; free + 1];
    let mut came_from = vec![0_u16; (free + 1) * frames];
    for frame in 0..frames {
        let free_before = cost[free];
        let (best, best_before) = cheapest(&cost[..free]);
        let weight = (scene.step_s(frame) * 10.0).clamp(0.0, 5.0);
        let row = &mut came_from[frame * (free + 1)..(frame + 1) * (free + 1)];
        for state in 0..=free {
            let (mut from, mut least) = (state, cost[state]);
            let via_mover = best_before + if state == free { CHANGE_COST } else { 2.0 * CHANGE_COST };
            if via_mover < least {
                (from, least) = (best, via_mover);
            }
            if state != free && free_before + CHANGE_COST < least {
                (from, least) = (free, free_before + CHANGE_COST);
            }
            row[state] = from as u16;
            cost[state] = least;
        }
        if let Some(seen) = &seen(scene, ball, frame) {
            for (total, mover) in cost.iter_mut().zip(&near) {
                *total += weight * hold_cost(scene, seen, *mover, frame);
            }
            cost[free] += weight * FREE_COST;
        }
    }
    let (best, least) = cheapest(&cost[..free]);
    let last = if least <= cost[free] { best } else { free };
    collect(scene, &near, &came_from, last)
}

/// Whether a mover is ever near enough to the ball to cost less than the cap.
fn comes_near(scene: &Scene, ball: &MoverTrack, mover: usize) -> bool {
    let far_yd = FAR_FACTOR * scene.settings.hold_ball_yd;
    scene.tracks[mover].pieces.iter().any(|track| {
        ball.pieces.iter().any(|piece| {
            let frames = track.first.max(piece.first)..track.end().min(piece.end());
            frames.into_iter().any(|f| {
                let off = piece.pos(f) - track.pos(f);
                off.x.abs() <= far_yd && off.y.abs() <= far_yd
            })
        })
    })
}

/// The ball in one frame and the frames next to it over which speeds are compared.
struct Seen<'a> {
    pos_yd: V2,
    piece: &'a Track,
    back: usize,
    ahead: usize,
}

fn seen<'a>(scene: &Scene, ball: &'a MoverTrack, frame: usize) -> Option<Seen<'a>> {
    let piece = ball.at(frame)?;
    let back = scene.before(frame, SPEED_BASE_S).min(frame.saturating_sub(1)).max(piece.first);
    let ahead = scene.after(frame, SPEED_BASE_S).max(frame + 1).min(piece.end() - 1);
    Some(Seen { pos_yd: piece.pos(frame), piece, back, ahead })
}

/// Cost of `mover` holding the ball in this frame, per tenth of a second.
fn hold_cost(scene: &Scene, seen: &Seen, mover: usize, frame: usize) -> f64 {
    let hold_yd = scene.settings.hold_ball_yd;
    let far_yd = FAR_FACTOR * hold_yd;
    let Some(track) = scene.tracks[mover].at(frame) else { return CAP_COST };
    let off = seen.pos_yd - track.pos(frame);
    if off.x.abs() > far_yd || off.y.abs() > far_yd {
        return CAP_COST;
    }
    // A ball at the edge of the hold costs 3: more than nobody's.
    let place = 3.0 * off.norm2() / (hold_yd * hold_yd).max(1e-6);
    if place >= CAP_COST {
        return CAP_COST;
    }
    // The calmer of the two sides in time counts: at a catch the ball came fast and goes on with him.
    let drift_yps2 = |other: usize| {
        let dt_s = scene.span_s(other.min(frame), other.max(frame));
        (dt_s > 0.0 && track.covers(other)).then(|| ((seen.piece.pos(other) - track.pos(other) - off) / dt_s).norm2())
    };
    let drift = match (drift_yps2(seen.back), drift_yps2(seen.ahead)) {
        (Some(a), Some(b)) => a.min(b),
        (a, b) => a.or(b).unwrap_or(0.0),
    };
    (place + 0.5 * drift / (SPEED_SCALE_YPS * SPEED_SCALE_YPS)).min(CAP_COST)
}

fn cheapest(cost: &[f64]) -> (usize, f64) {
    let mut best = (0, f64::INFINITY);
    for (state, c) in cost.iter().enumerate() {
        if *c < best.1 {
            best = (state, *c);
        }
    }
    best
}

/// Reads the story backwards, joins the holds of one mover over short pauses, and dates their ends.
fn collect(scene: &Scene, near: &[usize], came_from: &[u16], last: usize) -> Vec<Hold> {
    let free = near.len();
    let mut found: Vec<Hold> = Vec::new();
    let mut state = last;
    for frame in (0..scene.frames()).rev() {
        if let Some(mover) = near.get(state).copied() {
            match found.last_mut() {
                Some(hold) if hold.mover == mover && hold.start == frame + 1 => hold.start = frame,
                _ => found.push(Hold { mover, start: frame, end: frame }),
            }
        }
        state = usize::from(came_from[frame * (free + 1) + state]);
    }
    found.reverse();
    let mut joined: Vec<Hold> = Vec::with_capacity(found.len());
    for hold in found {
        match joined.last_mut() {
            Some(before) if before.mover == hold.mover && scene.span_s(before.end, hold.start) <= PAUSE_S => before.end = hold.end,
            _ => joined.push(hold),
        }
    }
    for hold in &mut joined {
        settle(scene, hold);
    }
    joined
}

/// Dates a hold by when the ball comes to rest in the holder's hands and when it begins to leave them: the places next
/// to a change of hands where it is farther from where he carries it than it is at other times.
fn settle(scene: &Scene, hold: &mut Hold) {
    let (from, to) = (scene.after(hold.start, SETTLED_S.0), scene.before(hold.end, LEAVING_S.0));
    if let Some(grip) = Grip::over(scene, hold.mover, from, scene.after(hold.start, SETTLED_S.1).min(hold.end)) {
        let still_comes = |f: usize| !grip.has(scene, f) || drifts(scene, hold.mover, f);
        while hold.start < from && still_comes(hold.start) {
            hold.start += 1;
        }
        hold.start = arrival(scene, hold.mover, &grip, hold.start).unwrap_or(hold.start).min(from);
    }
    let earliest = scene.before(hold.end, LEAVING_S.1).max(hold.start + 1);
    if let Some(grip) = Grip::over(scene, hold.mover, earliest - 1, to) {
        while hold.end > earliest && !grip.has(scene, hold.end) {
            hold.end -= 1;
        }
    }
}

/// Where a holder carries the ball, and how far from there it may seem to be.
struct Grip {
    mover: usize,
    off: V2,
    within_yd: f64,
}

impl Grip {
    /// From some frames: the median offset, each axis by itself, and three sigmas of the distances from it.
    fn over(scene: &Scene, mover: usize, from: usize, to: usize) -> Option<Grip> {
        let offs = || (from..=to).filter_map(|f| Some(scene.ball_pos(f)? - scene.pos(mover, f)?));
        let (mut xs, mut ys): (Vec<f64>, Vec<f64>) = (offs().map(|o| o.x).collect(), offs().map(|o| o.y).collect());
        if xs.len() < 2 {
            return None;
        }
        let off = V2::new(median_in_place(&mut xs)?, median_in_place(&mut ys)?);
        let mut gaps: Vec<f64> = offs().map(|o| (o - off).norm()).collect();
        // The median of the distance of a round normal scatter is 1.177 sigmas (Rayleigh).
        let within_yd = (3.0 / 1.177 * median_in_place(&mut gaps)?).clamp(GRIP_YD.0, GRIP_YD.1);
        Some(Grip { mover, off, within_yd })
    }

    /// Whether the ball is in his hands; true where one of them is unseen.
    fn has(&self, scene: &Scene, frame: usize) -> bool {
        match (scene.ball_pos(frame), scene.pos(self.mover, frame)) {
            (Some(ball), Some(holder)) => (ball - holder - self.off).norm() <= self.within_yd,
            _ => true,
        }
    }
}

/// The frame at which the ball comes to rest in a holder's hands, near `guess`: the knee of the way that it makes to where he carries
/// it, by least squares: straight towards there, then at rest. One place alone cannot tell: at 25 Hz and 0.1 yd noise a ball handed
/// over at arm's length seems to be in his hands some frames too soon. None where frames are so far apart that the last straight has
/// one or two.
fn arrival(scene: &Scene, mover: usize, grip: &Grip, guess: usize) -> Option<usize> {
    if scene.step_s(guess) > ARRIVAL_STEP_S {
        return None;
    }
    let (from, to) = (scene.before(guess, ARRIVAL_BEFORE_S), scene.after(guess, ARRIVAL_AFTER_S));
    let off = |f: usize| Some((scene.time_s(f), scene.ball_pos(f)? - scene.pos(mover, f)? - grip.off));
    let seen: Vec<(f64, V2)> = (from..=to).filter_map(off).collect();
    let explained = |f: usize| explained_yd2(&seen, scene.time_s(f));
    (from + 1..=to).max_by(|a, b| explained(*a).total_cmp(&explained(*b)).then(b.cmp(a)))
}

/// How much of the squared offsets a straight way to a knee at `knee_s` explains.
fn explained_yd2(seen: &[(f64, V2)], knee_s: f64) -> f64 {
    let (mut aa, mut ao) = (0.0, V2::ZERO);
    for (t, off) in seen {
        let ahead_s = (knee_s - t).max(0.0);
        aa += ahead_s * ahead_s;
        ao += *off * ahead_s;
    }
    if aa > 0.0 { ao.norm2() / aa } else { 0.0 }
}

/// Whether the ball moves against him over the next moments.
fn drifts(scene: &Scene, mover: usize, frame: usize) -> bool {
    let next = scene.after(frame, SPEED_BASE_S).max(frame + 1);
    let off = |f: usize| Some(scene.ball_pos(f)? - scene.pos(mover, f)?);
    let dt_s = scene.span_s(frame, next);
    matches!((off(frame), off(next)), (Some(a), Some(b)) if (b - a).norm() > GRIP_YPS * dt_s)
}
