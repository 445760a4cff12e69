//! The mapping file: what a file's columns, units and event texts mean where names alone do not tell.

use super::{IngestError, Logical};
use crate::model::{EventMark, Field};
use serde::{Deserialize, Serialize};
use std::collections::BTreeMap;
use std::path::Path;

/// Unit of the coordinates.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub enum DistanceUnit {
    #[serde(rename = "yd")]
    Yards,
    #[serde(rename = "m")]
    Metres,
    #[serde(rename = "ft")]
    Feet,
}

/// Where x = y = 0 lies.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Origin {
    Corner,
    #[serde(alias = "center")]
    Centre,
}

/// How the file counts directions.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum HeadingForm {
    /// Degrees clockwise from +y.
    DegCwFromY,
    /// Degrees counter-clockwise from +x.
    DegCcwFromX,
    /// Radians counter-clockwise from +x.
    RadCcwFromX,
}

/// Unit of the file's own speed.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum SpeedUnit {
    Yps,
    Mps,
    Fps,
    Mph,
    Kmh,
    Kn,
}

/// How the time column is to be read.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum TimeForm {
    /// Seconds as a number.
    Seconds,
    /// Milliseconds as a number.
    Milliseconds,
    /// A clock text: `19:03:05.1`, `2026-09-13T19:03:05.100Z`. Recognised without being told.
    Clock,
}

/// Sizes of the field where they differ from the settings'.
#[derive(Clone, Copy, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct FieldOverride {
    pub length_yd: Option<f64>,
    pub width_yd: Option<f64>,
    pub end_zone_yd: Option<f64>,
}

/// What the file does not say by itself; everything optional. Read from TOML.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default, deny_unknown_fields)]
pub struct Mapping {
    pub units: Option<DistanceUnit>,
    pub origin: Option<Origin>,
    pub heading: Option<HeadingForm>,
    pub speed: Option<SpeedUnit>,
    pub time: Option<TimeForm>,
    /// Frames a second, where no time column tells.
    pub frame_rate_hz: Option<f64>,
    /// Ids, names, sides or positions that mean the ball, beside "ball" and "football".
    pub ball: Vec<String>,
    /// Logical column to the file's column; an empty text says that the file has none.
    pub columns: BTreeMap<Logical, String>,
    /// Event text to what it means.
    pub events: BTreeMap<String, String>,
    pub field: FieldOverride,
}

impl Mapping {
    /// Reads a mapping file.
    pub fn read(path: &Path) -> Result<Mapping, IngestError> {
        let text = std::fs::read_to_string(path).map_err(|e| IngestError::unreadable(path, &e))?;
        Mapping::parse(&text, path)
    }

    /// Reads a mapping from TOML text; `path` is named in an error.
    pub fn parse(text: &str, path: &Path) -> Result<Mapping, IngestError> {
        let mapping: Mapping = toml::from_str(text).map_err(|e| {
            let found = e.message().split_whitespace().collect::<Vec<_>>().join(" ");
            let line = e.span().map_or(1, |s| text.bytes().take(s.start).filter(|b| *b == b'\n').count() + 1);
            IngestError::BadMapping { path: path.to_path_buf(), found: format!("line {line}: {found}") }
        })?;
        mapping.check()?;
        Ok(mapping)
    }

    /// Whether its values make sense.
    pub(crate) fn check(&self) -> Result<(), IngestError> {
        let positive = |key: &str, value: Option<f64>| match value {
            Some(v) if !(v > 0.0 && v.is_finite()) => {
                Err(IngestError::BadMappingValue { key: key.into(), expected: "a number above 0".into(), found: v.to_string() })
            }
            _ => Ok(()),
        };
        positive("frame_rate_hz", self.frame_rate_hz)?;
        positive("field.length_yd", self.field.length_yd)?;
        positive("field.width_yd", self.field.width_yd)?;
        if let Some(v) = self.field.end_zone_yd.filter(|v| !(*v >= 0.0 && v.is_finite())) {
            let key = "field.end_zone_yd".to_string();
            return Err(IngestError::BadMappingValue { key, expected: "a number of 0 or more".into(), found: v.to_string() });
        }
        for (text, word) in &self.events {
            if super::events::mark_of_word(word).is_none() {
                let expected = format!("one of {}", super::events::WORDS.map(|(w, _)| w).join(", "));
                return Err(IngestError::BadMappingValue { key: format!("events.{text:?}"), expected, found: word.clone() });
            }
        }
        Ok(())
    }

    pub(crate) fn field(&self, field: Field) -> Field {
        Field {
            length_yd: self.field.length_yd.unwrap_or(field.length_yd),
            width_yd: self.field.width_yd.unwrap_or(field.width_yd),
            end_zone_yd: self.field.end_zone_yd.unwrap_or(field.end_zone_yd),
        }
    }

    /// Event texts in normal form with their marks.
    pub(crate) fn event_marks(&self) -> BTreeMap<String, EventMark> {
        self.events.iter().filter_map(|(text, word)| Some((super::naming::normal(text), super::events::mark_of_word(word)?))).collect()
    }
}
