//! Who had the ball when marks tell of a possession but no ball is in the file.
//!
//! The play shows it: the opponents run to where he will end. Of every mover who can have it the speeds are summed at
//! which his opponents, over the last second and a half, run towards the spot where he is at the end of the span,
//! and the one towards whom they run most is taken; for a score only those over the goal line count, for an end
//! out of bounds those at the sideline; at a hand-off it is the team-mate nearest the quarterback. A guess, and its
//! confidence says so.

use super::attack::{attack_at, downfield_x_yd};
use super::ends::track_end;
use super::live::Live;
use super::marks::Span;
use super::possession::{Gain, Possession};
use super::scene::Scene;
use crate::base::V2;
use crate::model::{CarryEnd, CarryStart};

/// Confidence of such a guess.
const GUESS: f64 = 0.4;
/// Distance between the two of a hand-off, yd.
const HANDING_YD: f64 = 2.5;
/// Time before the end over which the opponents' ways are looked at, s.
const LAST_S: f64 = 1.5;
/// Distance from a line within which somebody can have scored or gone out there, yd.
const AT_LINE_YD: f64 = 2.0;

pub(super) fn holder(scene: &Scene, live: Live, span: &Span, named: Option<usize>) -> Option<Possession> {
    let end = span.end.min(scene.last());
    let mover = match named {
        Some(mover) if scene.pos(mover, span.start).is_some() => mover,
        _ => guess(scene, live, span, end)?,
    };
    Some(Possession {
        mover,
        start: span.start,
        end: end.min(track_end(scene, mover, span.start)),
        gain: span.gain,
        start_how: if named == Some(mover) { CarryStart::PlaysTable } else { CarryStart::Event },
        end_how: span.end_how,
        thrown: span.thrown,
        confidence: if named == Some(mover) { 0.9 } else { GUESS },
    })
}

fn guess(scene: &Scene, live: Live, span: &Span, end: usize) -> Option<usize> {
    if span.gain == Gain::Snap && (span.thrown || end.saturating_sub(span.start) < 2) {
        return (0..scene.movers()).find(|m| scene.is_quarterback(*m) && scene.pos(*m, span.start).is_some());
    }
    let snap = live.snap.unwrap_or(0);
    if span.gain == Gain::HandOff
        && let Some(taker) = beside_quarterback(scene, span.start)
    {
        return Some(taker);
    }
    // Without a mark of the end nobody knows when to look.
    let how = span.end_how?;
    let mut best: Option<(f64, usize)> = None;
    for mover in 0..scene.movers() {
        let (Some(from), Some(p)) = (scene.pos(mover, span.start), scene.pos(mover, end)) else { continue };
        if !scene.play.field.contains(from, 1.0) || !wanted_side(scene, live, span, mover) {
            continue;
        }
        let field = &scene.play.field;
        let at_line = match how {
            CarryEnd::EventScore => {
                let attack = attack_at(scene, mover, snap, span.start);
                downfield_x_yd(scene, attack, p.x) >= field.goal_x_yd() - AT_LINE_YD
            }
            CarryEnd::EventOut => p.y.min(field.width_yd - p.y) <= AT_LINE_YD,
            _ => true,
        };
        if !at_line || span.gain == Gain::KickReceived && !is_deepest(scene, mover, snap, span.start) {
            continue;
        }
        let drawn_yps = drawn(scene, mover, p, span.start, end);
        if best.is_none_or(|(most, _)| drawn_yps > most) {
            best = Some((drawn_yps, mover));
        }
    }
    best.map(|(_, mover)| mover)
}

/// Whether nobody of his side is nearer to their own goal line.
fn is_deepest(scene: &Scene, mover: usize, snap: usize, frame: usize) -> bool {
    let attack = attack_at(scene, mover, snap, frame);
    let depth = |m: usize| scene.pos(m, frame).map(|p| downfield_x_yd(scene, attack, p.x));
    let Some(own) = depth(mover) else { return false };
    (0..scene.movers()).filter(|m| scene.mates(mover, *m)).filter_map(depth).all(|other| other >= own)
}

/// The team-mate nearest the quarterback, within handing distance.
fn beside_quarterback(scene: &Scene, frame: usize) -> Option<usize> {
    let passer = (0..scene.movers()).find(|m| scene.is_quarterback(*m) && scene.pos(*m, frame).is_some())?;
    let from = scene.pos(passer, frame)?;
    let gaps = (0..scene.movers()).filter(|m| scene.mates(passer, *m)).filter_map(|m| Some(((scene.pos(m, frame)? - from).norm(), m)));
    gaps.filter(|(gap, _)| *gap <= HANDING_YD).min_by(|a, b| a.0.total_cmp(&b.0)).map(|(_, m)| m)
}

/// Keeps to the side that can have it, as far as a quarterback's label tells which side began with the ball.
fn wanted_side(scene: &Scene, live: Live, span: &Span, mover: usize) -> bool {
    let snap = live.snap.unwrap_or(0);
    let Some(passer) = (0..scene.movers()).find(|m| scene.is_quarterback(*m) && scene.pos(*m, snap).is_some()) else { return true };
    match span.gain {
        Gain::Interception => !scene.mates(passer, mover) && mover != passer,
        Gain::Snap | Gain::HandOff | Gain::Arrived | Gain::Catch | Gain::Lateral => !scene.opposed(passer, mover),
        _ => true,
    }
}

/// Mean speed at which his opponents run towards where he ends, yd/s.
fn drawn(scene: &Scene, mover: usize, spot_yd: V2, start: usize, end: usize) -> f64 {
    let (mut sum, mut n) = (0.0, 0.0_f64);
    for other in (0..scene.movers()).filter(|m| scene.opposed(mover, *m)) {
        let track = &scene.tracks[other];
        for frame in scene.before(end, LAST_S).max(start)..end {
            let (Some(p), Some(v)) = (track.pos(frame), track.vel(frame)) else { continue };
            sum += (spot_yd - p).unit().map_or(0.0, |way| way.dot(v));
            n += 1.0;
        }
    }
    sum / n.max(1.0)
}
