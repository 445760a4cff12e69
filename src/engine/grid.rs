//! The times of a path's points, and what the drag model makes of them.

use super::reach::Drag;

/// Times of a path's points with e^{−αt} beside each, so that no exponential stands in an inner loop.
#[derive(Clone, Debug)]
pub struct Grid {
    pub t_s: Vec<f64>,
    pub(super) decay: Vec<f64>,
    pub(super) inverse: Vec<f64>,
    /// For a drag too strong for tables (the limit of constant speed): exponentials are taken one by one.
    pub(super) direct: bool,
    pub drag: Drag,
}

impl Grid {
    pub fn new(t_s: Vec<f64>, drag: Drag) -> Grid {
        let t0_s = t_s.first().copied().unwrap_or(0.0);
        let span_s = t_s.last().map_or(0.0, |last| last - t0_s);
        // Beyond this product e^{αT} leaves the range in which the tables' quotients keep their digits.
        let direct = drag.alpha_per_s * span_s > 600.0;
        let tables = if direct { &[][..] } else { &t_s[..] };
        let decay: Vec<f64> = tables.iter().map(|t| drag.decay(t - t0_s)).collect();
        let inverse = decay.iter().map(|d| 1.0 / d).collect();
        Grid { t_s, decay, inverse, direct, drag }
    }

    /// (a, b) from point `from` to point `to`: seconds of coasting and of driving.
    #[inline(always)]
    pub fn coast_drive_s(&self, from: usize, to: usize) -> (f64, f64) {
        let dt_s = self.t_s[to] - self.t_s[from];
        let coast_s =
            if self.direct { self.drag.coast_s(dt_s) } else { (1.0 - self.decay[to] * self.inverse[from]) / self.drag.alpha_per_s };
        (coast_s, dt_s - coast_s)
    }
}

impl Grid {
    /// As [`Grid::coast_drive_s`], to a share of the way from point `before` to the next.
    #[inline]
    pub fn coast_drive_between_s(&self, from: usize, before: usize, share: f64) -> (f64, f64) {
        let step_s = share * (self.t_s[before + 1] - self.t_s[before]);
        let dt_s = self.t_s[before] - self.t_s[from] + step_s;
        let coast_s = if self.direct {
            self.drag.coast_s(dt_s)
        } else {
            (1.0 - self.decay[before] * self.inverse[from] * self.drag.decay(step_s)) / self.drag.alpha_per_s
        };
        (coast_s, dt_s - coast_s)
    }
}
