//! Reports: rows of the audit's tables to view models (text, already rounded) to pages, tables and sentences.
//!
//! Everything here is pure: no file is opened, no statistic computed. What a reader sees is rounded once, in
//! [`text`]; entries that stand above a sum are rounded together, in [`rounding`], so that the printed entries
//! add up to the printed total. A missing value is a dash.
//!
//! | file | one line |
//! |---|---|
//! | [`text`], [`rounding`], [`spot`] | numbers, names and spots on the field as words |
//! | [`heading`], [`account`] | the six headings of the account and its lines |
//! | [`sentence`](sentence()), [`sheet`](sheet()) | one pursuit in a sentence, and in a terminal |
//! | [`grid`], [`tables`] | players, teams and clips as terminal table, CSV or JSON |
//! | [`clips`](clips()) | which moments to cut, and why |
//! | [`svg`], [`axis`], [`field_plan`], [`charts`], [`marks`] | drawings |
//! | [`page`](page()) and its `view_*` | the page |
//! | [`ranking_chart`](ranking_chart()) | the ranking as a picture of its own |

pub mod account;
pub mod axis;
pub mod charts;
pub mod clips;
pub mod field_frame;
pub mod field_plan;
pub mod grid;
pub mod heading;
pub mod marks;
pub mod page;
pub mod provenance;
pub mod ranking_chart;
pub mod rounding;
pub mod sentence;
pub mod sheet;
pub mod spot;
pub mod svg;
pub mod tables;
pub mod text;
pub mod view_players;
pub mod view_pursuit;
pub mod view_run;

pub use crate::store::csv::guarded as csv_safe;
pub use clips::{ClipFilter, ClipOrder, ClipPicker, ClipRow, clips};
pub use grid::Format;
pub use heading::Heading;
pub use page::{DrawnPursuit, page};
pub use provenance::{FindingLine, InputFile, Provenance};
pub use ranking_chart::ranking_chart;
pub use sentence::sentence;
pub use sheet::sheet;
pub use tables::{clips_csv_header, clips_csv_lines, clips_table, players_table, teams_table};
