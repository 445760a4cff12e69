//! The standard normal distribution.

use std::f64::consts::{FRAC_1_SQRT_2, PI};

/// Φ(z), through the complementary error function of the C library (relative error near 1e-16).
///
/// ```
/// use tailchase::base::normal::cdf;
/// assert_eq!(cdf(0.0), 0.5);
/// assert!((cdf(1.959963984540054) - 0.975).abs() < 1e-15);
/// ```
#[inline]
pub fn cdf(z: f64) -> f64 {
    0.5 * libm::erfc(-z * FRAC_1_SQRT_2)
}

#[inline]
pub fn pdf(z: f64) -> f64 {
    (-0.5 * z * z).exp() / (2.0 * PI).sqrt()
}

/// The z with Φ(z) = p, for 0 < p < 1, by bisection refined with Newton steps; ±∞ at the ends.
///
/// ```
/// use tailchase::base::normal::quantile;
/// assert!((quantile(0.975) - 1.959963984540054).abs() < 1e-12);
/// ```
pub fn quantile(p: f64) -> f64 {
    if p <= 0.0 {
        return f64::NEG_INFINITY;
    }
    if p >= 1.0 {
        return f64::INFINITY;
    }
    let (mut low, mut high) = (-38.5, 38.5);
    for _ in 0..60 {
        let mid = 0.5 * (low + high);
        if cdf(mid) < p { low = mid } else { high = mid }
    }
    let mut z = 0.5 * (low + high);
    for _ in 0..2 {
        let slope = pdf(z);
        if slope > 1e-300 {
            z -= (cdf(z) - p) / slope;
        }
    }
    z
}
