//! Parquet files: footer, columns and their plain types. Columns are decoded one row group at a time by polars'
//! decoder, asked for the plain stored type, so that categories, dates and narrow integers need no feature of it.

use super::IngestError;
use polars::io::parquet::read::_internal::to_deserializer;
use polars::io::prelude::FileMetadata;
use polars::prelude::{ArrayRef, ArrowDataType, ArrowDataType as A, ArrowField, ArrowTimeUnit, ParquetReader, SerReader};
use std::fs::File;
use std::io::{Read, Seek, SeekFrom};
use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::{Path, PathBuf};

/// What a column stores, as far as it matters here.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Stored {
    Truth,
    Int32,
    UInt32,
    Int64,
    UInt64,
    Float32,
    Float64,
    Text,
    /// Whole numbers that count this many to the second.
    Time32(f64),
    Time64(f64),
    /// Days since 1970.
    Date,
    /// The old 96-bit stamp, decoded to nanoseconds.
    Stamp96,
}

/// An open Parquet file.
pub(crate) struct ParquetFile {
    pub path: PathBuf,
    file: File,
    footer: FileMetadata,
    fields: Vec<ArrowField>,
}

impl ParquetFile {
    pub fn open(path: &Path) -> Result<ParquetFile, IngestError> {
        let file = File::open(path).map_err(|e| IngestError::unreadable(path, &e))?;
        let again = file.try_clone().map_err(|e| IngestError::unreadable(path, &e))?;
        let (footer, fields) = guarded(path, || {
            let mut footer = (**ParquetReader::new(again).get_metadata()?).clone();
            let told = polars::io::parquet::read::infer_schema(&footer)?;
            // Without the writer's own schema every column comes as the plain type that is stored.
            footer.key_value_metadata = None;
            let schema = polars::io::parquet::read::infer_schema(&footer)?;
            let mut fields: Vec<ArrowField> = schema.iter_values().cloned().collect();
            // Spans of time are stored as bare whole numbers: only the writer's schema tells what they count.
            for field in &mut fields {
                if let Some(A::Duration(unit)) = told.get(&field.name).map(|f| &f.dtype) {
                    field.dtype = A::Duration(*unit);
                }
            }
            Ok((footer, fields))
        })?;
        Ok(ParquetFile { path: path.to_path_buf(), file, footer, fields })
    }

    pub fn columns(&self) -> Vec<String> {
        self.fields.iter().map(|f| f.name.to_string()).collect()
    }

    pub fn rows(&self) -> u64 {
        self.footer.num_rows as u64
    }

    pub fn row_groups(&self) -> usize {
        self.footer.row_groups.len()
    }

    pub fn rows_of(&self, group: usize) -> usize {
        self.footer.row_groups[group].num_rows()
    }

    /// What a column stores; an error for lists, structures and raw bytes of fixed length.
    pub fn stored(&self, column: usize, expected: &'static str) -> Result<Stored, IngestError> {
        let per_s = |unit: &ArrowTimeUnit| match unit {
            ArrowTimeUnit::Second => 1.0,
            ArrowTimeUnit::Millisecond => 1e3,
            ArrowTimeUnit::Microsecond => 1e6,
            ArrowTimeUnit::Nanosecond => 1e9,
        };
        let field = &self.fields[column];
        Ok(match &field.dtype {
            A::Boolean => Stored::Truth,
            A::Int8 | A::Int16 | A::Int32 => Stored::Int32,
            A::UInt8 | A::UInt16 | A::UInt32 => Stored::UInt32,
            A::Int64 => Stored::Int64,
            A::UInt64 => Stored::UInt64,
            A::Float32 => Stored::Float32,
            A::Float64 => Stored::Float64,
            A::Utf8View | A::BinaryView => Stored::Text,
            A::Time32(unit) => Stored::Time32(per_s(unit)),
            A::Time64(unit) => Stored::Time64(per_s(unit)),
            A::Timestamp(unit, _) if self.is_96_bit(column) => {
                debug_assert!(*unit == ArrowTimeUnit::Nanosecond);
                Stored::Stamp96
            }
            A::Timestamp(unit, _) | A::Duration(unit) => Stored::Time64(per_s(unit)),
            A::Date32 => Stored::Date,
            other => {
                let found = format!("{other:?}").split(['(', '{']).next().unwrap_or_default().to_lowercase();
                return Err(IngestError::BadType { path: self.path.clone(), column: field.name.to_string(), expected, found });
            }
        })
    }

    fn is_96_bit(&self, column: usize) -> bool {
        let name = self.fields[column].name.as_str();
        let leaf = self.footer.schema_descr.columns().iter().find(|c| c.path_in_schema.first().is_some_and(|p| p.as_str() == name));
        leaf.is_some_and(|c| format!("{:?}", c.descriptor.primitive_type.physical_type) == "Int96")
    }

    /// Decodes one column of one row group.
    pub fn decode(&mut self, group: usize, column: usize, stored: Stored) -> Result<Vec<ArrayRef>, IngestError> {
        let field = &self.fields[column];
        let name = field.name.clone();
        let dtype = match stored {
            Stored::Truth => ArrowDataType::Boolean,
            Stored::Int32 | Stored::Time32(_) | Stored::Date => ArrowDataType::Int32,
            Stored::UInt32 => ArrowDataType::UInt32,
            Stored::Int64 | Stored::Time64(_) => ArrowDataType::Int64,
            Stored::UInt64 => ArrowDataType::UInt64,
            Stored::Float32 => ArrowDataType::Float32,
            Stored::Float64 => ArrowDataType::Float64,
            Stored::Text => ArrowDataType::Utf8View,
            Stored::Stamp96 => ArrowDataType::Timestamp(ArrowTimeUnit::Nanosecond, None),
        };
        let wanted = ArrowField::new(name.clone(), dtype, true);
        let (file, footer, path) = (&mut self.file, &self.footer, &self.path);
        guarded(path, || {
            let mut chunks = Vec::new();
            for meta in footer.row_groups[group].columns_under_root_iter(&name).into_iter().flatten() {
                let range = meta.byte_range();
                let mut bytes = Vec::with_capacity(usize::try_from(range.end.saturating_sub(range.start)).unwrap_or(0).min(1 << 31));
                file.seek(SeekFrom::Start(range.start))?;
                file.take(range.end.saturating_sub(range.start)).read_to_end(&mut bytes)?;
                chunks.push((meta, bytes.into()));
            }
            Ok(to_deserializer(chunks, wanted, None)?.0)
        })
    }
}

/// Runs the decoder so that a damaged file is an error, even where the decoder gives up by a panic.
fn guarded<T>(path: &Path, work: impl FnOnce() -> polars::prelude::PolarsResult<T>) -> Result<T, IngestError> {
    let bad = |found: String| IngestError::BadParquet { path: path.to_path_buf(), found };
    match catch_unwind(AssertUnwindSafe(work)) {
        Ok(Ok(value)) => Ok(value),
        Ok(Err(error)) => Err(bad(error.to_string().split_whitespace().collect::<Vec<_>>().join(" "))),
        Err(_) => Err(bad("bytes that make no sense".into())),
    }
}
