//! The data dictionary: the schema as a page to read.

use super::{CarryRow, ColumnDoc, FrameRow, PlayerRow, PursuitRow, Row, SetAsideRow, TeamRow};

/// The dictionary in Markdown, one table for each table on disk. `DICTIONARY.md` beside this file is a copy that a test holds to it.
pub fn dictionary_markdown() -> String {
    let mut page = String::from(
        "# Data dictionary\n\n\
         Written from the schema in `rows.rs`. Units stand at the end of a column's name: `_yd` yards, `_yps` yards per second, \
         `_s` seconds, `_deg` degrees, `_degps` degrees per second. Spots are turned so that the carrier attacks +x; y is 0 at the \
         sideline on his right. \"may be missing\" is a null in Parquet and an empty field in CSV, never 0.\n",
    );
    section::<PursuitRow>(&mut page, "`pursuits/game=<id>/part.parquet`: one row a pursuit");
    section::<CarryRow>(&mut page, "`carries/game=<id>/part.parquet`: one row a carry");
    section::<FrameRow>(&mut page, "`frames/game=<id>/part.parquet`: one row a pursuit and frame");
    section::<SetAsideRow>(
        &mut page,
        "`set_aside/game=<id>/part.parquet`: one row of the input that was not used; `set_aside.csv` holds them all",
    );
    section::<PlayerRow>(&mut page, "`players.csv`, `players.parquet`: one row a player");
    section::<TeamRow>(&mut page, "`teams.csv`: one row a side");
    page
}

fn section<R: Row>(page: &mut String, title: &str) {
    page.push_str(&format!("\n## {}\n\n{title}.\n\n| column | kind | meaning |\n|---|---|---|\n", R::TABLE));
    for doc in R::COLUMNS {
        page.push_str(&line(doc));
    }
}

fn line(doc: &ColumnDoc) -> String {
    let missing = if doc.optional { ", may be missing" } else { "" };
    format!("| `{}` | {}{missing} | {} |\n", doc.name, doc.kind.word(), doc.meaning.replace('|', "\\|"))
}
