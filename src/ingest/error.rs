//! What can be wrong with an input: `file, row n, column c: expected A, found B (what to do)`.

use std::path::PathBuf;

/// Row 0 is the header; the first data row is 1.
#[derive(Debug, thiserror::Error)]
pub enum IngestError {
    #[error("{}: expected a file, folder or pattern, found nothing there (check the spelling; put a pattern in quotes)", path.display())]
    NoSuchPath { path: PathBuf },
    #[error(
        "{}: expected tracking files (.csv, .tsv, .txt or .parquet, also .gz or .zst), found none (give a folder that holds some{skipped})",
        path.display()
    )]
    NoData { path: PathBuf, skipped: String },
    #[error("{}: expected a file that can be read, found: {found} (check that it exists, is whole and may be read)", path.display())]
    Unreadable { path: PathBuf, found: String },
    #[error("{}: expected at most 65535 files, found {count} (join them, or audit part by part)", path.display())]
    TooManyFiles { path: PathBuf, count: usize },
    #[error("{}, row 0: expected a header row, found an empty file (export it again, or leave it out)", path.display())]
    EmptyFile { path: PathBuf },
    #[error("{}, row 1: expected a data row, found nothing after the header (export it again, or leave it out)", path.display())]
    HeaderOnly { path: PathBuf },
    #[error(
        "{}, row 0: expected a column for {wanted}, found the columns {columns} (add `{line}` under [columns] in a mapping file)",
        path.display()
    )]
    MissingColumn { path: PathBuf, wanted: &'static str, columns: String, line: String },
    #[error("{}, row 0: expected a column for {wanted}, found the columns {columns} (name it `{name}`)", path.display())]
    MissingTableColumn { path: PathBuf, wanted: &'static str, columns: String, name: String },
    #[error("{}, row 0, column {column}: expected this column of the mapping, found the columns {columns} (correct `{line}` in the mapping file)", path.display())]
    NoSuchColumn { path: PathBuf, column: String, columns: String, line: String },
    #[error(
        "{}, row 0: expected one column for {wanted}, found {columns} (say which under [columns] in a mapping file: `{line}`)",
        path.display()
    )]
    Ambiguous { path: PathBuf, wanted: &'static str, columns: String, line: String },
    #[error("{}, row {row}, column {column}: expected {expected}, found {found:?} ({advice})", path.display())]
    BadValue { path: PathBuf, row: u64, column: String, expected: &'static str, found: String, advice: &'static str },
    #[error("{}, row {row}: expected {expected} fields, found {found} (a line cut short, a stray separator or a missing quote)", path.display())]
    FieldCount { path: PathBuf, row: u64, expected: usize, found: usize },
    #[error("{}, row {row}, column {column}: expected a closing quote, found the end of the file (close the quote that opens there)", path.display())]
    UnclosedQuote { path: PathBuf, row: u64, column: String },
    #[error("{}, row {row}: expected a line end within 64 MiB, found none (check that this is a text file)", path.display())]
    LongRecord { path: PathBuf, row: u64 },
    #[error("{}, row {row}, column {column}: expected UTF-8 text, found {found} (save the file as UTF-8)", path.display())]
    NotUtf8 { path: PathBuf, row: u64, column: String, found: String },
    #[error("{}: expected a whole Parquet file, found one that is cut short or damaged: {found} (copy or export it again)", path.display())]
    BadParquet { path: PathBuf, found: String },
    #[error("{}, row 0, column {column}: expected {expected}, found Parquet type {found} (export the column as plain numbers or text)", path.display())]
    BadType { path: PathBuf, column: String, expected: &'static str, found: String },
    #[error(
        "{}: expected a time column, a speed column or a frame rate, found frames alone (add `frame_rate_hz = 10`, or the rate that it is, to a mapping file)",
        path.display()
    )]
    NoRate { path: PathBuf },
    #[error(
        "game {game}: expected times or speeds that tell the frame rate, found none that do (add `frame_rate_hz = 10`, or the rate that it is, to a mapping file)"
    )]
    UnknownRate { game: String },
    #[error(
        "game {game}: expected frames 0.002 to 5 s apart, found them {step_s} s apart (check the time column; `time = \"milliseconds\"` or another column in a mapping file)"
    )]
    BadClock { game: String, step_s: f64 },
    #[error("{}: expected a mapping, found: {found} (`inspect` prints one ready to edit)", path.display())]
    BadMapping { path: PathBuf, found: String },
    #[error("mapping, {key}: expected {expected}, found {found:?} (correct the mapping file)")]
    BadMappingValue { key: String, expected: String, found: String },
    #[error("{}: expected room for a scattered game's rows in the temporary folder, found: {found} (free some space, or set TMPDIR to a larger disk)", path.display())]
    Spill { path: PathBuf, found: String },
}

impl IngestError {
    pub(crate) fn unreadable(path: &std::path::Path, error: &std::io::Error) -> IngestError {
        IngestError::Unreadable { path: path.to_path_buf(), found: error.to_string() }
    }
}

/// Column names for a message: as they stand in the file, cut after thirty.
pub(crate) fn name_list(names: &[String]) -> String {
    let mut text = names.iter().take(30).cloned().collect::<Vec<_>>().join(", ");
    if names.len() > 30 {
        text.push_str(&format!(" and {} more", names.len() - 30));
    }
    text
}
