//! A season of invented games on disk: one tracking file a game, the truth, and the optional tables.

use super::game::{DemoGame, generate_game};
use super::options::{DemoOptions, OptionError};
use super::parquet::write_parquet;
use super::row::visit;
use super::text::RowWriter;
use super::truth::Tables;
use std::fs::{self, File};
use std::io::{self, BufWriter, Write};
use std::path::{Path, PathBuf};
use std::sync::atomic::{AtomicBool, AtomicUsize, Ordering};
use std::sync::mpsc;

/// What a tracking file is written as.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Format {
    Csv,
    Parquet,
}

impl Format {
    pub fn extension(self) -> &'static str {
        match self {
            Format::Csv => "csv",
            Format::Parquet => "parquet",
        }
    }
}

/// Why a season could not be written.
#[derive(Debug, thiserror::Error)]
pub enum WriteError {
    #[error(transparent)]
    Options(#[from] OptionError),
    #[error("{}: cannot {what} (check the path and the rights on it)", path.display())]
    Io { path: PathBuf, what: &'static str, source: io::Error },
    #[error("{}: cannot write CSV", path.display())]
    Csv { path: PathBuf, source: csv::Error },
    #[error("{}: cannot write Parquet", path.display())]
    Parquet { path: PathBuf, source: Box<polars::prelude::PolarsError> },
}

/// What was written.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Written {
    pub games: usize,
    pub plays: usize,
    pub rows: u64,
}

/// Writes `tracking_<game>.csv` or `.parquet` for every game, then `truth_players.csv`, `truth_carries.csv`,
/// `players.csv` and `plays.csv`, each whole or not at all, over earlier ones. `progress` is told after every game
/// how many are done. The files do not depend on the number of threads.
///
/// # Errors
/// Options that cannot be used, before anything is written; else the first file that cannot be written.
pub fn write_games(dir: &Path, format: Format, options: &DemoOptions, mut progress: impl FnMut(usize)) -> Result<Written, WriteError> {
    options.check()?;
    fs::create_dir_all(dir).map_err(|source| WriteError::Io { path: dir.to_path_buf(), what: "make the folder", source })?;
    let next = AtomicUsize::new(0);
    let stop = AtomicBool::new(false);
    let (sender, receiver) = mpsc::sync_channel(2);
    let mut tables = Tables::default();
    let mut written = Written::default();
    let mut failed = None;
    std::thread::scope(|scope| {
        for _ in 0..options.threads.clamp(1, options.games) {
            let (sender, next, stop) = (sender.clone(), &next, &stop);
            scope.spawn(move || {
                loop {
                    let index = next.fetch_add(1, Ordering::Relaxed);
                    if index >= options.games || stop.load(Ordering::Relaxed) {
                        return;
                    }
                    let game = generate_game(index, options);
                    let done = write_game(dir, format, &game).map(|rows| (index, game, rows));
                    if sender.send(done).is_err() {
                        return;
                    }
                }
            });
        }
        drop(sender);
        for done in receiver {
            match done {
                Ok((index, game, rows)) => {
                    tables.add(index, &game);
                    written.games += 1;
                    written.plays += game.plays.len();
                    written.rows += rows;
                    progress(written.games);
                }
                Err(error) => {
                    stop.store(true, Ordering::Relaxed);
                    failed.get_or_insert(error);
                }
            }
        }
    });
    if let Some(error) = failed {
        return Err(error);
    }
    for (name, text) in [
        ("truth_players.csv", tables.truth_players()),
        ("truth_carries.csv", tables.truth_carries()),
        ("players.csv", tables.players()),
        ("plays.csv", tables.plays(options.direction_column)),
    ] {
        let path = dir.join(name);
        let text = text.map_err(|source| WriteError::Csv { path: path.clone(), source })?;
        whole(&path, |out| out.write_all(&text).map_err(|source| io_error(&path, "write the file", source)))?;
    }
    Ok(written)
}

/// Writes one game's tracking file and gives the number of its rows.
///
/// # Errors
/// When the file cannot be written.
pub fn write_game(dir: &Path, format: Format, game: &DemoGame) -> Result<u64, WriteError> {
    // Ids of invented games are digits, so that they are safe as they stand.
    let path = dir.join(format!("tracking_{}.{}", game.id, format.extension()));
    match format {
        Format::Csv => whole(&path, |out| write_csv(game, out).map_err(|source| WriteError::Csv { path: path.clone(), source }))?,
        Format::Parquet => {
            whole(&path, |out| write_parquet(game, out).map_err(|e| WriteError::Parquet { path: path.clone(), source: Box::new(e) }))?;
        }
    }
    Ok(super::row::row_count(game) as u64)
}

fn write_csv(game: &DemoGame, out: &mut dyn Write) -> Result<(), csv::Error> {
    let mut writer = RowWriter::new(out, game.carrier_column, false)?;
    let mut result = Ok(());
    visit(game, |row| {
        if result.is_ok() {
            result = writer.write(&row);
        }
    });
    result?;
    writer.finish()
}

fn io_error(path: &Path, what: &'static str, source: io::Error) -> WriteError {
    WriteError::Io { path: path.to_path_buf(), what, source }
}

/// Writes beside the target and puts it in place when all is there; a failure leaves nothing behind.
fn whole(path: &Path, write: impl FnOnce(&mut dyn Write) -> Result<(), WriteError>) -> Result<(), WriteError> {
    let mut name = path.file_name().unwrap_or_default().to_os_string();
    name.push(".part");
    let part = path.with_file_name(name);
    let staged = || {
        let file = File::create(&part).map_err(|source| io_error(&part, "create the file", source))?;
        let mut out = BufWriter::with_capacity(1 << 18, file);
        write(&mut out)?;
        out.flush().map_err(|source| io_error(&part, "write the file", source))?;
        fs::rename(&part, path).map_err(|source| io_error(path, "put the file in place", source))
    };
    let result = staged();
    if result.is_err() {
        // Nothing more can be done when this fails too; the error that is told is the first one.
        let _ = fs::remove_file(&part);
    }
    result
}
