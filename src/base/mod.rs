//! Ground that every layer stands on: plane vectors, angles, units, random streams, sums.
//! No word of the game appears here.

pub mod angle;
pub mod normal;
pub mod rng;
pub mod sum;
pub mod units;
pub mod vec2;

pub use angle::wrap_rad;
pub use rng::Stream;
pub use sum::Sum;
pub use vec2::V2;
