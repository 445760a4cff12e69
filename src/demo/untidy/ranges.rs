//! Finding one's way in the rows of a game.

use crate::base::{Stream, V2};
use crate::demo::row::DemoRow;
use crate::demo::tags::rounded;

pub(super) fn each(rows: &mut [DemoRow], mut change: impl FnMut(&mut DemoRow) -> bool) -> usize {
    rows.iter_mut().map(|row| usize::from(change(row))).sum()
}

/// Ranges of rows that share a key.
fn runs(rows: &[DemoRow], same: impl Fn(&DemoRow, &DemoRow) -> bool) -> Vec<std::ops::Range<usize>> {
    let mut out = Vec::new();
    let mut start = 0;
    for end in 1..=rows.len() {
        if end == rows.len() || !same(&rows[start], &rows[end]) {
            out.push(start..end);
            start = end;
        }
    }
    out
}

pub(super) fn plays(rows: &[DemoRow]) -> Vec<std::ops::Range<usize>> {
    runs(rows, |a, b| a.play_id == b.play_id)
}

pub(super) fn tracks(rows: &[DemoRow]) -> Vec<std::ops::Range<usize>> {
    runs(rows, |a, b| a.play_id == b.play_id && a.mover_id == b.mover_id)
}

pub(super) fn shift(row: &mut DemoRow, draws: &mut Stream, low_yd: f64, high_yd: f64) {
    let by = V2::polar(draws.between(0.0, std::f64::consts::TAU)) * draws.between(low_yd, high_yd);
    row.x = row.x.map(|x| rounded(x + by.x));
    row.y = row.y.map(|y| rounded(y + by.y));
}
