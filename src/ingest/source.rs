//! Files to a stream of games: by the quick road while each game's rows lie together, by buckets where they do not.

use super::buckets::Buckets;
use super::csv_rows::CsvRows;
use super::csv_text::CsvText;
use super::file::{Format, InputFile};
use super::game::{Context, Game, Gameless, RawGame};
use super::inputs::InputSet;
use super::naming::{require, understand};
use super::parquet_file::ParquetFile;
use super::parquet_rows::ParquetRows;
use super::row::{BallSpot, Codes, Row, RowSink};
use super::tables::Tables;
use super::units::Conversion;
use super::{IngestError, Logical, Mapping};
use crate::model::{FindingKind, SetAside, Settings, SourceRow};
use std::collections::BTreeMap;
use std::path::{Path, PathBuf};
use std::sync::Arc;

/// What may be told beside the files themselves.
#[derive(Clone, Debug, Default)]
pub struct IngestOptions {
    pub mapping: Option<Mapping>,
    /// Table of plays: game, play, carrier, kind, direction.
    pub plays: Option<PathBuf>,
    /// Table of players: id, name, side, position.
    pub players: Option<PathBuf>,
    /// Table of film starts: game, play, second.
    pub film: Option<PathBuf>,
}

/// An open input: a stream of games. `Send`, so that it may run on a thread of its own.
pub struct Source {
    files: Vec<InputFile>,
    skipped: Vec<PathBuf>,
    conversions: Vec<Conversion>,
    context: Arc<Context>,
    codes: Codes,
    sink: RowSink,
    reader: Option<Reader>,
    next_file: usize,
    /// Rows of each game delivered so far.
    delivered: BTreeMap<u32, u64>,
    /// Games that wait in buckets, once the quick road was left.
    buckets: Option<Buckets>,
    gameless: Vec<SourceRow>,
}

enum Reader {
    Text(Box<CsvRows>),
    Parquet(Box<ParquetRows>),
}

/// Opens an input: finds the files, understands each header. No row is read yet.
///
/// # Errors
/// Paths without data, columns that are missing or ambiguous, tables or mapping values that make no sense.
pub fn open(paths: &[PathBuf], options: &IngestOptions, settings: &Settings) -> Result<Source, IngestError> {
    let tables: Vec<&Path> = [&options.plays, &options.players, &options.film].into_iter().filter_map(|t| t.as_deref()).collect();
    let inputs = InputSet::collect(paths, &tables)?;
    let mapping = options.mapping.clone().unwrap_or_default();
    mapping.check()?;
    let field = mapping.field(settings.field());
    let files = inputs.files.iter().map(|path| open_file(path, &mapping)).collect::<Result<Vec<_>, _>>()?;
    for file in &files {
        let tells_rate = file.matching.has(Logical::Time) || file.matching.has(Logical::Speed) || mapping.frame_rate_hz.is_some();
        if !tells_rate {
            return Err(IngestError::NoRate { path: file.path.clone() });
        }
    }
    let conversions = files.iter().map(|f| Conversion::new(&mapping, &f.matching, &field)).collect();
    let context = Context {
        field,
        ball: mapping.ball.iter().map(|t| t.to_lowercase()).collect(),
        events: mapping.event_marks(),
        frame_rate_hz: mapping.frame_rate_hz,
        tables: Tables::read(options.plays.as_deref(), options.players.as_deref(), options.film.as_deref())?,
        files: inputs.files,
        spare: std::sync::Mutex::default(),
    };
    Ok(Source {
        files,
        skipped: inputs.skipped,
        conversions,
        context: Arc::new(context),
        codes: Codes::default(),
        sink: RowSink::default(),
        reader: None,
        next_file: 0,
        delivered: BTreeMap::new(),
        buckets: None,
        gameless: Vec::new(),
    })
}

pub(crate) fn open_file(path: &Path, mapping: &Mapping) -> Result<InputFile, IngestError> {
    let is_parquet = super::bytes::is_parquet(path).map_err(|e| IngestError::unreadable(path, &e))?;
    let named_parquet = path.extension().is_some_and(|e| e.eq_ignore_ascii_case("parquet"));
    let has_rows;
    let (format, columns, rows) = if is_parquet || named_parquet {
        if std::fs::metadata(path).is_ok_and(|m| m.len() == 0) {
            return Err(IngestError::EmptyFile { path: path.to_path_buf() });
        }
        let file = ParquetFile::open(path)?;
        has_rows = file.rows() > 0;
        (Format::Parquet, file.columns(), Some(file.rows()))
    } else {
        let text = CsvText::open(path)?;
        has_rows = text.has_rows();
        (Format::Text, text.columns, None)
    };
    let matching = understand(&columns, mapping, path)?;
    require(&matching, path)?;
    if !has_rows {
        return Err(IngestError::HeaderOnly { path: path.to_path_buf() });
    }
    InputFile::new(path.to_path_buf(), format, matching, rows)
}

impl Source {
    /// The input's files in order of path; a [`SourceRow`]'s file is an index into them.
    pub fn files(&self) -> &[InputFile] {
        &self.files
    }

    /// Files of folders and patterns left out because their names say that they hold no tracks.
    pub fn skipped(&self) -> &[PathBuf] {
        &self.skipped
    }

    /// The next game, grouped into plays; `None` at the end.
    pub fn next_game(&mut self) -> Result<Option<Game>, IngestError> {
        self.next_raw()?.map(RawGame::assemble).transpose()
    }

    /// The next game's rows, not yet grouped, for pipelines that group on several threads; `None` at the end.
    pub fn next_raw(&mut self) -> Result<Option<RawGame>, IngestError> {
        if self.buckets.is_none()
            && let Some(game) = self.next_together()?
        {
            return Ok(Some(game));
        }
        self.next_from_buckets()
    }

    /// Rows that name no game; complete once the last game was delivered.
    pub fn gameless(&self) -> Gameless {
        let mut out = Gameless::default();
        let mut rows = self.gameless.clone();
        rows.sort_unstable();
        if let Some(first) = rows.first() {
            out.account.rows_read = rows.len() as u64;
            out.account.set_aside.insert(SetAside::MissingKey, rows.len() as u64);
            let file = self.files[usize::from(first.file)].path.display();
            out.findings.add(FindingKind::MissingKey, rows.len() as u64, || format!("no game: {file}, row {}", first.row));
        }
        out.set_aside = rows.into_iter().map(|r| (r, SetAside::MissingKey)).collect();
        out
    }

    /// The quick road: reads until the game changes. `None` at the end, or when a game delivered earlier comes up again.
    fn next_together(&mut self) -> Result<Option<RawGame>, IngestError> {
        loop {
            let comes_again = self.sink.runs.iter().enumerate().any(|(i, run)| {
                self.delivered.contains_key(&run.game) || self.sink.runs[..i].iter().any(|earlier| earlier.game == run.game)
            });
            if comes_again {
                self.start_over()?;
                return Ok(None);
            }
            if self.sink.runs.len() >= 2 {
                return Ok(Some(self.take_first_run()));
            }
            if !self.read_more()? {
                if !self.sink.runs.is_empty() {
                    return Ok(Some(self.take_first_run()));
                }
                self.keep_gameless();
                return Ok(None);
            }
        }
    }

    fn take_first_run(&mut self) -> RawGame {
        let run = self.sink.runs.remove(0);
        let (rows_end, ball_end) =
            self.sink.runs.first().map_or((self.sink.rows.len(), self.sink.ball.len()), |r| (r.first_row, r.first_ball));
        let mut later_rows = self.context.empty_rows();
        later_rows.extend_from_slice(&self.sink.rows[rows_end..]);
        self.sink.rows.truncate(rows_end);
        let later_ball = self.sink.ball.split_off(ball_end);
        let rows = std::mem::replace(&mut self.sink.rows, later_rows);
        let ball = std::mem::replace(&mut self.sink.ball, later_ball);
        for later in &mut self.sink.runs {
            later.first_row -= rows_end;
            later.first_ball -= ball_end;
        }
        self.delivered.insert(run.game, rows.len() as u64);
        self.raw_game(run.game, rows, ball, false, false)
    }

    fn raw_game(&self, game: u32, rows: Vec<Row>, ball: Vec<BallSpot>, is_scattered: bool, replaces: bool) -> RawGame {
        RawGame {
            id: Arc::clone(&self.codes.texts.all()[game as usize]),
            rows,
            ball,
            texts: self.codes.texts.all().to_vec(),
            attributes: self.codes.attributes.all().to_vec(),
            context: Arc::clone(&self.context),
            is_scattered,
            replaces,
        }
    }

    /// Reads some more rows into the sink; false at the end of the last file.
    fn read_more(&mut self) -> Result<bool, IngestError> {
        if self.reader.is_none() {
            let Some(file) = self.files.get(self.next_file) else { return Ok(false) };
            let (number, conversion) = (self.next_file as u16, self.conversions[self.next_file]);
            self.reader = Some(match file.format {
                Format::Text => Reader::Text(Box::new(CsvRows::open(&file.path, number, &file.matching, conversion, &mut self.codes)?)),
                Format::Parquet => {
                    Reader::Parquet(Box::new(ParquetRows::open(&file.path, number, &file.matching, conversion, &mut self.codes)?))
                }
            });
            self.next_file += 1;
        }
        let more = match &mut self.reader {
            Some(Reader::Text(reader)) => reader.more(&mut self.codes, &mut self.sink)?,
            Some(Reader::Parquet(reader)) => reader.more(&mut self.codes, &mut self.sink)?,
            None => false,
        };
        if !more {
            self.reader = None;
        }
        Ok(true)
    }

    fn keep_gameless(&mut self) {
        self.gameless.append(&mut self.sink.gameless);
    }

    /// The slow road: all rows again, into a bucket a game.
    fn start_over(&mut self) -> Result<(), IngestError> {
        self.sink = RowSink::default();
        self.gameless.clear();
        self.reader = None;
        self.next_file = 0;
        let mut buckets = Buckets::new()?;
        while self.read_more()? {
            buckets.take(&mut self.sink)?;
            self.keep_gameless();
        }
        buckets.finish(&self.codes.texts)?;
        self.buckets = Some(buckets);
        Ok(())
    }

    /// Games in buckets, in natural order of id; those delivered whole already are left out.
    fn next_from_buckets(&mut self) -> Result<Option<RawGame>, IngestError> {
        let Some(buckets) = &mut self.buckets else { return Ok(None) };
        while let Some(bucket) = buckets.next()? {
            let before = self.delivered.get(&bucket.game).copied();
            if before == Some(bucket.rows.len() as u64) {
                continue;
            }
            let (game, is_scattered) = (bucket.game, bucket.is_scattered);
            return Ok(Some(self.raw_game(game, bucket.rows, bucket.ball, is_scattered, before.is_some())));
        }
        Ok(None)
    }
}
