//! Rows as CSV text. Two decimals for coordinates, quotes only where a field needs them.

use super::row::{COLUMNS, DemoRow, RowRef};
use std::io::Write;

/// Writes CSV rows into any sink, field by field, without a text per number.
pub struct RowWriter<W: Write> {
    out: csv::Writer<W>,
    number: Vec<u8>,
    carrier: bool,
    note: bool,
}

impl<W: Write> RowWriter<W> {
    /// Writes the header. `carrier` and `note`: whether these columns exist.
    ///
    /// # Errors
    /// When the sink cannot be written.
    pub fn new(sink: W, carrier: bool, note: bool) -> Result<RowWriter<W>, csv::Error> {
        let mut out = csv::WriterBuilder::new().buffer_capacity(1 << 16).from_writer(sink);
        let plain = &COLUMNS[..COLUMNS.len() - 1];
        out.write_record(plain.iter().copied().chain(carrier.then_some("carrier")).chain(note.then_some("note")))?;
        Ok(RowWriter { out, number: Vec::with_capacity(24), carrier, note })
    }

    /// # Errors
    /// When the sink cannot be written.
    pub fn write(&mut self, row: &RowRef<'_>) -> Result<(), csv::Error> {
        self.write_fields(row, Some(row.x), Some(row.y), Some(row.speed), None)
    }

    /// # Errors
    /// When the sink cannot be written.
    pub fn write_spoiled(&mut self, row: &DemoRow) -> Result<(), csv::Error> {
        let lent = RowRef {
            game_id: &row.game_id,
            play_id: &row.play_id,
            frame: row.frame,
            time_s: row.time_s,
            mover_id: &row.mover_id,
            name: &row.name,
            side: row.side.as_deref(),
            position: row.position.as_deref(),
            jersey: row.jersey.as_deref(),
            x: 0.0,
            y: 0.0,
            speed: 0.0,
            heading: row.heading,
            event: row.event.as_deref(),
            carrier: row.carrier.as_deref(),
        };
        self.write_fields(&lent, row.x, row.y, row.speed, row.note.as_deref())
    }

    /// # Errors
    /// When the sink cannot be written.
    pub fn finish(mut self) -> Result<(), csv::Error> {
        self.out.flush()?;
        Ok(())
    }

    fn write_fields(
        &mut self,
        row: &RowRef<'_>,
        x: Option<f64>,
        y: Option<f64>,
        speed: Option<f64>,
        note: Option<&str>,
    ) -> Result<(), csv::Error> {
        self.out.write_field(row.game_id)?;
        self.out.write_field(row.play_id)?;
        self.decimal(Some(row.frame as f64), 0)?;
        self.decimal(Some(row.time_s), 4)?;
        self.out.write_field(row.mover_id)?;
        self.out.write_field(row.name)?;
        for text in [row.side, row.position, row.jersey] {
            self.out.write_field(text.unwrap_or(""))?;
        }
        for value in [x, y, speed, row.heading] {
            self.decimal(value, 2)?;
        }
        self.out.write_field(row.event.unwrap_or(""))?;
        if self.carrier {
            self.out.write_field(row.carrier.unwrap_or(""))?;
        }
        if self.note {
            self.out.write_field(note.unwrap_or(""))?;
        }
        self.out.write_record(None::<&[u8]>)
    }

    /// A number with at most `places` decimals, trailing zeros dropped; an empty field for a missing one.
    fn decimal(&mut self, value: Option<f64>, places: usize) -> Result<(), csv::Error> {
        self.number.clear();
        if let Some(value) = value {
            push_decimal(&mut self.number, value, places);
        }
        self.out.write_field(&self.number)
    }
}

/// Appends a number with at most `places` (0 to 4) decimals; nothing for one that is not finite.
pub fn push_decimal(out: &mut Vec<u8>, value: f64, places: usize) {
    const TEN: [u64; 5] = [1, 10, 100, 1_000, 10_000];
    let scale = TEN[places.min(4)];
    let scaled = (value.abs() * scale as f64).round();
    if !value.is_finite() {
        return; // missing, an empty field
    }
    if scaled >= 1e15 {
        out.extend_from_slice(value.to_string().as_bytes());
        return;
    }
    let mut units = scaled as u64;
    if value < 0.0 && units > 0 {
        out.push(b'-');
    }
    let mut decimals = places.min(4);
    while decimals > 0 && units.is_multiple_of(10) {
        units /= 10;
        decimals -= 1;
    }
    let mut digits = [0_u8; 24];
    let mut at = digits.len();
    let mut written = 0;
    while units > 0 || written <= decimals {
        at -= 1;
        digits[at] = b'0' + (units % 10) as u8;
        units /= 10;
        written += 1;
        if written == decimals {
            at -= 1;
            digits[at] = b'.';
        }
    }
    out.extend_from_slice(&digits[at..]);
}

/// Rows as one CSV text with header; the carrier and note columns exist where any row has one.
///
/// # Errors
/// Never for memory; the type is the writer's.
pub fn csv_text(rows: &[DemoRow]) -> Result<Vec<u8>, csv::Error> {
    let mut text = Vec::new();
    let mut writer = RowWriter::new(&mut text, rows.iter().any(|r| r.carrier.is_some()), rows.iter().any(|r| r.note.is_some()))?;
    for row in rows {
        writer.write_spoiled(row)?;
    }
    writer.finish()?;
    Ok(text)
}
