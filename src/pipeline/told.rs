//! Which pursuits tell most of a player: the ones whose frames are kept and drawn.

use crate::store::PursuitRow;
use std::collections::BTreeMap;

/// How much a pursuit tells: the yards that were his own doing; none for one that is not charged.
pub fn telling_yd(row: &PursuitRow) -> Option<f64> {
    let own = [row.late_yd?, row.flat_yd?, row.deep_yd?, row.pace_yd?];
    row.charged.then(|| own.iter().sum())
}

/// For each defender the index of his most telling row; of two alike the first in order of (game, play, pursuit).
pub fn most_telling<'a>(rows: impl Iterator<Item = (usize, &'a PursuitRow)>) -> BTreeMap<&'a str, usize> {
    let mut best: BTreeMap<&str, Told> = BTreeMap::new();
    for (index, row) in rows {
        let Some(yards) = telling_yd(row) else { continue };
        let told = Told { yards, key: (&row.game, &row.play, row.pursuit), index };
        best.entry(&row.defender)
            .and_modify(|old| {
                if told.tells_more_than(old) {
                    *old = told
                }
            })
            .or_insert(told);
    }
    best.into_iter().map(|(defender, told)| (defender, told.index)).collect()
}

#[derive(Clone, Copy)]
struct Told<'a> {
    yards: f64,
    key: (&'a str, &'a str, i64),
    index: usize,
}

impl Told<'_> {
    fn tells_more_than(&self, other: &Told) -> bool {
        self.yards > other.yards || (self.yards == other.yards && self.key < other.key)
    }
}
