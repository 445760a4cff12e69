//! Files to plays: columns and their mapping, delimited text and Parquet to rows, rows to plays, and what was odd.
//! No judgement about play is made here.
//!
//! The road of a row: [`InputSet`] finds the files; `naming` understands each header; `csv_rows` or `parquet_rows` read
//! the needed columns into rows of codes and converted numbers; [`Source`] cuts the stream of rows into games (or spills
//! scattered ones to `buckets`); [`RawGame::assemble`] groups a game's rows into plays, tracks, marks and hints, counts
//! oddities and accounts for every row.

mod assemble;
mod buckets;
mod bytes;
mod clock;
mod csv_rows;
mod csv_text;
mod draft;
pub mod error;
pub mod events;
pub mod file;
pub mod game;
pub mod inputs;
pub mod inspect;
mod inspect_guess;
mod inspect_text;
pub mod logical;
pub mod mapping;
mod marks;
pub mod naming;
mod number;
mod oddities;
mod order;
mod parquet_file;
mod parquet_rows;
mod parquet_values;
mod rate;
mod roster;
mod row;
mod scan;
mod small_table;
pub mod source;
mod tables;
mod texts;
mod timebase;
pub mod units;
mod who;

pub use error::IngestError;
pub use file::{Format, InputFile, content_hash};
pub use game::{Game, Gameless, RawGame, RowAccount};
pub use inputs::InputSet;
pub use inspect::{Inspection, inspect};
pub use logical::Logical;
pub use mapping::Mapping;
pub use naming::{How, Matched, Matching};
pub use order::natural_order;
pub use source::{IngestOptions, Source, open};
