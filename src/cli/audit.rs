//! `tailchase audit`: the whole job.

use super::outcome::worries;
use super::print::{note, print, tell_set_aside, tell_without_side};
use super::progress::Bar;
use super::typed::{Common, FormatWord, InputArgs};
use super::{CliError, Outcome, needs};
use crate::pipeline::{AuditSummary, run_audit};
use crate::report::players_table;
use crate::store::RowAccount;
use clap::{Args, ValueEnum};
use std::num::NonZeroUsize;
use std::path::PathBuf;

/// Audit tracking files: find carries and pursuits, measure them, rank the players, write the report
///
/// Writes tables (Parquet, CSV) and a page (report/index.html) into the folder given by --out, and prints the ranking.
/// Games that the folder holds already are not done again when their files, the settings and the program are unchanged, so
/// an interrupted season goes on where it stopped. Games of earlier runs that are not among the files stay in the folder
/// and in the ranking; --fresh leaves only the games of this run.
#[derive(Debug, Args)]
#[command(after_long_help = "\
Examples:
  tailchase audit game.csv --out reports/game
  tailchase audit 'season/*.parquet' --players players.csv --out reports/season
  tailchase audit match.csv --field 105x68m --out reports/match")]
pub struct AuditArgs {
    #[command(flatten)]
    pub input: InputArgs,
    /// Folder for the results: new, empty, or an earlier audit
    #[arg(long, value_name = "DIR")]
    pub out: PathBuf,
    /// Which pursuits get their frames written
    #[arg(long, value_enum, default_value_t)]
    pub frames: FramesWord,
    /// Start over: do every game again, and drop games that are not among the files
    #[arg(long)]
    pub fresh: bool,
    /// Audit again under eight other settings (top speed, drag, their doubt, reach) and say how far each rank moves;
    /// takes nine times as long
    #[arg(long)]
    pub sensitivity: bool,
    /// Threads to work with [default: all cores]; the results are the same for any number
    #[arg(long, value_name = "N")]
    pub threads: Option<NonZeroUsize>,
    /// How the ranking is printed
    #[arg(long, value_enum, default_value_t)]
    pub format: FormatWord,
}

/// Which pursuits get a frames table.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, ValueEnum)]
pub enum FramesWord {
    /// No frames; the page then draws no pursuit
    None,
    /// Each player's most telling pursuit of each game
    #[default]
    Told,
    /// Every pursuit; a season takes much room
    All,
}

pub fn run(typed: &AuditArgs, common: &Common) -> Result<Outcome, CliError> {
    let request = needs::audit_request(typed)?;
    let summary = run_audit(&request, &Bar::new(common.quiet))?;
    print(&players_table(&summary.players, typed.format.into()))?;
    if typed.format == FormatWord::Table {
        print(&format!("\nreport: {}\n", summary.page.display()))?;
    }
    let worries = worries(&summary.info);
    tell(&summary, &worries, common.quiet);
    Ok(if worries.is_empty() { Outcome::Clean } else { Outcome::NeedsEyes })
}

fn tell(summary: &AuditSummary, worries: &[String], quiet: bool) {
    let info = &summary.info;
    note(
        quiet,
        &format!("games: {} audited, {} kept from before, {} in the folder", summary.games_done, summary.games_kept, info.games.len()),
    );
    note(quiet, &format!("found: {} plays, {} carries, {} pursuits", info.plays, info.carries, info.pursuits));
    note(quiet, &row_line(&info.rows));
    if let Some(share) = info.beyond_model_share {
        note(quiet, &format!("check: in {:.1} % of running frames a player out-does his motion model", 100.0 * share));
    }
    tell_set_aside(summary.broken_accounts, quiet);
    tell_without_side(summary.without_side, quiet);
    for worry in worries {
        note(quiet, &format!("needs eyes: {worry}"));
    }
}

/// `rows: 1000 read = 990 used + 10 set aside (7 exact repeat of another row, 3 missing coordinate)`.
fn row_line(rows: &RowAccount) -> String {
    let reasons: Vec<String> = rows.set_aside.iter().map(|(reason, count)| format!("{count} {reason}")).collect();
    let reasons = if reasons.is_empty() { String::new() } else { format!(" ({})", reasons.join(", ")) };
    format!("rows: {} read = {} used + {} set aside{reasons}", rows.read, rows.used, rows.set_aside_total())
}
