//! How much units truly differ: the between-unit variance τ² of the normal–normal model, by six published estimators.
//!
//! Model: yᵢ ~ N(θᵢ, vᵢ), θᵢ ~ N(μ, τ²), vᵢ known. Weights wᵢ = 1/(vᵢ + τ²), μ̂ = Σwᵢyᵢ/Σwᵢ.

use super::root::falling_root;

/// Steps of the coarse search over τ² before the score is bisected: a likelihood may have two humps.
const GRID: usize = 120;
/// Ratio of the largest to the smallest τ² of that search.
const GRID_SPAN: f64 = 1e9;

/// How τ² is estimated. All are cut off at zero.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum TauMethod {
    /// DerSimonian & Laird (1986): moments with fixed weights.
    DerSimonianLaird,
    /// Hedges (1983), also named Hedges & Olkin or variance components: plain moments.
    Hedges,
    /// Maximum likelihood.
    MaximumLikelihood,
    /// Restricted maximum likelihood (Patterson & Thompson 1971).
    Reml,
    /// Paule & Mandel (1982): the generalised Q equals its degrees of freedom.
    PauleMandel,
    /// Efron & Morris (1973): plain moments with k − 3 in place of k − 1, the shrinkage factor then being unbiased for
    /// equal variances; needs four units.
    EfronMorris,
}

/// τ² of units with `estimates` y and `variances` v, in the square of y's unit.
///
/// One unit alone says nothing about differences and gives 0. No result when there is no unit, the lengths differ,
/// a number is not finite or a variance is not positive; for Efron–Morris also below four units.
///
/// ```
/// use tailchase::stats::{TauMethod, tau2};
/// // Two units with equal variance 1, four apart: moments give ((2² + 2²)/1) − 1.
/// assert_eq!(tau2(&[0.0, 4.0], &[1.0, 1.0], TauMethod::Hedges), Some(7.0));
/// // Closer together than their errors: nothing between them.
/// assert_eq!(tau2(&[0.0, 0.1], &[1.0, 1.0], TauMethod::Reml), Some(0.0));
/// ```
pub fn tau2(estimates: &[f64], variances: &[f64], method: TauMethod) -> Option<f64> {
    if !is_usable(estimates, variances) || (method == TauMethod::EfronMorris && estimates.len() < 4) {
        return None;
    }
    if estimates.len() == 1 {
        return Some(0.0);
    }
    let data = Data { estimates, variances };
    Some(match method {
        TauMethod::DerSimonianLaird => data.dersimonian_laird(),
        TauMethod::Hedges => data.moments(1),
        TauMethod::EfronMorris => data.moments(3),
        TauMethod::PauleMandel => data.paule_mandel(),
        TauMethod::MaximumLikelihood => data.likelihood_peak(false),
        TauMethod::Reml => data.likelihood_peak(true),
    })
}

pub(super) fn is_usable(estimates: &[f64], variances: &[f64]) -> bool {
    !estimates.is_empty()
        && estimates.len() == variances.len()
        && estimates.iter().all(|y| y.is_finite())
        && variances.iter().all(|v| v.is_finite() && *v > 0.0)
}

#[derive(Clone, Copy)]
struct Data<'a> {
    estimates: &'a [f64],
    variances: &'a [f64],
}

/// Weighted sums at one τ².
struct Moments {
    w: f64,
    w2: f64,
    /// Σ w (y − μ̂)²
    wr2: f64,
    /// Σ w² (y − μ̂)²
    w2r2: f64,
    log_w: f64,
}

impl Data<'_> {
    fn k(&self) -> f64 {
        self.estimates.len() as f64
    }

    fn at(&self, tau2: f64) -> Moments {
        let (mut w, mut wy, mut log_w) = (0.0, 0.0, 0.0);
        for (y, v) in self.estimates.iter().zip(self.variances) {
            let weight = 1.0 / (v + tau2);
            w += weight;
            wy += weight * y;
            log_w += weight.ln();
        }
        let mean = wy / w;
        let mut m = Moments { w, w2: 0.0, wr2: 0.0, w2r2: 0.0, log_w };
        for (y, v) in self.estimates.iter().zip(self.variances) {
            let weight = 1.0 / (v + tau2);
            let r2 = (y - mean) * (y - mean);
            m.w2 += weight * weight;
            m.wr2 += weight * r2;
            m.w2r2 += weight * weight * r2;
        }
        m
    }

    /// Σ (y − ȳ)²
    fn scatter(&self) -> f64 {
        let mean = self.estimates.iter().sum::<f64>() / self.k();
        self.estimates.iter().map(|y| (y - mean) * (y - mean)).sum()
    }

    fn moments(&self, lost_df: usize) -> f64 {
        let mean_variance = self.variances.iter().sum::<f64>() / self.k();
        (self.scatter() / (self.k() - lost_df as f64) - mean_variance).max(0.0)
    }

    fn dersimonian_laird(&self) -> f64 {
        let m = self.at(0.0);
        ((m.wr2 - (self.k() - 1.0)) / (m.w - m.w2 / m.w)).max(0.0)
    }

    fn paule_mandel(&self) -> f64 {
        let excess = |tau2: f64| self.at(tau2).wr2 - (self.k() - 1.0);
        // At τ² = Σ(y − ȳ)² every wr² sum is below 1, so the excess is not positive there.
        if excess(0.0) > 0.0 { falling_root(0.0, self.scatter(), excess) } else { 0.0 }
    }

    fn log_likelihood(&self, tau2: f64, restricted: bool) -> f64 {
        let m = self.at(tau2);
        0.5 * (m.log_w - m.wr2 - if restricted { m.w.ln() } else { 0.0 })
    }

    /// Twice the slope of the log likelihood over τ².
    fn score(&self, tau2: f64, restricted: bool) -> f64 {
        let m = self.at(tau2);
        m.w2r2 - m.w + if restricted { m.w2 / m.w } else { 0.0 }
    }

    fn likelihood_peak(&self, restricted: bool) -> f64 {
        // Beyond twice the scatter the score is negative whatever the variances.
        let top = 2.0 * self.scatter();
        if top <= 0.0 {
            return 0.0;
        }
        let at = |step: usize| if step == 0 { 0.0 } else { top * GRID_SPAN.powf((step as f64 - GRID as f64) / GRID as f64) };
        let mut best = (0, self.log_likelihood(0.0, restricted));
        for step in 1..=GRID {
            let height = self.log_likelihood(at(step), restricted);
            if height > best.1 {
                best = (step, height);
            }
        }
        let (low, high) = (at(best.0.saturating_sub(1)), at((best.0 + 1).min(GRID)));
        if best.0 == 0 && self.score(0.0, restricted) <= 0.0 {
            return 0.0;
        }
        falling_root(low, high, |tau2| self.score(tau2, restricted))
    }
}
