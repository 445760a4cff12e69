//! Rounding the entries of a sum together, so that the printed entries add up to the printed total.

/// Entries and total in whole units of the last printed decimal.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Rounded {
    pub parts: Vec<Option<i64>>,
    pub total: i64,
    /// False when the exact entries do not add up to the exact total: then each is rounded by itself and the
    /// reader is told.
    pub balanced: bool,
}

/// Largest-remainder rounding (Hamilton's method, known from apportioning seats): every entry is cut down to
/// the unit below, and the units still missing go to the entries that lost most, the earlier one at a tie. No
/// entry moves by a whole unit, and a zero stays a zero.
///
/// `None` where the total or an entry is not finite or too large to count in units.
///
/// ```
/// use tailchase::report::rounding::round_together;
/// // each would print as 0.3, the total as 1.0
/// let r = round_together(&[Some(1.0 / 3.0); 3], 1.0, 1).unwrap();
/// assert_eq!(r.parts, [Some(4), Some(3), Some(3)]);
/// assert_eq!(r.total, 10);
/// ```
pub fn round_together(parts: &[Option<f64>], total: f64, decimals: i32) -> Option<Rounded> {
    let unit = 10f64.powi(decimals);
    let fits = |v: f64| v.is_finite() && (v * unit).abs() < 1e12;
    if !fits(total) || parts.iter().flatten().any(|v| !fits(*v)) {
        return None;
    }
    let sum: f64 = parts.iter().flatten().sum();
    // Half a printed unit: anything smaller cannot be seen, anything larger is an account that does not balance.
    let balanced = (sum - total).abs() * unit <= 0.5;
    let target = (total * unit).round() as i64;
    if !balanced {
        let parts = parts.iter().map(|v| v.map(|v| (v * unit).round() as i64)).collect();
        return Some(Rounded { parts, total: target, balanced });
    }
    let mut units: Vec<Option<i64>> = parts.iter().map(|v| v.map(|v| (v * unit).floor() as i64)).collect();
    let lost = |i: usize| parts[i].map_or(0.0, |v| v * unit - (v * unit).floor());
    let mut order: Vec<usize> = (0..parts.len()).filter(|&i| parts[i].is_some()).collect();
    order.sort_by(|&a, &b| lost(b).total_cmp(&lost(a)).then(a.cmp(&b)));
    let mut missing = target - units.iter().flatten().sum::<i64>();
    for &i in &order {
        if let Some(u) = units[i].as_mut().filter(|_| missing > 0) {
            *u += 1;
            missing -= 1;
        }
    }
    // The total may round down by half a unit below the sum of the cut entries.
    for &i in order.iter().rev() {
        if let Some(u) = units[i].as_mut().filter(|_| missing < 0) {
            *u -= 1;
            missing += 1;
        }
    }
    Some(Rounded { parts: units, total: target, balanced: missing == 0 })
}
