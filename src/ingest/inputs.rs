//! From what was typed to a list of files: files, folders with all below them, patterns; sorted by path.

use super::IngestError;
use super::file::stem;
use std::collections::BTreeSet;
use std::path::{Path, PathBuf};

/// The files of an input, and those of its folders that were left out because their names say that they hold no tracks.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct InputSet {
    pub files: Vec<PathBuf>,
    pub skipped: Vec<PathBuf>,
}

/// Names of files that hold no tracks: looked over in folders and patterns, read when named.
const OTHER_TABLES: [&str; 10] = ["truth", "readme", "plays", "players", "film", "games", "teams", "findings", "set_aside", "clips"];

impl InputSet {
    /// Collects the files. A file that is named itself is taken whatever it is called; `tables` (plays, players, film) are left out.
    pub fn collect(paths: &[PathBuf], tables: &[&Path]) -> Result<InputSet, IngestError> {
        let (mut files, mut skipped) = (BTreeSet::new(), BTreeSet::new());
        let tables: Vec<PathBuf> = tables.iter().map(|t| canonical(t)).collect();
        for path in paths {
            let mut found_here = BTreeSet::new();
            if path.is_file() {
                found_here.insert(path.clone());
            } else if path.is_dir() {
                walk(path, &mut found_here, &mut skipped, 0)?;
            } else {
                for found in by_pattern(path)? {
                    if found.is_dir() {
                        walk(&found, &mut found_here, &mut skipped, 0)?;
                    } else {
                        sort_in(found, &mut found_here, &mut skipped);
                    }
                }
            }
            found_here.retain(|f| !tables.contains(&canonical(f)));
            if found_here.is_empty() {
                let names: Vec<String> = skipped.iter().take(5).map(|p: &PathBuf| p.display().to_string()).collect();
                let skipped = if names.is_empty() { String::new() } else { format!("; left out by name: {}", names.join(", ")) };
                return Err(IngestError::NoData { path: path.clone(), skipped });
            }
            files.append(&mut found_here);
        }
        skipped.retain(|s| !files.contains(s) && !tables.contains(&canonical(s)));
        // One file by two names is one file.
        let mut known = BTreeSet::new();
        files.retain(|f| known.insert(canonical(f)));
        let first = paths.first().cloned().unwrap_or_default();
        if files.is_empty() {
            return Err(IngestError::NoData { path: first, skipped: String::new() });
        }
        if files.len() > usize::from(u16::MAX) {
            return Err(IngestError::TooManyFiles { path: first, count: files.len() });
        }
        Ok(InputSet { files: files.into_iter().collect(), skipped: skipped.into_iter().collect() })
    }
}

fn canonical(path: &Path) -> PathBuf {
    path.canonicalize().unwrap_or_else(|_| path.to_path_buf())
}

fn by_pattern(pattern: &Path) -> Result<Vec<PathBuf>, IngestError> {
    let missing = || IngestError::NoSuchPath { path: pattern.to_path_buf() };
    let text = pattern.to_str().ok_or_else(missing)?;
    if !text.contains(['*', '?', '[']) {
        return Err(missing());
    }
    let found: Vec<PathBuf> = glob::glob(text).map_err(|_| missing())?.filter_map(Result::ok).collect();
    if found.is_empty() { Err(missing()) } else { Ok(found) }
}

fn walk(folder: &Path, files: &mut BTreeSet<PathBuf>, skipped: &mut BTreeSet<PathBuf>, depth: u32) -> Result<(), IngestError> {
    // A link that leads back to a folder above would go on for ever.
    if depth > 32 {
        return Ok(());
    }
    let fail = |e: std::io::Error| IngestError::unreadable(folder, &e);
    for entry in std::fs::read_dir(folder).map_err(fail)? {
        let path = entry.map_err(fail)?.path();
        let hidden = path.file_name().is_some_and(|n| n.to_string_lossy().starts_with('.'));
        if hidden {
            continue;
        }
        if path.is_dir() {
            walk(&path, files, skipped, depth + 1)?;
        } else {
            sort_in(path, files, skipped);
        }
    }
    Ok(())
}

fn sort_in(path: PathBuf, files: &mut BTreeSet<PathBuf>, skipped: &mut BTreeSet<PathBuf>) {
    let name = path.file_name().map(|n| n.to_string_lossy().into_owned()).unwrap_or_default();
    let stem = stem(&name);
    if stem.len() == name.len() || !is_data_ending(&name) {
        return;
    }
    let word = stem.to_lowercase();
    let is_truth = word.starts_with("truth");
    if is_truth || OTHER_TABLES.contains(&word.as_str()) {
        skipped.insert(path);
    } else {
        files.insert(path);
    }
}

/// `.csv`, `.tsv`, `.txt`, `.parquet`, the first three packed too.
fn is_data_ending(name: &str) -> bool {
    let name = name.to_lowercase();
    let plain = name.strip_suffix(".gz").or_else(|| name.strip_suffix(".zst")).unwrap_or(&name);
    [".csv", ".tsv", ".txt"].iter().any(|e| plain.ends_with(e)) || name.ends_with(".parquet")
}
