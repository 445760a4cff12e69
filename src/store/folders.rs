//! Folder names: one folder a game and table, ids only in percent-encoding.

use super::StoreError;
use std::fs;
use std::path::{Path, PathBuf};
use xxhash_rust::xxh3::xxh3_64;

/// File name of a game's share of a table.
pub const PART_FILE: &str = "part.parquet";
/// File systems allow 255 bytes a name; this leaves room for `game=`, `.json` and `.part`.
const LONGEST_NAME: usize = 200;
const KEPT_OF_LONG_NAME: usize = 120;
/// Stands before the hash in a shortened name; an encoded id never has `%` before anything but two digits.
const SHORTENED: &str = "%~";
/// The empty id; a lone `%` cannot come from another one.
const EMPTY: &str = "%";

/// `OUT/<table>/game=<encoded id>/part.parquet`.
///
/// ```
/// use std::path::Path;
/// use tailchase::store::game_folder;
/// assert_eq!(game_folder(Path::new("out"), "pursuits", "2031/a"), Path::new("out/pursuits/game=2031%2Fa/part.parquet"));
/// ```
pub fn game_folder(out_dir: &Path, table: &str, game: &str) -> PathBuf {
    out_dir.join(table).join(folder_name(game)).join(PART_FILE)
}

/// `game=<encoded id>`.
pub fn folder_name(game: &str) -> String {
    format!("game={}", encode_id(game))
}

/// An id as part of a file name: everything outside `[A-Za-z0-9_.-]` as `%XX`, byte by byte in UTF-8, and a dot at
/// the start or end too, so that no name is `.`, `..`, hidden or changed by a file system that drops a last dot.
/// An id too long for a file name is cut and told apart by a hash; only such a name cannot be decoded.
///
/// ```
/// use tailchase::store::{decode_id, encode_id};
/// assert_eq!(encode_id("../é"), "%2E.%2F%C3%A9");
/// assert_eq!(decode_id("%2E.%2F%C3%A9").as_deref(), Some("../é"));
/// ```
pub fn encode_id(id: &str) -> String {
    if id.is_empty() {
        return EMPTY.to_string();
    }
    let last = id.len() - 1;
    let mut name = String::with_capacity(id.len());
    for (i, byte) in id.bytes().enumerate() {
        let dot_at_edge = byte == b'.' && (i == 0 || i == last);
        if (byte.is_ascii_alphanumeric() || matches!(byte, b'_' | b'.' | b'-')) && !dot_at_edge {
            name.push(char::from(byte));
        } else {
            name.push_str(&format!("%{byte:02X}"));
        }
    }
    if name.len() <= LONGEST_NAME {
        return name;
    }
    let mut kept = KEPT_OF_LONG_NAME;
    while name[..kept].ends_with('%') || name[..kept - 1].ends_with('%') {
        kept -= 1;
    }
    format!("{}{SHORTENED}{:016x}", &name[..kept], xxh3_64(id.as_bytes()))
}

/// The id behind an encoded name; `None` for a shortened name or one that [`encode_id`] never writes.
pub fn decode_id(name: &str) -> Option<String> {
    if name == EMPTY {
        return Some(String::new());
    }
    let mut bytes = Vec::with_capacity(name.len());
    let mut rest = name.bytes();
    while let Some(byte) = rest.next() {
        if byte != b'%' {
            bytes.push(byte);
            continue;
        }
        let high = char::from(rest.next()?).to_digit(16)?;
        let low = char::from(rest.next()?).to_digit(16)?;
        bytes.push(u8::try_from(high * 16 + low).ok()?);
    }
    let id = String::from_utf8(bytes).ok()?;
    (encode_id(&id) == name).then_some(id)
}

/// The `part.parquet` of every game that has one, sorted by folder name; none when the table is absent.
///
/// # Errors
/// When the table's folder cannot be listed.
pub fn game_files(out_dir: &Path, table: &str) -> Result<Vec<PathBuf>, StoreError> {
    let folder = out_dir.join(table);
    let mut files: Vec<PathBuf> = entries(&folder)?
        .into_iter()
        .filter(|path| name_of(path).is_some_and(|n| n.starts_with("game=")))
        .map(|path| path.join(PART_FILE))
        .filter(|path| path.is_file())
        .collect();
    files.sort();
    Ok(files)
}

/// Everything in a folder; nothing when there is no such folder.
pub(crate) fn entries(folder: &Path) -> Result<Vec<PathBuf>, StoreError> {
    let listed = match fs::read_dir(folder) {
        Ok(listed) => listed,
        Err(error) if error.kind() == std::io::ErrorKind::NotFound => return Ok(Vec::new()),
        Err(error) => return Err(StoreError::io(folder, "list the folder")(error)),
    };
    listed.map(|entry| entry.map(|e| e.path()).map_err(StoreError::io(folder, "list the folder"))).collect()
}

pub(crate) fn name_of(path: &Path) -> Option<&str> {
    path.file_name().and_then(|n| n.to_str())
}
