//! Delimited text to rows: only the columns that are needed are read.

use super::clock::time_us;
use super::csv_text::{CsvText, shown};
use super::number::{Read, is_missing, number};
use super::row::{Codes, ColumnCoder, FURTHEST_FRAME, NO_FRAME, RawRow, RowSink};
use super::scan::Span;
use super::texts::Texts;
use super::units::Conversion;
use super::who::Who;
use super::{IngestError, Logical, Matching};
use std::path::{Path, PathBuf};

/// An open text file with its plan.
pub(crate) struct CsvRows {
    text: CsvText,
    plan: Plan,
}

/// Where each needed field stands.
struct Plan {
    path: PathBuf,
    columns: Vec<String>,
    file: u16,
    conversion: Conversion,
    game: Option<usize>,
    /// The game where no column tells.
    whole_file_game: u32,
    play: Option<usize>,
    whole_game_play: u32,
    frame: Option<usize>,
    time: Option<usize>,
    who: Who,
    name: Option<usize>,
    side: Option<usize>,
    jersey: Option<usize>,
    position: Option<usize>,
    x: usize,
    y: usize,
    speed: Option<usize>,
    heading: Option<usize>,
    event: Option<usize>,
    carrier: Option<usize>,
    direction: Option<usize>,
    ball: Option<(usize, usize)>,
}

impl CsvRows {
    pub fn open(path: &Path, file: u16, matching: &Matching, conversion: Conversion, codes: &mut Codes) -> Result<CsvRows, IngestError> {
        let text = CsvText::open(path)?;
        let at = |l| matching.index(l);
        let plan = Plan {
            path: path.to_path_buf(),
            columns: text.columns.clone(),
            file,
            conversion,
            game: at(Logical::Game),
            whole_file_game: codes.texts.id_code(&super::file::game_of_path(path)),
            play: at(Logical::Play),
            whole_game_play: codes.texts.id_code("1"),
            frame: at(Logical::Frame),
            time: at(Logical::Time),
            who: Who::of(matching),
            name: at(Logical::Name),
            side: at(Logical::Side),
            jersey: at(Logical::Jersey),
            position: at(Logical::Position),
            x: at(Logical::X).unwrap_or(usize::MAX),
            y: at(Logical::Y).unwrap_or(usize::MAX),
            speed: at(Logical::Speed),
            heading: at(Logical::Heading),
            event: at(Logical::Event),
            carrier: at(Logical::Carrier),
            direction: at(Logical::PlayDirection),
            ball: at(Logical::BallX).zip(at(Logical::BallY)),
        };
        Ok(CsvRows { text, plan })
    }

    /// Reads some more rows; false when the file is at its end.
    pub fn more(&mut self, codes: &mut Codes, sink: &mut RowSink) -> Result<bool, IngestError> {
        let plan = &self.plan;
        let more = self.text.block(&mut |row, text, spans| {
            let raw = plan.read(row, text, spans, codes)?;
            sink.push(&raw, codes, &plan.conversion, plan.file);
            Ok(())
        })?;
        if !more && self.text.row == 0 {
            return Err(IngestError::HeaderOnly { path: self.plan.path.clone() });
        }
        Ok(more)
    }
}

impl Plan {
    #[inline(always)]
    fn read(&self, row: u64, text: &[u8], spans: &[Span], codes: &mut Codes) -> Result<RawRow, IngestError> {
        let field = |i: usize| spans.get(i).map_or(&[][..], |s| &text[s.start as usize..s.end as usize]);
        let mut raw = RawRow { row: u32::try_from(row).unwrap_or(u32::MAX), ..RawRow::default() };
        let Codes { texts, .. } = codes;
        raw.game = match self.game {
            Some(i) => self.coded(&mut codes.game, texts, i, row, field(i), true)?,
            None => self.whole_file_game,
        };
        raw.play = match self.play {
            Some(i) => self.coded(&mut codes.play, texts, i, row, field(i), true)?,
            None => self.whole_game_play,
        };
        if let Some(i) = self.frame {
            raw.frame = match number(field(i)) {
                Read::Number(v) if v == v.trunc() && v.abs() <= FURTHEST_FRAME as f64 => v as i64,
                Read::Missing => NO_FRAME,
                _ => return Err(self.bad(i, row, field(i), "a whole number")),
            };
        }
        if let Some(i) = self.time {
            raw.time_us = time_us(field(i), self.conversion.time).map_err(|()| self.bad(i, row, field(i), "seconds or a clock time"))?;
        }
        if let Some(i) = self.name {
            raw.attribute[0] = self.coded(&mut codes.name, texts, i, row, field(i), false)?;
        }
        if let Some(i) = self.side {
            raw.attribute[1] = self.coded(&mut codes.side, texts, i, row, field(i), false)?;
        }
        if let Some(i) = self.position {
            raw.attribute[2] = self.coded(&mut codes.position, texts, i, row, field(i), false)?;
        }
        if let Some(i) = self.jersey {
            raw.attribute[3] = self.coded(&mut codes.jersey, texts, i, row, field(i), true)?;
        }
        raw.mover = match self.who {
            Who::Id(i) => self.coded(&mut codes.mover, texts, i, row, field(i), true)?,
            Who::Name => raw.attribute[0],
            Who::SideAndJersey => Who::side_and_jersey(raw.attribute, texts, &mut codes.mover),
        };
        raw.x = self.real(self.x, row, field(self.x))?;
        raw.y = self.real(self.y, row, field(self.y))?;
        if let Some(i) = self.speed {
            raw.speed = self.real(i, row, field(i))?;
        }
        if let Some(i) = self.heading {
            raw.heading = self.real(i, row, field(i))?;
        }
        if let Some(i) = self.event {
            let text = field(i);
            if !is_missing(text) {
                raw.event = self.coded(&mut codes.event, texts, i, row, text, false)?;
            }
        }
        if let Some(i) = self.carrier {
            raw.carrier = self.coded(&mut codes.carrier, texts, i, row, field(i), true)?;
        }
        if let Some(i) = self.direction {
            let code = self.coded(&mut codes.direction, texts, i, row, field(i), false)?;
            raw.direction = codes.direction_of(code);
        }
        if let Some((i, j)) = self.ball {
            raw.ball_x = self.real(i, row, field(i))?;
            raw.ball_y = self.real(j, row, field(j))?;
        }
        Ok(raw)
    }

    #[inline(always)]
    fn real(&self, column: usize, row: u64, field: &[u8]) -> Result<f64, IngestError> {
        match number(field) {
            Read::Number(v) => Ok(v),
            Read::Missing => Ok(f64::NAN),
            Read::Text => Err(self.bad(column, row, field, "a number")),
        }
    }

    #[inline(always)]
    fn coded(
        &self,
        coder: &mut ColumnCoder,
        texts: &mut Texts,
        column: usize,
        row: u64,
        field: &[u8],
        is_id: bool,
    ) -> Result<u32, IngestError> {
        coder.bytes.code(
            field,
            |raw| raw.into(),
            |raw| match std::str::from_utf8(raw) {
                Ok(text) if is_id => Ok(texts.id_code(text)),
                Ok(text) => Ok(texts.code(text.trim())),
                Err(_) => {
                    Err(IngestError::NotUtf8 { path: self.path.clone(), row, column: self.columns[column].clone(), found: shown(raw) })
                }
            },
        )
    }

    #[cold]
    fn bad(&self, column: usize, row: u64, field: &[u8], expected: &'static str) -> IngestError {
        let text = String::from_utf8_lossy(field).trim().to_string();
        let is_comma = text.contains(',') && matches!(number(text.replace(',', ".").as_bytes()), Read::Number(_));
        let advice = if is_comma { "write the decimal sign as a point" } else { "correct the cell, leave it empty, or map another column" };
        IngestError::BadValue { path: self.path.clone(), row, column: self.columns[column].clone(), expected, found: text, advice }
    }
}
