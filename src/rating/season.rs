//! The pursuits of a season as the rating keeps them: game by game, some sixty bytes a pursuit.
//!
//! A chance keeps its account and its geometry; of the other pursuits only counters and the values that enter a mean are
//! kept. Nothing is rounded: what is computed from a season has the same digits as from the rows it was made of.

use super::chance::{Account, is_broken};
use super::packed::{Chance, Label, Packed, RunningMean, Sample, Tally};
use super::texts::{Code, Recoding, Texts};
use crate::store::rows::{BriefRow, PursuitRow};
use std::cmp::Ordering;
use std::collections::BTreeMap;

/// The pursuits of any number of games.
#[derive(Clone, Debug, Default)]
pub struct Season {
    texts: Texts,
    games: BTreeMap<Box<str>, GameShare>,
    pursuits: usize,
    set_aside: usize,
}

/// One game's pursuits. The lists run in order of play, carry and pursuit.
#[derive(Clone, Debug, Default)]
pub(super) struct GameShare {
    pub chances: Vec<Chance>,
    pub efficiencies: Vec<Sample>,
    pub steer_n: Vec<Sample>,
    pub steer_k_per_s: Vec<Sample>,
    /// In order of label.
    pub tallies: BTreeMap<Label, Tally>,
    /// By defender.
    pub top_speed_yps: BTreeMap<Code, RunningMean>,
}

impl Season {
    /// The season of rows that are at hand.
    pub fn of(rows: &[PursuitRow]) -> Season {
        let mut season = Season::default();
        season.add(&rows.iter().map(BriefRow::from).collect::<Vec<_>>());
        season
    }

    /// Adds pursuits, in any order, of one game or several.
    ///
    /// All of a game's pursuits belong in one call: what comes later is put behind, and a play cut in two counts as two plays
    /// where scatter is taken by play.
    pub fn add(&mut self, rows: &[BriefRow]) {
        let mut rows: Vec<&BriefRow> = rows.iter().collect();
        rows.sort_by(|a, b| in_order(a, b));
        self.pursuits += rows.len();
        self.set_aside += rows.iter().filter(|row| is_broken(row)).count();
        for game in rows.chunk_by(|a, b| a.game == b.game) {
            let share = self.games.entry(game[0].game.as_str().into()).or_default();
            share.reserve(game);
            game.iter().for_each(|row| share.add(row, &mut self.texts));
        }
    }

    /// Adds the games of another season; they should be other games, see [`Season::add`].
    pub fn merge(&mut self, more: Season) {
        let codes = self.texts.codes_of(&more.texts);
        self.pursuits += more.pursuits;
        self.set_aside += more.set_aside;
        for (game, share) in more.games {
            self.games.entry(game).or_default().append(share, &codes);
        }
    }

    pub fn is_empty(&self) -> bool {
        self.pursuits == 0
    }

    /// Pursuits added.
    pub fn pursuits(&self) -> usize {
        self.pursuits
    }

    /// Charged pursuits without a whole account: listed, but no chance.
    pub fn set_aside(&self) -> usize {
        self.set_aside
    }

    /// Pursuits of defenders without a side: in no side's figures.
    pub fn without_side(&self) -> usize {
        let tallies = self.games.values().flat_map(|share| &share.tallies);
        tallies.filter(|(label, _)| label.side.is_none()).map(|(_, tally)| tally.pursuits as usize).sum()
    }

    /// Games in order of id, each with its place in that order.
    pub(super) fn games(&self) -> impl Iterator<Item = (usize, &GameShare)> {
        self.games.values().enumerate()
    }

    pub(super) fn text(&self, code: Code) -> &str {
        self.texts.text(code)
    }
}

impl GameShare {
    fn reserve(&mut self, rows: &[&BriefRow]) {
        let finite = |value: fn(&BriefRow) -> Option<f64>| rows.iter().filter_map(|row| value(row)).filter(|v| v.is_finite()).count();
        self.chances.reserve_exact(rows.iter().filter(|row| Account::of(row).is_some()).count());
        self.efficiencies.reserve_exact(finite(|row| row.efficiency));
        self.steer_n.reserve_exact(finite(|row| row.steer_n));
        self.steer_k_per_s.reserve_exact(finite(|row| row.steer_k_per_s));
    }

    fn append(&mut self, mut more: GameShare, codes: &Recoding) {
        more.chances.iter_mut().for_each(|chance| chance.recode(codes));
        self.chances.append(&mut more.chances);
        for (own, mut samples) in
            [(&mut self.efficiencies, more.efficiencies), (&mut self.steer_n, more.steer_n), (&mut self.steer_k_per_s, more.steer_k_per_s)]
        {
            samples.iter_mut().for_each(|sample| sample.recode(codes));
            own.append(&mut samples);
        }
        more.tallies.iter().for_each(|(label, tally)| self.tallies.entry(label.recoded(codes)).or_default().add(tally));
        more.top_speed_yps.iter().for_each(|(code, mean)| self.top_speed_yps.entry(codes.of(*code)).or_default().append(mean));
    }

    fn add(&mut self, row: &BriefRow, texts: &mut Texts) {
        let mut code = |text: &Option<String>| text.as_deref().map(|text| texts.code(text));
        let (name, side, position) = (code(&row.defender_name), code(&row.defender_side), code(&row.position));
        let play_kind = code(&row.play_kind);
        let defender = texts.code(&row.defender);
        let tally = self.tallies.entry(Label { defender, name, side, position }).or_default();
        tally.pursuits += 1;
        match row.ending.as_str() {
            "stop" => tally.stops += 1,
            "contact_lost" => tally.contacts_lost += 1,
            "chance_lost" => tally.chances_lost += 1,
            _ => {}
        }
        self.top_speed_yps.entry(defender).or_default().add(row.top_speed_yps);
        let sample = |value: Option<f64>| value.filter(|v| v.is_finite()).map(|value| Sample { defender, side, value });
        self.efficiencies.extend(sample(row.efficiency));
        self.steer_n.extend(sample(row.steer_n));
        self.steer_k_per_s.extend(sample(row.steer_k_per_s));
        self.chances.extend(Account::of(row).map(|account| Chance {
            account,
            start_range_yd: Packed::of(Some(row.start_range_yd)),
            start_bearing_deg: Packed::of(Some(row.start_bearing_deg)),
            capability_ratio: Packed::of(row.capability_ratio),
            carrier_speed_yps: Packed::of(Some(row.carrier_speed_yps)),
            closing_median_yps: Packed::of(Some(row.closing_median_yps)),
            line_rate_median_degps: Packed::of(Some(row.line_rate_median_degps)),
            on_course_share: Packed::of(Some(row.on_course_share)),
            lean_deg: Packed::of(row.lean_deg),
            play: texts.code(&row.play),
            defender,
            side,
            position,
            play_kind,
        }));
    }
}

/// By place in the season; what follows only matters where a key is given twice.
fn in_order(a: &BriefRow, b: &BriefRow) -> Ordering {
    let number = |x: Option<f64>, y: Option<f64>| x.unwrap_or(f64::NAN).total_cmp(&y.unwrap_or(f64::NAN));
    (&a.game, &a.play, a.carry, a.pursuit, &a.defender, a.start_frame)
        .cmp(&(&b.game, &b.play, b.carry, b.pursuit, &b.defender, b.start_frame))
        .then_with(|| number(a.conceded_yd, b.conceded_yd))
        .then_with(|| number(a.late_yd, b.late_yd))
        .then_with(|| number(a.flat_yd, b.flat_yd))
        .then_with(|| number(a.efficiency, b.efficiency))
        .then_with(|| a.start_range_yd.total_cmp(&b.start_range_yd))
}
