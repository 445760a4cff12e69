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
    let mut best: BTreeMap<&str, (f64, (&str, &str, i64), usize)> = BTreeMap::new();
    for (index, row) in rows {
        let Some(yards) = telling_yd(row) else { continue };
        let key = (&*row.game, &*row.play, row.pursuit);
        let better = best.get(&*row.defender).is_none_or(|(y, k, _)| yards > *y || (yards == *y && key < *k));
        if better {
            best.insert(&row.defender, (yards, key, index));
        }
    }
    best.into_iter().map(|(defender, (_, _, index))| (defender, index)).collect()
}
