//! A season on disk: every file there, the same bytes for any number of threads, refusals that leave nothing behind.

use polars::prelude::{DataType, ParquetReader, SerReader};
use std::collections::BTreeMap;
use std::fs::{self, File};
use std::path::Path;
use tailchase::demo::row::{COLUMNS, row_count};
use tailchase::demo::{DemoOptions, Format, generate_game, rows, write_games};

fn options() -> DemoOptions {
    DemoOptions { games: 4, plays_per_game: 3, ..DemoOptions::default() }
}

fn bytes_of(dir: &Path) -> BTreeMap<String, Vec<u8>> {
    let entries = fs::read_dir(dir).unwrap().map(|e| e.unwrap());
    entries.map(|e| (e.file_name().to_string_lossy().into_owned(), fs::read(e.path()).unwrap())).collect()
}

#[test]
fn same_bytes_for_any_number_of_threads() {
    for format in [Format::Csv, Format::Parquet] {
        let (one, four) = (tempfile::tempdir().unwrap(), tempfile::tempdir().unwrap());
        let mut seen = Vec::new();
        let written = write_games(one.path(), format, &options(), |done| seen.push(done)).unwrap();
        write_games(four.path(), format, &DemoOptions { threads: 4, ..options() }, |_| {}).unwrap();
        let files = bytes_of(one.path());
        assert_eq!(files, bytes_of(four.path()));
        assert_eq!(files.len(), 4 + 4, "{:?}", files.keys());
        assert!(files.keys().all(|n| !n.ends_with(".part")));
        assert_eq!(seen, [1, 2, 3, 4]);
        let rows: usize = (0..4).map(|g| row_count(&generate_game(g, &options()))).sum();
        assert_eq!((written.games, written.plays, written.rows), (4, 12, rows as u64));
    }
}

#[test]
fn parquet_holds_the_rows_with_their_types() {
    let dir = tempfile::tempdir().unwrap();
    let options = DemoOptions { games: 1, carrier_column: true, ..options() };
    write_games(dir.path(), Format::Parquet, &options, |_| {}).unwrap();
    let game = generate_game(0, &options);
    let path = dir.path().join(format!("tracking_{}.parquet", game.id));
    let table = ParquetReader::new(File::open(path).unwrap()).finish().unwrap();
    assert_eq!(table.get_column_names(), COLUMNS);
    let expected = rows(&game);
    assert_eq!(table.height(), expected.len());
    assert_eq!(table.column("mover_id").unwrap().dtype(), &DataType::String);
    assert_eq!(table.column("frame").unwrap().dtype(), &DataType::Int64);
    let (x, heading) = (table.column("x").unwrap().f64().unwrap(), table.column("heading").unwrap().f64().unwrap());
    let text = |c: &str| table.column(c).unwrap().str().unwrap().clone();
    let (name, event, carrier) = (text("name"), text("event"), text("carrier"));
    for (k, row) in expected.iter().enumerate() {
        assert_eq!((x.get(k), heading.get(k)), (row.x, row.heading));
        assert_eq!(name.get(k), Some(&*row.name));
        assert_eq!((event.get(k), carrier.get(k)), (row.event.as_deref(), row.carrier.as_deref()));
    }
}

#[test]
fn refusals_name_the_place_and_leave_nothing() {
    let dir = tempfile::tempdir().unwrap();
    let bad = DemoOptions { noise_yd: -1.0, ..options() };
    let error = write_games(&dir.path().join("out"), Format::Csv, &bad, |_| {}).unwrap_err();
    assert_eq!(error.to_string(), "noise: expected 0 to 2 yd, found -1 yd (0.05 is usual)");
    assert!(!dir.path().join("out").exists());
    let file = dir.path().join("file");
    fs::write(&file, "not a folder").unwrap();
    let error = write_games(&file.join("out"), Format::Csv, &options(), |_| {}).unwrap_err();
    assert!(error.to_string().contains("cannot make the folder"), "{error}");
    // A folder where a tracking file wants to be.
    let game = generate_game(0, &options());
    let taken = dir.path().join("taken");
    fs::create_dir_all(taken.join(format!("tracking_{}.csv", game.id))).unwrap();
    let error = write_games(&taken, Format::Csv, &options(), |_| {}).unwrap_err();
    assert!(error.to_string().contains("cannot put the file in place"), "{error}");
    assert!(names_in(&taken).iter().all(|n| !n.ends_with(".part")));
}

fn names_in(dir: &Path) -> Vec<String> {
    fs::read_dir(dir).unwrap().map(|e| e.unwrap().file_name().to_string_lossy().into_owned()).collect()
}
