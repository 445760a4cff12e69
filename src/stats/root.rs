//! Roots by bisection: slow, certain, and the same to the last bit every time.

/// Halves a bracket in which `f` falls from positive to not positive, until two neighbouring numbers are left.
///
/// Assumes `f(low) > 0 ≥ f(high)`; with several crossings one of them is found.
///
/// ```
/// let root = tailchase::stats::root::falling_root(0.0, 2.0, |x| 2.0 - x * x);
/// assert!((root - 2.0_f64.sqrt()).abs() < 1e-15);
/// ```
pub fn falling_root(mut low: f64, mut high: f64, f: impl Fn(f64) -> f64) -> f64 {
    // A bracket of doubles cannot be halved more often than this.
    for _ in 0..2200 {
        let mid = low + 0.5 * (high - low);
        if mid <= low || mid >= high {
            break;
        }
        if f(mid) > 0.0 { low = mid } else { high = mid }
    }
    low + 0.5 * (high - low)
}
