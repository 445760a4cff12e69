//! Fixed-effects regression: slopes from differences within a unit only, so that what the units are like is not explained away.

use super::least_squares::{Fit, least_squares};

/// Slopes with the residual variance that belongs to them.
#[derive(Clone, Debug, PartialEq)]
pub struct WithinFit {
    pub fit: Fit,
    /// Residual sum of squares over rows − units − slopes.
    pub residual_variance: f64,
    pub df: usize,
}

/// Regresses y on the columns after taking each unit's own mean out of everything.
///
/// `unit[i]`: index of the unit of row i, counted from 0 without gaps. The slopes are those of least squares with one
/// intercept a unit. A column that never varies within a unit is left out (`fit.kept`).
/// No result when lengths differ, a number is not finite, or no degree of freedom is left.
/// Source: Mundlak, Econometrica 46 (1978), the within estimator.
///
/// ```
/// use tailchase::stats::within_fit;
/// // Two units, the second worse by 10 throughout; slope 2 in both.
/// let fit = within_fit(&[0, 0, 0, 1, 1, 1], &[vec![1.0, 2.0, 3.0, 4.0, 5.0, 6.0]], &[2.0, 4.0, 6.0, 18.0, 20.0, 22.0]).unwrap();
/// assert!((fit.fit.coefficients[0] - 2.0).abs() < 1e-12);
/// ```
pub fn within_fit(unit: &[usize], columns: &[Vec<f64>], y: &[f64]) -> Option<WithinFit> {
    if unit.len() != y.len() || columns.iter().any(|c| c.len() != y.len()) {
        return None;
    }
    let units = unit.iter().max().map_or(0, |m| m + 1);
    let mut count = vec![0_usize; units];
    unit.iter().for_each(|u| count[*u] += 1);
    let centred: Vec<Vec<f64>> = columns.iter().map(|c| centre(unit, &count, c)).collect();
    let fit = least_squares(&centred, &centre(unit, &count, y), None, 0.0)?;
    let used = count.iter().filter(|c| **c > 0).count() + fit.rank;
    let df = y.len().checked_sub(used).filter(|df| *df > 0)?;
    Some(WithinFit { residual_variance: fit.residual_ss / df as f64, df, fit })
}

fn centre(unit: &[usize], count: &[usize], values: &[f64]) -> Vec<f64> {
    let mut total = vec![0.0; count.len()];
    unit.iter().zip(values).for_each(|(u, v)| total[*u] += v);
    let size = values.iter().fold(0.0_f64, |a, v| a.max(v.abs()));
    unit.iter()
        .zip(values)
        .map(|(u, v)| {
            let difference = v - total[*u] / count[*u] as f64;
            // What rounding leaves of a constant is no variation.
            if difference.abs() <= 1e-12 * size { 0.0 } else { difference }
        })
        .collect()
}
