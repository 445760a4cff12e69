//! Possessions from the ball's way, alone or to fill what the marks leave open.

use super::ends::track_end;
use super::holds::Hold;
use super::live::Live;
use super::marks::Span;
use super::possession::{Gain, Possession};
use super::scene::Scene;
use crate::model::{CarryEnd, CarryStart};

/// Distance from its resting spot beyond which a ball that nobody held was kicked, yd: longer than any snap.
const KICKED_YD: f64 = 18.0;
/// Ball speed just after it left that only a throw or a kick has, yd/s.
const THROWN_YPS: f64 = 11.0;
/// A hold of the man over the ball that ends this soon after the snap is the snap, s.
const SNAPPED_S: f64 = 0.4;
/// Time over which a span's holder is looked for, s.
const LOOK_S: f64 = 1.5;
/// A gain is dated by the ball, not by the mark, when the two are farther apart than this, s.
const LATE_S: f64 = 0.3;

/// All possessions that the ball's way shows, from the snap on.
pub(super) fn possessions(scene: &Scene, live: Live, holds: &[Hold]) -> Vec<Possession> {
    let alive = live.snap.unwrap_or(0);
    let mut found: Vec<Possession> = Vec::new();
    for (k, hold) in holds.iter().enumerate() {
        let start = hold.start.max(alive);
        if hold.end <= start || scene.span_s(start, hold.end) + scene.step_s(start) < scene.settings.hold_time_s - 1e-6 {
            continue;
        }
        if found.is_empty() && is_snap_itself(scene, live, hold) {
            continue;
        }
        let gain = match found.last() {
            None => first_gain(scene, live, start),
            Some(before) if before.thrown => Gain::Catch,
            Some(before) if scene.span_s(before.end, start) <= LATE_S => Gain::HandOff,
            Some(_) => Gain::Recovery,
        };
        found.push(held(scene, hold, start, gain, holds.get(k + 1)));
    }
    found
}

fn first_gain(scene: &Scene, live: Live, start: usize) -> Gain {
    match (live.snap, live.spot_yd, scene.ball_pos(start)) {
        (None, _, _) => Gain::Held,
        (_, Some(spot), Some(ball)) if (ball - spot).norm() > KICKED_YD => Gain::KickReceived,
        _ => Gain::Snap,
    }
}

fn is_snap_itself(scene: &Scene, live: Live, hold: &Hold) -> bool {
    live.snap.is_some_and(|snap| hold.start <= snap + 1 && scene.span_s(snap, hold.end.max(snap)) <= SNAPPED_S)
}

fn held(scene: &Scene, hold: &Hold, start: usize, gain: Gain, next: Option<&Hold>) -> Possession {
    let runs_out = hold.end >= track_end(scene, hold.mover, hold.start).min(scene.last());
    let ball_runs_out = scene.ball.and_then(|b| b.at(hold.end)).is_none_or(|piece| hold.end + 1 >= piece.end()) && next.is_none();
    let open = runs_out || ball_runs_out;
    Possession {
        mover: hold.mover,
        start,
        end: if open { track_end(scene, hold.mover, start) } else { hold.end },
        gain,
        start_how: CarryStart::Ball,
        end_how: (!open).then_some(CarryEnd::BallLeft),
        thrown: !open && thrown_at(scene, hold.end),
        confidence: 0.5 + 0.4 * close_share(scene, hold.mover, start, hold.end),
    }
}

/// Whether the ball leaves at a speed that no runner has.
fn thrown_at(scene: &Scene, frame: usize) -> bool {
    let until = scene.after(frame, 0.5);
    (frame..=until).any(|f| scene.ball.and_then(|b| scene.velocity_yps(b, f, 0.1)).is_some_and(|v| v.norm() > THROWN_YPS))
}

/// Share of the frames in which he is within the holding distance of the ball.
fn close_share(scene: &Scene, mover: usize, from: usize, to: usize) -> f64 {
    let close = (from..=to).filter(|f| scene.ball_gap_yd(mover, *f).is_some_and(|gap| gap <= scene.settings.hold_ball_yd)).count();
    close as f64 / (to + 1).saturating_sub(from).max(1) as f64
}

/// Who had the ball in a span between marks, `before` having had it until then.
pub(super) fn holder(scene: &Scene, live: Live, holds: &[Hold], span: &Span, before: Option<usize>) -> Option<Possession> {
    scene.ball?;
    let snap = span.gain == Gain::Snap;
    let (from, to) = if snap {
        (scene.after(span.start, 0.3).min(span.end), scene.after(span.start, 2.0).min(span.end))
    } else {
        (scene.before(span.start, 0.2), scene.after(span.start, LOOK_S).min(span.end))
    };
    let weight = |m: usize| match (span.gain, before) {
        (Gain::HandOff | Gain::Lateral, Some(b)) if b == m => 0.3,
        (Gain::Snap, _) if scene.is_quarterback(m) => 3.0,
        (Gain::Interception, Some(b)) if scene.mates(b, m) => 0.3,
        (Gain::Catch | Gain::Arrived | Gain::HandOff | Gain::Lateral, Some(b)) if scene.opposed(b, m) => 0.3,
        _ => 1.0,
    };
    let mut best: Option<(f64, usize, usize)> = None;
    for hold in holds.iter().filter(|h| h.end >= from && h.start <= to) {
        if snap && is_snap_itself(scene, live, hold) {
            continue;
        }
        let lasts = scene.span_s(hold.start, hold.end) + scene.step_s(hold.start) >= scene.settings.hold_time_s - 1e-6;
        if snap && lasts {
            // The first who had it took the snap, however soon he gave it away.
            best = Some((f64::INFINITY, hold.mover, hold.start));
            break;
        }
        let (a, b) = (hold.start.max(from), hold.end.min(to));
        let score = (scene.span_s(a, b) + scene.step_s(a)) * weight(hold.mover);
        if best.is_none_or(|(most, _, _)| score > most) {
            best = Some((score, hold.mover, hold.start));
        }
    }
    let (mover, start) = match best {
        Some((_, mover, held_from)) => (mover, if scene.span_s(span.start, held_from) > LATE_S { held_from } else { span.start }),
        None => (nearest(scene, span.start, scene.after(span.start, 0.5).min(span.end), weight)?, span.start),
    };
    let confidence = 0.6 + 0.38 * close_share(scene, mover, start, scene.after(start, LOOK_S).min(span.end));
    Some(Possession {
        mover,
        start: if snap { span.start } else { start },
        end: span.end,
        gain: span.gain,
        start_how: CarryStart::Event,
        end_how: span.end_how,
        thrown: span.thrown,
        confidence,
    })
}

/// The mover nearest the ball on average, if within three times the holding distance.
fn nearest(scene: &Scene, from: usize, to: usize, weight: impl Fn(usize) -> f64) -> Option<usize> {
    let limit_yd = 3.0 * scene.settings.hold_ball_yd;
    let mut best: Option<(f64, usize)> = None;
    for mover in 0..scene.movers() {
        let (sum, n) =
            (from..=to).filter_map(|f| scene.ball_gap_yd(mover, f)).fold((0.0, 0.0), |(s, n), gap| (s + gap.min(3.0 * limit_yd), n + 1.0));
        let mean_yd = sum / n / weight(mover);
        if n > 0.0 && mean_yd <= limit_yd && best.is_none_or(|(least, _)| mean_yd < least) {
            best = Some((mean_yd, mover));
        }
    }
    best.map(|(_, mover)| mover)
}

/// Cuts a possession where the ball leaves its holder without a mark, and goes on with whoever has it next.
pub(super) fn split(scene: &Scene, holds: &[Hold], whole: Possession, out: &mut Vec<Possession>) {
    let mut p = whole;
    while let Some(gone) = departure(scene, &p) {
        let left = holds.iter().filter(|h| h.mover == p.mover && h.start <= gone && h.end >= p.start).map(|h| h.end.min(gone)).max();
        let left = left.unwrap_or(p.start);
        let next = holds.iter().find(|h| {
            let long = scene.span_s(h.start, h.end) + scene.step_s(h.start) >= scene.settings.hold_time_s - 1e-6;
            h.start > left && h.start < whole.end && h.mover != p.mover && long
        });
        let thrown = thrown_at(scene, left);
        out.push(Possession { end: left, end_how: Some(CarryEnd::BallLeft), thrown, ..p });
        let Some(next) = next else { return };
        let gain = match (thrown, p.gain) {
            (true, _) => Gain::Catch,
            (false, Gain::Snap) => Gain::HandOff,
            _ => Gain::Recovery,
        };
        let confidence = 0.5 + 0.4 * close_share(scene, next.mover, next.start, next.end.min(whole.end));
        p = Possession { mover: next.mover, start: next.start, gain, start_how: CarryStart::Ball, confidence, ..whole };
    }
    out.push(p);
}

/// The first frame from which the ball stays well away from its holder.
fn departure(scene: &Scene, p: &Possession) -> Option<usize> {
    let away_yd = 2.0 * scene.settings.hold_ball_yd;
    let away = |f: usize| scene.ball_gap_yd(p.mover, f).is_some_and(|gap| gap > away_yd);
    let last = p.end.min(track_end(scene, p.mover, p.start));
    let from = scene.after(p.start, LATE_S);
    (from..=last).find(|f| away(*f) && scene.after(*f, 0.3) <= last && (*f..=scene.after(*f, 0.3)).all(away))
}
