//! Plane vectors. Counter-clockwise is positive, as in every mathematics book.

use std::ops::{Add, AddAssign, Div, Mul, Neg, Sub, SubAssign};

/// A vector in the plane; the unit is the caller's and stands in the caller's name.
///
/// ```
/// use tailchase::base::V2;
/// let east = V2::new(1.0, 0.0);
/// let north = V2::new(0.0, 1.0);
/// assert_eq!(east.cross(north), 1.0); // north lies counter-clockwise of east
/// assert_eq!(east.left(), north);
/// ```
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct V2 {
    pub x: f64,
    pub y: f64,
}

impl V2 {
    pub const ZERO: V2 = V2 { x: 0.0, y: 0.0 };
    pub const EAST: V2 = V2 { x: 1.0, y: 0.0 };

    #[inline]
    pub const fn new(x: f64, y: f64) -> V2 {
        V2 { x, y }
    }

    /// Unit vector at `angle_rad` counter-clockwise from +x.
    #[inline]
    pub fn polar(angle_rad: f64) -> V2 {
        let (s, c) = angle_rad.sin_cos();
        V2::new(c, s)
    }

    #[inline]
    pub fn dot(self, o: V2) -> f64 {
        self.x * o.x + self.y * o.y
    }

    /// The z component of the vector product: positive when `o` lies counter-clockwise of `self`.
    #[inline]
    pub fn cross(self, o: V2) -> f64 {
        self.x * o.y - self.y * o.x
    }

    #[inline]
    pub fn norm2(self) -> f64 {
        self.dot(self)
    }

    #[inline]
    pub fn norm(self) -> f64 {
        self.norm2().sqrt()
    }

    /// Direction of the vector, radians counter-clockwise from +x, in (−π, π].
    #[inline]
    pub fn angle_rad(self) -> f64 {
        self.y.atan2(self.x)
    }

    /// The vector of length one in the same direction; none for a vector too short to have one.
    #[inline]
    pub fn unit(self) -> Option<V2> {
        let n = self.norm();
        (n > 1e-12).then(|| self / n)
    }

    /// A quarter turn counter-clockwise.
    #[inline]
    pub fn left(self) -> V2 {
        V2::new(-self.y, self.x)
    }

    /// Turned counter-clockwise by `angle_rad`.
    #[inline]
    pub fn rotated(self, angle_rad: f64) -> V2 {
        let (s, c) = angle_rad.sin_cos();
        V2::new(c * self.x - s * self.y, s * self.x + c * self.y)
    }

    #[inline]
    pub fn lerp(self, o: V2, share: f64) -> V2 {
        self + (o - self) * share
    }

    #[inline]
    pub fn is_finite(self) -> bool {
        self.x.is_finite() && self.y.is_finite()
    }
}

impl Add for V2 {
    type Output = V2;
    #[inline]
    fn add(self, o: V2) -> V2 {
        V2::new(self.x + o.x, self.y + o.y)
    }
}
impl Sub for V2 {
    type Output = V2;
    #[inline]
    fn sub(self, o: V2) -> V2 {
        V2::new(self.x - o.x, self.y - o.y)
    }
}
impl Mul<f64> for V2 {
    type Output = V2;
    #[inline]
    fn mul(self, k: f64) -> V2 {
        V2::new(self.x * k, self.y * k)
    }
}
impl Div<f64> for V2 {
    type Output = V2;
    #[inline]
    fn div(self, k: f64) -> V2 {
        V2::new(self.x / k, self.y / k)
    }
}
impl Neg for V2 {
    type Output = V2;
    #[inline]
    fn neg(self) -> V2 {
        V2::new(-self.x, -self.y)
    }
}
impl AddAssign for V2 {
    #[inline]
    fn add_assign(&mut self, o: V2) {
        *self = *self + o;
    }
}
impl SubAssign for V2 {
    #[inline]
    fn sub_assign(&mut self, o: V2) {
        *self = *self - o;
    }
}
