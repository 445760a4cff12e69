//! Who the movers of a game are: names, sides and positions from the rows, holes filled from a players table.

use super::game::RawGame;
use super::texts::NONE;
use super::who::means_ball;
use crate::model::{FindingKind, Findings, Mover};
use std::collections::BTreeMap;
use std::sync::Arc;

/// A game's movers by code, and which of them is the ball.
pub(crate) struct Roster {
    movers: BTreeMap<u32, Mover>,
    ball_attribute: Vec<bool>,
    ball_mover: Vec<bool>,
}

impl Roster {
    pub fn of(raw: &RawGame, findings: &mut Findings) -> Roster {
        let more = &raw.context.ball;
        let ball_text: Vec<bool> = raw.texts.iter().map(|t| means_ball(t, more)).collect();
        // A jersey number never means the ball; name, side and position may.
        let ball_attribute: Vec<bool> = raw.attributes.iter().map(|a| a[..3].iter().any(|code| ball_text[*code as usize])).collect();
        let mut seen: Vec<(u32, u32)> = Vec::new();
        let mut last_of_mover = vec![u32::MAX; raw.texts.len()];
        for row in &raw.rows {
            if last_of_mover[row.mover as usize] != row.attribute {
                last_of_mover[row.mover as usize] = row.attribute;
                seen.push((row.mover, row.attribute));
            }
        }
        seen.sort_unstable();
        seen.dedup();
        let mut roster = Roster { movers: BTreeMap::new(), ball_attribute, ball_mover: ball_text };
        for group in seen.chunk_by(|a, b| a.0 == b.0) {
            let mover = group[0].0;
            let attributes: Vec<u32> = group.iter().map(|g| g.1).filter(|a| !roster.is_ball(mover, *a)).collect();
            if mover != NONE && !attributes.is_empty() {
                let who = resolve(raw, mover, &attributes, findings);
                roster.movers.insert(mover, who);
            }
        }
        roster
    }

    #[inline]
    pub fn is_ball(&self, mover: u32, attribute: u32) -> bool {
        self.ball_attribute[attribute as usize] || self.ball_mover[mover as usize]
    }

    pub fn mover(&self, code: u32) -> Option<&Mover> {
        self.movers.get(&code)
    }
}

fn resolve(raw: &RawGame, mover: u32, attributes: &[u32], findings: &mut Findings) -> Mover {
    let id = Arc::clone(&raw.texts[mover as usize]);
    let mut is_torn = false;
    let mut pick = |part: usize| -> Option<Arc<str>> {
        let mut texts: Vec<&Arc<str>> = attributes
            .iter()
            .map(|a| raw.attributes[*a as usize][part])
            .filter(|code| *code != NONE)
            .map(|code| &raw.texts[code as usize])
            .collect();
        texts.sort();
        texts.dedup();
        is_torn |= texts.len() > 1;
        texts.first().map(|t| Arc::clone(t))
    };
    let (name, side, position, jersey) = (pick(0), pick(1), pick(2), pick(3));
    if is_torn {
        findings.add(FindingKind::NameConflict, 1, || format!("game {}, mover {id}", raw.id));
    }
    let told = raw.context.tables.players.get(&*id);
    let fill = |own: Option<Arc<str>>, other: Option<&Arc<str>>| own.or_else(|| other.cloned());
    Mover {
        name: fill(name, told.and_then(|t| t.name.as_ref())),
        side: fill(side, told.and_then(|t| t.side.as_ref())),
        position: fill(position, told.and_then(|t| t.position.as_ref())),
        jersey: fill(jersey, told.and_then(|t| t.jersey.as_ref())),
        id,
    }
}
