//! From rows to clean tracks: repeats, jumps and gaps put in order, then positions, velocities and accelerations with their
//! covariance.
//!
//! | file | what it does |
//! |---|---|
//! | `clean` | one mover's rows to dense segments; `repeats`, `jumps` and `spikes` are its parts |
//! | `coarse` | cheap velocities, good enough to find carries |
//! | `noise` | jerk density and measurement noise by maximum likelihood |
//! | `smooth` | the smoother as used: fast where steps are constant, general elsewhere; `table` and `pass` are its parts |
//! | `cuts` | sudden changes of push, found in a first pass and given room in a second |
//! | `rts`, `plan`, `state` | the general Kalman and Rauch–Tung–Striebel core on which it stands |
//! | `savgol` | Savitzky–Golay weights and filter, the independent check |
//! | `own` | the file's own speed and heading against the derived ones |

pub mod clean;
pub mod coarse;
pub mod noise;
pub mod own;
pub mod plan;
pub mod rts;
pub mod savgol;
pub mod smooth;
pub mod state;

mod cuts;
mod jumps;
mod pass;
mod repeats;
mod spikes;
mod table;

pub use clean::{Cleaned, Segment, clean_track};
pub use coarse::coarse_track;
pub use noise::estimate_noise;
pub use own::OwnCheck;
pub use smooth::{Boost, SmoothWork, smooth, smooth_evenly, smooth_range};
