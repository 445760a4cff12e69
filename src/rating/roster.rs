//! The pursuits sorted to their defenders, in an order that the input's order cannot change.

use super::chance::Account;
use crate::store::rows::PursuitRow;
use std::cmp::Ordering;
use std::collections::{BTreeMap, BTreeSet};

/// A charged pursuit with its account.
#[derive(Clone, Copy, Debug)]
pub struct Chance<'a> {
    pub row: &'a PursuitRow,
    pub account: Account,
}

/// One defender and all his pursuits, in order of game, play, carry and pursuit.
#[derive(Clone, Debug)]
pub struct Defender<'a> {
    pub id: &'a str,
    pub rows: Vec<&'a PursuitRow>,
    pub chances: Vec<Chance<'a>>,
}

/// All defenders in order of id.
pub fn defenders(rows: &[PursuitRow]) -> Vec<Defender<'_>> {
    let mut by_id: BTreeMap<&str, Vec<&PursuitRow>> = BTreeMap::new();
    for row in rows {
        by_id.entry(&row.defender).or_default().push(row);
    }
    by_id
        .into_iter()
        .map(|(id, mut rows)| {
            rows.sort_by(|a, b| in_order(a, b));
            let chances = rows.iter().filter_map(|row| Account::of(row).map(|account| Chance { row, account })).collect();
            Defender { id, rows, chances }
        })
        .collect()
}

/// By place in the season; what follows only matters where a key is given twice.
pub fn in_order(a: &PursuitRow, b: &PursuitRow) -> Ordering {
    let number = |x: Option<f64>, y: Option<f64>| x.unwrap_or(f64::NAN).total_cmp(&y.unwrap_or(f64::NAN));
    (&a.game, &a.play, a.carry, a.pursuit, &a.defender, a.start_frame)
        .cmp(&(&b.game, &b.play, b.carry, b.pursuit, &b.defender, b.start_frame))
        .then_with(|| number(a.conceded_yd, b.conceded_yd))
        .then_with(|| number(a.late_yd, b.late_yd))
        .then_with(|| number(a.flat_yd, b.flat_yd))
        .then_with(|| number(a.efficiency, b.efficiency))
        .then_with(|| a.start_range_yd.total_cmp(&b.start_range_yd))
}

impl<'a> Defender<'a> {
    pub fn games(&self) -> usize {
        self.rows.iter().map(|r| r.game.as_str()).collect::<BTreeSet<_>>().len()
    }

    pub fn endings(&self, word: &str) -> usize {
        self.rows.iter().filter(|r| r.ending == word).count()
    }

    /// The text that most of his rows give; of equally frequent ones the first in order of text.
    pub fn usual(&self, text: impl Fn(&'a PursuitRow) -> Option<&'a str>) -> Option<&'a str> {
        let mut count: BTreeMap<&str, usize> = BTreeMap::new();
        for word in self.rows.iter().filter_map(|r| text(r)) {
            *count.entry(word).or_default() += 1;
        }
        let most = count.values().copied().max()?;
        count.into_iter().find(|(_, n)| *n == most).map(|(word, _)| word)
    }
}

/// Finite values sorted into one list a key, keys in order of text.
pub fn grouped<'a>(values: impl Iterator<Item = (&'a str, Option<f64>)>) -> Vec<Vec<f64>> {
    let mut by_key: BTreeMap<&str, Vec<f64>> = BTreeMap::new();
    for (key, value) in values {
        if let Some(v) = value.filter(|v| v.is_finite()) {
            by_key.entry(key).or_default().push(v);
        }
    }
    by_key.into_values().collect()
}

/// Mean of the finite values; none when there is none.
pub fn mean(values: impl Iterator<Item = Option<f64>>) -> Option<f64> {
    let (mut total, mut n) = (0.0, 0_usize);
    for v in values.flatten().filter(|v| v.is_finite()) {
        total += v;
        n += 1;
    }
    (n > 0).then(|| total / n as f64)
}
