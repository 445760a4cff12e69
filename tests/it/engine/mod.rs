//! The engine against published and independently computed values.

mod intercepts;
mod ledger;
mod reach;
mod relative_motion;
mod steering;

use serde::de::DeserializeOwned;
use tailchase::base::V2;

/// A file of `fixtures/published`, parsed.
pub fn published<T: DeserializeOwned>(topic: &str) -> T {
    let path = format!("{}/fixtures/published/{topic}.toml", env!("CARGO_MANIFEST_DIR"));
    let text = std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{path}: {e}"));
    toml::from_str(&text).unwrap_or_else(|e| panic!("{path}: {e}"))
}

pub fn v2(pair: [f64; 2]) -> V2 {
    V2::new(pair[0], pair[1])
}

#[track_caller]
pub fn near(what: &str, found: f64, expected: f64, tolerance: f64) {
    assert!((found - expected).abs() <= tolerance, "{what}: found {found}, expected {expected} within {tolerance}");
}
