//! One measure over all players: raw mean, clustered standard error, shrunken value, interval.

use crate::base::normal;
use crate::stats::{TauMethod, TauPosterior, clustered_means, pool, tau2};

/// One player's share of a measure.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Measured {
    pub n: usize,
    /// Plain mean.
    pub raw: f64,
    /// Its variance, clustered by game and moderated; none when a single value is all there is.
    pub variance: Option<f64>,
    /// Partially pooled; none without a variance, for nobody could say how far to pool.
    pub pooled: Option<PooledValue>,
}

/// A shrunken value and its interval.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PooledValue {
    pub value: f64,
    pub low: f64,
    pub high: f64,
}

/// What pooling found for all players together.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PoolingReport {
    pub players: usize,
    /// Between-player variance by REML, which is used.
    pub tau2_reml: f64,
    /// The same by Paule & Mandel, as a check.
    pub tau2_paule_mandel: f64,
    pub mean: f64,
    pub se: f64,
    pub i2: f64,
}

/// Means and variances of every player's values, sorted by game: `values[player][game]`.
pub fn raw_means(values: &[Vec<Vec<f64>>], resolution: f64) -> Vec<Option<Measured>> {
    clustered_means(values, resolution)
        .into_iter()
        .map(|c| c.map(|c| Measured { n: c.n, raw: c.mean, variance: c.variance, pooled: None }))
        .collect()
}

/// Pools the players in place; those without a value or a variance are passed over.
///
/// Value: REML shrinkage. Interval: value ± z √(posterior mean square about the value), τ uncertain under a flat prior; a
/// plug-in interval would close to almost nothing whenever τ² is estimated as zero. Below three players the plug-in variance is used.
/// In simulated leagues with skewed yards the 95 % interval covers the truth in 0.90 to 0.97 of the players, the less the more the
/// situation is tangled up with quality.
pub fn pool_players(players: &mut [Option<Measured>], level: f64) -> Option<PoolingReport> {
    let usable: Vec<usize> = (0..players.len()).filter(|i| players[*i].is_some_and(|m| m.variance.is_some())).collect();
    let (y, v): (Vec<f64>, Vec<f64>) =
        usable.iter().filter_map(|i| players[*i].and_then(|m| m.variance.map(|variance| (m.raw, variance)))).unzip();
    let pooled = pool(&y, &v, TauMethod::Reml)?;
    let posterior = TauPosterior::flat(&y, &v);
    let z = normal::quantile(0.5 + 0.5 * level);
    for (place, i) in usable.iter().enumerate() {
        let unit = pooled.units[place];
        let spread = posterior.as_ref().map_or(unit.variance, |p| p.mean_square_about(unit.value, y[place], v[place])).sqrt();
        if let Some(m) = players[*i].as_mut() {
            m.pooled = Some(PooledValue { value: unit.value, low: unit.value - z * spread, high: unit.value + z * spread });
        }
    }
    Some(PoolingReport {
        players: usable.len(),
        tau2_reml: pooled.tau2,
        tau2_paule_mandel: tau2(&y, &v, TauMethod::PauleMandel)?,
        mean: pooled.mean,
        se: pooled.se,
        i2: pooled.i2,
    })
}
