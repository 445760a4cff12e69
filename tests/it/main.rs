//! All integration tests in one binary, so that the dataframe library is linked once.

mod carry;
mod demo;
mod demo_write;
mod dictionary;
mod engine;
mod ingest;
mod kinematics;
mod layers;
mod planted;
mod rating;
mod report;
mod stats;
mod store;
