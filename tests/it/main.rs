//! All integration tests in one binary, so that the dataframe library is linked once.

mod carry;
mod cli;
mod demo;
mod demo_write;
mod dictionary;
mod engine;
mod ingest;
mod job;
mod kinematics;
mod layers;
mod planted;
mod rating;
mod report;
mod stats;
mod store;
mod turned;
mod whole;
