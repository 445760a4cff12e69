//! Statistics against published tables and library calls, and what must hold for any input.

#[path = "stats/published.rs"]
mod published;
#[path = "stats/rules.rs"]
mod rules;
#[path = "stats/samples.rs"]
mod samples;
