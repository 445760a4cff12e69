//! One input file: its name, size, content hash and how its columns were understood.

use super::{IngestError, Matching};
use std::fs::File;
use std::io::Read;
use std::path::{Path, PathBuf};
use std::sync::OnceLock;

/// How a file is written.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Format {
    /// Delimited text, packed or not.
    Text,
    Parquet,
}

/// A file of the input.
#[derive(Debug)]
pub struct InputFile {
    pub path: PathBuf,
    pub bytes: u64,
    pub format: Format,
    pub matching: Matching,
    /// Rows, where the file says so without being read through (Parquet).
    pub rows: Option<u64>,
    hash: OnceLock<String>,
}

impl InputFile {
    pub(crate) fn new(path: PathBuf, format: Format, matching: Matching, rows: Option<u64>) -> Result<InputFile, IngestError> {
        let bytes = std::fs::metadata(&path).map_err(|e| IngestError::unreadable(&path, &e))?.len();
        Ok(InputFile { path, bytes, format, matching, rows, hash: OnceLock::new() })
    }

    /// XXH3 (128 bits) of the file's bytes as 32 hexadecimal digits; read through once, at the first call.
    pub fn content_hash(&self) -> Result<&str, IngestError> {
        if let Some(hash) = self.hash.get() {
            return Ok(hash);
        }
        let hash = content_hash(&self.path)?;
        Ok(self.hash.get_or_init(|| hash))
    }
}

/// XXH3 (128 bits) of a file's bytes as 32 hexadecimal digits.
pub fn content_hash(path: &Path) -> Result<String, IngestError> {
    let fail = |e: std::io::Error| IngestError::unreadable(path, &e);
    let mut file = File::open(path).map_err(fail)?;
    let mut hasher = xxhash_rust::xxh3::Xxh3::new();
    let mut block = vec![0_u8; 1 << 18];
    loop {
        match file.read(&mut block).map_err(fail)? {
            0 => return Ok(format!("{:032x}", hasher.digest128())),
            n => hasher.update(&block[..n]),
        }
    }
}

/// The game that a file without a game column holds: the `game=…` folder it lies in, else its name without endings.
pub(crate) fn game_of_path(path: &Path) -> String {
    let folder = path.parent().and_then(Path::file_name).map(|n| n.to_string_lossy().into_owned());
    if let Some(id) = folder.as_deref().and_then(|f| f.strip_prefix("game=")).filter(|id| !id.is_empty()) {
        return unescaped(id);
    }
    let name = path.file_name().map(|n| n.to_string_lossy().into_owned()).unwrap_or_default();
    stem(&name).to_string()
}

/// A file name without its known endings.
pub(crate) fn stem(name: &str) -> &str {
    let cut = |name: &'_ str, ending: &str| {
        let at = name.len().checked_sub(ending.len()).filter(|at| name.is_char_boundary(*at))?;
        name[at..].eq_ignore_ascii_case(ending).then_some(at)
    };
    let name = [".gz", ".zst"].iter().find_map(|e| cut(name, e)).map_or(name, |at| &name[..at]);
    [".csv", ".tsv", ".txt", ".parquet"].iter().find_map(|e| cut(name, e)).map_or(name, |at| &name[..at])
}

/// Percent escapes of a folder name undone.
fn unescaped(text: &str) -> String {
    let mut bytes = Vec::with_capacity(text.len());
    let mut rest = text.as_bytes();
    while let [first, tail @ ..] = rest {
        let code =
            (*first == b'%').then(|| tail.get(..2).and_then(|h| std::str::from_utf8(h).ok()).and_then(|h| u8::from_str_radix(h, 16).ok()));
        match code.flatten() {
            Some(b) => {
                bytes.push(b);
                rest = &tail[2..];
            }
            None => {
                bytes.push(*first);
                rest = tail;
            }
        }
    }
    String::from_utf8_lossy(&bytes).into_owned()
}
