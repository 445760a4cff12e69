//! What the event marks say about possession: spans of time with their gain and their end, nobody named yet.

use super::possession::Gain;
use super::scene::Scene;
use crate::model::{CarryEnd, EventMark};

/// A span of possession between two marks, frames inclusive.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Span {
    pub gain: Gain,
    pub start: usize,
    pub end: usize,
    /// None when no mark tells how it ended.
    pub end_how: Option<CarryEnd>,
    /// Ended by a pass, a kick or a sack: no carry.
    pub thrown: bool,
}

/// Marks of one gain that follow each other within this time are one gain (caught, then caught again), s.
const SAME_GAIN_S: f64 = 1.0;
/// A catch that an incomplete pass follows within this time was none, s.
const UNDONE_S: f64 = 1.5;

/// The spans in order of time; none when no mark tells of a gain (a lone "down" does not).
pub(super) fn spans(scene: &Scene) -> Option<Vec<Span>> {
    let mut events: Vec<(usize, EventMark)> =
        scene.play.events.iter().filter(|(f, _)| (*f as usize) < scene.frames()).map(|(f, m)| (*f as usize, *m)).collect();
    events.sort_by_key(|(frame, mark)| (*frame, rank(*mark), *mark));
    if !events.iter().any(|(_, mark)| tells(*mark)) {
        return None;
    }
    let mut walk = Walk { scene, open: None, done: Vec::new(), killed: None };
    for (frame, mark) in events {
        walk.step(frame, mark);
    }
    walk.close(scene.last(), None, false);
    Some(walk.done)
}

/// Order of marks within one frame: what starts before what ends.
fn rank(mark: EventMark) -> u8 {
    match mark {
        EventMark::Snap => 0,
        EventMark::PassThrown | EventMark::Kick => 1,
        EventMark::PassArrived | EventMark::HandOff | EventMark::Catch | EventMark::Interception => 2,
        EventMark::Lateral | EventMark::KickReceived => 2,
        EventMark::Fumble => 3,
        EventMark::Recovery => 4,
        _ => 5,
    }
}

fn tells(mark: EventMark) -> bool {
    use EventMark::*;
    matches!(
        mark,
        Snap | HandOff
            | PassThrown
            | PassArrived
            | Catch
            | Incomplete
            | Interception
            | Lateral
            | KickReceived
            | FairCatch
            | Touchback
            | Recovery
            | Sack
    )
}

struct Walk<'a> {
    scene: &'a Scene<'a>,
    open: Option<Span>,
    done: Vec<Span>,
    /// Frame of the last mark that said "no possession".
    killed: Option<usize>,
}

impl Walk<'_> {
    fn step(&mut self, frame: usize, mark: EventMark) {
        match mark {
            EventMark::Snap => match &mut self.open {
                Some(open) if open.gain == Gain::Snap => open.start = frame,
                Some(_) => {}
                None if self.done.is_empty() => self.start(frame, Gain::Snap),
                None => {}
            },
            EventMark::HandOff => self.gain(frame, Gain::HandOff, Some(CarryEnd::BallLeft)),
            EventMark::Lateral => self.gain(frame, Gain::Lateral, Some(CarryEnd::EventLateral)),
            EventMark::PassArrived => self.gain(frame, Gain::Arrived, None),
            EventMark::Catch => self.gain(frame, Gain::Catch, None),
            EventMark::Interception => self.gain(frame, Gain::Interception, None),
            EventMark::KickReceived => self.gain(frame, Gain::KickReceived, None),
            EventMark::Recovery => self.gain(frame, Gain::Recovery, None),
            EventMark::PassThrown | EventMark::Kick => self.close(frame, Some(CarryEnd::BallLeft), true),
            EventMark::Fumble => self.close(frame, Some(CarryEnd::EventFumble), false),
            EventMark::Down => self.close(frame, Some(CarryEnd::EventDown), false),
            EventMark::OutOfBounds => self.close(frame, Some(CarryEnd::EventOut), false),
            EventMark::Score => self.close(frame, Some(CarryEnd::EventScore), false),
            EventMark::Slide => self.close(frame, Some(CarryEnd::EventSlide), false),
            EventMark::Sack => {
                let by_passer = self.open.is_some_and(|o| o.gain == Gain::Snap);
                self.close(frame, Some(CarryEnd::EventDown), by_passer);
            }
            EventMark::Incomplete => self.undo(frame, |gain| matches!(gain, Gain::Arrived | Gain::Catch), UNDONE_S),
            EventMark::FairCatch => self.undo(frame, |_| true, SAME_GAIN_S),
            EventMark::Touchback => self.undo(frame, |gain| gain != Gain::Snap, f64::INFINITY),
            EventMark::FirstContact | EventMark::Other => {}
        }
    }

    fn start(&mut self, frame: usize, gain: Gain) {
        self.open = Some(Span { gain, start: frame, end: frame, end_how: None, thrown: false });
    }

    /// Opens a span; `ends_other` is how the one before ended where this mark says so.
    fn gain(&mut self, frame: usize, gain: Gain, ends_other: Option<CarryEnd>) {
        let catching = |g: Gain| matches!(g, Gain::Arrived | Gain::Catch | Gain::Interception | Gain::KickReceived);
        if self.killed.is_some_and(|k| self.scene.span_s(k, frame) <= SAME_GAIN_S) && catching(gain) {
            return;
        }
        if let Some(open) = &mut self.open {
            let soon = self.scene.span_s(open.start, frame) <= SAME_GAIN_S;
            if soon && open.gain == gain {
                return;
            }
            if soon && catching(open.gain) && catching(gain) {
                // "Arrived" adds nothing to a catch; a catch after "arrived", or an interception after either, is the truth.
                if gain != Gain::Arrived {
                    (open.gain, open.start) = (gain, frame);
                }
                return;
            }
            if soon && open.gain == Gain::Lateral && catching(gain) {
                // The toss has arrived.
                let gain = if gain == Gain::Interception { gain } else { open.gain };
                (open.gain, open.start) = (gain, frame);
                return;
            }
            let thrown = catching(gain) && matches!(open.gain, Gain::Snap | Gain::HandOff | Gain::Lateral);
            self.close(frame, ends_other.or(Some(CarryEnd::BallLeft)), thrown);
        }
        self.start(frame, gain);
    }

    fn close(&mut self, frame: usize, end_how: Option<CarryEnd>, thrown: bool) {
        if let Some(open) = self.open.take() {
            self.done.push(Span { end: frame, end_how, thrown, ..open });
        }
    }

    /// A mark that says there was no possession to run with.
    fn undo(&mut self, frame: usize, undone: impl Fn(Gain) -> bool, within_s: f64) {
        self.killed = Some(frame);
        let Some(open) = self.open else { return };
        if open.gain == Gain::Snap {
            self.close(frame, Some(CarryEnd::BallLeft), true);
        } else if undone(open.gain) && self.scene.span_s(open.start, frame) <= within_s {
            self.open = None;
        } else {
            self.close(frame, Some(CarryEnd::EventDown), false);
        }
    }
}
