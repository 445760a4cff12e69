//! The field and its axes: x along, 0 at one back line; y across, 0 at one sideline.

use crate::base::V2;
use serde::{Deserialize, Serialize};

/// A field, yards. `end_zone_yd` 0 stands for a field without goal-line logic.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Field {
    pub length_yd: f64,
    pub width_yd: f64,
    pub end_zone_yd: f64,
}

impl Field {
    /// 120 × 53⅓ yd, goal lines at x = 10 and 110.
    pub const AMERICAN: Field = Field { length_yd: 120.0, width_yd: 160.0 / 3.0, end_zone_yd: 10.0 };
    /// 150 × 65 yd with 20-yd end zones; the sizes change by season, so they are data.
    pub const CANADIAN: Field = Field { length_yd: 150.0, width_yd: 65.0, end_zone_yd: 20.0 };

    /// A rectangle of any size, for sports without this goal-line logic.
    pub const fn rectangle(length_yd: f64, width_yd: f64) -> Field {
        Field { length_yd, width_yd, end_zone_yd: 0.0 }
    }

    /// The goal line that is attacked, x in yards, when the carrier attacks towards +x.
    pub fn goal_x_yd(&self) -> f64 {
        self.length_yd - self.end_zone_yd
    }

    /// Whether a spot lies on the field, `margin_yd` beyond the lines allowed.
    pub fn contains(&self, spot_yd: V2, margin_yd: f64) -> bool {
        spot_yd.x >= -margin_yd
            && spot_yd.x <= self.length_yd + margin_yd
            && spot_yd.y >= -margin_yd
            && spot_yd.y <= self.width_yd + margin_yd
    }

    /// A spot after the half turn that makes a carrier who attacks −x attack +x. Its own inverse.
    ///
    /// ```
    /// use tailchase::{base::V2, model::Field};
    /// let f = Field::AMERICAN;
    /// let spot = V2::new(30.0, 10.0);
    /// assert_eq!(f.turned(spot).x, 90.0);
    /// assert_eq!(f.turned(f.turned(spot)).x, spot.x); // a rotation, never a mirror image
    /// ```
    pub fn turned(&self, spot_yd: V2) -> V2 {
        V2::new(self.length_yd - spot_yd.x, self.width_yd - spot_yd.y)
    }
}
