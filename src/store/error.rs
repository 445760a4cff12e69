//! What can go wrong with the audit's files, in words that name the file and what to do.

use std::path::{Path, PathBuf};

/// A failure of reading or writing an audit's folder.
#[derive(Debug, thiserror::Error)]
pub enum StoreError {
    #[error("{}: cannot {doing}", path.display())]
    Io { path: PathBuf, doing: &'static str, source: std::io::Error },
    #[error("{}: not readable as Parquet (damaged or cut short? audit that game again)", path.display())]
    Parquet { path: PathBuf, source: Box<dyn std::error::Error + Send + Sync> },
    #[error("{}: cannot be written as Parquet", path.display())]
    ParquetOut { path: PathBuf, source: Box<dyn std::error::Error + Send + Sync> },
    #[error("{}, column {column}: expected {expected}, found {found}", path.display())]
    WrongKind { path: PathBuf, column: String, expected: &'static str, found: String },
    #[error("{}, column {column}: expected the column, found none (written by another version? audit again with --fresh)", path.display())]
    MissingColumn { path: PathBuf, column: String },
    #[error("{}, row {row}, column {column}: expected {expected}, found nothing", path.display())]
    MissingValue { path: PathBuf, row: usize, column: String, expected: &'static str },
    #[error("{}, row {row}, column {column}: expected a finite number, found {value} (a fault of this program, please report it)", path.display())]
    NotFinite { path: PathBuf, row: usize, column: String, value: f64 },
    #[error("{}: not readable as JSON of this program", path.display())]
    Json { path: PathBuf, source: serde_json::Error },
    #[error("{}: expected an audit's folder with audit.json, found none (run `tailchase audit FILES --out {}` first)", path.display(), path.display())]
    NotAnAudit { path: PathBuf },
    #[error("{}: expected an empty folder or an earlier audit, found other files (choose another --out)", path.display())]
    ForeignFolder { path: PathBuf },
    #[error("{}: expected a folder, found a file (choose another --out)", path.display())]
    IsAFile { path: PathBuf },
    #[error("{}: another run is writing here (wait for it, or choose another --out)", path.display())]
    Busy { path: PathBuf },
}

impl StoreError {
    /// For `map_err`: an input or output failure at `path` while `doing` something.
    pub(crate) fn io(path: &Path, doing: &'static str) -> impl FnOnce(std::io::Error) -> StoreError {
        let path = path.to_path_buf();
        move |source| StoreError::Io { path, doing, source }
    }
}
