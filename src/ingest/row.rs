//! One row as read: codes and converted numbers, ready to be grouped.

use super::clock::NO_TIME;
use super::texts::{Attribute, Attributes, Coder, NONE, Texts};
use super::units::Conversion;
use crate::model::SourceRow;

/// Stands for "no frame number" in a row.
pub(crate) const NO_FRAME: i64 = i64::MIN;

/// Whole numbers beyond this are no frames and no ids that a float column left; up to it a float is exact.
pub(crate) const FURTHEST_FRAME: i64 = 1 << 53;

/// A row of the input; missing numbers are NaN, missing texts [`NONE`].
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Row {
    pub x_yd: f64,
    pub y_yd: f64,
    pub speed_yps: f64,
    pub heading_rad: f64,
    pub time_us: i64,
    pub frame: i64,
    pub play: u32,
    pub mover: u32,
    pub attribute: u32,
    pub event: u32,
    pub carrier: u32,
    pub row: u32,
    pub file: u16,
    /// 1 towards +x, −1 towards −x, 0 unknown.
    pub direction: i8,
}

impl Row {
    pub fn source(&self) -> SourceRow {
        SourceRow { file: self.file, row: self.row }
    }
    pub fn has_place(&self) -> bool {
        !(self.x_yd.is_nan() || self.y_yd.is_nan())
    }
}

/// Where the ball is, from ball columns; no row of its own.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct BallSpot {
    pub play: u32,
    pub frame: i64,
    pub time_us: i64,
    pub x_yd: f64,
    pub y_yd: f64,
    pub source: SourceRow,
}

/// A row before conversion, in the file's units.
#[derive(Clone, Copy, Debug)]
pub(crate) struct RawRow {
    pub game: u32,
    pub play: u32,
    pub mover: u32,
    pub attribute: Attribute,
    pub event: u32,
    pub carrier: u32,
    pub frame: i64,
    pub time_us: i64,
    pub x: f64,
    pub y: f64,
    pub speed: f64,
    pub heading: f64,
    pub ball_x: f64,
    pub ball_y: f64,
    pub direction: i8,
    pub row: u32,
}

impl Default for RawRow {
    fn default() -> RawRow {
        let nan = f64::NAN;
        RawRow {
            game: NONE,
            play: NONE,
            mover: NONE,
            attribute: [NONE; 4],
            event: NONE,
            carrier: NONE,
            frame: NO_FRAME,
            time_us: NO_TIME,
            x: nan,
            y: nan,
            speed: nan,
            heading: nan,
            ball_x: nan,
            ball_y: nan,
            direction: 0,
            row: 0,
        }
    }
}

/// Coders of the text columns, by raw bytes and by whole number.
#[derive(Debug, Default)]
pub(crate) struct ColumnCoder {
    pub bytes: Coder<Box<[u8]>>,
    pub whole: Coder<i64>,
}

/// All codes, kept over the files of one input.
#[derive(Debug, Default)]
pub(crate) struct Codes {
    pub texts: Texts,
    pub attributes: Attributes,
    pub game: ColumnCoder,
    pub play: ColumnCoder,
    pub mover: ColumnCoder,
    pub name: ColumnCoder,
    pub side: ColumnCoder,
    pub jersey: ColumnCoder,
    pub position: ColumnCoder,
    pub event: ColumnCoder,
    pub carrier: ColumnCoder,
    pub direction: ColumnCoder,
    last_direction: (u32, i8),
}

impl Codes {
    /// 1, −1 or 0 for a direction text's code; a play has one, so the last is remembered.
    #[inline]
    pub fn direction_of(&mut self, code: u32) -> i8 {
        if self.last_direction.0 != code {
            let text = &self.texts.all()[code as usize];
            self.last_direction = (code, super::who::direction(text));
        }
        self.last_direction.1
    }
}

/// The start of a run of rows of one game.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Run {
    pub game: u32,
    pub first_row: usize,
    pub first_ball: usize,
}

/// Rows in the order of the input, with the places where the game changes.
#[derive(Debug, Default)]
pub(crate) struct RowSink {
    pub rows: Vec<Row>,
    pub ball: Vec<BallSpot>,
    pub runs: Vec<Run>,
    /// Rows that name no game.
    pub gameless: Vec<SourceRow>,
}

impl RowSink {
    #[inline(always)]
    pub fn push(&mut self, raw: &RawRow, codes: &mut Codes, conversion: &Conversion, file: u16) {
        let source = SourceRow { file, row: raw.row };
        if raw.game == NONE {
            self.gameless.push(source);
            return;
        }
        if self.runs.last().is_none_or(|run| run.game != raw.game) {
            self.runs.push(Run { game: raw.game, first_row: self.rows.len(), first_ball: self.ball.len() });
        }
        if !raw.ball_x.is_nan() && !raw.ball_y.is_nan() {
            let (x_yd, y_yd) = (conversion.x_yd(raw.ball_x), conversion.y_yd(raw.ball_y));
            let spot = BallSpot { play: raw.play, frame: raw.frame, time_us: raw.time_us, x_yd, y_yd, source };
            let same = |b: &BallSpot| BallSpot { source, ..*b } == spot;
            if !self.ball.last().is_some_and(same) {
                self.ball.push(spot);
            }
        }
        self.rows.push(Row {
            x_yd: conversion.x_yd(raw.x),
            y_yd: conversion.y_yd(raw.y),
            speed_yps: conversion.speed_yps(raw.speed),
            heading_rad: if raw.heading.is_nan() { f64::NAN } else { conversion.heading_rad(raw.heading) },
            time_us: raw.time_us,
            frame: raw.frame,
            play: raw.play,
            mover: raw.mover,
            attribute: codes.attributes.number(raw.mover, raw.attribute),
            event: raw.event,
            carrier: raw.carrier,
            row: raw.row,
            file,
            direction: raw.direction,
        });
    }
}
