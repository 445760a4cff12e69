//! What looks worth checking in an input: units and origin told by where people stand, guesses, events without a meaning.

use super::inspect::Inspection;
use super::mapping::{DistanceUnit, Origin};
use super::naming::How;
use super::{Logical, Mapping};
use crate::base::units::{FT_PER_YD, M_PER_YD};
use crate::model::Field;

/// Where the sample's movers are, every place counted.
#[derive(Default)]
pub(crate) struct Spread {
    x: Vec<f64>,
    y: Vec<f64>,
}

impl Spread {
    pub fn add(&mut self, x_yd: f64, y_yd: f64) {
        self.x.push(x_yd);
        self.y.push(y_yd);
    }

    /// 0.2 and 99.8 % quantiles: what a few strays at the bench cannot move.
    fn range(values: &[f64]) -> Option<(f64, f64)> {
        let mut sorted = values.to_vec();
        sorted.sort_by(f64::total_cmp);
        let cut = sorted.len() / 500;
        Some((*sorted.get(cut)?, *sorted.get(sorted.len().checked_sub(cut + 1)?)?))
    }
}

pub(crate) fn notes(seen: &Inspection, mapping: &Mapping, spread: &Spread, field: &Field) -> Vec<String> {
    let mut notes = Vec::new();
    for file in &seen.files {
        for m in file.matched.iter().filter(|m| m.how == How::Guessed) {
            notes.push(format!(
                "{}: column {} was guessed to be {}; say so in a mapping file",
                file.path.display(),
                m.column,
                m.logical.meaning()
            ));
        }
        for logical in [Logical::Game, Logical::Play] {
            if file.missing.contains(&logical) {
                let taken = if logical == Logical::Game { "the file's name is the game" } else { "each game is one play" };
                notes.push(format!("{}: no column for {}; {taken}", file.path.display(), logical.meaning()));
            }
        }
    }
    notes.extend(units(mapping, spread, field));
    let unknown: Vec<&str> = seen.sample.events.iter().filter(|e| e.mark.is_none()).map(|e| e.text.as_str()).collect();
    if !unknown.is_empty() {
        notes.push(format!("event texts without a meaning here: {}; map those that mark possession under [events]", unknown.join(", ")));
    }
    if seen.sample.rows > 0 && !seen.sample.has_ball {
        notes.push("no ball was found; name its id or name with `ball = [\"…\"]`, or its columns ball_x and ball_y".into());
    }
    notes
}

/// Units and origin that fit the places better than those taken. Nothing is changed by it: the mapping decides.
fn units(mapping: &Mapping, spread: &Spread, field: &Field) -> Option<String> {
    let ((x0, x1), (y0, y1)) = (Spread::range(&spread.x)?, Spread::range(&spread.y)?);
    let is_centre = mapping.origin == Some(Origin::Centre);
    let per_yd = match mapping.units {
        Some(DistanceUnit::Metres) => M_PER_YD,
        Some(DistanceUnit::Feet) => FT_PER_YD,
        _ => 1.0,
    };
    let seen = format!(
        "places lie in x {x0:.1} to {x1:.1} yd, y {y0:.1} to {y1:.1} yd of a field of {:.1} by {:.1} yd",
        field.length_yd, field.width_yd
    );
    let fits = |low: f64, high: f64, size: f64| low > -0.1 * size && high < 1.1 * size;
    if fits(x0, x1, field.length_yd) && fits(y0, y1, field.width_yd) {
        // Metres fit into a field of yards: told by a far sideline that nobody reaches.
        let far = y1 / field.width_yd;
        let is_short = mapping.units.is_none() && (0.86..0.945).contains(&far) && x1 < 0.93 * field.length_yd && spread.x.len() > 5000;
        return is_short
            .then(|| format!("{seen}: nobody comes near the far sideline; check whether the coordinates are metres (units = \"m\")"));
    }
    let looks_centred = !is_centre && x0 < -0.1 * field.length_yd && y0 < -0.1 * field.width_yd;
    let size = if looks_centred { (y1 - y0) * per_yd / field.width_yd } else { y1 * per_yd / field.width_yd };
    let unit = match size {
        s if s > 1.6 => "ft",
        s if s < 0.945 && mapping.units.is_none() => "m, or yd",
        _ => "yd",
    };
    let origin = if looks_centred { "centre" } else { "corner" };
    Some(format!("{seen}: they do not fit; try units = \"{unit}\" and origin = \"{origin}\" in a mapping file"))
}
