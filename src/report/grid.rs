//! A plain grid of cells and its three ways out: terminal table, CSV, JSON.

use super::text::shown;
use crate::store::csv::{csv_text as text_of, table_cells, table_header};
use crate::store::rows::Row;

/// One cell: the same as in the tables on disk, so that a text is made safe for spreadsheets in one place.
pub use crate::store::csv::CsvCell as Cell;

/// How a table is written.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Format {
    /// Aligned columns, rounded.
    Table,
    /// Every column in full precision; numbers bare, text made safe for spreadsheets.
    Csv,
    /// An array of objects in full precision; missing is null.
    Json,
}

/// Names of the columns, and the rows.
#[derive(Clone, Debug, PartialEq)]
pub struct Grid {
    pub names: Vec<&'static str>,
    pub rows: Vec<Vec<Cell>>,
}

/// All columns of a table's rows.
pub fn grid_of<R: Row>(rows: &[R]) -> Grid {
    Grid { names: table_header::<R>(), rows: table_cells(rows) }
}

/// Comma separated, one header line, `\n` line ends, quotes where a cell needs them.
pub fn csv_text(grid: &Grid) -> String {
    text_of(&grid.names, &grid.rows)
}

/// An array of objects, one row a line, keys in the order of the columns.
pub fn json_text(grid: &Grid) -> String {
    let rows: Vec<String> = grid
        .rows
        .iter()
        .map(|row| {
            let pairs: Vec<String> = grid.names.iter().zip(row).map(|(n, c)| format!("{}:{}", json_string(n), json_cell(c))).collect();
            format!("{{{}}}", pairs.join(","))
        })
        .collect();
    if rows.is_empty() { "[]\n".to_string() } else { format!("[\n{}\n]\n", rows.join(",\n")) }
}

fn json_cell(cell: &Cell) -> String {
    match cell {
        Cell::Text(t) => json_string(t),
        Cell::Number(n) => serde_json::Value::from(*n).to_string(),
        Cell::Whole(n) => n.to_string(),
        Cell::Truth(b) => b.to_string(),
        Cell::Missing => "null".to_string(),
    }
}

fn json_string(text: &str) -> String {
    serde_json::Value::from(text).to_string()
}

/// On which side of its column a text stands.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Align {
    Left,
    Right,
}

/// Columns of text under their heads, two blanks apart, a rule under the heads.
///
/// Widths count characters: combining accents and wide scripts may stand a column off.
pub fn aligned(heads: &[(&str, Align)], rows: &[Vec<String>]) -> String {
    let rows: Vec<Vec<String>> = rows.iter().map(|r| r.iter().map(|c| shown(c)).collect()).collect();
    let width = |i: usize| {
        let cells = rows.iter().filter_map(|r| r.get(i)).map(|c| c.chars().count()).max().unwrap_or(0);
        cells.max(heads[i].0.chars().count())
    };
    let widths: Vec<usize> = (0..heads.len()).map(width).collect();
    let line = |cells: &mut dyn Iterator<Item = &str>| {
        let mut out = String::new();
        for (i, cell) in cells.enumerate().take(heads.len()) {
            let pad = " ".repeat(widths[i] - cell.chars().count().min(widths[i]));
            out += if i > 0 { "  " } else { "" };
            match heads[i].1 {
                Align::Left => out += &format!("{cell}{pad}"),
                Align::Right => out += &format!("{pad}{cell}"),
            }
        }
        format!("{}\n", out.trim_end())
    };
    let mut out = line(&mut heads.iter().map(|h| h.0));
    let rules: Vec<String> = widths.iter().map(|w| "-".repeat(*w)).collect();
    out += &line(&mut rules.iter().map(String::as_str));
    for row in &rows {
        out += &line(&mut row.iter().map(String::as_str));
    }
    out
}
