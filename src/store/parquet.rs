//! Tables as Parquet: the schema is the row type's, whatever the rows hold.

use super::folders::game_files;
use super::{Column, Kind, Row, Staged, StoreError};
use polars::prelude as pl;
use polars::prelude::{NamedFrom, SerReader};
use std::fs::File;
use std::panic::catch_unwind;
use std::path::Path;

/// Writes rows as one Parquet file, whole or not at all. Zero rows give a file with all columns and no rows.
/// A number that is not finite becomes a missing value where the column allows one.
///
/// # Errors
/// When the file cannot be written, or a number that must not be missing is not finite.
pub fn write_table<R: Row>(path: &Path, rows: &[R]) -> Result<(), StoreError> {
    stage_table(path, rows)?.commit()
}

/// Like [`write_table`], but left beside its target until committed.
///
/// # Errors
/// As [`write_table`].
pub fn stage_table<R: Row>(path: &Path, rows: &[R]) -> Result<Staged, StoreError> {
    let columns = R::COLUMNS
        .iter()
        .zip(R::to_columns(rows))
        .map(|(doc, column)| to_series(path, doc.name, doc.optional, column).map(pl::Column::from))
        .collect::<Result<Vec<_>, _>>()?;
    let broken = |source: pl::PolarsError| StoreError::ParquetOut { path: path.to_path_buf(), source: Box::new(source) };
    let mut frame = pl::DataFrame::new(rows.len(), columns).map_err(broken)?;
    Staged::write(path, |out| {
        // One thread: the games are written side by side already. LZ4 costs the least time for its size here.
        pl::ParquetWriter::new(out)
            .with_compression(pl::ParquetCompression::Lz4Raw)
            .set_parallel(false)
            .finish(&mut frame)
            .map(|_bytes| ())
            .map_err(broken)
    })
}

fn to_series(path: &Path, name: &'static str, optional: bool, column: Column) -> Result<pl::Series, StoreError> {
    let title = pl::PlSmallStr::from_static(name);
    Ok(match column {
        Column::Text(values) => pl::Series::new(title, values),
        Column::Whole(values) => pl::Series::new(title, values),
        Column::Truth(values) => pl::Series::new(title, values),
        Column::Number(mut values) => {
            for (i, slot) in values.iter_mut().enumerate() {
                match *slot {
                    Some(value) if !value.is_finite() && optional => *slot = None,
                    Some(value) if !value.is_finite() => {
                        return Err(StoreError::NotFinite { path: path.to_path_buf(), row: i + 1, column: name.to_string(), value });
                    }
                    _ => {}
                }
            }
            pl::Series::new(title, values)
        }
    })
}

/// Reads a table. Only the row type's columns are read, so that a narrow row type reads little; other columns are
/// left alone. An optional column that the file lacks gives missing values.
///
/// # Errors
/// When the file is not Parquet, a column is of another kind, or a column or value that must be there is not.
pub fn read_table<R: Row>(path: &Path) -> Result<Vec<R>, StoreError> {
    read_part(path, None)
}

/// Like [`read_table`], but of one row alone, counted from 0; none when the table is shorter.
///
/// # Errors
/// As [`read_table`].
pub fn read_row<R: Row>(path: &Path, row: usize) -> Result<Option<R>, StoreError> {
    Ok(read_part(path, Some(row))?.pop())
}

fn read_part<R: Row>(path: &Path, row: Option<usize>) -> Result<Vec<R>, StoreError> {
    // The Parquet reader panics on some damaged files; that too is the file's fault and no reason to die.
    catch_unwind(|| read_sound_table(path, row))
        .unwrap_or_else(|_| Err(StoreError::Parquet { path: path.to_path_buf(), source: "its contents contradict themselves".into() }))
}

fn read_sound_table<R: Row>(path: &Path, row: Option<usize>) -> Result<Vec<R>, StoreError> {
    let broken = |source: pl::PolarsError| StoreError::Parquet { path: path.to_path_buf(), source: Box::new(source) };
    let file = File::open(path).map_err(StoreError::io(path, "open the file"))?;
    let mut reader = pl::ParquetReader::new(file).read_parallel(pl::ParallelStrategy::None).set_rechunk(true);
    let schema = reader.schema().map_err(broken)?;
    let rows = reader.num_rows().map_err(broken)?;
    let (first, height) = row.map_or((0, rows), |row| (row.min(rows), rows.saturating_sub(row).min(1)));

    let mut present = Vec::new();
    for doc in R::COLUMNS {
        match schema.get(doc.name).map(|field| &field.dtype) {
            None if doc.optional => {}
            None => return Err(StoreError::MissingColumn { path: path.to_path_buf(), column: doc.name.to_string() }),
            Some(pl::ArrowDataType::Null) if doc.optional => {}
            Some(dtype) if fits(doc.kind, dtype) => present.push(doc.name.to_string()),
            Some(dtype) => {
                let (column, found) = (doc.name.to_string(), format!("{dtype:?}"));
                return Err(StoreError::WrongKind { path: path.to_path_buf(), column, expected: doc.kind.word(), found });
            }
        }
    }

    let frame = reader.with_columns(Some(present)).with_slice(row.map(|_| (first, height))).finish().map_err(broken)?;
    let mut columns = Vec::with_capacity(R::COLUMNS.len());
    for doc in R::COLUMNS {
        let Ok(found) = frame.column(doc.name) else {
            columns.push(None);
            continue;
        };
        let column = from_series(doc.kind, found.as_materialized_series()).map_err(broken)?;
        if let Some(gap) = first_missing(&column).filter(|_| !doc.optional) {
            let (column, expected) = (doc.name.to_string(), doc.kind.word());
            return Err(StoreError::MissingValue { path: path.to_path_buf(), row: first + gap + 1, column, expected });
        }
        columns.push(Some(column));
    }
    Ok(R::from_columns(columns, height))
}

/// The kinds in which other tools may give a column back.
fn fits(kind: Kind, dtype: &pl::ArrowDataType) -> bool {
    use pl::ArrowDataType as A;
    match kind {
        Kind::Text => matches!(dtype, A::Utf8 | A::LargeUtf8 | A::Utf8View),
        Kind::Number => matches!(dtype, A::Float64 | A::Float32 | A::Int64 | A::Int32),
        Kind::Whole => matches!(dtype, A::Int64 | A::Int32 | A::UInt32),
        Kind::Truth => matches!(dtype, A::Boolean),
    }
}

fn from_series(kind: Kind, series: &pl::Series) -> pl::PolarsResult<Column> {
    Ok(match kind {
        Kind::Text => Column::Text(series.str()?.iter().map(|v| v.map(str::to_string)).collect()),
        Kind::Number => Column::Number(series.cast(&pl::DataType::Float64)?.f64()?.iter().map(|v| v.filter(|n| n.is_finite())).collect()),
        Kind::Whole => Column::Whole(series.strict_cast(&pl::DataType::Int64)?.i64()?.iter().collect()),
        Kind::Truth => Column::Truth(series.bool()?.iter().collect()),
    })
}

fn first_missing(column: &Column) -> Option<usize> {
    match column {
        Column::Text(v) => v.iter().position(Option::is_none),
        Column::Number(v) => v.iter().position(Option::is_none),
        Column::Whole(v) => v.iter().position(Option::is_none),
        Column::Truth(v) => v.iter().position(Option::is_none),
    }
}

/// All rows of a table, the games in order of folder name. For a whole season prefer [`each_game`] or a narrow row type.
///
/// # Errors
/// As [`read_table`], for the first game that fails.
pub fn read_all<R: Row>(out_dir: &Path) -> Result<Vec<R>, StoreError> {
    let mut all = Vec::new();
    // The rows are wide: growing by doubling would cost as much again.
    all.reserve_exact(rows_of_all_games(out_dir, R::TABLE)?);
    each_game(out_dir, |mut rows: Vec<R>| all.append(&mut rows))?;
    Ok(all)
}

/// Rows of a table over all games, from the files' ends alone.
fn rows_of_all_games(out_dir: &Path, table: &str) -> Result<usize, StoreError> {
    let height = |path: &Path| {
        let file = File::open(path).map_err(StoreError::io(path, "open the file"))?;
        // A damaged file is told of when it is read.
        Ok(catch_unwind(move || pl::ParquetReader::new(file).num_rows().unwrap_or(0)).unwrap_or(0))
    };
    game_files(out_dir, table)?.iter().map(|path| height(path)).sum()
}

/// Hands over one game's rows after the other, in order of folder name, so that a season needs no more memory than a game.
///
/// # Errors
/// As [`read_table`], for the first game that fails.
pub fn each_game<R: Row>(out_dir: &Path, mut take: impl FnMut(Vec<R>)) -> Result<(), StoreError> {
    for path in game_files(out_dir, R::TABLE)? {
        take(read_table(&path)?);
    }
    Ok(())
}
