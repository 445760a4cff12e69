//! Rows that go missing.

use super::Spared;
use super::ranges::{plays, tracks};
use crate::base::Stream;
use crate::demo::row::DemoRow;
use std::collections::BTreeMap;

/// Drops (first, count) rows of each track for which `stretch` gives one.
pub(super) fn drop_stretch(
    rows: &mut Vec<DemoRow>,
    draws: &mut Stream,
    mut stretch: impl FnMut(&mut Stream, usize) -> Option<(usize, usize)>,
) -> usize {
    let before = rows.len();
    let mut keep = vec![true; before];
    for range in tracks(rows) {
        if range.len() > 6
            && let Some((first, count)) = stretch(draws, range.len())
        {
            for k in first..(first + count).min(range.len()) {
                keep[range.start + k] = false;
            }
        }
    }
    let mut kept = keep.iter();
    rows.retain(|_| kept.next().copied().unwrap_or(true));
    before - rows.len()
}

pub(super) fn drop_unspared(
    rows: &mut Vec<DemoRow>,
    draws: &mut Stream,
    spared: &Spared,
    share: f64,
    stretch: impl Fn(&mut Stream, usize) -> (usize, usize),
) -> usize {
    let mut free: Vec<bool> = tracks(rows)
        .iter()
        .filter(|r| r.len() > 6)
        .map(|r| !spared.contains(&(rows[r.start].play_id.clone(), rows[r.start].mover_id.clone())))
        .collect();
    free.reverse();
    drop_stretch(rows, draws, |draws, n| (free.pop() == Some(true) && draws.chance(share)).then(|| stretch(draws, n)))
}

pub(super) fn frame_missing(rows: &mut Vec<DemoRow>, draws: &mut Stream) -> usize {
    let before = rows.len();
    let mut gone = BTreeMap::new();
    for range in plays(rows).into_iter().step_by(2) {
        let unmarked: Vec<i64> = rows[range.clone()].iter().filter(|r| r.event.is_none() && r.frame > 2).map(|r| r.frame).collect();
        if !unmarked.is_empty() {
            gone.insert(rows[range.start].play_id.clone(), unmarked[draws.below(unmarked.len())]);
        }
    }
    rows.retain(|row| gone.get(&row.play_id) != Some(&row.frame));
    before - rows.len()
}
