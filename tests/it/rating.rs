//! Players and teams: what the rows hold, what the ranking must hold, and how near it comes to a known truth.

#[path = "rating/league.rs"]
mod league;
#[path = "rating/rows.rs"]
mod rows;
#[path = "rating/rules.rs"]
mod rules;
#[path = "rating/season.rs"]
mod season;
#[path = "rating/truth.rs"]
mod truth;
