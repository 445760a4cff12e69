//! From a play to its audit: the layers in order, each step a pure function.
//!
//! ```text
//! prepare   clean every mover, find the carries            per play
//! noise     jerk density and measurement noise             per game, on a sample that row order cannot change
//! smooth    tracks with covariance around the carries      per play
//! tops      top speeds from the smoothed speeds            per game
//! judge     pursuits, bearings, intercepts, accounts       per play
//! ```
//!
//! Noise and top speeds are read off one game, not one file or a season: so a game's results depend on its own rows
//! alone, files may be split in any way, and adding a game changes no other.

mod frames;
mod judge;
mod measures;
mod prepare;
mod smoothing;
mod turned;

pub use frames::frame_rows;
pub use judge::{CarryAudit, PlayAudit, PursuitAudit, judge};
pub use prepare::{Prepared, noise_of, prepare};
pub use smoothing::{Smoothed, smooth_play};

use crate::kinematics::SmoothWork;
use crate::model::{Play, Settings};

/// Audits one play by itself: noise and top speeds are read off this play alone.
///
/// The pipeline audits game by game instead, which pools both over the game's plays.
pub fn audit_play(play: &Play, settings: &Settings) -> PlayAudit {
    let prepared = prepare(play, settings);
    let noise = noise_of(std::slice::from_ref(&(play, &prepared)), settings);
    let smoothed = smooth_play(play, &prepared, noise, settings, &mut SmoothWork::default());
    let tops = smoothed.speeds.top_speeds(&settings.motion);
    judge(play, &prepared, &smoothed, &tops, settings)
}
