//! Tables as files: what is written comes back, and what is damaged or foreign is told, never guessed.

use super::{message, pursuit, pursuits};
use polars::prelude as pl;
use polars::prelude::SerReader;
use proptest::prelude::*;
use std::fs::{self, File};
use std::path::Path;
use tailchase::store::{
    BriefRow, CarryRow, CsvCell, FrameRow, Kind, PlayerRow, PursuitRow, Row, SetAsideRow, StoreError, csv_text, decode_id, each_game,
    encode_id, folder_name, game_folder, guarded, read_all, read_row, read_table, table_csv, write_table,
};

#[test]
fn a_table_comes_back_with_its_gaps_and_last_digits() {
    let dir = tempfile::tempdir().unwrap();
    let path = dir.path().join("deep/er/part.parquet");
    let rows = pursuits("g", 5);
    write_table(&path, &rows).unwrap();
    assert_eq!(read_table::<PursuitRow>(&path).unwrap(), rows);
    assert_eq!(fs::read_dir(path.parent().unwrap()).unwrap().count(), 1, "no .part is left");
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(40))]
    #[test]
    fn any_finite_row_comes_back(rows in proptest::collection::vec((".*", any::<i64>(), -1e300..1e300f64, proptest::option::of(".*"), proptest::option::of(-1.0..1.0f64), any::<bool>()), 0..12)) {
        let rows: Vec<FrameRow> = rows
            .into_iter()
            .map(|(game, frame, x, drift, need, steady)| FrameRow { game, frame, carrier_x_yd: x, drift, need_yps: need, steady, ..FrameRow::default() })
            .collect();
        let dir = tempfile::tempdir().unwrap();
        let path = dir.path().join("t.parquet");
        write_table(&path, &rows).unwrap();
        prop_assert_eq!(read_table::<FrameRow>(&path).unwrap(), rows);
    }

    #[test]
    fn any_id_makes_a_safe_name_and_comes_back(id in ".{0,60}") {
        let name = encode_id(&id);
        prop_assert!(!name.is_empty() && name.len() <= 255 - "game=.json.part".len());
        prop_assert!(name.bytes().all(|b| b.is_ascii_alphanumeric() || b"_.-%~".contains(&b)), "{}", name);
        prop_assert!(!name.starts_with('.') && !name.ends_with('.'));
        if !name.contains("%~") {
            prop_assert_eq!(decode_id(&name), Some(id));
        }
    }
}

#[test]
fn an_empty_table_keeps_its_schema() {
    let dir = tempfile::tempdir().unwrap();
    let path = dir.path().join("part.parquet");
    write_table::<PlayerRow>(&path, &[]).unwrap();
    assert_eq!(read_table::<PlayerRow>(&path).unwrap(), []);
    let frame = pl::ParquetReader::new(File::open(&path).unwrap()).finish().unwrap();
    let names: Vec<String> = frame.get_column_names().iter().map(|n| n.to_string()).collect();
    assert_eq!(names, PlayerRow::COLUMNS.iter().map(|c| c.name.to_string()).collect::<Vec<_>>());
    for doc in PlayerRow::COLUMNS {
        let expected = match doc.kind {
            Kind::Text => pl::DataType::String,
            Kind::Number => pl::DataType::Float64,
            Kind::Whole => pl::DataType::Int64,
            Kind::Truth => pl::DataType::Boolean,
        };
        assert_eq!(frame.column(doc.name).unwrap().dtype(), &expected, "{}", doc.name);
    }
}

#[test]
fn the_same_rows_give_the_same_bytes() {
    let dir = tempfile::tempdir().unwrap();
    let (a, b) = (dir.path().join("a"), dir.path().join("b"));
    write_table(&a, &pursuits("g", 400)).unwrap();
    write_table(&b, &pursuits("g", 400)).unwrap();
    assert_eq!(fs::read(a).unwrap(), fs::read(b).unwrap());
}

#[test]
fn a_number_that_is_none_becomes_missing_or_is_refused() {
    let dir = tempfile::tempdir().unwrap();
    let path = dir.path().join("part.parquet");
    let optional = PursuitRow { need_start_yps: Some(f64::INFINITY), conceded_yd: Some(f64::NAN), ..pursuit("g", 1) };
    write_table(&path, &[optional]).unwrap();
    let back = read_table::<PursuitRow>(&path).unwrap();
    assert_eq!((back[0].need_start_yps, back[0].conceded_yd), (None, None));

    let before = fs::read(&path).unwrap();
    let required = PursuitRow { start_range_yd: f64::NAN, ..pursuit("g", 2) };
    let error = write_table(&path, &[pursuit("g", 1), required]).unwrap_err();
    assert!(message(&error).contains("row 2, column start_range_yd: expected a finite number, found NaN"), "{}", message(&error));
    assert_eq!(fs::read(&path).unwrap(), before, "a refused write leaves the old file");
}

/// A file of `columns` as another tool would have written it.
fn foreign(path: &Path, columns: Vec<pl::Column>, height: usize) {
    let mut frame = pl::DataFrame::new(height, columns).unwrap();
    pl::ParquetWriter::new(File::create(path).unwrap()).finish(&mut frame).unwrap();
}

#[test]
fn missing_columns_other_widths_and_wrong_kinds() {
    let dir = tempfile::tempdir().unwrap();
    let path = dir.path().join("set.parquet");
    let file = pl::Column::new("file".into(), ["a.csv", "b.csv"]);
    let row = pl::Column::new("row".into(), [4_i32, 5]);
    let reason = pl::Column::new("reason".into(), ["x", "y"]);

    foreign(&path, vec![pl::Column::new("extra".into(), [1.5, 2.5]), reason.clone(), row.clone(), file.clone()], 2);
    let rows = read_table::<SetAsideRow>(&path).unwrap();
    assert_eq!((rows[1].file.as_str(), rows[1].row, rows[1].reason.as_str()), ("b.csv", 5, "y"), "order, width and extras do not matter");

    foreign(&path, vec![row, file.clone()], 2);
    let error = message(&read_table::<SetAsideRow>(&path).unwrap_err());
    assert!(
        error.ends_with(
            "set.parquet, column reason: expected the column, found none (written by another version? audit again with --fresh)"
        ),
        "{error}"
    );

    foreign(&path, vec![file.clone(), pl::Column::new("row".into(), ["4", "5"]), reason.clone()], 2);
    let error = message(&read_table::<SetAsideRow>(&path).unwrap_err());
    assert!(error.contains("set.parquet, column row: expected whole number, found Utf8View"), "{error}");

    foreign(&path, vec![file, pl::Column::new("row".into(), [Some(4_i64), None]), reason], 2);
    let error = message(&read_table::<SetAsideRow>(&path).unwrap_err());
    assert!(error.contains("set.parquet, row 2, column row: expected whole number, found nothing"), "{error}");
}

#[test]
fn an_optional_column_that_is_absent_is_missing_not_zero() {
    let dir = tempfile::tempdir().unwrap();
    let path = dir.path().join("part.parquet");
    write_table(&path, &pursuits("g", 2)).unwrap();
    let frame = pl::ParquetReader::new(File::open(&path).unwrap()).finish().unwrap();
    let kept = frame.columns().iter().filter(|c| c.name() != "conceded_yd").cloned().collect();
    foreign(&path, kept, 2);
    assert_eq!(read_table::<PursuitRow>(&path).unwrap()[0].conceded_yd, None);
}

#[test]
fn damaged_files_are_an_error_and_never_a_panic() {
    let dir = tempfile::tempdir().unwrap();
    let path = dir.path().join("part.parquet");
    write_table(&path, &pursuits("g", 40)).unwrap();
    let whole = fs::read(&path).unwrap();
    for cut in [0, 1, 4, 11, whole.len() / 2, whole.len() - 9, whole.len() - 1] {
        fs::write(&path, &whole[..cut]).unwrap();
        let error = message(&read_table::<PursuitRow>(&path).unwrap_err());
        assert!(error.contains("part.parquet: not readable as Parquet"), "cut at {cut}: {error}");
    }
    fs::write(&path, "game,play\n1,2\n").unwrap();
    assert!(matches!(read_table::<PursuitRow>(&path), Err(StoreError::Parquet { .. })));
    assert!(matches!(read_table::<PursuitRow>(&dir.path().join("absent")), Err(StoreError::Io { .. })));
}

#[test]
fn a_narrow_row_is_the_whole_row_with_fewer_columns() {
    let dir = tempfile::tempdir().unwrap();
    let path = dir.path().join("part.parquet");
    let rows = pursuits("g", 4);
    write_table(&path, &rows).unwrap();
    assert_eq!(read_table::<BriefRow>(&path).unwrap(), rows.iter().map(BriefRow::from).collect::<Vec<_>>());
    for narrow in BriefRow::COLUMNS {
        let whole = PursuitRow::COLUMNS.iter().find(|c| c.name == narrow.name).unwrap();
        assert_eq!((narrow.kind, narrow.optional), (whole.kind, whole.optional), "{}", narrow.name);
    }
    assert_eq!(BriefRow::TABLE, PursuitRow::TABLE);
    assert!(2 * BriefRow::COLUMNS.len() < PursuitRow::COLUMNS.len() + 1);
}

#[test]
fn one_row_is_read_alone() {
    let dir = tempfile::tempdir().unwrap();
    let path = dir.path().join("part.parquet");
    let rows = pursuits("g", 4);
    write_table(&path, &rows).unwrap();
    for (place, row) in rows.iter().enumerate() {
        assert_eq!(read_row::<PursuitRow>(&path, place).unwrap().as_ref(), Some(row));
    }
    for beyond in [4, 5, usize::MAX] {
        assert_eq!(read_row::<PursuitRow>(&path, beyond).unwrap(), None);
    }
    fs::write(&path, "no table").unwrap();
    assert!(matches!(read_row::<PursuitRow>(&path, 0), Err(StoreError::Parquet { .. })));
}

#[test]
fn games_are_read_in_order_of_folder_name_and_one_by_one() {
    let dir = tempfile::tempdir().unwrap();
    for game in ["b", "a", "10", "9"] {
        write_table(&game_folder(dir.path(), "pursuits", game), &pursuits(game, 2)).unwrap();
    }
    fs::create_dir_all(dir.path().join("pursuits/other")).unwrap();
    fs::write(dir.path().join("pursuits/notes.txt"), "mine").unwrap();
    let order: Vec<String> = read_all::<PursuitRow>(dir.path()).unwrap().into_iter().map(|r| r.game).collect();
    assert_eq!(order, ["10", "10", "9", "9", "a", "a", "b", "b"]);
    let mut counts = Vec::new();
    each_game(dir.path(), |rows: Vec<PursuitRow>| counts.push(rows.len())).unwrap();
    assert_eq!(counts, [2, 2, 2, 2]);
    assert_eq!(read_all::<CarryRow>(dir.path()).unwrap(), [], "a table that nobody wrote has no rows");
}

#[test]
fn csv_keeps_spreadsheets_from_running_text() {
    for text in ["=cmd", "+1", "-2", "@x", "\tx", "\rx"] {
        assert_eq!(guarded(text), format!("'{text}"));
    }
    let rows = vec![vec![
        CsvCell::Text("=a,\"b\"".to_string()),
        CsvCell::Number(-0.1),
        CsvCell::Whole(-3),
        CsvCell::Truth(true),
        CsvCell::Missing,
        CsvCell::Number(f64::NAN),
    ]];
    assert_eq!(csv_text(&["t", "n", "w", "b", "m", "nan"], &rows), "t,n,w,b,m,nan\n\"'=a,\"\"b\"\"\",-0.1,-3,true,,\n");

    let hostile = [SetAsideRow { file: "-x.csv".to_string(), row: 3, reason: "line\nbreak".to_string() }];
    let text = table_csv(&hostile);
    assert_eq!(text, "file,row,reason\n'-x.csv,3,\"line\nbreak\"\n");
    // Read back by the csv crate (default reader), which prints the fields as they were before quoting.
    let record = csv::Reader::from_reader(text.as_bytes()).records().next().unwrap().unwrap();
    assert_eq!(record.iter().collect::<Vec<_>>(), ["'-x.csv", "3", "line\nbreak"]);
    assert_eq!(folder_name("x"), "game=x");
}
