//! `tailchase scout`: the defences compared; one of them looked at closely.

use super::print::{print, tell_set_aside, tell_without_side};
use super::rank::Choice;
use super::typed::{Common, FormatWord};
use super::{CliError, Outcome, read_settings};
use crate::rating::{SideSplit, compare_sides, rank};
use crate::report::grid::{Align, Cell, Grid, aligned, csv_text, json_text};
use crate::report::text::number;
use crate::report::{players_table, teams_table};
use crate::store::read_audit_info;
use clap::Args;
use std::path::PathBuf;

/// Compare the defences of an audit, or look closely at one
///
/// Without --side: every side's own yards per chance under each heading. With --side: its players in rank order, and from
/// where and at which positions it gives up ground.
#[derive(Debug, Args)]
#[command(after_long_help = "Example:\n  tailchase scout reports/season --side HOME")]
pub struct ScoutArgs {
    /// Folder of an audit
    #[arg(value_name = "OUT")]
    pub out: PathBuf,
    /// The club or home/away label to look at
    #[arg(long, value_name = "SIDE")]
    pub side: Option<String>,
    /// Print the side's splits only, for CSV or JSON
    #[arg(long, requires = "side")]
    pub splits: bool,
    /// TOML file of settings; only its rating part counts here
    #[arg(long, value_name = "FILE")]
    pub settings: Option<PathBuf>,
    #[arg(long, value_enum, default_value_t)]
    pub format: FormatWord,
}

pub fn run(typed: &ScoutArgs, common: &Common) -> Result<Outcome, CliError> {
    let info = read_audit_info(&typed.out)?;
    let settings = typed.settings.as_deref().map(read_settings).transpose()?.unwrap_or(info.settings).rating;
    let season = Choice::default().season(&typed.out)?;
    let sides = compare_sides(&season, &settings);
    tell_without_side(sides.rows_without_side, common.quiet);
    tell_set_aside(season.set_aside(), common.quiet);
    let Some(wanted) = &typed.side else {
        print(&teams_table(&sides.teams, typed.format.into()))?;
        return Ok(Outcome::Clean);
    };
    let is_wanted = |side: &str| side.trim().to_lowercase() == wanted.trim().to_lowercase();
    if !sides.teams.iter().any(|team| is_wanted(&team.side)) {
        let found = sides.teams.iter().map(|team| team.side.as_str()).collect::<Vec<_>>().join(", ");
        return Err(CliError::NoSide { path: typed.out.clone(), wanted: wanted.clone(), found });
    }
    let splits: Vec<&SideSplit> = sides.splits.iter().filter(|split| is_wanted(&split.side)).collect();
    if typed.splits {
        print(&splits_table(&splits, typed.format))?;
        return Ok(Outcome::Clean);
    }
    // Ranked among all, so that a rank means the same here as in the whole ranking.
    let mut players = rank(&season, &settings).players;
    players.retain(|player| player.side.as_deref().is_some_and(is_wanted));
    print(&players_table(&players, typed.format.into()))?;
    if typed.format == FormatWord::Table {
        print(&format!("\n{}", splits_table(&splits, typed.format)))?;
    }
    Ok(Outcome::Clean)
}

fn splits_table(splits: &[&SideSplit], format: FormatWord) -> String {
    const NAMES: [&str; 7] = ["side", "by", "part", "chances", "own_yd", "own_low_yd", "own_high_yd"];
    let cells = |s: &SideSplit| {
        let yards = |v: Option<f64>| v.map_or(Cell::Missing, Cell::Number);
        let text = |t: &str| Cell::Text(t.to_string());
        let chances = i64::try_from(s.chances).map_or(Cell::Missing, Cell::Whole);
        vec![text(&s.side), text(s.by), text(s.part), chances, yards(s.own_yd), yards(s.own_low_yd), yards(s.own_high_yd)]
    };
    let grid = || Grid { names: NAMES.to_vec(), rows: splits.iter().map(|s| cells(s)).collect() };
    match format {
        FormatWord::Csv => csv_text(&grid()),
        FormatWord::Json => json_text(&grid()),
        FormatWord::Table => {
            let heads = [
                ("by", Align::Left),
                ("part", Align::Left),
                ("chances", Align::Right),
                ("own yd", Align::Right),
                ("low", Align::Right),
                ("high", Align::Right),
            ];
            let line = |s: &&SideSplit| {
                let yards = [s.own_yd, s.own_low_yd, s.own_high_yd].map(|v| number(v, 2));
                [vec![s.by.to_string(), s.part.to_string(), s.chances.to_string()], yards.to_vec()].concat()
            };
            aligned(&heads, &splits.iter().map(line).collect::<Vec<_>>())
        }
    }
}
