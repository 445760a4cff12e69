//! Tables as CSV that a spreadsheet opens without running anything in them.

use super::{Column, Row, StoreError, write_text};
use std::borrow::Cow;
use std::path::Path;

/// One value of a CSV row. Text is guarded, numbers are not, since a minus sign is part of them.
#[derive(Clone, Debug, PartialEq)]
pub enum CsvCell {
    Text(String),
    Number(f64),
    Whole(i64),
    Truth(bool),
    Missing,
}

/// Text that a spreadsheet would take for a formula gets an apostrophe in front: one that begins with `=`, `+`, `-`, `@`
/// (or their full-width twins) after any blanks, or with a tab, return or line feed.
///
/// ```
/// use tailchase::store::guarded;
/// assert_eq!(guarded("=1+1"), "'=1+1");
/// assert_eq!(guarded("O'Vale"), "O'Vale");
/// ```
pub fn guarded(text: &str) -> Cow<'_, str> {
    let starts_bare = text.starts_with(['\t', '\r', '\n']);
    let starts_formula = text.trim_start().starts_with(['=', '+', '-', '@', '＝', '＋', '－', '＠']);
    if starts_bare || starts_formula { Cow::Owned(format!("'{text}")) } else { Cow::Borrowed(text) }
}

/// CSV text: header, then rows, lines ended by `\n`; a missing value is an empty field, a number has all its digits.
pub fn csv_text(header: &[&str], rows: &[Vec<CsvCell>]) -> String {
    let mut text = csv_header(header);
    rows.iter().for_each(|row| push_line(&mut text, row.iter().map(written)));
    text
}

/// The header line alone.
pub fn csv_header(header: &[&str]) -> String {
    let mut text = String::new();
    push_line(&mut text, header.iter().map(|name| guarded(name)));
    text
}

/// Rows without a header, for a file that is written piece by piece.
pub fn csv_lines(rows: &[Vec<CsvCell>]) -> String {
    let mut text = String::new();
    rows.iter().for_each(|row| push_line(&mut text, row.iter().map(written)));
    text
}

/// Writes a CSV file whole or not at all.
///
/// # Errors
/// When the file cannot be written; an earlier file is then untouched.
pub fn write_csv(path: &Path, header: &[&str], rows: &[Vec<CsvCell>]) -> Result<(), StoreError> {
    write_text(path, &csv_text(header, rows))
}

/// A whole table as CSV, columns as in its schema.
pub fn table_csv<R: Row>(rows: &[R]) -> String {
    csv_text(&table_header::<R>(), &table_cells(rows))
}

/// Names of a table's columns.
pub fn table_header<R: Row>() -> Vec<&'static str> {
    R::COLUMNS.iter().map(|doc| doc.name).collect()
}

/// A table's rows as cells, in the order of its columns; a number that is not finite is missing.
pub fn table_cells<R: Row>(rows: &[R]) -> Vec<Vec<CsvCell>> {
    let columns = R::to_columns(rows);
    (0..rows.len()).map(|i| columns.iter().map(|column| cell(column, i)).collect()).collect()
}

fn cell(column: &Column, row: usize) -> CsvCell {
    let found = match column {
        Column::Text(v) => v.get(row).cloned().flatten().map(CsvCell::Text),
        Column::Number(v) => v.get(row).copied().flatten().filter(|n| n.is_finite()).map(CsvCell::Number),
        Column::Whole(v) => v.get(row).copied().flatten().map(CsvCell::Whole),
        Column::Truth(v) => v.get(row).copied().flatten().map(CsvCell::Truth),
    };
    found.unwrap_or(CsvCell::Missing)
}

fn written(cell: &CsvCell) -> Cow<'_, str> {
    match cell {
        CsvCell::Text(text) => guarded(text),
        CsvCell::Number(value) if value.is_finite() => Cow::Owned(value.to_string()),
        CsvCell::Number(_) | CsvCell::Missing => Cow::Borrowed(""),
        CsvCell::Whole(value) => Cow::Owned(value.to_string()),
        CsvCell::Truth(value) => Cow::Owned(value.to_string()),
    }
}

fn push_line<'a>(text: &mut String, fields: impl Iterator<Item = Cow<'a, str>>) {
    for (i, field) in fields.enumerate() {
        if i > 0 {
            text.push(',');
        }
        if field.contains([',', '"', '\n', '\r']) {
            text.push('"');
            text.push_str(&field.replace('"', "\"\""));
            text.push('"');
        } else {
            text.push_str(&field);
        }
    }
    text.push('\n');
}
