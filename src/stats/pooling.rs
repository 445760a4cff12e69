//! Partial pooling: a unit's own mean and everyone's mean, mixed by how much each can be trusted.

use super::tau::{TauMethod, is_usable, tau2};

/// One unit after pooling.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Shrunken {
    /// B = τ²/(τ² + v): the share that his own mean keeps, 0..1.
    pub weight: f64,
    /// B y + (1 − B) μ̂.
    pub value: f64,
    /// B v + (1 − B)² se².
    pub variance: f64,
}

/// Everyone together, and each unit after pooling (in the order given).
#[derive(Clone, Debug, PartialEq)]
pub struct Pooled {
    pub tau2: f64,
    pub mean: f64,
    pub se: f64,
    /// Cochran's Q, with the weights of τ² = 0.
    pub q: f64,
    /// Share of Q beyond its degrees of freedom, 0..1 (Higgins & Thompson 2002).
    pub i2: f64,
    pub units: Vec<Shrunken>,
}

/// Pools units by the normal–normal model, τ² estimated by `method`.
///
/// `estimates` y and their `variances` v (the square of y's unit). No result when [`tau2`] has none.
/// The variance of a shrunken value counts the doubt about μ and takes τ² as known; [`super::TauPosterior`] does not.
/// Source: Raudenbush & Bryk, Journal of Educational Statistics 10 (1985).
///
/// ```
/// use tailchase::stats::{TauMethod, pool};
/// let p = pool(&[0.0, 4.0], &[1.0, 1.0], TauMethod::Hedges).unwrap(); // τ² = 7, B = 7/8
/// assert_eq!(p.mean, 2.0);
/// assert_eq!(p.units[1].value, 7.0 / 8.0 * 4.0 + 1.0 / 8.0 * 2.0);
/// ```
pub fn pool(estimates: &[f64], variances: &[f64], method: TauMethod) -> Option<Pooled> {
    pool_at(estimates, variances, tau2(estimates, variances, method)?)
}

/// The same for a τ² that is given; 0 pools completely.
pub fn pool_at(estimates: &[f64], variances: &[f64], tau2: f64) -> Option<Pooled> {
    if !is_usable(estimates, variances) || !tau2.is_finite() || tau2 < 0.0 {
        return None;
    }
    let (mean, mean_variance) = weighted_mean(estimates, variances, tau2);
    let fixed_mean = weighted_mean(estimates, variances, 0.0).0;
    let q: f64 = estimates.iter().zip(variances).map(|(y, v)| (y - fixed_mean) * (y - fixed_mean) / v).sum();
    let df = (estimates.len() - 1) as f64;
    let i2 = if q > df { (q - df) / q } else { 0.0 };
    let units = estimates.iter().zip(variances).map(|(y, v)| shrink(*y, *v, tau2, mean, mean_variance)).collect();
    Some(Pooled { tau2, mean, se: mean_variance.sqrt(), q, i2, units })
}

/// μ̂ and its variance 1/Σw at a given τ². Assumes usable numbers.
pub(super) fn weighted_mean(estimates: &[f64], variances: &[f64], tau2: f64) -> (f64, f64) {
    let (mut w, mut wy) = (0.0, 0.0);
    for (y, v) in estimates.iter().zip(variances) {
        let weight = 1.0 / (v + tau2);
        w += weight;
        wy += weight * y;
    }
    (wy / w, 1.0 / w)
}

fn shrink(y: f64, v: f64, tau2: f64, mean: f64, mean_variance: f64) -> Shrunken {
    let weight = tau2 / (tau2 + v);
    // Written so that B = 0 gives μ̂ itself and rounding cannot leave the interval between y and μ̂.
    let value = (mean + weight * (y - mean)).clamp(mean.min(y), mean.max(y));
    Shrunken { weight, value, variance: weight * v + (1.0 - weight) * (1.0 - weight) * mean_variance }
}
