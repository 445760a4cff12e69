//! All integration tests in one binary, so that the dataframe library is linked once.

mod carry;
mod engine;
mod kinematics;
mod planted;
mod rating;
mod report;
mod stats;
