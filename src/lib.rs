//! `tailchase` audits pursuit angles in tracking data after the game.
//!
//! ```text
//! files ──[ingest]──▶ Play ──[kinematics]──▶ tracks with covariance ──[carry]──▶ carries, pursuits
//!       ──[engine]──▶ bearings, intercepts, accounts    ([audit] runs these in order, for one play)
//!       ──[store]──▶ Parquet tables, one folder a game ──[rating]──▶ players, sides
//!       ──[report]──▶ terminal table, CSV, page, clip list
//! ```
//!
//! [`pipeline`] sequences the layers over games and threads; [`cli`] turns flags into what the pipeline needs.
//! [`audit::audit_play`] is the whole judgement of one play as a pure function: no input or output, no clock, no
//! randomness, no global.
//!
//! Units inside: yards, seconds, radians; a name carries its unit. The field is turned so that the carrier attacks +x.
#![forbid(unsafe_code)]

pub mod audit;
pub mod base;
pub mod carry;
pub mod cli;
pub mod demo;
pub mod engine;
pub mod ingest;
pub mod kinematics;
pub mod model;
pub mod pipeline;
pub mod rating;
pub mod report;
pub mod stats;
pub mod store;
