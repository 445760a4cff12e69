//! Compensated sums: the account has to balance to the last digit that the arithmetic allows.

/// A running sum after Neumaier (1974): carries the rounding error of every addition along.
///
/// ```
/// let mut s = tailchase::base::Sum::default();
/// for v in [1.0, 1e100, 1.0, -1e100] { s.add(v); }
/// assert_eq!(s.value(), 2.0);
/// ```
#[derive(Clone, Copy, Debug, Default)]
pub struct Sum {
    total: f64,
    lost: f64,
}

impl Sum {
    #[inline]
    pub fn add(&mut self, v: f64) {
        let t = self.total + v;
        self.lost += if self.total.abs() >= v.abs() { (self.total - t) + v } else { (v - t) + self.total };
        self.total = t;
    }

    #[inline]
    pub fn value(self) -> f64 {
        self.total + self.lost
    }
}

impl FromIterator<f64> for Sum {
    fn from_iter<I: IntoIterator<Item = f64>>(values: I) -> Sum {
        let mut s = Sum::default();
        for v in values {
            s.add(v);
        }
        s
    }
}
