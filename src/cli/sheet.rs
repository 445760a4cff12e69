//! `tailchase sheet`: one pursuit, its account and its sentence.

use super::print::print;
use super::{CliError, Outcome};
use crate::pipeline::each_game_in_brief;
use crate::rating::own_yd;
use crate::report::sheet;
use crate::store::{BriefRow, FrameRow, PursuitRow, Row, game_folder, read_audit_info, read_row, read_table};
use clap::Args;
use std::path::{Path, PathBuf};

/// Explain one pursuit: the account of its yards, and one plain sentence
///
/// Without a choice: the pursuit that cost most by the defender's own doing. With one: the costliest of those that fit.
#[derive(Debug, Args)]
#[command(
    after_long_help = "Examples:\n  tailchase sheet reports/game\n  tailchase sheet reports/game --game 2031-04 --play 17 --defender 52"
)]
pub struct SheetArgs {
    /// Folder of an audit
    #[arg(value_name = "OUT")]
    pub out: PathBuf,
    #[arg(long, value_name = "GAME")]
    pub game: Option<String>,
    #[arg(long, value_name = "PLAY")]
    pub play: Option<String>,
    /// Id or name of the defender
    #[arg(long, value_name = "PLAYER")]
    pub defender: Option<String>,
    /// Number of the pursuit within its play
    #[arg(long, value_name = "N")]
    pub pursuit: Option<i64>,
}

impl SheetArgs {
    fn takes(&self, row: &BriefRow) -> bool {
        let same = |name: &str, want: &str| name.trim().to_lowercase() == want.trim().to_lowercase();
        let defender = |want: &String| *want == row.defender || row.defender_name.as_deref().is_some_and(|name| same(name, want));
        self.game.as_ref().is_none_or(|game| *game == row.game)
            && self.play.as_ref().is_none_or(|play| *play == row.play)
            && self.defender.as_ref().is_none_or(defender)
            && self.pursuit.is_none_or(|number| number == row.pursuit)
    }

    fn words(&self) -> String {
        let number = self.pursuit.map(|n| n.to_string());
        let parts = [("game", &self.game), ("play", &self.play), ("defender", &self.defender), ("pursuit", &number)];
        let said: Vec<String> = parts.iter().filter_map(|(name, value)| value.as_ref().map(|v| format!("{name} {v}"))).collect();
        if said.is_empty() { "any kind".to_string() } else { said.join(", ") }
    }
}

pub fn run(typed: &SheetArgs) -> Result<Outcome, CliError> {
    let info = read_audit_info(&typed.out)?;
    let Some(row) = costliest(typed)? else {
        let advice = format!("`tailchase clips {}` lists pursuits", typed.out.display());
        return Err(CliError::NoPursuit { path: typed.out.clone(), wanted: typed.words(), advice });
    };
    print(&sheet(&row, &frames_of(&typed.out, &row)?, &info.settings.field()))?;
    Ok(Outcome::Clean)
}

/// The pursuit with most own yards; a charged one before one that is only listed, the first in file order among equals.
fn costliest(typed: &SheetArgs) -> Result<Option<PursuitRow>, CliError> {
    let cost = |row: &BriefRow| (row.charged, own_yd(row).unwrap_or(f64::NEG_INFINITY));
    let costs_more = |row: &BriefRow, best: &BriefRow| {
        let ((charged, yards), (best_charged, best_yards)) = (cost(row), cost(best));
        charged.cmp(&best_charged).then(yards.total_cmp(&best_yards)).is_gt()
    };
    let first_of = |best: Option<(usize, BriefRow)>, row: (usize, BriefRow)| match best {
        Some(best) if !costs_more(&row.1, &best.1) => Some(best),
        _ => Some(row),
    };
    // Of each game the costliest with its row number, so that only one game is then read with all of its columns.
    let of_game = |rows: Vec<BriefRow>| rows.into_iter().enumerate().filter(|(_, row)| typed.takes(row)).fold(None, first_of);
    let mut best = None;
    each_game_in_brief(&typed.out, typed.game.as_deref(), of_game, |found| {
        best = found.into_iter().fold(best.take(), first_of);
        Ok(())
    })?;
    let Some((place, row)) = best else { return Ok(None) };
    Ok(read_row(&game_folder(&typed.out, PursuitRow::TABLE, &row.game), place)?)
}

/// The pursuit's frames, where the audit kept them.
fn frames_of(out: &Path, row: &PursuitRow) -> Result<Vec<FrameRow>, CliError> {
    let path = game_folder(out, FrameRow::TABLE, &row.game);
    if !path.is_file() {
        return Ok(Vec::new());
    }
    let mut frames: Vec<FrameRow> = read_table(&path)?;
    frames.retain(|f| f.play == row.play && f.pursuit == row.pursuit);
    Ok(frames)
}
