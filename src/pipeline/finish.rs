//! The end of a run: rankings, clips, page, accounts of rows and findings, from the tables on disk.

use super::error::PipelineError;
use super::request::AuditSummary;
use super::told::{most_telling, telling_yd};
use crate::rating::{rank_players, rank_teams};
use crate::report::{ClipFilter, DrawnPursuit, FindingLine, InputFile, Provenance, clips, clips_table, page};
use crate::store::{
    AuditInfo, CarryRow, FrameRow, GameMark, PlayerRow, PursuitRow, Row, RunInfo, SetAsideRow, TeamRow, each_game, game_folder,
    read_audit_info, read_table, table_csv, write_audit_info, write_table, write_text,
};
use std::collections::BTreeMap;
use std::path::Path;

/// Players drawn on the page at most: the first in the ranking.
const DRAWN: usize = 60;
/// Carries shown on the page only where there are few games.
const CARRIES_SHOWN_GAMES: usize = 4;

pub fn finish(
    out: &Path,
    run: RunInfo,
    marks: &BTreeMap<String, GameMark>,
    loose: &[SetAsideRow],
    games_done: usize,
    games_kept: usize,
) -> Result<AuditSummary, PipelineError> {
    let settings = run.settings.clone();
    let earlier = read_audit_info(out).ok();
    let info = AuditInfo::sum_up(run, marks, earlier.as_ref());

    let mut rows: Vec<PursuitRow> = Vec::new();
    each_game(out, |mut game: Vec<PursuitRow>| rows.append(&mut game))?;
    let players = rank_players(&rows, &settings.rating);
    let teams = rank_teams(&rows, &settings.rating);
    write_table(&out.join("players.parquet"), &players)?;
    write_text(&out.join("players.csv"), &table_csv::<PlayerRow>(&players))?;
    write_table(&out.join("teams.parquet"), &teams)?;
    write_text(&out.join("teams.csv"), &table_csv::<TeamRow>(&teams))?;
    write_text(&out.join("clips.csv"), &clips_table(&clips(&rows, &ClipFilter::default()), crate::report::Format::Csv))?;

    let drawn = drawn(out, &rows, &players)?;
    let drawn: Vec<DrawnPursuit> = drawn.iter().map(|(row, frames)| DrawnPursuit { row, frames }).collect();
    let mut carries: Vec<CarryRow> = Vec::new();
    if info.games.len() <= CARRIES_SHOWN_GAMES {
        each_game(out, |mut game: Vec<CarryRow>| carries.append(&mut game))?;
    }
    let path = out.join("report").join("index.html");
    write_text(&path, &page(&provenance(&info), &players, &teams, &drawn, &carries, &settings))?;

    let mut set_aside = loose.to_vec();
    each_game(out, |mut game: Vec<SetAsideRow>| set_aside.append(&mut game))?;
    set_aside.sort_by(|a, b| (&a.file, a.row).cmp(&(&b.file, b.row)));
    write_text(&out.join("set_aside.csv"), &table_csv::<SetAsideRow>(&set_aside))?;
    write_text(&out.join("findings.csv"), &findings_csv(&info))?;
    // Last, so that it stands only over a whole set of results.
    write_audit_info(out, &info)?;
    Ok(AuditSummary { info, players, teams, page: path, games_done, games_kept })
}

/// Each ranked player's most telling pursuit that has frames, with them.
fn drawn(out: &Path, rows: &[PursuitRow], players: &[PlayerRow]) -> Result<Vec<(PursuitRow, Vec<FrameRow>)>, PipelineError> {
    let shown: BTreeMap<&str, i64> = players.iter().take(DRAWN).map(|p| (&*p.player, p.rank)).collect();
    let wanted = most_telling(rows.iter().enumerate().filter(|(_, r)| shown.contains_key(&*r.defender) && telling_yd(r).is_some()));
    let mut by_game: BTreeMap<&str, Vec<&PursuitRow>> = BTreeMap::new();
    for index in wanted.into_values() {
        by_game.entry(&rows[index].game).or_default().push(&rows[index]);
    }
    let mut found = Vec::new();
    for (game, pursuits) in by_game {
        let path = game_folder(out, FrameRow::TABLE, game);
        if !path.is_file() {
            continue;
        }
        let frames: Vec<FrameRow> = read_table(&path)?;
        for row in pursuits {
            let mine: Vec<FrameRow> = frames.iter().filter(|f| f.play == row.play && f.pursuit == row.pursuit).cloned().collect();
            if !mine.is_empty() {
                found.push((row.clone(), mine));
            }
        }
    }
    found.sort_by_key(|(row, _)| shown.get(&*row.defender).copied());
    Ok(found)
}

fn provenance(info: &AuditInfo) -> Provenance {
    let same = info.settings == crate::model::Settings::default();
    Provenance {
        version: info.version.clone(),
        inputs: info.inputs.iter().map(|i| InputFile { path: i.path.clone(), bytes: i.bytes, hash: i.hash.clone() }).collect(),
        settings_note: if same { "all settings at their defaults" } else { "some settings changed, see audit.json" }.to_owned(),
        rows_read: info.rows.read,
        rows_used: info.rows.used,
        rows_set_aside: info.rows.set_aside_total(),
        games: info.games.len() as u64,
        plays: info.plays,
        carries: info.carries,
        pursuits: info.pursuits,
        findings: info
            .findings
            .iter()
            .map(|f| FindingLine { kind: f.kind.clone(), count: f.count, first_place: f.first_place.clone(), advice: f.advice.clone() })
            .collect(),
        beyond_model_share: info.beyond_model_share,
    }
}

fn findings_csv(info: &AuditInfo) -> String {
    use crate::store::{CsvCell, csv_text};
    let text = |s: &str| CsvCell::Text(s.to_owned());
    let rows: Vec<Vec<CsvCell>> =
        info.findings.iter().map(|f| vec![text(&f.kind), text(&f.count.to_string()), text(&f.first_place), text(&f.advice)]).collect();
    csv_text(&["kind", "count", "first_place", "advice"], &rows)
}
