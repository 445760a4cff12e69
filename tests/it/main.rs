//! All integration tests in one binary, so that the dataframe library is linked once.

mod carry;
mod cli;
mod coverage;
mod demo;
mod demo_write;
mod dictionary;
mod engine;
mod ingest;
mod job;
mod kinematics;
mod layers;
mod order;
mod planted;
mod rates;
mod rating;
mod report;
mod road;
mod stats;
mod store;
mod turned;
mod untidy;
mod whole;
