//! How a command ends: the exit code, the error and its chain of causes.

use crate::ingest::IngestError;
use crate::model::FindingKind;
use crate::pipeline::PipelineError;
use crate::store::{AuditInfo, StoreError};
use std::path::PathBuf;
use std::process::ExitCode;

/// How a command that did its work ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Outcome {
    /// Exit code 0.
    Clean,
    /// Exit code 1: finished, but something in the data needs a person's eyes.
    NeedsEyes,
}

impl From<Outcome> for ExitCode {
    fn from(outcome: Outcome) -> ExitCode {
        match outcome {
            Outcome::Clean => ExitCode::SUCCESS,
            Outcome::NeedsEyes => ExitCode::from(1),
        }
    }
}

/// Exit code of a command that failed.
pub const FAILED: u8 = 2;

/// Why a command failed.
#[derive(Debug, thiserror::Error)]
pub enum CliError {
    #[error(transparent)]
    Store(#[from] StoreError),
    #[error(transparent)]
    Ingest(#[from] IngestError),
    #[error(transparent)]
    Pipeline(#[from] PipelineError),
    #[error("{}: expected {what}, found a file that cannot be read", path.display())]
    Unreadable { path: PathBuf, what: &'static str, source: std::io::Error },
    #[error("{}, line {line}: expected a setting in TOML, found: {found} (`tailchase settings` prints them all)", path.display())]
    BadSettings { path: PathBuf, line: usize, found: String },
    #[error("{place}, setting {setting}: expected {expected}, found {found}")]
    SettingRange { place: String, setting: String, expected: String, found: f64 },
    #[error("settings cannot be written as TOML")]
    SettingsOut { source: Box<toml::ser::Error> },
    #[error("{}: expected a pursuit of {wanted}, found none ({advice})", path.display())]
    NoPursuit { path: PathBuf, wanted: String, advice: String },
    #[error("{}: expected side {wanted:?}, found the sides {found}", path.display())]
    NoSide { path: PathBuf, wanted: String, found: String },
    #[error("cannot print the result")]
    Print { source: std::io::Error },
}

/// The error and its causes in one line; a cause that only repeats what is said already is left out.
pub fn chain(error: &dyn std::error::Error) -> String {
    let mut text = error.to_string();
    let mut cause = error.source();
    while let Some(found) = cause {
        let words = found.to_string().trim_end().replace('\n', " | ");
        if !text.contains(&words) {
            text = format!("{text}: {words}");
        }
        cause = found.source();
    }
    text
}

/// Kinds of finding that a person should look at before trusting the figures. The others (a bridged gap, a bench player,
/// a ball that flies on) are everyday and handled.
const NEED_EYES: [FindingKind; 10] = [
    FindingKind::MissingKey,
    FindingKind::ConflictingRepeat,
    FindingKind::PlayGivenTwice,
    FindingKind::UnknownEvent,
    FindingKind::SpeedDisagrees,
    FindingKind::HeadingDisagrees,
    FindingKind::NoSides,
    FindingKind::NoBall,
    FindingKind::NameConflict,
    FindingKind::FewerPlayers,
];
/// Share of rows set aside beyond which the input itself is in doubt; own choice.
const SET_ASIDE_LIMIT: f64 = 0.01;

/// Share of plays without a carry (incomplete passes have none) beyond which the marks or the ball are in doubt; own choice.
const NO_CARRY_LIMIT: f64 = 0.4;

/// What needs a person's eyes after an audit, one sentence each.
pub fn worries(info: &AuditInfo) -> Vec<String> {
    let mut list: Vec<String> = info
        .findings
        .iter()
        .filter(|f| {
            let many_without_carry = f.kind == FindingKind::NoCarry.word() && f.count as f64 > NO_CARRY_LIMIT * info.plays as f64;
            many_without_carry || NEED_EYES.iter().any(|kind| kind.word() == f.kind)
        })
        .map(|f| format!("{} × {}, first {}: {}", f.count, f.kind, f.first_place, f.advice))
        .collect();
    let aside = info.rows.set_aside_total();
    if aside as f64 > SET_ASIDE_LIMIT * info.rows.read as f64 {
        list.push(format!("{aside} of {} rows were set aside; set_aside.csv lists them with their reasons", info.rows.read));
    }
    let otherwise = info.games_made_otherwise();
    if otherwise > 0 {
        list.push(format!("{otherwise} games in the folder come from an audit with other settings or another version; audit them again, or start over with --fresh"));
    }
    if info.pursuits == 0 {
        list.push("no pursuit was found; `tailchase inspect` shows how the files were understood".to_string());
    }
    list
}
