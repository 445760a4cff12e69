//! Where a possession ends: across the goal line, off the field, in a heap, or when the ball goes.

use super::attack::downfield_x_yd;
use super::possession::{Gain, Possession};
use super::scene::Scene;
use crate::base::V2;
use crate::model::{Attack, CarryEnd, CarryStart, EventMark};

/// How far beyond a line a carrier's centre must be seen before he counts as out, yd: above the noise of a tag.
const OUT_YD: f64 = 0.3;
/// The same where the file has marks of its own and said nothing, yd.
const OUT_UNMARKED_YD: f64 = 0.6;
/// A mark within this time of what the tracks show is the mark of that, s.
const SAME_END_S: f64 = 1.0;
/// Opponents this much farther than the reach still hold a man up.
const HEAP_FACTOR: f64 = 1.4;
/// Time over which a stopped carrier must stay where he is, s.
const STAYS_S: f64 = 1.0;
/// Half the time over which his speed is taken, s.
const SPEED_S: f64 = 0.2;
/// An opponent who was on him up to this long ago stopped him, s.
const BESET_S: f64 = 1.0;
/// Time that a player who just got the ball has to get going before standing counts against him, s.
const GATHERS_S: f64 = 0.5;
/// From the fall of his speed to the ground, s. Own choice.
const FALLS_S: f64 = 0.1;

/// The end of a possession: frame and how it was known.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct End {
    pub frame: usize,
    pub how: CarryEnd,
}

/// Looks for everything that can end `p` between its start and its latest end, and takes the first.
pub(super) fn find_end(scene: &Scene, attack: Attack, p: &Possession) -> End {
    let mut end = match p.end_how.map(|how| End { frame: p.end, how }).or_else(|| marked_end(scene, p)) {
        Some(end) => end,
        None => {
            let last = track_end(scene, p.mover, p.start).min(p.end);
            collapse(scene, p.mover, p.start, last).unwrap_or(End { frame: last, how: CarryEnd::TrackEnded })
        }
    };
    if p.start_how == CarryStart::Ball && end.how == CarryEnd::BallLeft && p.gain != Gain::Snap && !p.thrown {
        // A ball that leaves a man who is down was not lost by him.
        end = collapse(scene, p.mover, p.start, end.frame).filter(|c| was_down(scene, p, c.frame)).unwrap_or(end);
    }
    if let Some(frame) = crossing(scene, attack, p.mover, p.start, end.frame) {
        let how = if end.how == CarryEnd::EventScore { end.how } else { CarryEnd::CrossedGoal };
        end = End { frame, how: marked_near(scene, frame, EventMark::Score).map_or(how, |_| CarryEnd::EventScore) };
    }
    let marked = matches!(end.how, CarryEnd::EventDown | CarryEnd::EventOut | CarryEnd::EventSlide | CarryEnd::EventFumble);
    if let Some(frame) = leaving(scene, p.mover, p.start, end.frame, if marked { OUT_UNMARKED_YD } else { OUT_YD }) {
        let how = marked_near(scene, frame, EventMark::OutOfBounds).map_or(CarryEnd::LeftField, |_| CarryEnd::EventOut);
        end = End { frame, how };
    }
    let seen_until = track_end(scene, p.mover, p.start);
    if seen_until < end.frame {
        // A mark after the carrier's last frame still says how it ended.
        end.frame = seen_until;
    }
    end
}

/// Whether he had been down for a while when the ball left him, or the ball stays where he is.
fn was_down(scene: &Scene, p: &Possession, down: usize) -> bool {
    let near_yd = 1.5 * scene.settings.hold_ball_yd;
    let stays = || (p.end..=scene.after(p.end, STAYS_S)).all(|f| scene.ball_gap_yd(p.mover, f).is_none_or(|gap| gap <= near_yd));
    scene.span_s(down, p.end) >= STAYS_S || stays()
}

/// The first mark of an end at or after the start of a possession whose end its source does not know.
fn marked_end(scene: &Scene, p: &Possession) -> Option<End> {
    let until = scene.after(p.end, 0.5);
    scene.play.events.iter().find_map(|(frame, mark)| {
        let frame = *frame as usize;
        if frame < p.start || frame > until {
            return None;
        }
        let how = match mark {
            EventMark::Down | EventMark::Sack => CarryEnd::EventDown,
            EventMark::OutOfBounds => CarryEnd::EventOut,
            EventMark::Score => CarryEnd::EventScore,
            EventMark::Slide => CarryEnd::EventSlide,
            EventMark::Fumble => CarryEnd::EventFumble,
            _ => return None,
        };
        Some(End { frame, how })
    })
}

fn marked_near(scene: &Scene, frame: usize, wanted: EventMark) -> Option<()> {
    let (from, to) = (scene.before(frame, SAME_END_S), scene.after(frame, SAME_END_S));
    scene.play.events.iter().any(|(f, m)| *m == wanted && (from..=to).contains(&(*f as usize))).then_some(())
}

/// Last frame of the piece of track that covers `frame`.
pub(super) fn track_end(scene: &Scene, mover: usize, frame: usize) -> usize {
    scene.tracks.get(mover).and_then(|t| t.at(frame)).map_or(frame, |piece| piece.end() - 1)
}

/// The first frame at which the carrier is over the goal line that he attacks; none on a field without one.
fn crossing(scene: &Scene, attack: Attack, mover: usize, start: usize, end: usize) -> Option<usize> {
    let field = &scene.play.field;
    if field.end_zone_yd <= 0.0 {
        return None;
    }
    let piece = scene.tracks.get(mover)?.at(start)?;
    (start..=end.min(piece.end() - 1)).find(|f| downfield_x_yd(scene, attack, piece.pos(*f).x) >= field.goal_x_yd())
}

/// The first frame off the field, once he is seen `margin_yd` beyond a line in two frames running (or in his last).
fn leaving(scene: &Scene, mover: usize, start: usize, end: usize, margin_yd: f64) -> Option<usize> {
    let field = &scene.play.field;
    let piece = scene.tracks.get(mover)?.at(start)?;
    let last = end.min(piece.end() - 1);
    let off = |f: usize| !field.contains(piece.pos(f), margin_yd);
    let seen = (start..=last).find(|f| off(*f) && (*f == last || off(*f + 1)))?;
    let mut first = seen;
    while first > start && !field.contains(piece.pos(first - 1), 0.0) {
        first -= 1;
    }
    Some(first)
}

/// The first frame in which the carrier, with an opponent on him, is slower than `down_speed_yps` and after which
/// he gets nowhere for a second (standing for a moment and running on is no end), and a tenth of a second for the fall.
fn collapse(scene: &Scene, mover: usize, start: usize, last: usize) -> Option<End> {
    let piece = scene.tracks.get(mover)?.at(start)?;
    let down_yps = scene.settings.down_speed_yps;
    for frame in scene.after(start, GATHERS_S)..=last {
        let slow = scene.slope_yps(mover, frame, SPEED_S).is_some_and(|v| v.norm() < down_yps);
        if !slow || !beset(scene, mover, scene.before(frame, BESET_S).max(start), scene.after(frame, SPEED_S)) {
            continue;
        }
        let later = scene.after(frame, STAYS_S).min(piece.end() - 1);
        if (frame..=later).all(|f| (piece.pos(f) - piece.pos(frame)).norm() <= down_yps * STAYS_S) {
            return Some(End { frame: scene.nearest(frame, FALLS_S).min(last), how: CarryEnd::SpeedCollapse });
        }
    }
    None
}

/// Whether an opponent is on him in any of these frames.
fn beset(scene: &Scene, carrier: usize, from: usize, to: usize) -> bool {
    let heap_yd = HEAP_FACTOR * scene.settings.reach_yd;
    let close = |p: V2, q: V2| (p - q).norm2() <= heap_yd * heap_yd;
    (0..scene.movers()).filter(|m| scene.opposed(carrier, *m)).any(|m| {
        let track = &scene.tracks[m];
        (from..=to).any(|f| matches!((track.pos(f), scene.pos(carrier, f)), (Some(p), Some(q)) if close(p, q)))
    })
}
