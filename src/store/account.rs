//! Row accounts and findings as they stand in JSON; both add up in any order.

use crate::model::{Findings, SetAside};
use serde::{Deserialize, Serialize};
use std::collections::BTreeMap;

/// Where the rows went: read = used + set aside.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct RowAccount {
    pub read: u64,
    pub used: u64,
    /// By reason, in words.
    pub set_aside: BTreeMap<String, u64>,
}

impl RowAccount {
    pub fn set_aside(&mut self, reason: SetAside, count: u64) {
        if count > 0 {
            *self.set_aside.entry(reason.word().to_string()).or_default() += count;
        }
    }

    pub fn merge(&mut self, other: &RowAccount) {
        self.read += other.read;
        self.used += other.used;
        for (reason, count) in &other.set_aside {
            *self.set_aside.entry(reason.clone()).or_default() += count;
        }
    }

    pub fn set_aside_total(&self) -> u64 {
        self.set_aside.values().sum()
    }

    pub fn balances(&self) -> bool {
        self.read == self.used + self.set_aside_total()
    }
}

/// One kind of finding with its count, the first place in order of text, and the advice.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct FindingEntry {
    pub kind: String,
    pub count: u64,
    pub first_place: String,
    pub advice: String,
}

/// The findings as entries, in order of kind.
pub fn finding_entries(findings: &Findings) -> Vec<FindingEntry> {
    findings
        .list()
        .into_iter()
        .map(|f| FindingEntry {
            kind: f.kind.word().to_string(),
            count: f.count,
            first_place: f.first_place,
            advice: f.kind.advice().to_string(),
        })
        .collect()
}

/// One list out of many, sorted by kind; counts add up, the first place is the first in order of text.
pub fn merge_findings<'a>(lists: impl IntoIterator<Item = &'a [FindingEntry]>) -> Vec<FindingEntry> {
    let mut by_kind: BTreeMap<&str, FindingEntry> = BTreeMap::new();
    for entry in lists.into_iter().flatten() {
        by_kind
            .entry(&entry.kind)
            .and_modify(|sum| {
                sum.count += entry.count;
                if entry.first_place < sum.first_place {
                    sum.first_place.clone_from(&entry.first_place);
                }
            })
            .or_insert_with(|| entry.clone());
    }
    by_kind.into_values().collect()
}
