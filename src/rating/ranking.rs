//! The ranking of players, and what it rests on.

use super::measure::{Measured, PoolingReport, pool_players, raw_means};
use super::player::{Figures, player_row};
use super::position_effect::{PositionOffset, position_offsets};
use super::roster::{Defender, defenders, grouped};
use super::season::Season;
use super::situation::{SituationFit, adjust};
use super::steering::steering;
use crate::model::Group;
use crate::model::settings::RatingSettings;
use crate::stats::{RankDraws, rank_intervals};
use crate::store::rows::{PlayerRow, PursuitRow};

/// Least difference in yards that an account can show: the noise of a good tag, a tenth of a yard.
pub(super) const RESOLUTION_YD: f64 = 0.1;
/// Least difference of an efficiency; own choice.
pub(super) const RESOLUTION_EFFICIENCY: f64 = 0.01;
/// Level of the intervals where the setting is no share between 0 and 1.
const FALLBACK_LEVEL: f64 = 0.95;

/// Players in order of rank, and the models behind the order.
#[derive(Clone, Debug, PartialEq)]
pub struct Ranking {
    pub players: Vec<PlayerRow>,
    /// Own yards per chance, as they are.
    pub own: Option<PoolingReport>,
    /// Own yards per chance, adjusted: what the rank goes by.
    pub own_adjusted: Option<PoolingReport>,
    pub efficiency: Option<PoolingReport>,
    /// None when there were too few chances to fit the situation.
    pub situation: Option<SituationFit>,
    pub positions: Vec<PositionOffset>,
    /// Charged pursuits without a whole account; not used.
    pub set_aside: usize,
}

/// Ranks all defenders of rows that are at hand; see [`rank`].
pub fn rank_players(rows: &[PursuitRow], settings: &RatingSettings) -> Vec<PlayerRow> {
    rank(&Season::of(rows), settings).players
}

/// Ranks all defenders who have a pursuit by their own yards per chance: adjusted for the situation, partially pooled, the
/// smallest first.
///
/// Players with fewer chances than the setting asks for are pooled with the others but marked `too_few` and ranked after
/// them, with a rank interval from first to last: one chance at the pooled mean is no place in a ranking. Equal pooled values, as when nothing at all can be told between players, are put in
/// order of the adjusted mean, then of the id; their rank intervals say that it means nothing. Players without a
/// chance, or about whose scatter nothing is known, follow in order of id, with a rank interval from first to last.
/// The order of the rows that the season was made of does not matter. A `level` that is no share between 0 and 1 is read as 0.95.
pub fn rank(season: &Season, settings: &RatingSettings) -> Ranking {
    let level = if settings.level > 0.0 && settings.level < 1.0 { settings.level } else { FALLBACK_LEVEL };
    let mut defenders = defenders(season);
    // First what needs its values no longer than this, so that they are gone before the regression takes its room.
    let efficiencies: Vec<Vec<Vec<f64>>> = defenders.iter_mut().map(|d| std::mem::take(&mut d.efficiencies).values).collect();
    let mut efficiency = raw_means(&efficiencies, RESOLUTION_EFFICIENCY);
    drop(efficiencies);
    let efficiency_report = pool_players(&mut efficiency, level);
    let steering = steering(&mut defenders, level);
    let mut raw = raw_means(&own_by_game(&defenders), RESOLUTION_YD);
    let own = pool_players(&mut raw, level);
    let (mut adjusted, situation, positions) = adjusted_means(season, &defenders);
    let own_adjusted = pool_players(&mut adjusted, level);

    let has_enough: Vec<bool> = defenders.iter().map(|d| d.chances.len() >= settings.too_few as usize).collect();
    let intervals = intervals(&defenders, &adjusted, &has_enough, settings, level);
    let mut order: Vec<usize> = (0..defenders.len()).collect();
    let key = |i: usize| adjusted[i].and_then(|m| m.pooled.map(|p| (p.value, m.raw)));
    order.sort_by(|a, b| match (key(*a), key(*b)) {
        (Some(x), Some(y)) => has_enough[*b].cmp(&has_enough[*a]).then(x.0.total_cmp(&y.0)).then(x.1.total_cmp(&y.1)).then(a.cmp(b)),
        (Some(_), None) => std::cmp::Ordering::Less,
        (None, Some(_)) => std::cmp::Ordering::Greater,
        (None, None) => a.cmp(b),
    });
    let players = order
        .into_iter()
        .enumerate()
        .map(|(place, i)| {
            let rank = place + 1;
            // The order goes by the pooled value, the interval by draws: at its edge the one may step over the other.
            let (low, high) = intervals[i].map_or((1, defenders.len()), |(low, high)| (low.min(rank), high.max(rank)));
            let figures = Figures {
                own: raw[i],
                own_adjusted: adjusted[i],
                efficiency: efficiency[i],
                steering: steering[i],
                rank: (rank, low, high),
            };
            player_row(&defenders[i], &figures, settings)
        })
        .collect();
    Ranking { players, own, own_adjusted, efficiency: efficiency_report, situation, positions, set_aside: season.set_aside() }
}

/// Own yards of each defender's chances sorted by game.
fn own_by_game(defenders: &[Defender<'_>]) -> Vec<Vec<Vec<f64>>> {
    defenders.iter().map(|d| grouped(d.chances.iter().map(|c| (c.game, c.chance.account.own_yd())))).collect()
}

/// Means after the adjustment for the situation and for the position, their variances enlarged by the doubt about both.
fn adjusted_means(season: &Season, defenders: &[Defender<'_>]) -> (Vec<Option<Measured>>, Option<SituationFit>, Vec<PositionOffset>) {
    let moved = adjust(season, defenders);
    let values: Vec<Vec<Vec<f64>>> =
        defenders.iter().zip(&moved.own_yd).map(|(d, own)| grouped(d.chances.iter().zip(own).map(|(c, v)| (c.game, *v)))).collect();
    let mut means = raw_means(&values, RESOLUTION_YD);
    for (mean, extra) in means.iter_mut().zip(&moved.extra_variance) {
        if let Some(variance) = mean.as_mut().and_then(|m| m.variance.as_mut()) {
            *variance += extra;
        }
    }
    let groups: Vec<Option<Group>> = defenders.iter().map(|d| d.position.and_then(Group::of)).collect();
    let offsets = position_offsets(&groups, &means);
    for (mean, group) in means.iter_mut().zip(&groups) {
        if let Some(m) = mean.as_mut()
            && let Some(offset) = offsets.iter().find(|o| Some(o.group) == *group)
        {
            m.raw -= offset.offset_yd;
            m.variance = m.variance.map(|v| v + offset.variance);
        }
    }
    (means, moved.fit, offsets)
}

fn intervals(
    defenders: &[Defender<'_>],
    adjusted: &[Option<Measured>],
    has_enough: &[bool],
    settings: &RatingSettings,
    level: f64,
) -> Vec<Option<(usize, usize)>> {
    let mut out = vec![None; defenders.len()];
    let known: Vec<usize> = (0..defenders.len()).filter(|i| has_enough[*i] && adjusted[*i].is_some_and(|m| m.pooled.is_some())).collect();
    let ids: Vec<&str> = known.iter().map(|i| defenders[*i].id).collect();
    let (y, v): (Vec<f64>, Vec<f64>) =
        known.iter().filter_map(|i| adjusted[*i].and_then(|m| m.variance.map(|variance| (m.raw, variance)))).unzip();
    let how = RankDraws { draws: settings.draws as usize, seed: settings.seed, level };
    if let Some(found) = rank_intervals(&ids, &y, &v, how) {
        for (i, interval) in known.into_iter().zip(found) {
            out[i] = Some(interval);
        }
    }
    out
}
