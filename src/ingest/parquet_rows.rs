//! Parquet to rows: the needed columns alone, one row group at a time.

use super::clock::NO_TIME;
use super::parquet_file::{ParquetFile, Stored};
use super::parquet_values::{Misfit, codes, reals, times, wholes};
use super::row::{Codes, ColumnCoder, NO_FRAME, RawRow, RowSink};
use super::texts::{NONE, Texts};
use super::units::Conversion;
use super::who::Who;
use super::{IngestError, Logical, Matching};
use std::path::Path;

/// An open Parquet file with its plan and the decoded columns of the row group at hand.
pub(crate) struct ParquetRows {
    file: ParquetFile,
    number: u16,
    conversion: Conversion,
    matching: Matching,
    who: Who,
    whole_file_game: u32,
    whole_game_play: u32,
    next_group: usize,
    rows_before: u64,
    group_rows: usize,
    next_row: usize,
    /// By [`Logical`] order; empty where the file has no such column.
    texts: [Vec<u32>; 18],
    numbers: [Vec<f64>; 18],
    frames: Vec<i64>,
    times: Vec<i64>,
}

/// Rows handed out at a time.
const PIECE: usize = 1 << 15;

impl ParquetRows {
    pub fn open(
        path: &Path,
        number: u16,
        matching: &Matching,
        conversion: Conversion,
        codes: &mut Codes,
    ) -> Result<ParquetRows, IngestError> {
        let file = ParquetFile::open(path)?;
        if file.rows() == 0 {
            return Err(IngestError::HeaderOnly { path: path.to_path_buf() });
        }
        Ok(ParquetRows {
            file,
            number,
            conversion,
            matching: matching.clone(),
            who: Who::of(matching),
            whole_file_game: codes.texts.id_code(&super::file::game_of_path(path)),
            whole_game_play: codes.texts.id_code("1"),
            next_group: 0,
            rows_before: 0,
            group_rows: 0,
            next_row: 0,
            texts: Default::default(),
            numbers: Default::default(),
            frames: Vec::new(),
            times: Vec::new(),
        })
    }

    /// Reads some more rows; false when the file is at its end.
    pub fn more(&mut self, codes: &mut Codes, sink: &mut RowSink) -> Result<bool, IngestError> {
        while self.next_row == self.group_rows {
            if self.next_group == self.file.row_groups() {
                return Ok(false);
            }
            self.rows_before += self.group_rows as u64;
            self.next_row = 0;
            self.decode(self.next_group, codes)?;
            self.next_group += 1;
        }
        let end = (self.next_row + PIECE).min(self.group_rows);
        for i in self.next_row..end {
            let raw = self.row(i, codes);
            sink.push(&raw, codes, &self.conversion, self.number);
        }
        self.next_row = end;
        Ok(self.next_row < self.group_rows || self.next_group < self.file.row_groups())
    }

    fn decode(&mut self, group: usize, all: &mut Codes) -> Result<(), IngestError> {
        self.group_rows = self.file.rows_of(group);
        for logical in Logical::ALL {
            let Some(column) = self.matching.index(logical) else { continue };
            let expected = expected(logical);
            let stored = self.file.stored(column, expected)?;
            if stored == Stored::Truth && coder(all, logical).is_none() {
                let path = self.file.path.clone();
                let column = self.matching.columns[column].clone();
                return Err(IngestError::BadType { path, column, expected, found: "boolean".into() });
            }
            let arrays = self.file.decode(group, column, stored)?;
            let place = logical as usize;
            let read: Result<usize, Misfit> = match logical {
                Logical::Frame => wholes(&arrays, stored, &mut self.frames).map(|()| self.frames.len()),
                Logical::Time => times(&arrays, stored, self.conversion.time, &mut self.times).map(|()| self.times.len()),
                _ => match coder(all, logical) {
                    Some((coder, texts)) => {
                        let is_id =
                            !matches!(logical, Logical::Name | Logical::Side | Logical::Position | Logical::Event | Logical::PlayDirection);
                        codes(&arrays, stored, coder, texts, is_id, &mut self.texts[place]);
                        Ok(self.texts[place].len())
                    }
                    None => reals(&arrays, stored, &mut self.numbers[place]).map(|()| self.numbers[place].len()),
                },
            };
            let path = self.file.path.clone();
            let column = self.matching.columns[column].clone();
            match read {
                Ok(rows) if rows == self.group_rows => {}
                Ok(rows) => {
                    let found = format!("{rows} values of {column} in a row group of {} rows", self.group_rows);
                    return Err(IngestError::BadParquet { path, found });
                }
                Err((row, found)) => {
                    let row = self.rows_before + row as u64 + 1;
                    let advice = "correct the cell, leave it empty, or map another column";
                    return Err(IngestError::BadValue { path, row, column, expected, found, advice });
                }
            }
        }
        Ok(())
    }

    #[inline]
    fn row(&self, i: usize, codes: &mut Codes) -> RawRow {
        let text = |l: Logical| self.texts[l as usize].get(i).copied().unwrap_or(NONE);
        let real = |l: Logical| self.numbers[l as usize].get(i).copied().unwrap_or(f64::NAN);
        let attribute = [text(Logical::Name), text(Logical::Side), text(Logical::Position), text(Logical::Jersey)];
        let side = text(Logical::PlayDirection);
        RawRow {
            game: if self.matching.has(Logical::Game) { text(Logical::Game) } else { self.whole_file_game },
            play: if self.matching.has(Logical::Play) { text(Logical::Play) } else { self.whole_game_play },
            mover: match self.who {
                Who::Id(_) => text(Logical::Mover),
                Who::Name => attribute[0],
                Who::SideAndJersey => Who::side_and_jersey(attribute, &mut codes.texts, &mut codes.mover),
            },
            attribute,
            event: text(Logical::Event),
            carrier: text(Logical::Carrier),
            frame: self.frames.get(i).copied().unwrap_or(NO_FRAME),
            time_us: self.times.get(i).copied().unwrap_or(NO_TIME),
            x: real(Logical::X),
            y: real(Logical::Y),
            speed: real(Logical::Speed),
            heading: real(Logical::Heading),
            ball_x: real(Logical::BallX),
            ball_y: real(Logical::BallY),
            direction: codes.direction_of(side),
            row: u32::try_from(self.rows_before + i as u64 + 1).unwrap_or(u32::MAX),
        }
    }
}

fn expected(logical: Logical) -> &'static str {
    match logical {
        Logical::Frame => "a whole number",
        Logical::Time => "seconds or a clock time",
        Logical::X | Logical::Y | Logical::Speed | Logical::Heading | Logical::BallX | Logical::BallY => "a number",
        _ => "a text or a whole number",
    }
}

/// The coder of a text column; `None` for columns of numbers.
fn coder(codes: &mut Codes, logical: Logical) -> Option<(&mut ColumnCoder, &mut Texts)> {
    let coder = match logical {
        Logical::Game => &mut codes.game,
        Logical::Play => &mut codes.play,
        Logical::Mover => &mut codes.mover,
        Logical::Name => &mut codes.name,
        Logical::Side => &mut codes.side,
        Logical::Jersey => &mut codes.jersey,
        Logical::Position => &mut codes.position,
        Logical::Event => &mut codes.event,
        Logical::Carrier => &mut codes.carrier,
        Logical::PlayDirection => &mut codes.direction,
        _ => return None,
    };
    Some((coder, &mut codes.texts))
}
