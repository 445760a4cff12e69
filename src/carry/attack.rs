//! Which way a side attacks, from the hint or from how the sides face each other.
//!
//! A side's direction holds for the whole play, returns included: it attacks towards the side it faces at the
//! snap or kick (at the play's first frame where no mark tells when that was). Robust medians of x over the movers
//! on the field tell which that is. Where they do not (no sides, or nearly the same median), the way in which the
//! carrier then runs tells.

use super::scene::Scene;
use crate::model::settings::CarrySettings;
use crate::model::{Attack, EventMark, MoverTrack, Play};
use crate::stats::median_in_place;

/// Difference of the sides' median x below which they do not face each other, yd.
const FACING_YD: f64 = 0.5;
/// Time over which the carrier's own way is looked at, s.
const OWN_WAY_S: f64 = 2.0;
/// Distance from the ball within which a mover had it at the snap, yd.
const AT_BALL_YD: f64 = 2.5;

/// The direction in which `carrier` attacks.
///
/// With a hint, the side with the ball at the snap attacks as it says and the other side the other way; the
/// side with the ball is that of the quarterback, else of the mover nearest the ball just after the snap.
pub fn attack_of(play: &Play, tracks: &[MoverTrack], carrier: usize, start: usize) -> Attack {
    let settings = CarrySettings::default();
    let scene = Scene::new(play, tracks, None, &settings);
    let mark = play.events.iter().find(|(_, m)| matches!(m, EventMark::Snap | EventMark::Kick));
    let snap = mark.map_or(0, |(f, _)| *f as usize);
    attack_at(&scene, carrier, snap, start)
}

pub(super) fn attack_at(scene: &Scene, carrier: usize, snap: usize, start: usize) -> Attack {
    let facing = facing(scene, carrier, snap).or_else(|| facing(scene, carrier, start));
    if let Some(hint) = scene.play.hints.attack {
        let offence = quarterback_side(scene).or_else(|| side_at_ball(scene, snap));
        return match (offence, scene.side(carrier), facing) {
            (Some(offence), Some(own), _) => {
                if own == offence {
                    hint
                } else {
                    turned(hint)
                }
            }
            (_, _, Some(facing)) => facing,
            _ => hint,
        };
    }
    facing.or_else(|| own_way(scene, carrier, start)).unwrap_or(Attack::TowardsPlusX)
}

pub(super) fn turned(attack: Attack) -> Attack {
    match attack {
        Attack::TowardsPlusX => Attack::TowardsMinusX,
        Attack::TowardsMinusX => Attack::TowardsPlusX,
    }
}

/// +1 or −1: the sign of downfield.
pub(super) fn sign(attack: Attack) -> f64 {
    match attack {
        Attack::TowardsPlusX => 1.0,
        Attack::TowardsMinusX => -1.0,
    }
}

/// x counted downfield, yd from the back line behind the attacking side.
pub(super) fn downfield_x_yd(scene: &Scene, attack: Attack, x_yd: f64) -> f64 {
    match attack {
        Attack::TowardsPlusX => x_yd,
        Attack::TowardsMinusX => scene.play.field.length_yd - x_yd,
    }
}

fn facing(scene: &Scene, carrier: usize, frame: usize) -> Option<Attack> {
    let (mut own, mut other) = (Vec::with_capacity(11), Vec::with_capacity(11));
    for mover in 0..scene.movers() {
        let Some(p) = scene.pos(mover, frame).or_else(|| scene.pos(mover, frame + 1)) else { continue };
        if !scene.play.field.contains(p, 0.0) {
            continue;
        }
        if scene.opposed(carrier, mover) {
            other.push(p.x);
        } else if mover == carrier || scene.mates(carrier, mover) {
            own.push(p.x);
        }
    }
    let ahead_yd = median_in_place(&mut other)? - median_in_place(&mut own)?;
    if ahead_yd.abs() < FACING_YD {
        return None;
    }
    Some(if ahead_yd > 0.0 { Attack::TowardsPlusX } else { Attack::TowardsMinusX })
}

fn own_way(scene: &Scene, carrier: usize, start: usize) -> Option<Attack> {
    let piece = scene.tracks.get(carrier)?.at(start)?;
    let until = scene.after(start, OWN_WAY_S).min(piece.end() - 1);
    let gone_yd = piece.pos(until).x - piece.pos(start).x;
    (gone_yd != 0.0).then_some(if gone_yd > 0.0 { Attack::TowardsPlusX } else { Attack::TowardsMinusX })
}

/// The side of the quarterback, when all quarterbacks on the field at the play's first frames are of one side.
fn quarterback_side(scene: &Scene) -> Option<usize> {
    let mut found = None;
    for mover in (0..scene.movers()).filter(|m| scene.is_quarterback(*m)) {
        let on_field = scene.tracks[mover].pieces.first().is_some_and(|p| !p.is_empty() && scene.play.field.contains(p.pos_yd[0], 0.0));
        match (on_field, found, scene.side(mover)) {
            (true, None, side) => found = side,
            (true, Some(had), Some(side)) if had != side => return None,
            _ => {}
        }
    }
    found
}

/// The side of the mover nearest the ball as the file gives it: at a kick the kicker; at a snap a little later,
/// when the ball has left the two men who stand over it.
fn side_at_ball(scene: &Scene, snap: usize) -> Option<usize> {
    let raw = scene.play.ball.as_ref()?;
    let kick = scene.play.events.iter().any(|(f, m)| *m == EventMark::Kick && *f as usize == snap);
    let frame = if kick { snap } else { scene.after(snap, 0.8) };
    let row = raw.frame_index.iter().position(|f| *f as usize >= frame)?;
    let (x_yd, y_yd) = (*raw.x_yd.get(row)?, *raw.y_yd.get(row)?);
    let frame = raw.frame_index[row] as usize;
    let mut best: Option<(f64, usize)> = None;
    for mover in 0..scene.movers() {
        let Some(p) = scene.pos(mover, frame) else { continue };
        let gap_yd = (p.x - x_yd).hypot(p.y - y_yd);
        if gap_yd <= AT_BALL_YD && best.is_none_or(|(least, _)| gap_yd < least) {
            best = Some((gap_yd, mover));
        }
    }
    scene.side(best?.1)
}
