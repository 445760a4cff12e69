//! Gains for constant steps without holes: the start transient, then the steady state over and over.

use super::cuts::Watch;
use super::plan::Plan;
use super::state::Matrix;
use crate::model::{Cov, Noise};

/// Relative change below which a covariance counts as settled; a hundred units in the last place.
const SETTLED: f64 = 2e-14;

/// Weak prior of a segment's first frame: what a runner may do, so wide that three frames outweigh it. The position's prior is flat.
/// Standard deviations 10 yd/s and 10 yd/s²; own choice.
const PRIOR_VELOCITY_VAR: f64 = 100.0;
const PRIOR_ACCELERATION_VAR: f64 = 100.0;

/// Covariance of a segment's first frame after its measurement.
pub(super) fn first_covariance(noise_var: f64) -> Matrix<3> {
    [[noise_var, 0.0, 0.0], [0.0, PRIOR_VELOCITY_VAR, 0.0], [0.0, 0.0, PRIOR_ACCELERATION_VAR]]
}

/// One (step, noise) pair's gains, grown to as many frames as were needed so far, at most until they settle.
#[derive(Debug)]
pub(super) struct Table {
    pub step_s: f64,
    pub noise: Noise,
    plan: Plan<3>,
    is_settled: bool,
    /// Smoothed covariance of a run of `cov.len()` frames: the length asked for last.
    cov: Vec<Cov>,
    watch: Watch,
}

impl Table {
    pub fn new(step_s: f64, noise: Noise) -> Table {
        let mut plan = Plan::default();
        plan.start_filtered(first_covariance(noise.sigma_yd * noise.sigma_yd));
        Table { step_s, noise, plan, is_settled: false, cov: Vec::new(), watch: Watch::default() }
    }

    /// Grows the gains to `frames` frames unless they have settled before.
    fn grow(&mut self, frames: usize) {
        let r = self.noise.sigma_yd * self.noise.sigma_yd;
        while !self.is_settled && self.plan.len() < frames {
            self.plan.push_white_jerk(self.step_s, self.noise.jerk_density, true, r);
            if let [.., a, b] = self.plan.filtered.as_slice() {
                self.is_settled = is_same(a, b);
            }
        }
    }

    /// Smoothed covariances of a run of `frames` frames, what to look out for in it, and the gains.
    pub fn of(&mut self, frames: usize) -> (&[Cov], &Watch, &Plan<3>) {
        self.grow(frames);
        if self.cov.len() != frames && frames > 0 {
            let last = self.plan.len() - 1;
            self.cov.clear();
            self.cov.resize(frames, Cov::default());
            let mut after = self.plan.filtered[last.min(frames - 1)];
            self.cov[frames - 1] = packed(&after);
            let mut k = frames - 1;
            while k > 0 {
                k -= 1;
                // Past the table's end every frame is like its last step.
                let at = k.min(last.saturating_sub(1));
                let now = self.plan.smoothed_before(at, &after);
                self.cov[k] = packed(&now);
                if k > at && is_same(&now, &after) {
                    self.cov[at..k].fill(packed(&now));
                    k = at;
                }
                after = now;
            }
            self.watch.prepare(&self.plan, self.cov.iter().map(unpacked));
        }
        (&self.cov, &self.watch, &self.plan)
    }
}

/// Whether two covariances are the same but for rounding; an entry is weighed against its variances.
fn is_same(a: &Matrix<3>, b: &Matrix<3>) -> bool {
    (0..3).all(|i| (0..=i).all(|j| (a[i][j] - b[i][j]).abs() <= SETTLED * (b[i][i] * b[j][j]).sqrt()))
}

pub(super) fn packed(m: &Matrix<3>) -> Cov {
    Cov { pp: m[0][0], pv: m[0][1], pa: m[0][2], vv: m[1][1], va: m[1][2], aa: m[2][2] }
}

fn unpacked(c: &Cov) -> Matrix<3> {
    [[c.pp, c.pv, c.pa], [c.pv, c.vv, c.va], [c.pa, c.va, c.aa]]
}
