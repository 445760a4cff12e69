//! `tailchase rank`: the ranking again, of all or of a choice.

use super::print::{note, print, tell_set_aside};
use super::typed::{Common, FormatWord};
use super::{CliError, Outcome, read_settings};
use crate::pipeline::each_game_in_brief;
use crate::rating::{Season, rank};
use crate::report::players_table;
use crate::store::{BriefRow, read_audit_info};
use clap::Args;
use std::path::{Path, PathBuf};

/// Rank the players of an audit
///
/// By own yards (late break, flat line, deep line, pace) per chance: adjusted for the situation and drawn towards the middle
/// where a player has few chances. Ranks come with the range in which they may lie. Narrow the pursuits by side, position,
/// game or kind of play; the ranking is then made from those alone.
#[derive(Debug, Args)]
#[command(after_long_help = "Example:\n  tailchase rank reports/season --position CB --format csv")]
pub struct RankArgs {
    /// Folder of an audit
    #[arg(value_name = "OUT")]
    pub out: PathBuf,
    #[command(flatten)]
    pub choice: Choice,
    /// TOML file of settings; only its rating part counts here
    #[arg(long, value_name = "FILE")]
    pub settings: Option<PathBuf>,
    #[arg(long, value_enum, default_value_t)]
    pub format: FormatWord,
}

/// Which pursuits are looked at; texts are compared whatever the case.
#[derive(Clone, Debug, Default, Args)]
pub struct Choice {
    /// Only defenders of this club or home/away label
    #[arg(long, value_name = "SIDE")]
    pub side: Option<String>,
    /// Only defenders at this position, as written in the files
    #[arg(long, value_name = "POSITION")]
    pub position: Option<String>,
    /// Only this game
    #[arg(long, value_name = "GAME")]
    pub game: Option<String>,
    /// Only this kind of play, as written in the files
    #[arg(long, value_name = "KIND")]
    pub kind: Option<String>,
}

impl Choice {
    fn takes(&self, row: &BriefRow) -> bool {
        let fits = |want: &Option<String>, found: Option<&str>| {
            want.as_deref().is_none_or(|want| found.is_some_and(|found| found.trim().to_lowercase() == want.trim().to_lowercase()))
        };
        fits(&self.side, row.defender_side.as_deref())
            && fits(&self.position, row.position.as_deref())
            && fits(&self.kind, row.play_kind.as_deref())
            && self.game.as_ref().is_none_or(|game| *game == row.game)
    }

    /// What `of` makes of the chosen pursuits of an audit, game by game; `of` runs on any thread.
    ///
    /// # Errors
    /// When a table cannot be read.
    pub fn each_game<T: Send>(&self, out: &Path, of: impl Fn(&[BriefRow]) -> T + Sync, mut take: impl FnMut(T)) -> Result<(), CliError> {
        let of_chosen = |mut rows: Vec<BriefRow>| {
            rows.retain(|row| self.takes(row));
            of(&rows)
        };
        Ok(each_game_in_brief(out, self.game.as_deref(), of_chosen, |game| {
            take(game);
            Ok(())
        })?)
    }

    /// The chosen pursuits of an audit as a season to rank.
    ///
    /// # Errors
    /// When a table cannot be read.
    pub fn season(&self, out: &Path) -> Result<Season, CliError> {
        let mut season = Season::default();
        let of_game = |rows: &[BriefRow]| {
            let mut game = Season::default();
            game.add(rows);
            game
        };
        self.each_game(out, of_game, |game| season.merge(game))?;
        Ok(season)
    }
}

pub fn run(typed: &RankArgs, common: &Common) -> Result<Outcome, CliError> {
    let info = read_audit_info(&typed.out)?;
    let settings = typed.settings.as_deref().map(read_settings).transpose()?.unwrap_or(info.settings);
    let season = typed.choice.season(&typed.out)?;
    print(&players_table(&rank(&season, &settings.rating).players, typed.format.into()))?;
    tell_set_aside(season.set_aside(), common.quiet);
    if season.is_empty() {
        note(common.quiet, "nobody in this audit fits that choice");
    }
    Ok(Outcome::Clean)
}
