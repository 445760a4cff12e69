//! The season sorted to its defenders, in an order that the input's order cannot change.

use super::packed::{Chance, Label, RunningMean, Sample, Tally};
use super::season::Season;
use super::texts::Code;
use std::collections::BTreeMap;

/// A chance and the place of its game.
#[derive(Clone, Copy, Debug)]
pub struct Placed<'a> {
    pub game: usize,
    pub chance: &'a Chance,
}

/// One defender: his chances in order of game, play, carry and pursuit; of all his pursuits what a mean or a count needs.
#[derive(Clone, Debug, Default)]
pub struct Defender<'a> {
    pub id: &'a str,
    pub name: Option<&'a str>,
    pub side: Option<&'a str>,
    pub position: Option<&'a str>,
    pub games: usize,
    pub tally: Tally,
    pub chances: Vec<Placed<'a>>,
    pub efficiencies: ByGame,
    pub steer_n: ByGame,
    pub steer_k_per_s: ByGame,
    /// Mean over games of the game's mean, so that a game with many pursuits counts no more than another.
    pub top_speed_yps: Option<f64>,
}

/// Values, one list a game that has any, in order of game.
#[derive(Clone, Debug, Default)]
pub struct ByGame {
    pub values: Vec<Vec<f64>>,
    last: Option<usize>,
}

impl ByGame {
    fn push(&mut self, game: usize, value: f64) {
        match self.values.last_mut().filter(|_| self.last == Some(game)) {
            Some(values) => values.push(value),
            None => self.values.push(vec![value]),
        }
        self.last = Some(game);
    }
}

/// A defender while the games go by.
#[derive(Default)]
struct Gathered<'a> {
    chances: Vec<Placed<'a>>,
    efficiencies: ByGame,
    steer_n: ByGame,
    steer_k_per_s: ByGame,
    tally: Tally,
    labels: Vec<(Label, u32)>,
    games: usize,
    top_speed: RunningMean,
}

/// All defenders in order of id.
pub fn defenders(season: &Season) -> Vec<Defender<'_>> {
    let mut by_code: BTreeMap<Code, Gathered<'_>> = BTreeMap::new();
    for (game, share) in season.games() {
        for (defender, mean) in &share.top_speed_yps {
            let gathered = by_code.entry(*defender).or_default();
            gathered.games += 1;
            mean.value().into_iter().for_each(|mean| gathered.top_speed.add(mean));
        }
        for (label, tally) in &share.tallies {
            let gathered = by_code.entry(label.defender).or_default();
            gathered.tally.add(tally);
            gathered.labels.push((*label, tally.pursuits));
        }
        let mut give = |samples: &[Sample], list: for<'b> fn(&'b mut Gathered<'_>) -> &'b mut ByGame| {
            samples.iter().for_each(|s| list(by_code.entry(s.defender).or_default()).push(game, s.value));
        };
        give(&share.efficiencies, |g| &mut g.efficiencies);
        give(&share.steer_n, |g| &mut g.steer_n);
        give(&share.steer_k_per_s, |g| &mut g.steer_k_per_s);
        for chance in &share.chances {
            by_code.entry(chance.defender).or_default().chances.push(Placed { game, chance });
        }
    }
    let mut list: Vec<Defender<'_>> = by_code
        .into_iter()
        .map(|(code, g)| Defender {
            id: season.text(code),
            name: usual(season, &g.labels, |l| l.name),
            side: usual(season, &g.labels, |l| l.side),
            position: usual(season, &g.labels, |l| l.position),
            games: g.games,
            tally: g.tally,
            chances: g.chances,
            efficiencies: g.efficiencies,
            steer_n: g.steer_n,
            steer_k_per_s: g.steer_k_per_s,
            top_speed_yps: g.top_speed.value(),
        })
        .collect();
    list.sort_by(|a, b| a.id.cmp(b.id));
    list
}

/// The text that most of his pursuits give; of equally frequent ones the first in order of text.
fn usual<'a>(season: &'a Season, labels: &[(Label, u32)], text: fn(&Label) -> Option<Code>) -> Option<&'a str> {
    let mut count: BTreeMap<&str, u32> = BTreeMap::new();
    for (code, pursuits) in labels.iter().filter_map(|(label, pursuits)| text(label).map(|code| (code, pursuits))) {
        *count.entry(season.text(code)).or_default() += pursuits;
    }
    let most = count.values().copied().max()?;
    count.into_iter().find(|(_, n)| *n == most).map(|(word, _)| word)
}

/// Finite values as one list for each run of equal keys.
pub fn grouped<K: PartialEq>(values: impl Iterator<Item = (K, f64)>) -> Vec<Vec<f64>> {
    let mut lists: Vec<Vec<f64>> = Vec::new();
    let mut last = None;
    for (key, value) in values.filter(|(_, v)| v.is_finite()) {
        match lists.last_mut().filter(|_| last.as_ref() == Some(&key)) {
            Some(list) => list.push(value),
            None => lists.push(vec![value]),
        }
        last = Some(key);
    }
    lists
}

/// Mean of the finite values; none when there is none.
pub fn mean(values: impl Iterator<Item = Option<f64>>) -> Option<f64> {
    let mut mean = RunningMean::default();
    values.flatten().for_each(|value| mean.add(value));
    mean.value()
}
