//! What a position costs by itself: group means, themselves partially pooled, so that a small group is hardly moved.
//!
//! A player's slopes come from differences within him; his position never differs within him. So it is judged between players,
//! and as a random effect: a group of three poor players must not have its poorness taken for its position.

use super::measure::Measured;
use crate::model::Group;
use crate::stats::{TauMethod, pool, tau2};
use std::collections::BTreeMap;

/// Smallest group that says something about its position; own choice.
const LEAST_PLAYERS: usize = 3;

/// A group's pooled difference from the average player.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PositionOffset {
    pub group: Group,
    pub players: usize,
    /// Taken off the own yards of its players.
    pub offset_yd: f64,
    /// What is added to the variance of their means.
    pub variance: f64,
}

/// Offsets by group, in order of group; empty when fewer than two groups are large enough.
///
/// `groups` and `players` run side by side.
pub fn position_offsets(groups: &[Option<Group>], players: &[Option<Measured>]) -> Vec<PositionOffset> {
    let mut members: BTreeMap<Group, Vec<(f64, f64)>> = BTreeMap::new();
    for (group, player) in groups.iter().zip(players) {
        if let (Some(group), Some(m)) = (group, player)
            && let Some(variance) = m.variance
        {
            members.entry(*group).or_default().push((m.raw, variance));
        }
    }
    members.retain(|_, list| list.len() >= LEAST_PLAYERS);
    if members.len() < 2 {
        return Vec::new();
    }
    let within = variance_within_groups(&members);
    let means: Vec<(f64, f64)> = members.values().map(|list| weighted(list, within)).collect();
    let (y, v): (Vec<f64>, Vec<f64>) = means.into_iter().unzip();
    let Some(pooled) = pool(&y, &v, TauMethod::Reml) else {
        return Vec::new();
    };
    let total: usize = members.values().map(Vec::len).sum();
    // The average over players keeps the league's level where it was.
    let level = members.values().zip(&pooled.units).map(|(list, u)| list.len() as f64 * u.value).sum::<f64>() / total as f64;
    members
        .iter()
        .zip(&pooled.units)
        .zip(&v)
        .map(|(((group, list), unit), variance)| PositionOffset {
            group: *group,
            players: list.len(),
            offset_yd: unit.value - level,
            variance: unit.weight * variance,
        })
        .collect()
}

/// Between-player variance once the groups' means are taken out; REML loses the groups' degrees of freedom, hence the factor.
fn variance_within_groups(members: &BTreeMap<Group, Vec<(f64, f64)>>) -> f64 {
    let (mut y, mut v) = (Vec::new(), Vec::new());
    for list in members.values() {
        let (mean, _) = weighted(list, 0.0);
        let n = list.len() as f64;
        for (raw, variance) in list {
            y.push((raw - mean) * (n / (n - 1.0)).sqrt());
            v.push(*variance);
        }
    }
    tau2(&y, &v, TauMethod::Reml).unwrap_or(0.0)
}

fn weighted(list: &[(f64, f64)], tau2: f64) -> (f64, f64) {
    let w: f64 = list.iter().map(|(_, v)| 1.0 / (v + tau2)).sum();
    (list.iter().map(|(y, v)| y / (v + tau2)).sum::<f64>() / w, 1.0 / w)
}
