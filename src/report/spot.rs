//! Spots on the field in words that a coach uses: the number of the yard line and whose half it is.

use super::text::{MISSING, fixed};
use crate::model::Field;

/// A spot along the field in words. The carrier attacks +x, so his own goal line is the low one.
///
/// On a field without goal lines the distance from the back line behind the carrier is given.
///
/// ```
/// use tailchase::{model::Field, report::spot::spot_words};
/// assert_eq!(spot_words(Some(69.0), &Field::AMERICAN), "the defence's 41"); // 41 yards to the line attacked
/// assert_eq!(spot_words(Some(42.0), &Field::AMERICAN), "the carrier's own 32");
/// assert_eq!(spot_words(Some(60.2), &Field::AMERICAN), "midfield");
/// assert_eq!(spot_words(Some(110.0), &Field::AMERICAN), "the goal line");
/// ```
pub fn spot_words(x_yd: Option<f64>, field: &Field) -> String {
    let Some(x) = x_yd.filter(|x| x.is_finite()) else { return MISSING.to_string() };
    if field.end_zone_yd <= 0.0 {
        return format!("{} yd along the field", fixed(x, 0));
    }
    let to_goal = field.goal_x_yd() - x;
    let half = field.length_yd / 2.0 - field.end_zone_yd;
    let from_own = 2.0 * half - to_goal;
    if to_goal.round() < 0.0 {
        "the end zone attacked".into()
    } else if to_goal.round() == 0.0 {
        "the goal line".into()
    } else if from_own.round() < 0.0 {
        "the carrier's own end zone".into()
    } else if from_own.round() == 0.0 {
        "the carrier's own goal line".into()
    } else if (to_goal - half).round() == 0.0 {
        "midfield".into()
    } else if to_goal < half {
        format!("the defence's {}", fixed(to_goal, 0))
    } else {
        format!("the carrier's own {}", fixed(from_own, 0))
    }
}

/// The number painted at a yard line: yards to the nearer goal line, or along the field where there are none.
pub fn line_number(x_yd: f64, field: &Field) -> String {
    if field.end_zone_yd <= 0.0 {
        return fixed(x_yd, 0);
    }
    let to_goal = field.goal_x_yd() - x_yd;
    let from_own = x_yd - field.end_zone_yd;
    let nearer = to_goal.min(from_own);
    if nearer < -0.5 {
        String::new()
    } else if nearer < 0.5 {
        "G".into()
    } else {
        fixed(nearer, 0)
    }
}
