//! Pursuits: one defender against one carry, from contact to contact.

use super::blocks::{Chase, blocked};
use super::contact::contact_at;
use crate::base::V2;
use crate::model::settings::CarrySettings;
use crate::model::{Carry, MoverTrack, Play, Pursuit, Track};

/// Times the reach at which a lost contact is over and a new pursuit begins.
const LOST_FACTOR: f64 = 1.3;
/// What must be left of the carry for a new pursuit, s.
const LEFT_S: f64 = 0.5;
/// How far beyond the lines an opponent is off the field, yd.
const OFF_FIELD_YD: f64 = 1.0;

/// Every opponent's pursuits of one carry, in order of (defender, start), numbered from 1.
///
/// A pursuit starts with the carry (or with the defender's track) and ends at contact, at the end of the carry
/// or with his track. Contact is the first frame with a gap within the reach; where the two meet and part between
/// two frames, the nearer one of them. A contact that does not stop the carrier is followed by a new pursuit once
/// the gap has opened to 1.3 times the reach, if half a second is left. A stop: the carrier is down or out, and
/// this defender's contact lasted until `stop_within_s` before that or less. Opponents who are off the field both
/// at the start and at the end pursue nobody, nor does anybody whose side is unknown.
pub fn find_pursuits(play: &Play, tracks: &[MoverTrack], carry: &Carry, settings: &CarrySettings) -> Vec<Pursuit> {
    let mut found = Vec::with_capacity(12);
    let Some(runner) = runner(tracks, carry) else { return found };
    let mates = mates(play, tracks, carry);
    for (defender, piece) in opponents(play, tracks, carry) {
        each_contact(play, runner, piece, carry, settings, |leg| {
            let contact = leg.contact.map(|frame| contact_at(play, runner, piece, leg.start, frame));
            let chase = Chase { runner, defender: piece, mates: &mates, start: leg.start, end: leg.end };
            found.push(Pursuit {
                number: found.len() as u32 + 1,
                defender,
                start: leg.start,
                end: leg.end,
                contact,
                is_stop: leg.is_stop,
                blocked: blocked(play, &chase, settings),
            });
        });
    }
    found
}

/// Who comes to contact with the carrier and in which frames: (defender, frame), in that order.
pub fn contacts(play: &Play, tracks: &[MoverTrack], carry: &Carry, settings: &CarrySettings) -> Vec<(usize, usize)> {
    let mut found = Vec::new();
    let Some(runner) = runner(tracks, carry) else { return found };
    for (defender, piece) in opponents(play, tracks, carry) {
        each_contact(play, runner, piece, carry, settings, |leg| found.extend(leg.contact.map(|frame| (defender, frame))));
    }
    found
}

/// The defenders who made the stop, in order of index: those whose contact ended the carry.
pub fn stoppers(pursuits: &[Pursuit], carry: &Carry) -> Vec<usize> {
    if !carry.end_how.is_stop() {
        return Vec::new();
    }
    let mut found: Vec<usize> = pursuits.iter().filter(|p| p.is_stop).map(|p| p.defender).collect();
    found.sort_unstable();
    found.dedup();
    found
}

fn runner<'a>(tracks: &'a [MoverTrack], carry: &Carry) -> Option<&'a Track> {
    tracks.get(carry.carrier)?.at(carry.start)
}

/// Opponents with the pieces of their tracks that reach into the carry.
fn opponents<'a>(play: &'a Play, tracks: &'a [MoverTrack], carry: &'a Carry) -> impl Iterator<Item = (usize, &'a Track)> {
    let carrier = play.movers.get(carry.carrier);
    let opposed = move |m: usize| matches!((carrier, play.movers.get(m)), (Some(c), Some(d)) if c.opposes(d));
    tracks.iter().enumerate().filter(move |(m, _)| opposed(*m)).flat_map(move |(m, track)| {
        track.pieces.iter().filter_map(move |piece| {
            let (from, to) = (piece.first.max(carry.start), piece.end().min(carry.end + 1));
            let on_field = |f: usize| play.field.contains(piece.pos(f), OFF_FIELD_YD);
            (from < to && (on_field(from) || on_field(to - 1))).then_some((m, piece))
        })
    })
}

fn mates<'a>(play: &Play, tracks: &'a [MoverTrack], carry: &Carry) -> Vec<&'a Track> {
    let Some(side) = play.movers.get(carry.carrier).and_then(|c| c.side.as_ref()) else { return Vec::new() };
    let is_mate = |m: usize| m != carry.carrier && play.movers.get(m).and_then(|o| o.side.as_ref()) == Some(side);
    let reaches = |piece: &&Track| !piece.is_empty() && piece.first <= carry.end && piece.end() > carry.start;
    tracks.iter().enumerate().filter(|(m, _)| is_mate(*m)).flat_map(|(_, t)| t.pieces.iter()).filter(reaches).collect()
}

/// One chase of one defender, up to its contact if there is one.
struct Leg {
    start: usize,
    end: usize,
    contact: Option<usize>,
    is_stop: bool,
}

fn each_contact(play: &Play, runner: &Track, defender: &Track, carry: &Carry, settings: &CarrySettings, mut take: impl FnMut(Leg)) {
    let first = carry.start.max(defender.first).max(runner.first);
    let last = carry.end.min(defender.end() - 1).min(runner.end() - 1);
    let time_s = |f: usize| play.time_s.get(f).copied().unwrap_or(f64::INFINITY);
    let reach2 = settings.reach_yd * settings.reach_yd;
    let lost2 = reach2 * LOST_FACTOR * LOST_FACTOR;
    let gap = |f: usize| runner.pos(f) - defender.pos(f);
    let mut start = first;
    while start <= last {
        let Some(contact) = first_contact(start, last, reach2, gap) else {
            take(Leg { start, end: last, contact: None, is_stop: false });
            return;
        };
        let mut opened = contact + 1;
        while opened <= last && gap(opened).norm2() <= lost2 {
            opened += 1;
        }
        let held_until = opened - 1;
        let is_stop = carry.end_how.is_stop() && time_s(carry.end) - time_s(held_until) <= settings.stop_within_s + 1e-6;
        take(Leg { start, end: contact, contact: Some(contact), is_stop });
        if opened > last || time_s(last) - time_s(opened) < LEFT_S {
            return;
        }
        start = opened;
    }
}

/// The first frame in contact. A pass closer than the reach between two frames counts for the nearer one.
fn first_contact(start: usize, last: usize, reach2: f64, gap: impl Fn(usize) -> V2) -> Option<usize> {
    let mut here = gap(start);
    for frame in start..=last {
        if here.norm2() <= reach2 {
            return Some(frame);
        }
        if frame == last {
            break;
        }
        let next = gap(frame + 1);
        let step = next - here;
        // Closing at this frame, opening at the next: the least gap lies between them.
        let (closing, opening) = (here.dot(step) < 0.0, next.dot(step) > 0.0);
        if closing && opening && next.norm2() > reach2 {
            let least = here.cross(step);
            if least * least <= reach2 * step.norm2() {
                return Some(if next.norm2() < here.norm2() { frame + 1 } else { frame });
            }
        }
        here = next;
    }
    None
}
