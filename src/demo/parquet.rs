//! A game's rows as Parquet, column by column.

use super::game::DemoGame;
use super::row::{COLUMNS, row_count, visit};
use polars::prelude::{
    Column, DataFrame, IntoSeries, NamedFrom, ParquetCompression, ParquetWriter, PlSmallStr, PolarsError, Series, StringChunkedBuilder,
};
use std::io::Write;

/// Writes the rows of a game; text for ids, marks and names, numbers for the rest; missing stays missing.
///
/// # Errors
/// When the sink cannot be written.
pub fn write_parquet(game: &DemoGame, out: &mut dyn Write) -> Result<(), PolarsError> {
    let n = row_count(game);
    let title = PlSmallStr::from_static;
    // Text columns in the order of the file: game, play, mover, name, side, position, jersey, event, carrier.
    let mut texts: Vec<StringChunkedBuilder> =
        [0, 1, 4, 5, 6, 7, 8, 13, 14].iter().map(|k| StringChunkedBuilder::new(title(COLUMNS[*k]), n)).collect();
    let mut frame = Vec::with_capacity(n);
    let mut numbers: [Vec<f64>; 4] = std::array::from_fn(|_| Vec::with_capacity(n));
    let mut heading: Vec<Option<f64>> = Vec::with_capacity(n);
    visit(game, |row| {
        let fields = [
            Some(row.game_id),
            Some(row.play_id),
            Some(row.mover_id),
            Some(row.name),
            row.side,
            row.position,
            row.jersey,
            row.event,
            row.carrier,
        ];
        for (builder, field) in texts.iter_mut().zip(fields) {
            builder.append_option(field);
        }
        frame.push(row.frame);
        for (column, value) in numbers.iter_mut().zip([row.time_s, row.x, row.y, row.speed]) {
            column.push(value);
        }
        heading.push(row.heading);
    });
    let mut by_place: Vec<(usize, Series)> = Vec::with_capacity(COLUMNS.len());
    for (builder, k) in texts.into_iter().zip([0, 1, 4, 5, 6, 7, 8, 13, 14]) {
        if k != 14 || game.carrier_column {
            by_place.push((k, builder.finish().into_series()));
        }
    }
    by_place.push((2, Series::new(title(COLUMNS[2]), frame)));
    for (column, k) in numbers.into_iter().zip([3, 9, 10, 11]) {
        by_place.push((k, Series::new(title(COLUMNS[k]), column)));
    }
    by_place.push((12, Series::new(title(COLUMNS[12]), heading)));
    by_place.sort_by_key(|(k, _)| *k);
    let columns: Vec<Column> = by_place.into_iter().map(|(_, series)| Column::from(series)).collect();
    let mut table = DataFrame::new(n, columns)?;
    // One thread: games are written side by side already.
    ParquetWriter::new(out).with_compression(ParquetCompression::Lz4Raw).set_parallel(false).finish(&mut table)?;
    Ok(())
}
