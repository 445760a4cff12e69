//! Units of a file's columns, and their conversion to yards, yards a second and radians: once, as rows are read.

use super::mapping::{DistanceUnit, HeadingForm, Origin, SpeedUnit, TimeForm};
use super::{Logical, Mapping, Matching};
use crate::base::angle::{from_nautical_rad, wrap_rad};
use crate::base::units::{FT_PER_YD, M_PER_YD, MPH_PER_YPS, YPS_PER_KN};
use crate::model::Field;

/// How one file's numbers become the program's. A coordinate is divided and shifted: dividing by an exact
/// constant rounds once, so that metres and yards of one place agree to the last printed digit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Conversion {
    x_per_yd: f64,
    y_per_yd: f64,
    shift_x_yd: f64,
    shift_y_yd: f64,
    speed_per_yps: f64,
    heading: HeadingForm,
    pub(crate) time: Option<TimeForm>,
}

impl Conversion {
    pub(crate) fn new(mapping: &Mapping, matching: &Matching, field: &Field) -> Conversion {
        let unit_of = |logical| matching.get(logical).and_then(|m| m.unit);
        let distance = |logical| match (mapping.units, unit_of(logical)) {
            (Some(unit), _) => unit,
            (None, Some("m")) => DistanceUnit::Metres,
            (None, Some("ft")) => DistanceUnit::Feet,
            _ => DistanceUnit::Yards,
        };
        let (x_unit, y_unit) = (distance(Logical::X), distance(Logical::Y));
        let speed = mapping.speed.unwrap_or(match (unit_of(Logical::Speed), x_unit) {
            (Some("mps"), _) => SpeedUnit::Mps,
            (Some("yps"), _) => SpeedUnit::Yps,
            (Some("fps"), _) => SpeedUnit::Fps,
            (Some("mph"), _) => SpeedUnit::Mph,
            (Some("kmh"), _) => SpeedUnit::Kmh,
            (Some("kn"), _) => SpeedUnit::Kn,
            (_, DistanceUnit::Yards) => SpeedUnit::Yps,
            (_, DistanceUnit::Metres) => SpeedUnit::Mps,
            (_, DistanceUnit::Feet) => SpeedUnit::Fps,
        });
        let centre = mapping.origin == Some(Origin::Centre);
        let heading = mapping.heading.unwrap_or(match unit_of(Logical::Heading) {
            Some("rad") => HeadingForm::RadCcwFromX,
            _ => HeadingForm::DegCwFromY,
        });
        let time = mapping.time.or(match unit_of(Logical::Time) {
            Some("ms") => Some(TimeForm::Milliseconds),
            _ => None,
        });
        Conversion {
            x_per_yd: per_yd(x_unit),
            y_per_yd: per_yd(y_unit),
            shift_x_yd: if centre { field.length_yd / 2.0 } else { 0.0 },
            shift_y_yd: if centre { field.width_yd / 2.0 } else { 0.0 },
            speed_per_yps: per_yps(speed),
            heading,
            time,
        }
    }

    #[inline]
    pub fn x_yd(&self, x: f64) -> f64 {
        x / self.x_per_yd + self.shift_x_yd
    }
    #[inline]
    pub fn y_yd(&self, y: f64) -> f64 {
        y / self.y_per_yd + self.shift_y_yd
    }
    #[inline]
    pub fn speed_yps(&self, speed: f64) -> f64 {
        speed / self.speed_per_yps
    }
    #[inline]
    pub fn heading_rad(&self, heading: f64) -> f64 {
        match self.heading {
            HeadingForm::DegCwFromY => from_nautical_rad(heading),
            HeadingForm::DegCcwFromX => wrap_rad(heading.to_radians()),
            HeadingForm::RadCcwFromX => wrap_rad(heading),
        }
    }
}

fn per_yd(unit: DistanceUnit) -> f64 {
    match unit {
        DistanceUnit::Yards => 1.0,
        DistanceUnit::Metres => M_PER_YD,
        DistanceUnit::Feet => FT_PER_YD,
    }
}

fn per_yps(unit: SpeedUnit) -> f64 {
    match unit {
        SpeedUnit::Yps => 1.0,
        SpeedUnit::Mps => M_PER_YD,
        SpeedUnit::Fps => FT_PER_YD,
        SpeedUnit::Mph => MPH_PER_YPS,
        SpeedUnit::Kmh => 3.6 * M_PER_YD,
        SpeedUnit::Kn => 1.0 / YPS_PER_KN,
    }
}
