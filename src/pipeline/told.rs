//! Which pursuits tell most of a player: the ones whose frames are kept and drawn.

use crate::report::heading::Entries;
use crate::store::{BriefRow, PursuitRow};
use std::collections::BTreeMap;

/// A pursuit by its place, and the yards that were the defender's own doing: the more, the more it tells.
#[derive(Clone, Copy, Debug)]
pub struct Told<T> {
    yards: f64,
    pub game: T,
    pub play: T,
    pub pursuit: i64,
    /// Place among the rows that were looked through.
    pub row: usize,
}

impl<'a> Told<&'a str> {
    /// None for a pursuit that is not charged.
    fn of(entries: &impl Entries, charged: bool, (game, play, pursuit): (&'a str, &'a str, i64), row: usize) -> Option<Told<&'a str>> {
        let yards = entries.own_entries_yd().filter(|_| charged)?;
        Some(Told { yards, game, play, pursuit, row })
    }

    fn owned(self) -> Told<String> {
        Told { yards: self.yards, game: self.game.to_owned(), play: self.play.to_owned(), pursuit: self.pursuit, row: self.row }
    }
}

impl<T: Ord> Told<T> {
    /// Of two alike the first in order of (game, play, pursuit) tells more.
    fn tells_more_than(&self, other: &Told<T>) -> bool {
        let is_before = || (&self.game, &self.play, self.pursuit) < (&other.game, &other.play, other.pursuit);
        self.yards > other.yards || (self.yards == other.yards && is_before())
    }
}

/// What tells most of each defender.
fn best<'a>(pursuits: impl Iterator<Item = (&'a str, Option<Told<&'a str>>)>) -> BTreeMap<&'a str, Told<&'a str>> {
    let mut best: BTreeMap<&str, Told<&str>> = BTreeMap::new();
    for (defender, told) in pursuits {
        if let Some(told) = told.filter(|told| best.get(defender).is_none_or(|old| told.tells_more_than(old))) {
            best.insert(defender, told);
        }
    }
    best
}

/// For each defender the index of his most telling row.
pub fn most_telling<'a>(rows: impl Iterator<Item = (usize, &'a PursuitRow)>) -> BTreeMap<&'a str, usize> {
    let told = |(index, r): (usize, &'a PursuitRow)| (&*r.defender, Told::of(r, r.charged, (&r.game, &r.play, r.pursuit), index));
    best(rows.map(told)).into_iter().map(|(defender, told)| (defender, told.row)).collect()
}

/// Each defender's most telling pursuit of a season; one place a defender is all that is kept.
#[derive(Clone, Debug, Default)]
pub struct MostTelling {
    best: BTreeMap<String, Told<String>>,
}

impl MostTelling {
    /// The most telling ones of a game's pursuits.
    pub fn of_game(rows: &[BriefRow]) -> MostTelling {
        let all = rows.iter().enumerate().map(|(index, r)| (&*r.defender, Told::of(r, r.charged, (&r.game, &r.play, r.pursuit), index)));
        MostTelling { best: best(all).into_iter().map(|(defender, told)| (defender.to_owned(), told.owned())).collect() }
    }

    /// Keeps of each defender what tells more.
    pub fn merge(&mut self, more: MostTelling) {
        for (defender, told) in more.best {
            if self.best.get(&defender).is_none_or(|old| told.tells_more_than(old)) {
                self.best.insert(defender, told);
            }
        }
    }

    pub fn of(&self, defender: &str) -> Option<&Told<String>> {
        self.best.get(defender)
    }
}
