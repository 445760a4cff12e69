//! Angles: radians, counter-clockwise from +x, wrapped into (−π, π].

use std::f64::consts::{PI, TAU};

/// Wraps an angle into (−π, π].
///
/// ```
/// use std::f64::consts::PI;
/// use tailchase::base::wrap_rad;
/// assert!((wrap_rad(3.0 * PI) - PI).abs() < 1e-12);
/// assert_eq!(wrap_rad(-PI), PI); // the edge belongs to +π
/// ```
#[inline]
pub fn wrap_rad(angle_rad: f64) -> f64 {
    if angle_rad > -PI && angle_rad <= PI {
        return angle_rad;
    }
    let wrapped = angle_rad - TAU * (angle_rad / TAU).round();
    if wrapped <= -PI { wrapped + TAU } else { wrapped }
}

/// Nautical bearing (degrees clockwise from +y) of a mathematical angle.
///
/// ```
/// use tailchase::base::angle::nautical_deg;
/// assert_eq!(nautical_deg(0.0), 90.0); // +x is east
/// ```
pub fn nautical_deg(angle_rad: f64) -> f64 {
    (90.0 - angle_rad.to_degrees()).rem_euclid(360.0)
}

/// Mathematical angle of a nautical bearing, wrapped into (−π, π].
///
/// ```
/// use tailchase::base::angle::from_nautical_rad;
/// assert!((from_nautical_rad(0.0) - std::f64::consts::FRAC_PI_2).abs() < 1e-15);
/// ```
pub fn from_nautical_rad(bearing_deg: f64) -> f64 {
    wrap_rad((90.0 - bearing_deg).to_radians())
}
