//! The audit's tables and files on disk: schema, writing whole or not at all, reading back, going on after a break.
//!
//! `OUT/<table>/game=<id>/part.parquet` holds one game's share of a table, `OUT/done/game=<id>.json` says that the game is
//! finished, `OUT/audit.json` sums up. Auditing into a folder adds or replaces the games of the input and no others; the games
//! of earlier runs stay in the ranking, unless a fresh start prunes them.

pub mod account;
pub mod audit_info;
pub mod column;
pub mod csv;
pub mod dictionary;
pub mod error;
pub mod folders;
pub mod game;
pub mod mark;
pub mod out;
pub mod parquet;
pub mod rows;
pub mod whole;

pub use account::{FindingEntry, RowAccount, finding_entries, merge_findings};
pub use audit_info::{AUDIT_FILE, AuditInfo, GameEntry, InputEntry, RunInfo, read_audit_info, write_audit_info};
pub use column::{Column, Kind};
pub use csv::{CsvCell, csv_text, guarded, table_csv, write_csv};
pub use dictionary::dictionary_markdown;
pub use error::StoreError;
pub use folders::{PART_FILE, decode_id, encode_id, folder_name, game_files, game_folder};
pub use game::{GAME_TABLES, GameTables, prune_games, write_game};
pub use mark::{DONE, GameMark, NoiseEntry, fingerprint, mark_path, read_marks, write_mark};
pub use out::{OutDir, prepare_out};
pub use parquet::{each_game, read_all, read_row, read_table, write_table};
pub use rows::{BriefRow, CarryRow, ColumnDoc, FrameRow, PlayerRow, PursuitRow, Row, SetAsideRow, TeamRow};
pub use whole::{PART_SUFFIX, Staged, write_text};
