//! Cleaning and smoothing: published values, coverage of the error bars, untidy tracks.

#[path = "kinematics/cleaning.rs"]
mod cleaning;
#[path = "kinematics/coverage.rs"]
mod coverage;
#[path = "kinematics/paths.rs"]
mod paths;
#[path = "kinematics/published.rs"]
mod published;
#[path = "kinematics/simulated.rs"]
mod simulated;
