//! The account as lines of text that add up on paper.

use super::heading::{Entries, Heading};
use super::rounding::round_together;
use super::text::{MISSING, fixed};
use serde::Serialize;

/// One line of the account.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct AccountLine {
    pub key: &'static str,
    pub name: &'static str,
    pub meaning: &'static str,
    /// Yards with one decimal, or a dash.
    pub yards: String,
    /// Marks a negative entry: ground won.
    pub note: &'static str,
    /// The printed value in tenths of a yard, for sentences and bars.
    #[serde(skip)]
    pub tenths: Option<i64>,
}

/// The six lines and their sum.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Account {
    pub lines: Vec<AccountLine>,
    pub total: String,
    #[serde(skip)]
    pub total_tenths: Option<i64>,
    /// Says so when the entries of the row do not add up to its total; empty otherwise.
    pub warning: String,
}

/// The account of a row with a total. Without a total all lines are dashes.
pub fn account(row: &impl Entries, total_yd: Option<f64>) -> Account {
    let entries = row.entries_yd();
    let rounded = total_yd.and_then(|t| round_together(&entries, t, 1));
    let lines = Heading::ALL
        .iter()
        .enumerate()
        .map(|(i, h)| {
            let tenths = rounded.as_ref().and_then(|r| r.parts[i]);
            AccountLine {
                key: h.key(),
                name: h.name(),
                meaning: h.meaning(),
                yards: tenths_text(tenths),
                note: if tenths.is_some_and(|t| t < 0) { "gain" } else { "" },
                tenths,
            }
        })
        .collect();
    let total_tenths = rounded.as_ref().map(|r| r.total);
    let warning = match (&rounded, total_yd) {
        (Some(r), Some(total)) if !r.balanced => {
            let sum: f64 = entries.iter().flatten().sum();
            format!("this account does not balance: the entries add up to {} yd, the total is {} yd", fixed(sum, 2), fixed(total, 2))
        }
        _ => String::new(),
    };
    Account { lines, total: tenths_text(total_tenths), total_tenths, warning }
}

/// Tenths of a yard as text with one decimal.
pub fn tenths_text(tenths: Option<i64>) -> String {
    tenths.map_or_else(|| MISSING.to_string(), |t| fixed(t as f64 / 10.0, 1))
}
