//! Own yards as they would have been from the average situation: what the defender did not choose is taken out.
//!
//! Slopes come from differences between one player's own chances (fixed effects), so that a poor player's poorness is never
//! mistaken for a hard situation. Then each chance is moved by its slopes to the average situation of all chances.
//!
//! Slopes fitted to little are mostly noise, and would move players by noise. So each slope keeps the share 1 − (se/slope)² of
//! itself, not below zero: the non-negative garrote of Breiman (1995) for one column at a time. A clear slope keeps nearly
//! all of itself, a chance one vanishes.

use super::packed::Chance;
use super::roster::Defender;
use super::season::Season;
use super::texts::Code;
use crate::stats::{WithinFit, within_fit};
use std::collections::BTreeMap;

/// Within-player degrees of freedom asked for each slope; fewer, and the slopes are mostly noise (a common rule of thumb).
const ROWS_PER_TERM: usize = 10;
/// Chances below which a kind of play is put with the other rare ones; own choice.
const LEAST_OF_A_KIND: usize = 20;

/// A slope: yards for each unit of the term, as fitted, before the shrinkage.
#[derive(Clone, Debug, PartialEq)]
pub struct Term {
    pub name: String,
    pub slope: f64,
    pub se: f64,
    /// Share of the slope that is used, 0..1; 0 also where the term never varies within a player or repeats the others.
    pub kept: f64,
}

/// What the adjustment found.
#[derive(Clone, Debug, PartialEq)]
pub struct SituationFit {
    pub chances: usize,
    pub terms: Vec<Term>,
    /// Within players, in yd².
    pub residual_variance: f64,
}

/// Adjusted own yards in the order of the defenders' chances, and what the doubt about the slopes adds to each player's variance.
#[derive(Clone, Debug, PartialEq)]
pub struct Adjusted {
    pub own_yd: Vec<Vec<f64>>,
    pub extra_variance: Vec<f64>,
    /// None when there were too few chances to fit anything; then the own yards are as they were.
    pub fit: Option<SituationFit>,
}

struct Column {
    name: String,
    values: Vec<f64>,
}

/// Fits the slopes and moves every chance to the average situation.
pub fn adjust(season: &Season, defenders: &[Defender<'_>]) -> Adjusted {
    let raw: Vec<Vec<f64>> = defenders.iter().map(|d| d.chances.iter().map(|c| c.chance.account.own_yd()).collect()).collect();
    let plain = |raw| Adjusted { own_yd: raw, extra_variance: vec![0.0; defenders.len()], fit: None };
    let chances: Vec<&Chance> = defenders.iter().flat_map(|d| d.chances.iter().map(|c| c.chance)).collect();
    // Units counted without gaps over those who have a chance.
    let mut unit = Vec::with_capacity(chances.len());
    let mut units = 0;
    for d in defenders.iter().filter(|d| !d.chances.is_empty()) {
        unit.extend(std::iter::repeat_n(units, d.chances.len()));
        units += 1;
    }
    let df = chances.len() - units;
    let mut columns = geometry(&chances);
    let kinds = play_kinds(season, &chances);
    if df >= ROWS_PER_TERM * (columns.len() + kinds.len()) {
        columns.extend(kinds);
    }
    if columns.is_empty() || df < ROWS_PER_TERM * columns.len() {
        return plain(raw);
    }
    let y: Vec<f64> = raw.iter().flatten().copied().collect();
    let (names, values): (Vec<String>, Vec<Vec<f64>>) = columns.into_iter().map(|c| (c.name, c.values)).unzip();
    let Some(within) = within_fit(&unit, &values, &y) else {
        return plain(raw);
    };
    let centre: Vec<f64> = values.iter().map(|c| c.iter().sum::<f64>() / c.len() as f64).collect();
    let terms = terms(names, &within);
    let slopes: Vec<f64> = terms.iter().map(|t| t.kept * t.slope).collect();
    let mut at = 0;
    let (mut own_yd, mut extra_variance) = (Vec::with_capacity(raw.len()), Vec::with_capacity(raw.len()));
    for list in &raw {
        let mut offset = vec![0.0; centre.len()];
        let mut moved = Vec::with_capacity(list.len());
        for own in list {
            let from_average: Vec<f64> = values.iter().zip(&centre).map(|(c, m)| c[at] - m).collect();
            moved.push(own - slopes.iter().zip(&from_average).map(|(s, d)| s * d).sum::<f64>());
            offset.iter_mut().zip(&from_average).for_each(|(o, d)| *o += d / list.len() as f64);
            at += 1;
        }
        own_yd.push(moved);
        // A slope drawn to zero keeps the same share of its variance as of itself.
        offset.iter_mut().zip(&terms).for_each(|(o, t)| *o *= t.kept.sqrt());
        extra_variance.push(within.fit.leverage(&offset) * within.residual_variance);
    }
    let fit = SituationFit { chances: chances.len(), terms, residual_variance: within.residual_variance };
    Adjusted { own_yd, extra_variance, fit: Some(fit) }
}

fn terms(names: Vec<String>, within: &WithinFit) -> Vec<Term> {
    names
        .into_iter()
        .enumerate()
        .map(|(j, name)| {
            let slope = within.fit.coefficients[j];
            let variance = within.fit.inverse[j][j] * within.residual_variance;
            let kept = if within.fit.kept[j] && slope != 0.0 { (1.0 - variance / (slope * slope)).max(0.0) } else { 0.0 };
            Term { name, slope, se: variance.sqrt(), kept }
        })
        .collect()
}

fn geometry(chances: &[&Chance]) -> Vec<Column> {
    let bearing_rad = |c: &Chance| c.start_bearing_deg.get().map(f64::to_radians);
    [
        column("start_range_yd", chances, |c| c.start_range_yd.get()),
        column("start_bearing_cos", chances, |c| bearing_rad(c).map(f64::cos)),
        column("start_bearing_abs_sin", chances, |c| bearing_rad(c).map(|rad| rad.sin().abs())),
        column("capability_ratio", chances, |c| c.capability_ratio.get()),
        column("carrier_speed_yps", chances, |c| c.carrier_speed_yps.get()),
    ]
    .into_iter()
    .flatten()
    .collect()
}

/// A column, a missing value standing at the mean of the known ones (which leaves its chance unmoved); none without variation.
fn column(name: &str, chances: &[&Chance], value: impl Fn(&Chance) -> Option<f64>) -> Option<Column> {
    let given: Vec<Option<f64>> = chances.iter().map(|c| value(c).filter(|v| v.is_finite())).collect();
    let mean = super::roster::mean(given.iter().copied())?;
    let varies = given.iter().flatten().any(|v| (v - mean).abs() > 1e-9 * (1.0 + mean.abs()));
    varies.then(|| Column { name: name.to_owned(), values: given.into_iter().map(|v| v.unwrap_or(mean)).collect() })
}

/// One 0/1 column for each kind of play but the most frequent; rare and unnamed kinds share one, or go with the most frequent.
fn play_kinds(season: &Season, chances: &[&Chance]) -> Vec<Column> {
    let mut count: BTreeMap<Code, usize> = BTreeMap::new();
    for kind in chances.iter().filter_map(|c| c.play_kind) {
        *count.entry(kind).or_default() += 1;
    }
    count.retain(|_, n| *n >= LEAST_OF_A_KIND);
    // In order of text: codes have none.
    let kinds: BTreeMap<&str, (Code, usize)> = count.iter().map(|(kind, n)| (season.text(*kind), (*kind, *n))).collect();
    let Some(most) = count.values().copied().max() else {
        return Vec::new();
    };
    let Some(usual) = kinds.values().find(|(_, n)| *n == most).map(|(kind, _)| *kind) else {
        return Vec::new();
    };
    let share_of = |is_one: &dyn Fn(&Chance) -> bool| chances.iter().map(|c| f64::from(u8::from(is_one(c)))).collect::<Vec<f64>>();
    let mut columns: Vec<Column> = kinds
        .iter()
        .filter(|(_, (kind, _))| *kind != usual)
        .map(|(text, (kind, _))| Column { name: format!("play_kind={text}"), values: share_of(&|c| c.play_kind == Some(*kind)) })
        .collect();
    let is_rare = |c: &Chance| c.play_kind.is_none_or(|kind| !count.contains_key(&kind));
    if chances.iter().filter(|c| is_rare(c)).count() >= LEAST_OF_A_KIND {
        columns.push(Column { name: "play_kind=other".to_owned(), values: share_of(&is_rare) });
    }
    columns
}
