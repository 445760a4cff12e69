//! A small table read whole: texts by column, found by any of several names.

use super::IngestError;
use super::csv_text::{CsvText, shown};
use super::logical::Logical;
use super::naming::normal;
use super::number::{Read, is_missing, number};
use super::parquet_file::ParquetFile;
use super::parquet_values::codes;
use super::row::ColumnCoder;
use super::texts::{NONE, Texts, plain_id};
use std::path::{Path, PathBuf};

/// A table of texts; missing cells are `None`.
pub(crate) struct SmallTable {
    pub path: PathBuf,
    pub columns: Vec<String>,
    pub rows: Vec<Vec<Option<String>>>,
}

impl SmallTable {
    pub fn read(path: &Path) -> Result<SmallTable, IngestError> {
        if !path.exists() {
            return Err(IngestError::NoSuchPath { path: path.to_path_buf() });
        }
        match super::bytes::is_parquet(path).map_err(|e| IngestError::unreadable(path, &e))? {
            true => SmallTable::of_parquet(path),
            false => SmallTable::of_text(path),
        }
    }

    fn of_text(path: &Path) -> Result<SmallTable, IngestError> {
        let mut text = CsvText::open(path)?;
        let columns = text.columns.clone();
        let mut rows = Vec::new();
        let mut more = true;
        while more {
            more = text.block(&mut |row, bytes, spans| {
                let mut cells = Vec::with_capacity(spans.len());
                for (i, s) in spans.iter().enumerate() {
                    let cell = bytes[s.start as usize..s.end as usize].trim_ascii();
                    let text = std::str::from_utf8(cell).map_err(|_| IngestError::NotUtf8 {
                        path: path.to_path_buf(),
                        row,
                        column: columns[i].clone(),
                        found: shown(cell),
                    })?;
                    cells.push((!is_missing(cell)).then(|| text.to_string()));
                }
                rows.push(cells);
                Ok(())
            })?;
        }
        Ok(SmallTable { path: path.to_path_buf(), columns, rows })
    }

    fn of_parquet(path: &Path) -> Result<SmallTable, IngestError> {
        let mut file = ParquetFile::open(path)?;
        let columns = file.columns();
        let mut rows: Vec<Vec<Option<String>>> = vec![Vec::with_capacity(columns.len()); file.rows() as usize];
        let (mut texts, mut found) = (Texts::default(), Vec::new());
        for column in 0..columns.len() {
            // A nested column is none that this program asks for.
            let stored = file.stored(column, "a text or a number").ok();
            let mut coder = ColumnCoder::default();
            let mut at = 0;
            for group in 0..file.row_groups() {
                let Some(stored) = stored else { break };
                let arrays = file.decode(group, column, stored)?;
                codes(&arrays, stored, &mut coder, &mut texts, false, &mut found);
                for (row, code) in rows[at..].iter_mut().zip(&found) {
                    row.push((*code != NONE).then(|| texts.all()[*code as usize].to_string()));
                }
                at += found.len();
            }
            rows.iter_mut().for_each(|row| row.resize(column + 1, None));
        }
        Ok(SmallTable { path: path.to_path_buf(), columns, rows })
    }

    /// The column called by one of these names in normal form.
    pub fn column(&self, names: &[&str]) -> Option<usize> {
        names.iter().find_map(|name| self.columns.iter().position(|c| normal(c) == *name))
    }

    /// The column for a logical one; for a mover also the only one whose name ends in "id".
    pub fn logical(&self, logical: Logical) -> Option<usize> {
        let named = logical.grades().iter().find_map(|names| self.column(names));
        named.or_else(|| {
            let taken = [self.named(Logical::Game), self.named(Logical::Play)];
            let mut ids = (0..self.columns.len()).filter(|i| normal(&self.columns[*i]).ends_with("id") && !taken.contains(&Some(*i)));
            let only = ids.next().filter(|_| logical == Logical::Mover)?;
            ids.next().is_none().then_some(only)
        })
    }

    fn named(&self, logical: Logical) -> Option<usize> {
        logical.grades().iter().find_map(|names| self.column(names))
    }

    pub fn cell(&self, row: usize, column: Option<usize>) -> Option<&str> {
        self.rows[row].get(column?)?.as_deref()
    }

    pub fn id(&self, row: usize, column: Option<usize>) -> Option<&str> {
        self.cell(row, column).map(plain_id)
    }

    /// A number; text in its place is an error.
    pub fn number(&self, row: usize, column: Option<usize>) -> Result<Option<f64>, IngestError> {
        let Some(text) = self.cell(row, column) else { return Ok(None) };
        match number(text.as_bytes()) {
            Read::Number(v) => Ok(Some(v)),
            Read::Missing => Ok(None),
            Read::Text => Err(IngestError::BadValue {
                path: self.path.clone(),
                row: row as u64 + 1,
                column: column.map(|c| self.columns[c].clone()).unwrap_or_default(),
                expected: "a number",
                found: text.to_string(),
                advice: "correct the cell, or leave it empty",
            }),
        }
    }

    /// The column, or an error that says which are there.
    pub fn required(&self, column: Option<usize>, wanted: &'static str, name: &str) -> Result<usize, IngestError> {
        column.ok_or_else(|| IngestError::MissingTableColumn {
            path: self.path.clone(),
            wanted,
            columns: super::error::name_list(&self.columns),
            name: name.to_string(),
        })
    }
}
