//! The cut-out of the field that one drawing shows, and its scale.

use crate::model::Field;

/// Width of every field drawing in its own units; heights follow from the cut-out.
pub const WIDTH: f64 = 640.0;
/// Room below for the numbers of the yard lines.
pub const FOOT: f64 = 24.0;
/// Yards around the players that are shown too.
const MARGIN_YD: f64 = 4.0;
/// The smallest cut-out along the field.
const LEAST_LENGTH_YD: f64 = 24.0;
/// Along over across: a drawing taller than this would not fit beside its charts.
const LEAST_ASPECT: f64 = 1.15;
const LEAST_ACROSS_YD: f64 = 10.0;
/// How far beyond the lines the paper goes.
const BEYOND_YD: f64 = 3.0;

/// From yards on the field to units on paper. The carrier attacks to the right and left stays left: y grows upwards.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FieldFrame {
    pub x_low_yd: f64,
    pub x_high_yd: f64,
    pub y_low_yd: f64,
    pub y_high_yd: f64,
    pub units_per_yd: f64,
}

impl FieldFrame {
    /// The cut-out around the spots, held within the field and a few yards around it.
    pub fn around(spots_yd: impl IntoIterator<Item = (f64, f64)>, field: &Field) -> FieldFrame {
        let (mut x, mut y) = (Span::EMPTY, Span::EMPTY);
        for (px, py) in spots_yd.into_iter().filter(|(a, b)| a.is_finite() && b.is_finite()) {
            x.take(px);
            y.take(py);
        }
        let x_all = Span { low: -BEYOND_YD, high: field.length_yd + BEYOND_YD };
        let y_all = Span { low: -BEYOND_YD, high: field.width_yd + BEYOND_YD };
        let x = x.or(field.length_yd / 2.0).padded(MARGIN_YD, LEAST_LENGTH_YD).within(x_all);
        let y = y.or(field.width_yd / 2.0).padded(MARGIN_YD, LEAST_ACROSS_YD).within(y_all);
        let x = x.padded(0.0, (y.length() * LEAST_ASPECT).min(x_all.length())).within(x_all);
        FieldFrame { x_low_yd: x.low, x_high_yd: x.high, y_low_yd: y.low, y_high_yd: y.high, units_per_yd: WIDTH / x.length().max(1.0) }
    }

    pub fn place(&self, x_yd: f64, y_yd: f64) -> (f64, f64) {
        ((x_yd - self.x_low_yd) * self.units_per_yd, (self.y_high_yd - y_yd) * self.units_per_yd)
    }

    /// `None` for a spot that is not a number.
    pub fn spot(&self, x_yd: f64, y_yd: f64) -> Option<(f64, f64)> {
        (x_yd.is_finite() && y_yd.is_finite()).then(|| self.place(x_yd, y_yd))
    }

    /// Height of the turf, without the foot.
    pub fn turf_height(&self) -> f64 {
        (self.y_high_yd - self.y_low_yd) * self.units_per_yd
    }
}

#[derive(Clone, Copy)]
struct Span {
    low: f64,
    high: f64,
}

impl Span {
    const EMPTY: Span = Span { low: f64::INFINITY, high: f64::NEG_INFINITY };

    fn take(&mut self, v: f64) {
        self.low = self.low.min(v);
        self.high = self.high.max(v);
    }

    fn or(self, middle: f64) -> Span {
        if self.low > self.high { Span { low: middle, high: middle } } else { self }
    }

    fn length(self) -> f64 {
        self.high - self.low
    }

    /// Widened by the margin on both sides, then around the middle to the least length.
    fn padded(self, margin: f64, least: f64) -> Span {
        let lack = ((least - self.length()) / 2.0 - margin).max(0.0) + margin;
        Span { low: self.low - lack, high: self.high + lack }
    }

    /// Pushed inside `all` without losing length where there is room, cut where there is none.
    fn within(self, all: Span) -> Span {
        let length = self.length().min(all.length());
        let low = self.low.max(all.low).min(all.high - length);
        Span { low, high: low + length }
    }
}
