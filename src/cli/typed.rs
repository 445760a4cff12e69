//! What can be typed: commands and the options that several of them share.

use super::{audit, clips, demo, inspect, rank, scout, settings, sheet};
use crate::report::Format;
use clap::{Args, Parser, Subcommand, ValueEnum};
use std::path::PathBuf;

/// After-the-game audit of pursuit angles in tracking data.
///
/// Reads who was where in every frame, finds the ball carriers and everyone who went after them, and says for each pursuit
/// how many yards were given up and by what: breaking late, too flat a line, too deep a line, pace, a block, or the
/// carrier's own move.
#[derive(Debug, Parser)]
#[command(name = "tailchase", version, after_help = EXAMPLES, after_long_help = EXAMPLES)]
pub struct Typed {
    #[command(subcommand)]
    pub command: Command,
    #[command(flatten)]
    pub common: Common,
}

const EXAMPLES: &str = "\
Examples:
  tailchase inspect season/*.csv                       how the files are understood
  tailchase audit season/*.csv --out reports/season    the whole job
  tailchase sheet reports/season                       the costliest pursuit, explained

Exit codes: 0 clean, 1 finished but something needs your eyes, 2 failed.";

#[derive(Debug, Subcommand)]
pub enum Command {
    Demo(demo::DemoArgs),
    Inspect(inspect::InspectArgs),
    Audit(audit::AuditArgs),
    Rank(rank::RankArgs),
    Scout(scout::ScoutArgs),
    Clips(clips::ClipsArgs),
    Sheet(sheet::SheetArgs),
    Settings(settings::SettingsArgs),
}

/// Options of every command.
#[derive(Clone, Copy, Debug, Default, Args)]
pub struct Common {
    /// Print the result only: no progress, no notes
    #[arg(long, global = true)]
    pub quiet: bool,
}

/// How a table is printed.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, ValueEnum)]
pub enum FormatWord {
    /// Aligned columns to read, rounded
    #[default]
    Table,
    /// Every column, all digits, for a spreadsheet
    Csv,
    /// Every column, all digits, for a program
    Json,
}

impl From<FormatWord> for Format {
    fn from(word: FormatWord) -> Format {
        match word {
            FormatWord::Table => Format::Table,
            FormatWord::Csv => Format::Csv,
            FormatWord::Json => Format::Json,
        }
    }
}

/// Which files are read, and how they are to be understood; shared by `inspect` and `audit`.
#[derive(Clone, Debug, Args)]
pub struct InputArgs {
    /// Tracking files, folders or patterns: CSV, TSV (also .gz, .zst), Parquet
    #[arg(required = true, value_name = "FILES")]
    pub files: Vec<PathBuf>,
    /// TOML file that says what the columns, units and event texts mean (`inspect` prints one to edit)
    #[arg(long, value_name = "FILE")]
    pub mapping: Option<PathBuf>,
    /// Table of plays: carrier, kind of play, direction
    #[arg(long, value_name = "FILE")]
    pub plays: Option<PathBuf>,
    /// Table of players: name, side, position
    #[arg(long, value_name = "FILE")]
    pub players: Option<PathBuf>,
    /// Table of film: the second of the video at which each play starts
    #[arg(long, value_name = "FILE")]
    pub film: Option<PathBuf>,
    /// The field: american, canadian, or LENGTHxWIDTH in yards (100x70) or metres (105x68m)
    #[arg(long, value_name = "FIELD", value_parser = super::field_size::parse_field)]
    pub field: Option<crate::model::Field>,
    /// TOML file of settings (`tailchase settings` prints them all)
    #[arg(long, value_name = "FILE")]
    pub settings: Option<PathBuf>,
}
