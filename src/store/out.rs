//! The output folder: checked before any work is done, held by one run at a time, cleared of a dead run's leavings.

use super::audit_info::AUDIT_FILE;
use super::folders::{entries, name_of};
use super::game::{GAME_TABLES, remove_file};
use super::mark::DONE;
use super::whole::PART_SUFFIX;
use super::{PART_FILE, StoreError};
use std::fs::{self, File, OpenOptions, TryLockError};
use std::io::Write;
use std::path::{Path, PathBuf};

/// Held by a running audit; also what tells an interrupted first run from a folder of other things.
const HOLD_FILE: &str = ".tailchase";
/// Files that an audit writes at the top of its folder and under `report/`.
const TOP_FILES: [&str; 10] = [
    AUDIT_FILE,
    "set_aside.csv",
    "findings.csv",
    "players.csv",
    "players.parquet",
    "teams.csv",
    "teams.parquet",
    "clips.csv",
    "report/index.html",
    "charts/ranking.svg",
];

/// An output folder that this run holds until it is dropped.
#[derive(Debug)]
pub struct OutDir {
    root: PathBuf,
    _hold: File,
}

impl OutDir {
    pub fn path(&self) -> &Path {
        &self.root
    }
}

/// Makes sure, before any work, that results can be written to the folder: makes it where it is missing, refuses a file,
/// a folder of other things (names that begin with a dot aside) and one that another run holds, tries a write, and removes
/// the `.part` files of a run that died.
///
/// # Errors
/// For each of these refusals.
pub fn prepare_out(out_dir: &Path) -> Result<OutDir, StoreError> {
    let path = out_dir.to_path_buf();
    if out_dir.is_file() {
        return Err(StoreError::IsAFile { path });
    }
    fs::create_dir_all(out_dir).map_err(StoreError::io(out_dir, "make the output folder"))?;
    let is_ours = out_dir.join(AUDIT_FILE).is_file() || out_dir.join(HOLD_FILE).is_file();
    let is_hidden = |path: &PathBuf| name_of(path).is_some_and(|n| n.starts_with('.'));
    if !is_ours && !entries(out_dir)?.iter().all(is_hidden) {
        return Err(StoreError::ForeignFolder { path });
    }
    let hold_path = out_dir.join(HOLD_FILE);
    let mut hold = OpenOptions::new()
        .create(true)
        .truncate(false)
        .write(true)
        .open(&hold_path)
        .map_err(StoreError::io(&hold_path, "write to the output folder"))?;
    // A file system without locks is no reason to refuse.
    if matches!(hold.try_lock(), Err(TryLockError::WouldBlock)) {
        return Err(StoreError::Busy { path });
    }
    hold.write_all(b"This folder is an audit's; the file keeps two runs from writing to it at once.\n")
        .map_err(StoreError::io(&hold_path, "write to the output folder"))?;
    remove_stale_parts(out_dir)?;
    Ok(OutDir { root: path, _hold: hold })
}

/// Only files that an audit itself would have written are removed.
fn remove_stale_parts(out_dir: &Path) -> Result<(), StoreError> {
    for name in TOP_FILES {
        remove_file(&out_dir.join(format!("{name}{PART_SUFFIX}")))?;
    }
    for table in GAME_TABLES {
        for folder in entries(&out_dir.join(table))? {
            if name_of(&folder).is_some_and(|n| n.starts_with("game=")) && folder.is_dir() {
                remove_file(&folder.join(format!("{PART_FILE}{PART_SUFFIX}")))?;
                // Without a part in it the folder was only made for one; a folder with files in it stays.
                let _ = fs::remove_dir(&folder);
            }
        }
    }
    for path in entries(&out_dir.join(DONE))? {
        if name_of(&path).is_some_and(|n| n.starts_with("game=") && n.ends_with(PART_SUFFIX)) {
            remove_file(&path)?;
        }
    }
    Ok(())
}
