//! Ranks with intervals: how often each unit comes out where, over draws from what is known about all of them.

use super::pooling::pool;
use super::tau::TauMethod;
use super::tau_posterior::{TauNode, TauPosterior};
use crate::base::Stream;

/// How many draws, from which seed, and the level of the interval (0..1).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct RankDraws {
    pub draws: usize,
    pub seed: u64,
    pub level: f64,
}

/// Intervals of ranks, 1 for the smallest θ, one pair for each unit.
///
/// `ids` name the units: each draws from a stream of its own, so that their order cannot matter; ids must differ.
/// A draw takes τ from its posterior under a flat prior (below three units τ is held at its REML estimate), then μ given τ, then
/// each θ given both. Where τ = 0 the θ are all one and chance decides, as it should.
/// The interval runs from the (1 − level)/2 quantile of the drawn ranks to the (1 + level)/2 one, widened to whole ranks.
/// No result when the numbers are not usable (see [`super::tau2`]), the lengths differ or there are no draws; the level is held in 0..1.
pub fn rank_intervals(ids: &[&str], estimates: &[f64], variances: &[f64], how: RankDraws) -> Option<Vec<(usize, usize)>> {
    let k = ids.len();
    if k != estimates.len() || how.draws == 0 {
        return None;
    }
    let nodes = nodes(estimates, variances)?;
    let mut cumulated = 0.0;
    let shares: Vec<f64> = nodes
        .iter()
        .map(|n| {
            cumulated += n.weight;
            cumulated
        })
        .collect();
    let mut shared = Stream::new(how.seed, "population");
    let mut own: Vec<Stream> = ids.iter().map(|id| Stream::new(how.seed, &format!("unit {id}"))).collect();
    let mut ranks: Vec<Vec<u32>> = vec![Vec::with_capacity(how.draws); k];
    let mut drawn: Vec<(u64, u32)> = Vec::with_capacity(k);
    for _ in 0..how.draws {
        let pick = shared.uniform() * cumulated;
        let node = &nodes[shares.partition_point(|s| *s <= pick).min(nodes.len() - 1)];
        let mean = node.mean + shared.normal() * node.mean_variance.sqrt();
        let tau2 = node.tau * node.tau;
        drawn.clear();
        for (i, stream) in own.iter_mut().enumerate() {
            let b = tau2 / (tau2 + variances[i]);
            let z = stream.normal();
            let theta = b * estimates[i] + (1.0 - b) * mean + z * (b * variances[i]).sqrt();
            drawn.push((ordered_bits(if tau2 > 0.0 { theta } else { z }), i as u32));
        }
        drawn.sort_unstable();
        for (rank, (_, i)) in drawn.iter().enumerate() {
            ranks[*i as usize].push(rank as u32 + 1);
        }
    }
    let tail = 0.5 * (1.0 - how.level.clamp(0.0, 1.0));
    let last = (how.draws - 1) as f64;
    let (low, high) = ((last * tail).floor() as usize, (last * (1.0 - tail)).ceil() as usize);
    Some(
        ranks
            .into_iter()
            .map(|mut r| {
                r.sort_unstable();
                (r[low] as usize, r[high] as usize)
            })
            .collect(),
    )
}

/// Whole numbers in the order of `f64::total_cmp`, for a faster sort.
fn ordered_bits(value: f64) -> u64 {
    let bits = value.to_bits();
    if bits >> 63 == 0 { bits | (1 << 63) } else { !bits }
}

fn nodes(estimates: &[f64], variances: &[f64]) -> Option<Vec<TauNode>> {
    if let Some(posterior) = TauPosterior::flat(estimates, variances) {
        return Some(posterior.nodes);
    }
    let held = pool(estimates, variances, TauMethod::Reml)?;
    Some(vec![TauNode { tau: held.tau2.sqrt(), weight: 1.0, mean: held.mean, mean_variance: held.se * held.se }])
}
