//! Units, converted once on the way in and once on the way out.
//!
//! Exact by definition since 1959: 1 yd = 0.9144 m, 1 ft = 0.3048 m, 1 mi = 1760 yd
//! (NIST Special Publication 811, section B.6).

pub const M_PER_YD: f64 = 0.9144;
pub const FT_PER_YD: f64 = 3.0;
pub const YD_PER_MI: f64 = 1760.0;
pub const YD_PER_M: f64 = 1.0 / M_PER_YD;
/// 1 yd/s in miles an hour: 45/22.
pub const MPH_PER_YPS: f64 = 3600.0 / YD_PER_MI;
/// 1 knot (1852 m an hour) in yd/s.
pub const YPS_PER_KN: f64 = 1852.0 / M_PER_YD / 3600.0;

/// ```
/// assert_eq!(tailchase::base::units::mph(22.0), 45.0);
/// ```
#[inline]
pub fn mph(speed_yps: f64) -> f64 {
    speed_yps * MPH_PER_YPS
}
