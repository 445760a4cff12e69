//! `audit.json`: what was run on what, and what came of it. No clock and no thread count in it, so that the same
//! input gives the same bytes.

use super::account::merge_findings;
use super::{FindingEntry, GameMark, NoiseEntry, RowAccount, StoreError, write_text};
use crate::model::Settings;
use serde::{Deserialize, Serialize};
use std::collections::{BTreeMap, BTreeSet};
use std::fs;
use std::path::Path;

pub const AUDIT_FILE: &str = "audit.json";

/// One input file.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct InputEntry {
    /// As given on the command line.
    pub path: String,
    pub bytes: u64,
    /// xxh3 of the contents, 128 bits in hexadecimal.
    pub hash: String,
    /// Rows of the file that name no game.
    pub loose_rows: RowAccount,
}

/// One audited game.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct GameEntry {
    pub game: String,
    pub plays: u64,
    pub carries: u64,
    pub pursuits: u64,
    pub rows_read: u64,
    pub rows_used: u64,
    pub noise: Option<NoiseEntry>,
    /// Audited with other settings, options or another version than the last run's.
    pub made_otherwise: bool,
}

/// Everything `audit.json` says. All games of the folder are in it, those of earlier runs too.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct AuditInfo {
    pub version: String,
    pub made_with: String,
    pub settings: Settings,
    /// `none`, `told` or `all`.
    pub frames: String,
    pub inputs: Vec<InputEntry>,
    pub plays: u64,
    pub carries: u64,
    pub pursuits: u64,
    pub rows: RowAccount,
    pub findings: Vec<FindingEntry>,
    /// Share of the frames above 3 yd/s in which a player out-does his own motion model.
    pub beyond_model_share: Option<f64>,
    pub games: Vec<GameEntry>,
}

/// What the last run adds to what the games' marks say.
#[derive(Clone, Debug, Default)]
pub struct RunInfo {
    pub version: String,
    pub made_with: String,
    pub settings: Settings,
    pub frames: String,
    pub inputs: Vec<InputEntry>,
    /// Findings about rows that name no game.
    pub loose_findings: Vec<FindingEntry>,
}

impl AuditInfo {
    /// Sums up the folder: the last run, and every game that it holds. Input files of an earlier run stay listed while
    /// a game in the folder still comes from them.
    pub fn sum_up(run: RunInfo, marks: &BTreeMap<String, GameMark>, earlier: Option<&AuditInfo>) -> AuditInfo {
        let in_use: BTreeSet<&str> = marks.values().flat_map(|m| m.inputs.iter().map(String::as_str)).collect();
        let mut inputs = run.inputs;
        for old in earlier.iter().flat_map(|info| &info.inputs) {
            if in_use.contains(old.hash.as_str()) && inputs.iter().all(|new| new.hash != old.hash) {
                inputs.push(old.clone());
            }
        }
        inputs.sort_by(|a, b| (&a.path, &a.hash).cmp(&(&b.path, &b.hash)));

        let mut rows = RowAccount::default();
        inputs.iter().map(|i| &i.loose_rows).chain(marks.values().map(|m| &m.rows)).for_each(|part| rows.merge(part));
        let findings = merge_findings(marks.values().map(|m| m.findings.as_slice()).chain([run.loose_findings.as_slice()]));
        let model_frames: u64 = marks.values().map(|m| m.model_frames).sum();
        let beyond: u64 = marks.values().map(|m| m.beyond_model_frames).sum();
        let games = marks.values().map(|mark| GameEntry {
            game: mark.game.clone(),
            plays: mark.plays,
            carries: mark.carries,
            pursuits: mark.pursuits,
            rows_read: mark.rows.read,
            rows_used: mark.rows.used,
            noise: mark.noise,
            made_otherwise: mark.made_with != run.made_with,
        });
        AuditInfo {
            plays: marks.values().map(|m| m.plays).sum(),
            carries: marks.values().map(|m| m.carries).sum(),
            pursuits: marks.values().map(|m| m.pursuits).sum(),
            beyond_model_share: (model_frames > 0).then(|| beyond as f64 / model_frames as f64),
            games: games.collect(),
            version: run.version,
            made_with: run.made_with,
            settings: run.settings,
            frames: run.frames,
            inputs,
            rows,
            findings,
        }
    }

    /// Games that the ranking mixes in although they were audited differently: audit them again, or start over with `--fresh`.
    pub fn games_made_otherwise(&self) -> usize {
        self.games.iter().filter(|game| game.made_otherwise).count()
    }
}

/// Writes `OUT/audit.json`.
///
/// # Errors
/// When the file cannot be written.
pub fn write_audit_info(out_dir: &Path, info: &AuditInfo) -> Result<(), StoreError> {
    let path = out_dir.join(AUDIT_FILE);
    let text = serde_json::to_string_pretty(info).map_err(|source| StoreError::Json { path: path.clone(), source })?;
    write_text(&path, &(text + "\n"))
}

/// Reads `OUT/audit.json`: the first step of every command that reads an audit.
///
/// # Errors
/// When the folder is no audit, or the file is not one of this program.
pub fn read_audit_info(out_dir: &Path) -> Result<AuditInfo, StoreError> {
    let path = out_dir.join(AUDIT_FILE);
    if !path.is_file() {
        return Err(StoreError::NotAnAudit { path: out_dir.to_path_buf() });
    }
    let text = fs::read(&path).map_err(StoreError::io(&path, "read the file"))?;
    serde_json::from_slice(&text).map_err(|source| StoreError::Json { path, source })
}
