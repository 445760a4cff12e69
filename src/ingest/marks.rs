//! Event marks, carrier marks and the direction of attack of a play, from its rows.

use super::draft::Draft;
use super::game::RawGame;
use super::row::{NO_FRAME, Row};
use super::texts::NONE;
use super::who::truth;
use crate::model::{Attack, EventMark, FindingKind, Findings};
use std::collections::BTreeMap;

/// What a game's texts mean; learned once a game.
pub(crate) struct Marks {
    /// Event code to its mark, `None` for a text without a meaning.
    events: BTreeMap<u32, Option<EventMark>>,
    /// The carrier column holds yes or no on the carrier's own row, rather than his id on every row.
    carrier_is_truth: bool,
}

impl Marks {
    pub fn of(raw: &RawGame) -> Marks {
        let mut events = BTreeMap::new();
        let mut carriers: Vec<u32> = Vec::new();
        let (mut last_event, mut last_carrier) = (NONE, NONE);
        for row in &raw.rows {
            if row.event != last_event {
                last_event = row.event;
                if row.event != NONE {
                    events.entry(row.event).or_insert_with(|| mark_of(raw, row.event));
                }
            }
            if row.carrier != last_carrier {
                last_carrier = row.carrier;
                if !carriers.contains(&row.carrier) {
                    carriers.push(row.carrier);
                }
            }
        }
        let only_truths = carriers.iter().filter(|c| **c != NONE).all(|c| truth(&raw.texts[*c as usize]).is_some());
        let carrier_is_truth = only_truths && is_one_a_frame(raw);
        Marks { events, carrier_is_truth }
    }

    /// Each mark once a frame, in order of frame. Texts without a meaning are counted once a frame.
    pub fn events(&self, raw: &RawGame, play: &str, draft: &Draft, rows: &[&Row], findings: &mut Findings) -> Vec<(u32, EventMark)> {
        let mut seen: Vec<(u32, u32)> = Vec::new();
        for row in rows.iter().filter(|r| r.event != NONE) {
            let at = (draft.frame_index(row), row.event);
            if seen.last() != Some(&at) {
                seen.push(at);
            }
        }
        seen.sort_unstable();
        seen.dedup();
        let mut out: Vec<(u32, EventMark)> = Vec::with_capacity(seen.len());
        for (frame, code) in seen {
            let mark = self.events.get(&code).copied().flatten();
            if mark.is_none() {
                let text = &raw.texts[code as usize];
                findings.add(FindingKind::UnknownEvent, 1, || format!("game {}, play {play}: {text:?}", raw.id));
            }
            out.push((frame, mark.unwrap_or(EventMark::Other)));
        }
        out.sort_unstable();
        out.dedup();
        out
    }

    /// (frame index, mover index), one a frame, in order of frame.
    pub fn carriers(&self, raw: &RawGame, draft: &Draft, rows: &[&Row]) -> Vec<(u32, u32)> {
        let place = |code: u32| draft.codes.iter().position(|c| *c == code).map(|p| p as u32);
        let mut out: Vec<(u32, u32)> = Vec::new();
        for row in rows.iter().filter(|r| r.carrier != NONE) {
            let who = match self.carrier_is_truth {
                true if truth(&raw.texts[row.carrier as usize]) == Some(true) => row.mover,
                true => continue,
                false => row.carrier,
            };
            if let Some(mover) = place(who) {
                let at = (draft.frame_index(row), mover);
                if out.last() != Some(&at) {
                    out.push(at);
                }
            }
        }
        out.sort_unstable();
        out.dedup_by_key(|at| at.0);
        out
    }
}

/// The direction that the rows agree on.
pub(crate) fn attack(rows: &[&Row]) -> Option<Attack> {
    let right = rows.iter().any(|r| r.direction > 0);
    let left = rows.iter().any(|r| r.direction < 0);
    match (right, left) {
        (true, false) => Some(Attack::TowardsPlusX),
        (false, true) => Some(Attack::TowardsMinusX),
        _ => None,
    }
}

/// Whether the frames marked true mostly have one mover so marked. A player whose id is 1 looks like a yes, but an id
/// column names him on every mover's row.
fn is_one_a_frame(raw: &RawGame) -> bool {
    let says_yes = |r: &&Row| r.carrier != NONE && truth(&raw.texts[r.carrier as usize]) == Some(true);
    let mut marked: Vec<(u32, i64, i64, u32)> =
        raw.rows.iter().filter(says_yes).map(|r| (r.play, r.frame, if r.frame == NO_FRAME { r.time_us } else { 0 }, r.mover)).collect();
    marked.sort_unstable();
    marked.dedup();
    let movers = marked.len();
    marked.dedup_by_key(|m| (m.0, m.1, m.2));
    2 * movers <= 3 * marked.len()
}

fn mark_of(raw: &RawGame, code: u32) -> Option<EventMark> {
    let text = &raw.texts[code as usize];
    let mapped = raw.context.events.get(&super::naming::normal(text)).copied();
    mapped.or_else(|| super::events::mark_of_text(text))
}
