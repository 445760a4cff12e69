//! A season's pursuits in brief: a few games are read side by side and handed over in order, so that ten seasons need no
//! more memory than one.

use crate::store::{BriefRow, Row, StoreError, game_files, game_folder, read_table};
use rayon::prelude::*;
use std::path::{Path, PathBuf};

/// Games read at a time for each thread.
const GAMES_AHEAD: usize = 2;

/// Hands over what `of` makes of each game's pursuits, in order of folder name; `of` runs on any thread.
///
/// `game`: that game alone, nothing when the folder does not hold it.
///
/// # Errors
/// When a table cannot be read, or the first that `take` gives back.
pub fn each_game_in_brief<T: Send>(
    out: &Path,
    game: Option<&str>,
    of: impl Fn(Vec<BriefRow>) -> T + Sync,
    mut take: impl FnMut(T) -> Result<(), StoreError>,
) -> Result<(), StoreError> {
    let files: Vec<PathBuf> = match game {
        Some(game) => [game_folder(out, BriefRow::TABLE, game)].into_iter().filter(|path| path.is_file()).collect(),
        None => game_files(out, BriefRow::TABLE)?,
    };
    for ahead in files.chunks(GAMES_AHEAD * rayon::current_num_threads()) {
        let read: Vec<Result<T, StoreError>> = ahead.par_iter().map(|path| read_table(path).map(&of)).collect();
        for part in read {
            take(part?)?;
        }
    }
    Ok(())
}
