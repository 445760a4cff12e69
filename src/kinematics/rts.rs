//! The general Kalman filter and Rauch–Tung–Striebel smoother for one measured series: any small state, any steps, any holes.

use super::plan::Plan;
use super::state::{Matrix, Step, Vector, apply};

/// What is known of the state at the first frame before its measurement.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Prior<const N: usize> {
    pub mean: Vector<N>,
    pub cov: Matrix<N>,
}

/// States and covariances, one for each frame.
#[derive(Clone, Debug)]
pub struct Smoothed<const N: usize> {
    pub filtered: Vec<Vector<N>>,
    pub smoothed: Vec<Vector<N>>,
    /// Gains and all covariances.
    pub plan: Plan<N>,
    /// Log-likelihood of each innovation; zero where nothing was measured. Their sum is the log-likelihood of the series.
    pub loglik: Vec<f64>,
}

/// Filters and smooths `z` (none where a frame was not measured).
///
/// `steps[k]` leads from frame k to frame k + 1, so there is one less than values; frames beyond the steps are not used.
/// `noise_var` is the variance of a measurement, in the square of its unit.
///
/// Source: Kalman 1960; Rauch, Tung & Striebel 1965.
///
/// ```
/// use tailchase::kinematics::rts::{Prior, rts};
/// // two looks at one number that does not move: the mean, with half the variance
/// let stay = tailchase::kinematics::state::Step { f: [[1.0]], q: [[0.0]] };
/// let s = rts(&[Some(1.0), Some(3.0)], &[stay], 1.0, &Prior { mean: [0.0], cov: [[1e12]] });
/// assert!((s.smoothed[0][0] - 2.0).abs() < 1e-9);
/// assert!((s.plan.smoothed[0][0][0] - 0.5).abs() < 1e-9);
/// ```
pub fn rts<const N: usize>(z: &[Option<f64>], steps: &[Step<N>], noise_var: f64, prior: &Prior<N>) -> Smoothed<N> {
    let n = z.len().min(steps.len() + 1);
    let mut plan = Plan::default();
    let mut predicted: Vec<Vector<N>> = Vec::with_capacity(n);
    let mut filtered: Vec<Vector<N>> = Vec::with_capacity(n);
    let mut loglik = vec![0.0; n];
    for k in 0..n {
        let x = match filtered.last() {
            None => {
                plan.start(prior.cov, z[k].is_some(), noise_var);
                prior.mean
            }
            Some(last) => {
                plan.push(&steps[k - 1], z[k].is_some(), noise_var);
                apply(&steps[k - 1].f, last)
            }
        };
        predicted.push(x);
        filtered.push(match (z[k], plan.spread[k]) {
            (Some(value), Some(s)) => {
                let e = value - x[0];
                loglik[k] = -0.5 * ((std::f64::consts::TAU * s).ln() + e * e / s);
                std::array::from_fn(|i| x[i] + plan.gain[k][i] * e)
            }
            _ => x,
        });
    }
    plan.backward();
    let mut smoothed = filtered.clone();
    for k in (0..n.saturating_sub(1)).rev() {
        let ahead: Vector<N> = std::array::from_fn(|i| smoothed[k + 1][i] - predicted[k + 1][i]);
        let add = apply(&plan.back[k], &ahead);
        smoothed[k] = std::array::from_fn(|i| filtered[k][i] + add[i]);
    }
    Smoothed { filtered, smoothed, plan, loglik }
}
