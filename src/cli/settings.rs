//! `tailchase settings`: every setting with unit, default and source.

use super::print::print;
use super::{CliError, Outcome, read_settings, settings_toml};
use clap::Args;
use std::path::PathBuf;

/// Print every setting with its unit, default and source, as TOML
///
/// Write them to a file, change what you like, and give the file back with --settings. A setting that you leave out keeps
/// its default.
#[derive(Debug, Args)]
#[command(
    after_long_help = "Example:\n  tailchase settings > mine.toml\n  tailchase audit game.csv --out reports/game --settings mine.toml"
)]
pub struct SettingsArgs {
    /// Print the settings as this file leaves them
    #[arg(long, value_name = "FILE")]
    pub settings: Option<PathBuf>,
}

pub fn run(typed: &SettingsArgs) -> Result<Outcome, CliError> {
    let settings = typed.settings.as_deref().map(read_settings).transpose()?.unwrap_or_default();
    print(&settings_toml(&settings)?)?;
    Ok(Outcome::Clean)
}
