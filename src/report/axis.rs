//! A linear axis: from values to places on paper, with round tick values.

/// Values from `low` to `high` drawn from `start` to `end`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Axis {
    pub low: f64,
    pub high: f64,
    pub start: f64,
    pub end: f64,
}

impl Axis {
    /// An axis over the values given, widened to at least `least_span` around their middle.
    /// Values that are not numbers do not count; without any the axis is 0 to `least_span`.
    pub fn over(values: impl IntoIterator<Item = f64>, least_span: f64, start: f64, end: f64) -> Axis {
        let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
        for v in values.into_iter().filter(|v| v.is_finite()) {
            low = low.min(v);
            high = high.max(v);
        }
        if low > high {
            (low, high) = (0.0, least_span);
        }
        let lack = (least_span - (high - low)).max(0.0) / 2.0;
        Axis { low: low - lack, high: high + lack, start, end }
    }

    /// The place of a value; values beyond the axis lie beyond its ends.
    pub fn place(&self, value: f64) -> f64 {
        let span = self.high - self.low;
        if span <= 0.0 { self.start } else { self.start + (value - self.low) / span * (self.end - self.start) }
    }

    /// The place of a value, held at the ends of the axis.
    pub fn held(&self, value: f64) -> f64 {
        self.place(value.clamp(self.low, self.high))
    }

    /// Round values (1, 2 or 5 times a power of ten apart) on the axis, about `wanted` of them, and the decimals
    /// needed to print them.
    ///
    /// ```
    /// use tailchase::report::axis::Axis;
    /// let a = Axis { low: 0.0, high: 5.2, start: 0.0, end: 100.0 };
    /// assert_eq!(a.ticks(5), (vec![0.0, 1.0, 2.0, 3.0, 4.0, 5.0], 0));
    /// ```
    pub fn ticks(&self, wanted: usize) -> (Vec<f64>, usize) {
        let span = self.high - self.low;
        if !span.is_finite() || span <= 0.0 || wanted == 0 {
            return (Vec::new(), 0);
        }
        let rough = span / wanted as f64;
        let power = rough.log10().floor();
        let base = 10f64.powf(power);
        let multiple = [1.0, 2.0, 5.0, 10.0].into_iter().find(|m| m * base >= rough * 0.8).unwrap_or(10.0);
        let step = multiple * base;
        let decimals = (-step.log10().floor()).max(0.0) as usize;
        let first = (self.low / step - 1e-9).ceil() as i64;
        let last = (self.high / step + 1e-9).floor() as i64;
        ((first..=last).take(50).map(|i| i as f64 * step).collect(), decimals)
    }
}
