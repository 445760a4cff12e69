//! Rows of scattered games in temporary files, one a game, so that memory holds one game at a time.

use super::IngestError;
use super::order::natural_order;
use super::row::{BallSpot, Row, RowSink};
use super::texts::Texts;
use crate::model::SourceRow;
use std::collections::BTreeMap;
use std::fs::{File, OpenOptions};
use std::io::{Read, Write};
use std::path::{Path, PathBuf};
use std::sync::atomic::{AtomicU64, Ordering};

/// Rows held in memory over all games before they are written out.
const HELD_ROWS: usize = 1 << 19;
const ROW_BYTES: usize = 75;
const SPOT_BYTES: usize = 42;

/// The temporary folder; removed with everything in it when dropped.
struct Folder(PathBuf);

impl Drop for Folder {
    fn drop(&mut self) {
        // A folder that cannot be removed is the system's to clean up; there is nobody left to tell.
        let _ = std::fs::remove_dir_all(&self.0);
    }
}

#[derive(Default)]
struct Held {
    rows: Vec<Row>,
    ball: Vec<BallSpot>,
    /// Runs of rows so far: more than one means scattered.
    runs: u64,
}

pub(crate) struct Buckets {
    folder: Folder,
    held: BTreeMap<u32, Held>,
    held_rows: usize,
    last_game: u32,
    order: Vec<u32>,
}

/// One game out of its bucket.
pub(crate) struct Bucket {
    pub game: u32,
    pub rows: Vec<Row>,
    pub ball: Vec<BallSpot>,
    pub is_scattered: bool,
}

static COUNTER: AtomicU64 = AtomicU64::new(0);

impl Buckets {
    pub fn new() -> Result<Buckets, IngestError> {
        let name = format!("tailchase-{}-{}", std::process::id(), COUNTER.fetch_add(1, Ordering::Relaxed));
        let path = std::env::temp_dir().join(name);
        std::fs::create_dir_all(&path).map_err(|e| spill(&path, &e))?;
        Ok(Buckets { folder: Folder(path), held: BTreeMap::new(), held_rows: 0, last_game: 0, order: Vec::new() })
    }

    /// Takes all rows out of the sink.
    pub fn take(&mut self, sink: &mut RowSink) -> Result<(), IngestError> {
        let ends: Vec<(usize, usize)> = sink.runs.iter().skip(1).map(|r| (r.first_row, r.first_ball)).collect();
        for (i, run) in sink.runs.iter().enumerate() {
            let (rows_end, ball_end) = ends.get(i).copied().unwrap_or((sink.rows.len(), sink.ball.len()));
            let held = self.held.entry(run.game).or_default();
            held.runs += u64::from(run.game != self.last_game);
            self.last_game = run.game;
            held.rows.extend_from_slice(&sink.rows[run.first_row..rows_end]);
            held.ball.extend_from_slice(&sink.ball[run.first_ball..ball_end]);
            self.held_rows += rows_end - run.first_row;
        }
        sink.rows.clear();
        sink.ball.clear();
        sink.runs.clear();
        if self.held_rows >= HELD_ROWS { self.write_out() } else { Ok(()) }
    }

    fn write_out(&mut self) -> Result<(), IngestError> {
        for (game, held) in &mut self.held {
            append(&self.folder.0.join(format!("{game}.rows")), held.rows.iter().map(row_bytes))?;
            append(&self.folder.0.join(format!("{game}.ball")), held.ball.iter().map(spot_bytes))?;
            held.rows = Vec::new();
            held.ball = Vec::new();
        }
        self.held_rows = 0;
        Ok(())
    }

    /// Everything is in: games come out in natural order of id from here on.
    pub fn finish(&mut self, texts: &Texts) -> Result<(), IngestError> {
        self.write_out()?;
        self.order = self.held.keys().copied().collect();
        self.order.sort_by(|a, b| natural_order(&texts.all()[*b as usize], &texts.all()[*a as usize]));
        Ok(())
    }

    pub fn next(&mut self) -> Result<Option<Bucket>, IngestError> {
        let Some(game) = self.order.pop() else { return Ok(None) };
        let rows = read_all(&self.folder.0.join(format!("{game}.rows")), row_of)?;
        let ball = read_all(&self.folder.0.join(format!("{game}.ball")), spot_of)?;
        let is_scattered = self.held.get(&game).is_some_and(|h| h.runs > 1);
        Ok(Some(Bucket { game, rows, ball, is_scattered }))
    }
}

fn spill(path: &Path, error: &std::io::Error) -> IngestError {
    IngestError::Spill { path: path.to_path_buf(), found: error.to_string() }
}

fn append<const N: usize>(path: &Path, records: impl Iterator<Item = [u8; N]>) -> Result<(), IngestError> {
    let bytes: Vec<u8> = records.flatten().collect();
    if bytes.is_empty() {
        return Ok(());
    }
    let mut file = OpenOptions::new().create(true).append(true).open(path).map_err(|e| spill(path, &e))?;
    file.write_all(&bytes).map_err(|e| spill(path, &e))
}

fn read_all<T, const N: usize>(path: &Path, of: impl Fn(&[u8; N]) -> T) -> Result<Vec<T>, IngestError> {
    if !path.exists() {
        return Ok(Vec::new());
    }
    let mut bytes = Vec::new();
    File::open(path).and_then(|mut f| f.read_to_end(&mut bytes)).map_err(|e| spill(path, &e))?;
    Ok(bytes.as_chunks::<N>().0.iter().map(of).collect())
}

/// Puts values one after the other, least byte first.
struct Pack<const N: usize>([u8; N], usize);

impl<const N: usize> Pack<N> {
    fn put<const M: usize>(mut self, bytes: [u8; M]) -> Self {
        self.0[self.1..self.1 + M].copy_from_slice(&bytes);
        self.1 += M;
        self
    }
}

/// Takes them out again.
struct Unpack<'a>(&'a [u8]);

impl Unpack<'_> {
    fn get<const M: usize>(&mut self) -> [u8; M] {
        let (head, rest) = self.0.split_first_chunk::<M>().map_or(([0; M], &[][..]), |(h, r)| (*h, r));
        self.0 = rest;
        head
    }
    fn f64(&mut self) -> f64 {
        f64::from_le_bytes(self.get())
    }
    fn i64(&mut self) -> i64 {
        i64::from_le_bytes(self.get())
    }
    fn u32(&mut self) -> u32 {
        u32::from_le_bytes(self.get())
    }
    fn source(&mut self) -> SourceRow {
        SourceRow { row: self.u32(), file: u16::from_le_bytes(self.get()) }
    }
}

fn row_bytes(r: &Row) -> [u8; ROW_BYTES] {
    let floats = [r.x_yd, r.y_yd, r.speed_yps, r.heading_rad];
    let pack = floats.iter().fold(Pack([0; ROW_BYTES], 0), |p, v| p.put(v.to_le_bytes()));
    let pack = [r.time_us, r.frame].iter().fold(pack, |p, v| p.put(v.to_le_bytes()));
    let pack = [r.play, r.mover, r.attribute, r.event, r.carrier].iter().fold(pack, |p, v| p.put(v.to_le_bytes()));
    pack.put(r.row.to_le_bytes()).put(r.file.to_le_bytes()).put(r.direction.to_le_bytes()).0
}

fn row_of(bytes: &[u8; ROW_BYTES]) -> Row {
    let mut b = Unpack(bytes);
    let (x_yd, y_yd, speed_yps, heading_rad, time_us, frame) = (b.f64(), b.f64(), b.f64(), b.f64(), b.i64(), b.i64());
    let (play, mover, attribute, event, carrier) = (b.u32(), b.u32(), b.u32(), b.u32(), b.u32());
    let SourceRow { file, row } = b.source();
    let direction = i8::from_le_bytes(b.get());
    Row { x_yd, y_yd, speed_yps, heading_rad, time_us, frame, play, mover, attribute, event, carrier, row, file, direction }
}

fn spot_bytes(s: &BallSpot) -> [u8; SPOT_BYTES] {
    let pack = Pack([0; SPOT_BYTES], 0).put(s.x_yd.to_le_bytes()).put(s.y_yd.to_le_bytes()).put(s.frame.to_le_bytes());
    let pack = pack.put(s.time_us.to_le_bytes()).put(s.play.to_le_bytes());
    pack.put(s.source.row.to_le_bytes()).put(s.source.file.to_le_bytes()).0
}

fn spot_of(bytes: &[u8; SPOT_BYTES]) -> BallSpot {
    let mut b = Unpack(bytes);
    let (x_yd, y_yd, frame, time_us, play) = (b.f64(), b.f64(), b.i64(), b.i64(), b.u32());
    BallSpot { play, frame, time_us, x_yd, y_yd, source: b.source() }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rows_and_spots_come_back_as_they_were() {
        let row = Row {
            x_yd: 12.34,
            y_yd: -0.5,
            speed_yps: 8.25,
            heading_rad: -3.0,
            time_us: i64::MIN,
            frame: -7,
            play: 1,
            mover: 2,
            attribute: 3,
            event: 4,
            carrier: 5,
            row: 4_000_000_000,
            file: 65_000,
            direction: -1,
        };
        assert_eq!(row_of(&row_bytes(&row)), row);
        let spot = BallSpot { play: 9, frame: 3, time_us: 4, x_yd: 5.5, y_yd: 6.5, source: SourceRow { file: 7, row: 8 } };
        assert_eq!(spot_of(&spot_bytes(&spot)), spot);
    }
}
