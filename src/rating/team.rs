//! Each side's defence: means per chance with an interval clustered by game.

use super::chance::{Account, own_yd};
use super::ranking::RESOLUTION_YD;
use super::roster::{grouped, in_order, mean};
use crate::base::normal;
use crate::model::settings::RatingSettings;
use crate::stats::cluster::{PRIOR_DF, cluster_variance};
use crate::store::rows::{PursuitRow, TeamRow};
use std::collections::{BTreeMap, BTreeSet};

/// Sides in order of own yards per chance, the smallest first; then sides without a chance, in order of text.
///
/// A side is a sum of many players, so it is not pooled towards the others; its interval says how far the mean can be trusted.
/// Rows without a side belong to nobody and are left out (see [`super::compare_sides`] for their number).
pub fn rank_teams(rows: &[PursuitRow], settings: &RatingSettings) -> Vec<TeamRow> {
    let mut teams: Vec<TeamRow> = by_side(rows).into_iter().map(|(side, rows)| team(side, &rows, settings)).collect();
    teams.sort_by(|a, b| match (a.own_yd, b.own_yd) {
        (Some(x), Some(y)) => x.total_cmp(&y).then_with(|| a.side.cmp(&b.side)),
        (Some(_), None) => std::cmp::Ordering::Less,
        (None, Some(_)) => std::cmp::Ordering::Greater,
        (None, None) => a.side.cmp(&b.side),
    });
    for (rank, team) in (1_i64..).zip(teams.iter_mut()) {
        team.rank = rank;
    }
    teams
}

/// Rows of each side, in a fixed order.
pub(super) fn by_side(rows: &[PursuitRow]) -> BTreeMap<&str, Vec<&PursuitRow>> {
    let mut sides: BTreeMap<&str, Vec<&PursuitRow>> = BTreeMap::new();
    for row in rows {
        if let Some(side) = &row.defender_side {
            sides.entry(side).or_default().push(row);
        }
    }
    sides.values_mut().for_each(|rows| rows.sort_by(|a, b| in_order(a, b)));
    sides
}

/// Mean own yards per chance with its interval.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(super) struct OwnYards {
    pub chances: usize,
    pub mean_yd: Option<f64>,
    pub low_yd: Option<f64>,
    pub high_yd: Option<f64>,
}

/// Clusters by game where there are games, by play where there is one: the pursuits of one play share one run. The
/// game-clustered variance has games − 1 degrees of freedom, so it is mixed with the play-clustered one, which counts for ten.
/// No interval from a single play.
pub(super) fn own_yards(rows: &[&PursuitRow], settings: &RatingSettings) -> OwnYards {
    let plays: Vec<String> = rows.iter().map(|r| format!("{}\u{1f}{}", r.game, r.play)).collect();
    let by_play = grouped(plays.iter().zip(rows).map(|(play, r)| (play.as_str(), own_yd(r))));
    let by_game = grouped(rows.iter().map(|r| (r.game.as_str(), own_yd(r))));
    let chances: usize = by_game.iter().map(Vec::len).sum();
    let mean_yd = mean(by_game.iter().flatten().map(|v| Some(*v)));
    let df = by_game.len().saturating_sub(1) as f64;
    let variance = cluster_variance(&by_play)
        .map(|play| cluster_variance(&by_game).map_or(play, |game| (PRIOR_DF * play + df * game) / (PRIOR_DF + df)))
        .map(|v| v.max(RESOLUTION_YD * RESOLUTION_YD / chances as f64));
    let level = if settings.level > 0.0 && settings.level < 1.0 { settings.level } else { 0.95 };
    let half_yd = variance.map(|v| normal::quantile(0.5 + 0.5 * level) * v.sqrt());
    let shifted = |sign: f64| mean_yd.and_then(|m| half_yd.map(|h| m + sign * h));
    OwnYards { chances, mean_yd, low_yd: shifted(-1.0), high_yd: shifted(1.0) }
}

fn team(side: &str, rows: &[&PursuitRow], settings: &RatingSettings) -> TeamRow {
    let own = own_yards(rows, settings);
    let accounts: Vec<Account> = rows.iter().filter_map(|r| Account::of(r)).collect();
    let per_chance = |value: fn(&Account) -> f64| mean(accounts.iter().map(|a| Some(value(a))));
    let players: BTreeSet<&str> = rows.iter().filter(|r| own_yd(r).is_some()).map(|r| r.defender.as_str()).collect();
    let count = |ending: &str| rows.iter().filter(|r| r.ending == ending).count() as i64;
    TeamRow {
        rank: 0,
        side: side.to_owned(),
        players: players.len() as i64,
        chances: own.chances as i64,
        stops: count("stop"),
        chances_lost: count("chance_lost"),
        efficiency: mean(rows.iter().map(|r| r.efficiency)),
        own_yd: own.mean_yd,
        own_low_yd: own.low_yd,
        own_high_yd: own.high_yd,
        late_yd: per_chance(|a| a.late_yd),
        flat_yd: per_chance(|a| a.flat_yd),
        deep_yd: per_chance(|a| a.deep_yd),
        pace_yd: per_chance(|a| a.pace_yd),
        block_yd: per_chance(|a| a.block_yd),
        move_yd: per_chance(|a| a.move_yd),
    }
}
