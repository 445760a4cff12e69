//! Marks of games done: `OUT/done/game=<id>.json`, written after the game's tables, so that an interrupted
//! audit goes on with the games that have none, and `audit.json` can be put together from all of them.

use super::folders::{entries, folder_name, game_folder, name_of};
use super::{FindingEntry, RowAccount, StoreError, write_text};
use serde::{Deserialize, Serialize, Serializer};
use std::collections::BTreeMap;
use std::fs;
use std::path::{Path, PathBuf};
use xxhash_rust::xxh3::xxh3_128;

/// The folder of the marks.
pub const DONE: &str = "done";

/// What a finished game leaves behind beside its tables.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct GameMark {
    pub game: String,
    /// [`fingerprint`] of everything but the rows that the results depend on.
    pub made_with: String,
    /// Content hashes of the input files that the game's rows came from, sorted.
    pub inputs: Vec<String>,
    pub rows: RowAccount,
    pub findings: Vec<FindingEntry>,
    pub plays: u64,
    pub carries: u64,
    pub pursuits: u64,
    /// Frames above 3 yd/s, and those of them in which a player out-does his own model.
    pub model_frames: u64,
    pub beyond_model_frames: u64,
    pub noise: Option<NoiseEntry>,
}

/// The measurement noise and jerk density that the smoother worked with.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct NoiseEntry {
    #[serde(serialize_with = "twelve_digits")]
    pub jerk_density_yd2ps5: f64,
    #[serde(serialize_with = "twelve_digits")]
    pub sigma_yd: f64,
}

/// JSON's reader gives back up to 15 digits exactly, more of them only nearly; a number that is read and written again
/// must not creep, or an audit that was resumed would differ from one that was not.
fn twelve_digits<S: Serializer>(value: &f64, out: S) -> Result<S::Ok, S::Error> {
    let rounded: f64 = format!("{value:.11e}").parse().unwrap_or(*value);
    out.serialize_f64(rounded)
}

impl GameMark {
    /// Whether the game need not be done again: same program, settings and options, same input files.
    pub fn still_holds(&self, made_with: &str, inputs: &[String]) -> bool {
        self.made_with == made_with && self.inputs == inputs
    }
}

/// Hash of the texts that a result depends on beside its rows: program version, settings, mapping, options.
///
/// ```
/// use tailchase::store::fingerprint;
/// assert_ne!(fingerprint(&["ab", "c"]), fingerprint(&["a", "bc"]));
/// ```
pub fn fingerprint(parts: &[&str]) -> String {
    let mut joined = Vec::new();
    for part in parts {
        joined.extend_from_slice(&(part.len() as u64).to_le_bytes());
        joined.extend_from_slice(part.as_bytes());
    }
    format!("{:032x}", xxh3_128(&joined))
}

/// Where a game's mark stands.
pub fn mark_path(out_dir: &Path, game: &str) -> PathBuf {
    out_dir.join(DONE).join(format!("{}.json", folder_name(game)))
}

/// Writes a game's mark; do so after its tables.
///
/// # Errors
/// When the file cannot be written.
pub fn write_mark(out_dir: &Path, mark: &GameMark) -> Result<(), StoreError> {
    let path = mark_path(out_dir, &mark.game);
    let text = serde_json::to_string_pretty(mark).map_err(|source| StoreError::Json { path: path.clone(), source })?;
    write_text(&path, &(text + "\n"))
}

/// The marks of all games whose tables are there, by game id. A mark that cannot be read, or whose tables are gone,
/// counts as absent: the game is then done again.
///
/// # Errors
/// When the folder cannot be listed or a mark not opened.
pub fn read_marks(out_dir: &Path) -> Result<BTreeMap<String, GameMark>, StoreError> {
    let mut marks = BTreeMap::new();
    for path in entries(&out_dir.join(DONE))? {
        if !name_of(&path).is_some_and(|n| n.starts_with("game=") && n.ends_with(".json")) {
            continue;
        }
        let text = fs::read(&path).map_err(StoreError::io(&path, "read the file"))?;
        let Ok(mark) = serde_json::from_slice::<GameMark>(&text) else { continue };
        let whole = ["pursuits", "carries"].iter().all(|table| game_folder(out_dir, table, &mark.game).is_file());
        if whole && path == mark_path(out_dir, &mark.game) {
            marks.insert(mark.game.clone(), mark);
        }
    }
    Ok(marks)
}
