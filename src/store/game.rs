//! One game's tables: written together, then its mark; replaced without touching any other game.

use super::folders::{entries, folder_name, game_folder, name_of};
use super::mark::{DONE, GameMark, mark_path, write_mark};
use super::parquet::stage_table;
use super::{CarryRow, FrameRow, PursuitRow, Row, SetAsideRow, Staged, StoreError};
use std::collections::BTreeSet;
use std::fs;
use std::path::Path;

/// The tables kept by game.
pub const GAME_TABLES: [&str; 4] = [PursuitRow::TABLE, CarryRow::TABLE, FrameRow::TABLE, SetAsideRow::TABLE];

/// One game's rows. A table without rows is left out where it is optional (frames, set aside).
#[derive(Clone, Copy, Debug, Default)]
pub struct GameTables<'a> {
    pub pursuits: &'a [PursuitRow],
    pub carries: &'a [CarryRow],
    pub frames: &'a [FrameRow],
    pub set_aside: &'a [SetAsideRow],
}

/// Writes a game's tables and then its mark. All tables are written beside first and renamed in a row, so that a
/// failing write leaves the game as it was; a run killed between two renames leaves a mark that no longer holds.
///
/// # Errors
/// When a file cannot be written or removed.
pub fn write_game(out_dir: &Path, mark: &GameMark, tables: &GameTables) -> Result<(), StoreError> {
    let staged = [
        Some(stage_table(&game_folder(out_dir, PursuitRow::TABLE, &mark.game), tables.pursuits)?),
        Some(stage_table(&game_folder(out_dir, CarryRow::TABLE, &mark.game), tables.carries)?),
        stage_some(out_dir, &mark.game, tables.frames)?,
        stage_some(out_dir, &mark.game, tables.set_aside)?,
    ];
    remove_file(&mark_path(out_dir, &mark.game))?;
    for (table, part) in GAME_TABLES.iter().zip(staged) {
        match part {
            Some(part) => part.commit()?,
            None => remove_folder(&out_dir.join(table).join(folder_name(&mark.game)))?,
        }
    }
    write_mark(out_dir, mark)
}

fn stage_some<R: Row>(out_dir: &Path, game: &str, rows: &[R]) -> Result<Option<Staged>, StoreError> {
    if rows.is_empty() { Ok(None) } else { stage_table(&game_folder(out_dir, R::TABLE, game), rows).map(Some) }
}

/// Removes every game that is not in `keep`, tables and marks: how `--fresh` ends, once the new results stand.
///
/// # Errors
/// When a folder cannot be listed or removed.
pub fn prune_games(out_dir: &Path, keep: &BTreeSet<String>) -> Result<(), StoreError> {
    let kept_names: BTreeSet<String> = keep.iter().map(|game| folder_name(game)).collect();
    let is_stale = |name: &str| name.starts_with("game=") && !kept_names.contains(name);
    for path in entries(&out_dir.join(DONE))? {
        if name_of(&path).and_then(|n| n.strip_suffix(".json")).is_some_and(is_stale) {
            remove_file(&path)?;
        }
    }
    for table in GAME_TABLES {
        for path in entries(&out_dir.join(table))? {
            if name_of(&path).is_some_and(is_stale) {
                remove_folder(&path)?;
            }
        }
    }
    Ok(())
}

pub(crate) fn remove_file(path: &Path) -> Result<(), StoreError> {
    match fs::remove_file(path) {
        Err(error) if error.kind() != std::io::ErrorKind::NotFound => Err(StoreError::io(path, "remove the file")(error)),
        _ => Ok(()),
    }
}

fn remove_folder(path: &Path) -> Result<(), StoreError> {
    match fs::remove_dir_all(path) {
        Err(error) if error.kind() != std::io::ErrorKind::NotFound => Err(StoreError::io(path, "remove the folder")(error)),
        _ => Ok(()),
    }
}
