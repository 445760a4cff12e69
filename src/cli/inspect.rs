//! `tailchase inspect`: how files are understood, without computing.

use super::needs::{Understanding, understanding};
use super::print::{note, print};
use super::typed::{Common, InputArgs};
use super::{CliError, Outcome};
use crate::ingest::inspect;
use clap::Args;

/// Show how tracking files are understood, without computing anything
///
/// Prints which columns were matched, which were guessed and which are missing, units, frame rate and events, and a mapping
/// ready to edit. Give the edited mapping to `audit --mapping`. Ends with exit code 1 when something would stop an audit.
#[derive(Debug, Args)]
#[command(after_long_help = "Example:\n  tailchase inspect week1.csv\n  tailchase inspect week1.csv --mapping-only > mapping.toml")]
pub struct InspectArgs {
    #[command(flatten)]
    pub input: InputArgs,
    /// Print the mapping alone, to be written to a file
    #[arg(long)]
    pub mapping_only: bool,
}

pub fn run(typed: &InspectArgs, common: &Common) -> Result<Outcome, CliError> {
    let Understanding { settings, ingest } = understanding(&typed.input)?;
    let seen = inspect(&typed.input.files, &ingest, &settings)?;
    if typed.mapping_only {
        print(&seen.mapping_toml)?;
        seen.problems.iter().for_each(|problem| note(common.quiet, &format!("needs eyes: {problem}")));
    } else {
        print(&seen.to_text())?;
    }
    Ok(if seen.problems.is_empty() { Outcome::Clean } else { Outcome::NeedsEyes })
}
