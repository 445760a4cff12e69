//! How an input is understood, without computing anything about play: columns, units, rate, counts, events.

use super::events::mark_of_text;
use super::file::Format;
use super::game::RawGame;
use super::inputs::InputSet;
use super::inspect_guess::{Spread, notes};
use super::naming::{Matched, Matching, normal};
use super::row::Row;
use super::source::{IngestOptions, open, open_file};
use super::texts::NONE;
use super::who::means_ball;
use super::{IngestError, Logical, Mapping};
use crate::model::{EventMark, Settings};
use std::collections::{BTreeMap, BTreeSet};
use std::path::{Path, PathBuf};

/// Rows after which no further game is sampled.
const SAMPLE_ROWS: usize = 400_000;

/// One file as understood.
#[derive(Clone, Debug, PartialEq)]
pub struct FileInspection {
    pub path: PathBuf,
    pub bytes: u64,
    pub format: Format,
    pub rows: Option<u64>,
    pub matched: Vec<Matched>,
    pub missing: Vec<Logical>,
    pub unused: Vec<String>,
}

/// An event text of the sample and how it is read; `None` for a text without a meaning here.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct EventSeen {
    pub text: String,
    pub rows: u64,
    pub mark: Option<EventMark>,
}

/// What was found in the first games of the input.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Sample {
    pub games: usize,
    pub plays: usize,
    /// The ball excluded.
    pub movers: usize,
    pub rows: u64,
    pub rows_set_aside: u64,
    pub has_ball: bool,
    /// Median over the plays, frames a second.
    pub frame_rate_hz: Option<f64>,
    pub events: Vec<EventSeen>,
}

/// How an input is understood.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Inspection {
    pub files: Vec<FileInspection>,
    pub skipped: Vec<PathBuf>,
    pub sample: Sample,
    /// What looks worth checking: units, origin, guesses, events.
    pub notes: Vec<String>,
    /// What would stop an audit.
    pub problems: Vec<String>,
    /// A mapping file, ready to edit.
    pub mapping_toml: String,
}

/// Looks at an input. Trouble with a file's columns or values is told in [`Inspection::problems`]; an error is
/// returned only where there is nothing to look at.
pub fn inspect(paths: &[PathBuf], options: &IngestOptions, settings: &Settings) -> Result<Inspection, IngestError> {
    let tables: Vec<&Path> = [&options.plays, &options.players, &options.film].into_iter().filter_map(|t| t.as_deref()).collect();
    let inputs = InputSet::collect(paths, &tables)?;
    let mapping = options.mapping.clone().unwrap_or_default();
    let mut out = Inspection { skipped: inputs.skipped, ..Inspection::default() };
    let mut first_matching: Option<Matching> = None;
    for path in &inputs.files {
        match open_file(path, &mapping) {
            Ok(file) => {
                out.files.push(FileInspection {
                    path: path.clone(),
                    bytes: file.bytes,
                    format: file.format,
                    rows: file.rows,
                    matched: file.matching.matched().cloned().collect(),
                    missing: file.matching.missing(),
                    unused: file.matching.unused().into_iter().map(String::from).collect(),
                });
                first_matching.get_or_insert(file.matching);
            }
            Err(error) => out.problems.push(error.to_string()),
        }
    }
    let mut spread = Spread::default();
    if out.problems.is_empty()
        && let Err(error) = sample(paths, options, settings, &mapping, &mut out.sample, &mut spread)
    {
        out.problems.push(error.to_string());
    }
    let field = mapping.field(settings.field());
    out.notes = notes(&out, &mapping, &spread, &field);
    out.mapping_toml = super::inspect_text::mapping_toml(&mapping, first_matching.as_ref(), &out.sample, &field);
    Ok(out)
}

fn sample(
    paths: &[PathBuf],
    options: &IngestOptions,
    settings: &Settings,
    mapping: &Mapping,
    out: &mut Sample,
    spread: &mut Spread,
) -> Result<(), IngestError> {
    let mut source = open(paths, options, settings)?;
    let marks = mapping.event_marks();
    let mut movers = BTreeSet::new();
    let mut events: BTreeMap<String, u64> = BTreeMap::new();
    let mut rates = Vec::new();
    while (out.rows as usize) < SAMPLE_ROWS {
        let Some(raw) = source.next_raw()? else { break };
        for row in &raw.rows {
            if row.event != NONE {
                *events.entry(raw.texts[row.event as usize].to_string()).or_default() += 1;
            }
            if row.has_place() && !is_ball(&raw, row) {
                spread.add(row.x_yd, row.y_yd);
            }
        }
        let game = raw.assemble()?;
        out.games += 1;
        out.plays += game.plays.len();
        out.rows += game.account.rows_read;
        out.rows_set_aside += game.account.set_aside_total();
        for play in &game.plays {
            movers.extend(play.movers.iter().map(|m| m.id.to_string()));
            out.has_ball |= play.ball.is_some();
            let mut steps: Vec<f64> = play.time_s.windows(2).map(|w| w[1] - w[0]).collect();
            steps.sort_by(f64::total_cmp);
            rates.extend(steps.get(steps.len() / 2).map(|s| 1.0 / s));
        }
    }
    rates.sort_by(f64::total_cmp);
    out.frame_rate_hz = rates.get(rates.len() / 2).map(|r| (r * 100.0).round() / 100.0);
    out.movers = movers.len();
    out.events = events
        .into_iter()
        .map(|(text, rows)| {
            let mark = marks.get(&normal(&text)).copied().or_else(|| mark_of_text(&text));
            EventSeen { text, rows, mark }
        })
        .collect();
    Ok(())
}

fn is_ball(raw: &RawGame, row: &Row) -> bool {
    let attribute = raw.attributes[row.attribute as usize];
    let more = &raw.context.ball;
    std::iter::once(row.mover).chain(attribute[..3].iter().copied()).any(|code| means_ball(&raw.texts[code as usize], more))
}
