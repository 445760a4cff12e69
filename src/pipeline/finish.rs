//! The end of a run: rankings, clips, page, accounts of rows and findings, from the tables on disk.

use super::brief::each_game_in_brief;
use super::error::PipelineError;
use super::request::AuditSummary;
use super::told::{MostTelling, Told};
use crate::rating::{Season, rank, rank_teams, write_rank_swing};
use crate::report::{
    ClipFilter, ClipPicker, DrawnPursuit, FindingLine, InputFile, Provenance, clips_csv_header, clips_csv_lines, page, ranking_chart,
};
use crate::store::csv::{csv_header, csv_lines, table_cells, table_header};
use crate::store::{
    AuditInfo, BriefRow, CarryRow, CsvCell, FrameRow, GameMark, PlayerRow, PursuitRow, Row, RunInfo, SetAsideRow, Staged, StoreError,
    TeamRow, csv_text, each_game, game_files, game_folder, read_audit_info, read_row, read_table, table_csv, write_audit_info, write_table,
    write_text,
};
use rayon::prelude::*;
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
    variants: &[Vec<PlayerRow>],
    (games_done, games_kept): (usize, usize),
) -> Result<AuditSummary, PipelineError> {
    let settings = run.settings.clone();
    let earlier = read_audit_info(out).ok();
    let info = AuditInfo::sum_up(run, marks, earlier.as_ref());

    let (season, told) = look_through(out)?;
    let ranking = rank(&season, &settings.rating);
    let mut players = ranking.players;
    write_rank_swing(&mut players, variants);
    let teams = rank_teams(&season, &settings.rating);
    write_table(&out.join("players.parquet"), &players)?;
    write_text(&out.join("players.csv"), &table_csv::<PlayerRow>(&players))?;
    write_table(&out.join("teams.parquet"), &teams)?;
    write_text(&out.join("teams.csv"), &table_csv::<TeamRow>(&teams))?;

    if let Some(picture) = ranking_chart(&players) {
        write_text(&out.join("charts").join("ranking.svg"), &picture)?;
    }
    let drawn = drawn(out, &told, &players)?;
    let drawn: Vec<DrawnPursuit> = drawn.iter().map(|(row, frames)| DrawnPursuit { row, frames }).collect();
    let mut carries: Vec<CarryRow> = Vec::new();
    if info.games.len() <= CARRIES_SHOWN_GAMES {
        each_game(out, |mut game: Vec<CarryRow>| carries.append(&mut game))?;
    }
    let path = out.join("report").join("index.html");
    write_text(&path, &page(&provenance(&info), &players, &teams, &drawn, &carries, &settings))?;

    write_set_aside(out, loose)?;
    write_text(&out.join("findings.csv"), &findings_csv(&info))?;
    // Last, so that it stands only over a whole set of results.
    write_audit_info(out, &info)?;
    let (broken_accounts, without_side) = (season.set_aside(), season.without_side());
    Ok(AuditSummary { info, players, teams, page: path, games_done, games_kept, broken_accounts, without_side })
}

/// Reads all pursuits once, game by game: packs them for the rating, keeps each player's most telling one, writes `clips.csv`
/// (games in order of folder name, within a game the costliest first).
fn look_through(out: &Path) -> Result<(Season, MostTelling), StoreError> {
    let (mut season, mut told) = (Season::default(), MostTelling::default());
    let path = out.join("clips.csv");
    let want = ClipFilter::default();
    let of_game = |rows: Vec<BriefRow>| {
        let mut picker = ClipPicker::new(&want);
        picker.see(&rows);
        let mut game = Season::default();
        game.add(&rows);
        (game, MostTelling::of_game(&rows), clips_csv_lines(&picker.clips()))
    };
    let clips = Staged::write(&path, |file| {
        let mut write = |text: &str| file.write_all(text.as_bytes()).map_err(StoreError::io(&path, "write the file"));
        write(&clips_csv_header())?;
        each_game_in_brief(out, None, of_game, |(game, telling, lines)| {
            season.merge(game);
            told.merge(telling);
            write(&lines)
        })
    })?;
    clips.commit()?;
    Ok((season, told))
}

/// Writes `set_aside.csv`: rows that name no game, then game by game, each by file and row.
fn write_set_aside(out: &Path, loose: &[SetAsideRow]) -> Result<(), StoreError> {
    let path = out.join("set_aside.csv");
    Staged::write(&path, |file| {
        let mut write = |text: &str| file.write_all(text.as_bytes()).map_err(StoreError::io(&path, "write the file"));
        let in_order = |mut rows: Vec<SetAsideRow>| {
            rows.sort_by(|a, b| (&a.file, a.row).cmp(&(&b.file, b.row)));
            csv_lines(&table_cells(&rows))
        };
        write(&csv_header(&table_header::<SetAsideRow>()))?;
        write(&in_order(loose.to_vec()))?;
        for game in game_files(out, SetAsideRow::TABLE)? {
            write(&in_order(read_table(&game)?))?;
        }
        Ok(())
    })?
    .commit()
}

/// The first players' most telling pursuits that have frames, with them. Only the games they come from are read.
fn drawn(out: &Path, told: &MostTelling, players: &[PlayerRow]) -> Result<Vec<(PursuitRow, Vec<FrameRow>)>, PipelineError> {
    let mut by_game: BTreeMap<&str, Vec<(usize, &Told<String>)>> = BTreeMap::new();
    for (place, player) in players.iter().take(DRAWN).enumerate() {
        if let Some(told) = told.of(&player.player) {
            by_game.entry(&told.game).or_default().push((place, told));
        }
    }
    let by_game: Vec<_> = by_game.into_iter().collect();
    let read = |(game, wanted): &(&str, Vec<(usize, &Told<String>)>)| -> Result<Vec<_>, StoreError> {
        let path = game_folder(out, FrameRow::TABLE, game);
        if !path.is_file() {
            return Ok(Vec::new());
        }
        let frames: Vec<FrameRow> = read_table(&path)?;
        let pursuits = game_folder(out, PursuitRow::TABLE, game);
        let mut found = Vec::new();
        for (place, told) in wanted {
            let mine: Vec<FrameRow> = frames.iter().filter(|f| f.play == told.play && f.pursuit == told.pursuit).cloned().collect();
            if let Some(row) = read_row(&pursuits, told.row)?.filter(|_| !mine.is_empty()) {
                found.push((*place, row, mine));
            }
        }
        Ok(found)
    };
    let read = by_game.par_iter().map(read).collect::<Result<Vec<_>, _>>()?;
    let mut found: Vec<_> = read.into_iter().flatten().collect();
    found.sort_by_key(|(place, ..)| *place);
    Ok(found.into_iter().map(|(_, row, frames)| (row, frames)).collect())
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
    let text = |s: &str| CsvCell::Text(s.to_owned());
    let rows: Vec<Vec<CsvCell>> =
        info.findings.iter().map(|f| vec![text(&f.kind), text(&f.count.to_string()), text(&f.first_place), text(&f.advice)]).collect();
    csv_text(&["kind", "count", "first_place", "advice"], &rows)
}
