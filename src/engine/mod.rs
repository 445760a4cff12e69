//! The mathematics of pursuit. Nothing here reads, writes or fails.
//!
//! [`reach`] says where a player can be; [`path`] passes once over a carrier's path and answers what can be met, [`expected`] where on average;
//! [`foresight`] is the path that could be foreseen; [`chase`] holds what all accounts of a carry share;
//! [`ledger`] keeps a pursuit's account; [`outcome`] says what it came to. [`bearing`], [`intercept`] and
//! [`steering`] describe the line he ran.

pub mod bearing;
pub mod breaking;
pub mod capability;
pub mod chase;
pub mod clock;
pub mod expected;
pub mod foresight;
pub mod grid;
pub mod intercept;
pub mod ledger;
pub mod outcome;
pub mod path;
pub mod reach;
mod root;
pub mod steering;
