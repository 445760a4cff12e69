//! Files that appear whole or not at all: written beside as `.part`, then renamed.

use super::StoreError;
use std::ffi::OsString;
use std::fs::{self, File};
use std::io::{BufWriter, Write};
use std::path::{Path, PathBuf};

/// Suffix of a file that is still being written.
pub const PART_SUFFIX: &str = ".part";

/// A file written beside its target. [`Staged::commit`] puts it in place; dropped without, it vanishes
/// and the target stays as it was.
#[derive(Debug)]
#[must_use = "a staged file vanishes unless it is committed"]
pub struct Staged {
    part: PathBuf,
    target: PathBuf,
    committed: bool,
}

impl Staged {
    /// Writes the contents beside `target`, whose folder is made where it is missing.
    ///
    /// # Errors
    /// When the folder or the file cannot be made, or `write` fails.
    pub fn write(target: &Path, write: impl FnOnce(&mut dyn Write) -> Result<(), StoreError>) -> Result<Staged, StoreError> {
        if let Some(folder) = target.parent() {
            fs::create_dir_all(folder).map_err(StoreError::io(folder, "make the folder"))?;
        }
        let mut name = target.file_name().map_or_else(OsString::new, OsString::from);
        name.push(PART_SUFFIX);
        let staged = Staged { part: target.with_file_name(name), target: target.to_path_buf(), committed: false };
        let file = File::create(&staged.part).map_err(StoreError::io(&staged.part, "create the file"))?;
        let mut writer = BufWriter::with_capacity(1 << 16, file);
        write(&mut writer)?;
        writer.flush().map_err(StoreError::io(&staged.part, "write the file"))?;
        Ok(staged)
    }

    /// Puts the file in place of the target, in one step of the file system.
    ///
    /// # Errors
    /// When the target cannot be replaced, for instance because a folder has its name.
    pub fn commit(mut self) -> Result<(), StoreError> {
        fs::rename(&self.part, &self.target).map_err(StoreError::io(&self.target, "put the file in place"))?;
        self.committed = true;
        Ok(())
    }
}

impl Drop for Staged {
    fn drop(&mut self) {
        if !self.committed {
            // Nothing is lost if this fails: the next run removes stale parts.
            let _ = fs::remove_file(&self.part);
        }
    }
}

/// Writes a text file whole or not at all.
///
/// # Errors
/// When the file cannot be written; an earlier file is then untouched.
pub fn write_text(path: &Path, text: &str) -> Result<(), StoreError> {
    Staged::write(path, |out| out.write_all(text.as_bytes()).map_err(StoreError::io(path, "write the file")))?.commit()
}
