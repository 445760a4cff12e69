//! Each side's defence: means per chance with an interval clustered by game.

use super::chance::Account;
use super::packed::{RunningMean, Tally};
use super::ranking::RESOLUTION_YD;
use super::roster::{Placed, grouped, mean};
use super::season::Season;
use super::texts::Code;
use crate::base::normal;
use crate::model::settings::RatingSettings;
use crate::stats::cluster::{PRIOR_DF, cluster_variance};
use crate::store::rows::TeamRow;
use std::collections::{BTreeMap, BTreeSet};

/// Sides in order of own yards per chance, the smallest first; then sides without a chance, in order of text.
///
/// A side is a sum of many players, so it is not pooled towards the others; its interval says how far the mean can be trusted.
/// Rows without a side belong to nobody and are left out (see [`super::compare_sides`] for their number).
pub fn rank_teams(season: &Season, settings: &RatingSettings) -> Vec<TeamRow> {
    let mut teams: Vec<TeamRow> = by_side(season).into_iter().map(|(name, side)| team(name, &side, settings)).collect();
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

/// One side's chances in order of game, play, carry and pursuit; of all its pursuits the counts and the mean efficiency.
#[derive(Default)]
pub(super) struct Side<'a> {
    pub chances: Vec<Placed<'a>>,
    tally: Tally,
    efficiency: RunningMean,
}

/// The sides in order of text.
pub(super) fn by_side(season: &Season) -> BTreeMap<&str, Side<'_>> {
    let mut sides: BTreeMap<Code, Side<'_>> = BTreeMap::new();
    for (game, share) in season.games() {
        for (label, tally) in &share.tallies {
            if let Some(side) = label.side {
                sides.entry(side).or_default().tally.add(tally);
            }
        }
        for sample in &share.efficiencies {
            if let Some(side) = sample.side {
                sides.entry(side).or_default().efficiency.add(sample.value);
            }
        }
        for chance in &share.chances {
            if let Some(side) = chance.side {
                sides.entry(side).or_default().chances.push(Placed { game, chance });
            }
        }
    }
    sides.into_iter().map(|(code, side)| (season.text(code), side)).collect()
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
pub(super) fn own_yards(placed: &[Placed<'_>], settings: &RatingSettings) -> OwnYards {
    let by_play = grouped(placed.iter().map(|p| ((p.game, p.chance.play), p.chance.account.own_yd())));
    let by_game = grouped(placed.iter().map(|p| (p.game, p.chance.account.own_yd())));
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

fn team(name: &str, side: &Side<'_>, settings: &RatingSettings) -> TeamRow {
    let own = own_yards(&side.chances, settings);
    let per_chance = |value: fn(&Account) -> f64| mean(side.chances.iter().map(|p| Some(value(&p.chance.account))));
    let players: BTreeSet<Code> = side.chances.iter().map(|p| p.chance.defender).collect();
    TeamRow {
        rank: 0,
        side: name.to_owned(),
        players: players.len() as i64,
        chances: own.chances as i64,
        stops: i64::from(side.tally.stops),
        chances_lost: i64::from(side.tally.chances_lost),
        efficiency: side.efficiency.value(),
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
