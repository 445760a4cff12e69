//! Sample quantiles, definition 7 of Hyndman & Fan (1996): linear between order statistics, position 1 + (n − 1) p.

/// The `share` quantile of a sample, in the sample's own unit.
///
/// Formula: h = (n − 1) p; x₍⌊h⌋₎ + (h − ⌊h⌋) (x₍⌊h⌋₊₁₎ − x₍⌊h⌋₎), counting order statistics from 0.
/// No result for an empty sample, a value that is not finite, or a share outside 0..1.
/// Source: Hyndman & Fan, *Sample Quantiles in Statistical Packages*, The American Statistician 50 (1996), definition 7.
///
/// ```
/// use tailchase::stats::quantile;
/// assert_eq!(quantile(&[4.0, 1.0, 3.0, 2.0], 0.5), Some(2.5));
/// assert_eq!(quantile(&[10.0, 20.0], 0.25), Some(12.5));
/// assert_eq!(quantile(&[], 0.5), None);
/// ```
pub fn quantile(sample: &[f64], share: f64) -> Option<f64> {
    if !sample.iter().all(|v| v.is_finite()) {
        return None;
    }
    let mut sorted = sample.to_vec();
    sorted.sort_by(f64::total_cmp);
    quantile_sorted(&sorted, share)
}

/// The same for a sample that is already in ascending order and finite; saves the sort when several shares are asked for.
pub fn quantile_sorted(sorted: &[f64], share: f64) -> Option<f64> {
    if sorted.is_empty() || !(0.0..=1.0).contains(&share) {
        return None;
    }
    let position = (sorted.len() - 1) as f64 * share;
    let below = position.floor() as usize;
    let above = (below + 1).min(sorted.len() - 1);
    let part = position - below as f64;
    let (low, high) = (sorted[below], sorted[above]);
    // Taken from the nearer end, so that part 0 and part 1 give the order statistics exactly.
    Some(if part < 0.5 { low + part * (high - low) } else { high - (1.0 - part) * (high - low) })
}

/// The middle of a sample, or the mean of the middle two.
///
/// ```
/// assert_eq!(tailchase::stats::median(&[3.0, 1.0, 2.0]), Some(2.0));
/// ```
pub fn median(sample: &[f64]) -> Option<f64> {
    quantile(sample, 0.5)
}

/// The same, by selection instead of sorting: for short samples in inner loops, which it leaves in another order. Values
/// that are not finite take part in `total_cmp`'s order.
///
/// ```
/// use tailchase::stats::median_in_place;
/// assert_eq!(median_in_place(&mut [4.0, 1.0, 3.0, 2.0]), Some(2.5));
/// assert_eq!(median_in_place(&mut []), None);
/// ```
pub fn median_in_place(sample: &mut [f64]) -> Option<f64> {
    let n = sample.len();
    if n == 0 {
        return None;
    }
    let (below, middle, _) = sample.select_nth_unstable_by(n / 2, f64::total_cmp);
    let middle = *middle;
    if n % 2 == 1 {
        return Some(middle);
    }
    below.iter().copied().max_by(f64::total_cmp).map(|lower| 0.5 * (lower + middle))
}
