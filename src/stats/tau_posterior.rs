//! The normal–normal model without taking τ as known: one-dimensional quadrature over τ, flat prior on μ and τ.
//!
//! An estimate of τ² is often exactly zero when there are few units; then every interval would be too narrow and every
//! rank a tie. Averaging over τ has neither fault.

use super::pooling::weighted_mean;
use super::tau::{TauMethod, is_usable, tau2};

/// Nodes of the midpoint rule; halving them moves the published eight-schools values by less than 1e-5.
const NODES: usize = 400;
/// A flat prior on τ has a proper posterior from three units on.
const LEAST_UNITS: usize = 3;

/// One value of τ with its posterior weight, and μ given it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TauNode {
    pub tau: f64,
    /// Weights of all nodes add up to 1.
    pub weight: f64,
    pub mean: f64,
    pub mean_variance: f64,
}

/// The posterior of τ as weighted nodes in ascending order.
///
/// Source: Gelman et al., *Bayesian Data Analysis*, chapter 5: p(τ|y) ∝ √V_μ Π (vᵢ + τ²)^−½ exp(−(yᵢ − μ̂)²/2(vᵢ + τ²)).
#[derive(Clone, Debug, PartialEq)]
pub struct TauPosterior {
    pub nodes: Vec<TauNode>,
}

impl TauPosterior {
    /// No result below three units or when [`tau2`] has none.
    pub fn flat(estimates: &[f64], variances: &[f64]) -> Option<TauPosterior> {
        if estimates.len() < LEAST_UNITS || !is_usable(estimates, variances) {
            return None;
        }
        let scale = scale(estimates, variances)?;
        // τ = s t/(1 − t) for t in 0..1: half of the nodes lie below the scale s, the rest reach far out.
        let mut logs = Vec::with_capacity(NODES);
        let mut nodes = Vec::with_capacity(NODES);
        for i in 0..NODES {
            let t = (i as f64 + 0.5) / NODES as f64;
            let tau = scale * t / (1.0 - t);
            let (mean, mean_variance) = weighted_mean(estimates, variances, tau * tau);
            let mut log_density = 0.5 * mean_variance.ln() - 2.0 * (1.0 - t).ln();
            for (y, v) in estimates.iter().zip(variances) {
                let total = v + tau * tau;
                log_density -= 0.5 * (total.ln() + (y - mean) * (y - mean) / total);
            }
            logs.push(log_density);
            nodes.push(TauNode { tau, weight: 0.0, mean, mean_variance });
        }
        let top = logs.iter().fold(f64::NEG_INFINITY, |a, b| a.max(*b));
        let total: f64 = logs.iter().map(|l| (l - top).exp()).sum();
        for (node, log_density) in nodes.iter_mut().zip(&logs) {
            node.weight = (log_density - top).exp() / total;
        }
        Some(TauPosterior { nodes })
    }

    pub fn tau_mean(&self) -> f64 {
        self.nodes.iter().map(|n| n.weight * n.tau).sum()
    }

    /// Quantile of τ, linear between the nodes' borders.
    pub fn tau_quantile(&self, share: f64) -> f64 {
        let (mut below, mut last) = (0.0, 0.0);
        for pair in self.nodes.windows(2) {
            let border = 0.5 * (pair[0].tau + pair[1].tau);
            let next = below + pair[0].weight;
            if next >= share && pair[0].weight > 0.0 {
                return last + (border - last) * (share - below) / pair[0].weight;
            }
            (below, last) = (next, border);
        }
        last
    }

    /// Posterior mean and standard deviation of μ.
    pub fn mean(&self) -> (f64, f64) {
        let mean: f64 = self.nodes.iter().map(|n| n.weight * n.mean).sum();
        let variance: f64 = self.nodes.iter().map(|n| n.weight * (n.mean_variance + (n.mean - mean) * (n.mean - mean))).sum();
        (mean, variance.sqrt())
    }

    /// Posterior mean and standard deviation of one unit's θ, from his own estimate and its variance.
    pub fn unit(&self, estimate: f64, variance: f64) -> (f64, f64) {
        let mean: f64 = self.nodes.iter().map(|n| n.weight * n.unit(estimate, variance).0).sum();
        (mean, self.mean_square_about(mean, estimate, variance).sqrt())
    }

    /// Posterior mean of (θ − `about`)²: the doubt about a value that was got in another way.
    pub fn mean_square_about(&self, about: f64, estimate: f64, variance: f64) -> f64 {
        self.nodes
            .iter()
            .map(|n| {
                let (mean, spread) = n.unit(estimate, variance);
                n.weight * (spread + (mean - about) * (mean - about))
            })
            .sum()
    }
}

impl TauNode {
    /// Mean and variance of a unit's θ given this τ.
    fn unit(&self, estimate: f64, variance: f64) -> (f64, f64) {
        let tau2 = self.tau * self.tau;
        let b = tau2 / (tau2 + variance);
        (b * estimate + (1.0 - b) * self.mean, b * variance + (1.0 - b) * (1.0 - b) * self.mean_variance)
    }
}

/// Where the posterior of τ has its bulk: the estimate and a typical error together.
fn scale(estimates: &[f64], variances: &[f64]) -> Option<f64> {
    let (mut w, mut w2) = (0.0, 0.0);
    for v in variances {
        w += 1.0 / v;
        w2 += 1.0 / (v * v);
    }
    let k = estimates.len() as f64;
    let typical = (k - 1.0) * w / (w * w - w2);
    // With k units a variance is known to about √(2/k) of itself; a scale of that order keeps the nodes where they count.
    let spread = tau2(estimates, variances, TauMethod::Reml)? + typical * (2.0 / k).sqrt();
    (spread.is_finite() && spread > 0.0).then(|| spread.sqrt())
}
