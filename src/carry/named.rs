//! Carriers named by the file: a carrier column frame by frame, or one name for the whole play.

use super::ends::track_end;
use super::possession::{Gain, Possession};
use super::scene::Scene;
use crate::model::{CarryEnd, CarryStart, EventMark};

/// Marks of one carrier farther apart than this are two carries, s.
const PAUSE_S: f64 = 0.5;
/// A mark of the ball's leaving within this time of the column's end says how it ended, s.
const SAME_END_S: f64 = 0.5;
/// Downfield speed that begins a run when nothing else tells, yd/s, and the time for which it must last, s.
const RUN_YPS: f64 = 3.0;
const RUN_S: f64 = 0.5;

/// Possessions from the carrier column.
pub(super) fn by_column(scene: &Scene) -> Vec<Possession> {
    let mut found: Vec<Possession> = Vec::new();
    for (frame, mover) in &scene.play.hints.carrier_marks {
        let (frame, mover) = (*frame as usize, *mover as usize);
        if frame >= scene.frames() || mover >= scene.movers() {
            continue;
        }
        match found.last_mut() {
            Some(p) if p.mover == mover && scene.span_s(p.end, frame) <= PAUSE_S => p.end = frame,
            _ => found.push(Possession {
                mover,
                start: frame,
                end: frame,
                gain: Gain::Held,
                start_how: CarryStart::CarrierColumn,
                end_how: None,
                thrown: false,
                confidence: 1.0,
            }),
        }
    }
    for p in &mut found {
        finish(scene, p);
    }
    found
}

/// Reads the marks around a column's run: a start at the snap, an end by a pass, a down and so on.
fn finish(scene: &Scene, p: &mut Possession) {
    for (frame, mark) in &scene.play.events {
        let frame = *frame as usize;
        if *mark == EventMark::Snap && p.start <= scene.after(frame, 0.6) && p.end > frame {
            p.gain = Gain::Snap;
        }
        if frame < p.start || p.end_how.is_some() {
            continue;
        }
        let at_end = frame >= scene.before(p.end, SAME_END_S) && frame <= scene.after(p.end, SAME_END_S);
        match mark {
            EventMark::PassThrown | EventMark::Kick if at_end => p.thrown = true,
            EventMark::Sack if p.gain == Gain::Snap && frame <= scene.after(p.end, SAME_END_S) => p.thrown = true,
            EventMark::Incomplete if at_end => p.thrown = true,
            EventMark::Fumble if at_end => (p.end, p.end_how) = (frame.min(p.end), Some(CarryEnd::EventFumble)),
            EventMark::Lateral if at_end => (p.end, p.end_how) = (frame.min(p.end), Some(CarryEnd::EventLateral)),
            EventMark::Down | EventMark::OutOfBounds | EventMark::Score | EventMark::Slide
                if frame <= scene.after(p.end, SAME_END_S) && scene.span_s(p.start, frame) > 0.0 =>
            {
                let how = match mark {
                    EventMark::Down => CarryEnd::EventDown,
                    EventMark::OutOfBounds => CarryEnd::EventOut,
                    EventMark::Score => CarryEnd::EventScore,
                    _ => CarryEnd::EventSlide,
                };
                (p.end, p.end_how) = (frame.min(p.end), Some(how));
            }
            _ => {}
        }
    }
    // A column that runs to the end of the track does not say where the carry ended.
    if p.end_how.is_none() && p.end < track_end(scene, p.mover, p.start) {
        p.end_how = Some(CarryEnd::CarrierColumn);
    }
}

/// One possession for the carrier whom the plays table names, when nothing else in the play tells of any:
/// from where he begins to run.
pub(super) fn alone(scene: &Scene, mover: usize) -> Option<Possession> {
    let piece = scene.tracks.get(mover)?.pieces.iter().max_by_key(|p| p.len())?;
    let runs = |f: usize| scene.slope_yps(mover, f, 0.2).is_some_and(|v| v.norm() >= RUN_YPS);
    let start = (piece.first..piece.end()).find(|f| {
        let until = scene.after(*f, RUN_S);
        until < piece.end() && (*f..=until).all(runs)
    })?;
    Some(Possession {
        mover,
        start,
        end: piece.end() - 1,
        gain: Gain::Held,
        start_how: CarryStart::PlaysTable,
        end_how: None,
        thrown: false,
        confidence: 0.5,
    })
}

/// Brings the name from the plays table into possessions found by marks or ball: it confirms the one that is
/// his, else it takes the place of the longest one of his side (of any, where sides are unknown).
pub(super) fn confirm(scene: &Scene, mover: usize, possessions: &mut [Possession]) {
    let mut confirmed = false;
    for p in possessions.iter_mut().filter(|p| p.mover == mover) {
        (p.start_how, p.confidence) = (CarryStart::PlaysTable, p.confidence.max(0.98));
        confirmed = true;
    }
    if confirmed {
        return;
    }
    let fits = |p: &Possession| !p.thrown && p.gain != Gain::Snap && !scene.opposed(p.mover, mover);
    let longest =
        possessions.iter_mut().filter(|p| fits(p)).max_by(|a, b| (a.end - a.start).cmp(&(b.end - b.start)).then(b.start.cmp(&a.start)));
    if let Some(p) = longest
        && scene.pos(mover, p.start).is_some()
    {
        *p = Possession { mover, start_how: CarryStart::PlaysTable, confidence: 0.7, ..*p };
    }
}
