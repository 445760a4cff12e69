//! `tailchase demo`: invented games with their truth.

use super::print::note;
use super::progress::Bar;
use super::typed::Common;
use super::{CliError, Outcome};
use crate::demo::DemoOptions;
use crate::pipeline::{DemoFormat, DemoRequest, write_demo};
use clap::{Args, ValueEnum};
use std::num::NonZeroUsize;
use std::path::PathBuf;

/// Write invented games with their truth, to try the program on
///
/// Full line-ups of nobody: runs, catches and returns; defenders with characters (sound, runs at the man, too deep, too flat,
/// late, slow); tags with noise. The truth says who was given which character and who carried when. The same seed gives the
/// same files.
#[derive(Debug, Args)]
#[command(after_long_help = "Example:\n  tailchase demo invented --games 3\n  tailchase audit invented --out reports/invented")]
pub struct DemoArgs {
    /// Folder for the files
    #[arg(value_name = "DIR")]
    pub dir: PathBuf,
    /// Number of games
    #[arg(long, default_value_t = DemoOptions::default().games)]
    pub games: usize,
    /// Plays in each game
    #[arg(long, default_value_t = DemoOptions::default().plays_per_game)]
    pub plays: usize,
    /// Frames a second
    #[arg(long, value_name = "HZ", default_value_t = DemoOptions::default().rate_hz)]
    pub rate: f64,
    /// Noise of each coordinate, yards (standard deviation)
    #[arg(long, value_name = "YARDS", default_value_t = DemoOptions::default().noise_yd)]
    pub noise: f64,
    #[arg(long, default_value_t = DemoOptions::default().seed)]
    pub seed: u64,
    /// Leave out the event texts, so that carries must be told from the ball
    #[arg(long)]
    pub no_events: bool,
    /// Add a column that names the carrier
    #[arg(long)]
    pub carrier_column: bool,
    /// Add a column that says which way the side with the ball attacks
    #[arg(long)]
    pub direction_column: bool,
    /// Threads to work with [default: all cores]; the results are the same for any number
    #[arg(long, value_name = "N")]
    pub threads: Option<NonZeroUsize>,
    #[arg(long, value_enum, default_value_t)]
    pub format: FileWord,
}

/// How the tracking files are written.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, ValueEnum)]
pub enum FileWord {
    #[default]
    Csv,
    Parquet,
}

pub fn run(typed: &DemoArgs, common: &Common) -> Result<Outcome, CliError> {
    let threads = typed.threads.or_else(|| std::thread::available_parallelism().ok());
    let options = DemoOptions {
        games: typed.games,
        plays_per_game: typed.plays,
        rate_hz: typed.rate,
        noise_yd: typed.noise,
        seed: typed.seed,
        events: !typed.no_events,
        carrier_column: typed.carrier_column,
        direction_column: typed.direction_column,
        threads: threads.map_or(1, NonZeroUsize::get),
    };
    let format = match typed.format {
        FileWord::Csv => DemoFormat::Csv,
        FileWord::Parquet => DemoFormat::Parquet,
    };
    let written = write_demo(&DemoRequest { options, format, out: typed.dir.clone() }, &Bar::new(common.quiet))?;
    note(common.quiet, &format!("{} games in {}", written.games, typed.dir.display()));
    Ok(Outcome::Clean)
}
