//! What of the smoother does not depend on the measured values: gains and covariances, from steps and noise alone.
//!
//! Symbols: P⁻ predicted, P filtered, Pˢ smoothed covariance; K filter gain; G smoother gain; s innovation variance; r noise variance.

use super::state::{Matrix, Step, Vector, congruence, product_transposed, through_white_jerk, times_inverse};

/// Gains and covariances of a run of frames, filled forward frame by frame, then backward at once.
///
/// Source: Kalman 1960; Rauch, Tung & Striebel 1965.
#[derive(Clone, Debug, Default)]
pub struct Plan<const N: usize> {
    pub predicted: Vec<Matrix<N>>,
    pub filtered: Vec<Matrix<N>>,
    /// Zero where nothing was measured.
    pub gain: Vec<Vector<N>>,
    /// Innovation variance; none where nothing was measured.
    pub spread: Vec<Option<f64>>,
    /// G of frame k, known once frame k + 1 is there: one entry less than frames.
    pub back: Vec<Matrix<N>>,
    /// Filled by [`Plan::backward`].
    pub smoothed: Vec<Matrix<N>>,
}

impl<const N: usize> Plan<N> {
    pub fn clear(&mut self) {
        self.predicted.clear();
        self.filtered.clear();
        self.gain.clear();
        self.spread.clear();
        self.back.clear();
        self.smoothed.clear();
    }

    pub fn len(&self) -> usize {
        self.filtered.len()
    }

    pub fn is_empty(&self) -> bool {
        self.filtered.is_empty()
    }

    /// The first frame, when its state is known only by a prior with this covariance.
    pub fn start(&mut self, prior: Matrix<N>, seen: bool, noise_var: f64) {
        self.clear();
        self.measure(prior, seen, noise_var);
    }

    /// The first frame, when its measurement is already part of the covariance (flat prior on the position).
    pub fn start_filtered(&mut self, filtered: Matrix<N>) {
        self.clear();
        self.measure(filtered, false, 1.0);
    }

    /// The next frame, one `step` later.
    #[inline]
    pub fn push(&mut self, step: &Step<N>, seen: bool, noise_var: f64) {
        let Some(last) = self.filtered.last() else { return };
        let predicted = congruence(&step.f, last, &step.q);
        let across = product_transposed(last, &step.f);
        self.go_on(&across, predicted, seen, noise_var);
    }

    /// The next frame: its predicted covariance, and the last filtered one times the step's fᵀ.
    #[inline]
    fn go_on(&mut self, across: &Matrix<N>, predicted: Matrix<N>, seen: bool, noise_var: f64) {
        // A predicted covariance that rounding has made indefinite carries nothing back: gain zero, the filtered state stands.
        self.back.push(times_inverse(across, &predicted).unwrap_or([[0.0; N]; N]));
        self.measure(predicted, seen, noise_var);
    }

    #[inline]
    fn measure(&mut self, p: Matrix<N>, seen: bool, r: f64) {
        let mut filtered = p;
        let mut gain = [0.0; N];
        if seen {
            let s = p[0][0] + r;
            for i in 0..N {
                gain[i] = p[i][0] / s;
            }
            for i in 0..N {
                for j in 0..=i {
                    // Row 0 as a product, not a difference: it stays accurate when r is small against P⁻.
                    let v = if j == 0 { p[i][0] * (r / s) } else { p[i][j] - gain[i] * p[j][0] };
                    filtered[i][j] = v;
                    filtered[j][i] = v;
                }
            }
        }
        self.spread.push(seen.then(|| p[0][0] + r));
        self.predicted.push(p);
        self.filtered.push(filtered);
        self.gain.push(gain);
    }

    /// Smoothed covariances: Pˢₖ = Pₖ + Gₖ (Pˢₖ₊₁ − P⁻ₖ₊₁) Gₖᵀ, from the last frame back.
    pub fn backward(&mut self) {
        self.smoothed.clear();
        self.smoothed.extend_from_slice(&self.filtered);
        for k in (0..self.len().saturating_sub(1)).rev() {
            self.smoothed[k] = self.smoothed_before(k, &self.smoothed[k + 1]);
        }
    }

    /// Smoothed covariance of frame `k` from that of the frame after it.
    #[inline]
    pub fn smoothed_before(&self, k: usize, after: &Matrix<N>) -> Matrix<N> {
        let next = &self.predicted[k + 1];
        let gained: Matrix<N> = std::array::from_fn(|i| std::array::from_fn(|j| after[i][j] - next[i][j]));
        congruence(&self.back[k], &gained, &self.filtered[k])
    }
}

impl Plan<3> {
    /// The next frame, `step_s` later under white-noise jerk of this density; the same as [`Plan::push`] with that step, only quicker.
    #[inline]
    pub fn push_white_jerk(&mut self, step_s: f64, jerk_density: f64, seen: bool, noise_var: f64) {
        let Some(last) = self.filtered.last() else { return };
        let (m, predicted) = through_white_jerk(last, step_s, jerk_density);
        let across = std::array::from_fn(|i| std::array::from_fn(|j| m[j][i]));
        self.go_on(&across, predicted, seen, noise_var);
    }
}
