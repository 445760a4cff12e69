//! The same rows in another order, in other files, on other numbers of threads: the same bytes.
//!
//! Two small games with repeats, conflicting repeats, jumps and gaps in them. What must be the same: the tables of pursuits, carries
//! and frames, the rankings, the clips, and the page but for its list of files. The findings name kinds and places in the games, so
//! they are the same too, except that a scattered game is told of; only the rows set aside are named by file and row.

use crate::road::audit;
use std::collections::BTreeMap;
use std::fs;
use std::path::{Path, PathBuf};
use tailchase::base::Stream;
use tailchase::demo::row::BALL_ID;
use tailchase::demo::text::csv_text;
use tailchase::demo::untidy::{Mess, carriers, spoil};
use tailchase::demo::{DemoOptions, DemoRow, Format, generate_game, rows, write_games};
use tailchase::pipeline::FramesMode;

fn options() -> DemoOptions {
    DemoOptions { games: 2, plays_per_game: 8, seed: 6, ..DemoOptions::default() }
}

/// Rows of one game after the other, spoiled.
fn games() -> Vec<Vec<DemoRow>> {
    let spoiled = |index: usize| {
        let game = generate_game(index, &options());
        let (mut all, spared) = (rows(&game), carriers(&game));
        for mess in [Mess::ShortGaps, Mess::Jumps, Mess::ConflictingRepeats, Mess::ExactRepeats] {
            assert!(spoil(&mut all, mess, &spared, 3) > 0);
        }
        all
    };
    (0..2).map(spoiled).collect()
}

/// Rows that go into files of the same name go into the same file, in the order in which they come.
fn split(rows: &[DemoRow], name: impl Fn(&DemoRow) -> String) -> BTreeMap<String, Vec<DemoRow>> {
    let mut out: BTreeMap<String, Vec<DemoRow>> = BTreeMap::new();
    for row in rows {
        out.entry(name(row)).or_default().push(row.clone());
    }
    out
}

fn shuffled<T>(mut items: Vec<T>, seed: u64) -> Vec<T> {
    let mut draws = Stream::new(seed, "order");
    for i in (1..items.len()).rev() {
        items.swap(i, draws.below(i + 1));
    }
    items
}

/// Plays in any order, each whole.
fn plays_shuffled(rows: &[DemoRow]) -> Vec<DemoRow> {
    let plays: Vec<Vec<DemoRow>> = split(rows, |r| r.play_id.clone()).into_values().collect();
    shuffled(plays, 1).into_iter().flatten().collect()
}

fn write(dir: &Path, files: BTreeMap<String, Vec<DemoRow>>) -> Vec<PathBuf> {
    let put = |(name, rows): (String, Vec<DemoRow>)| {
        let path = dir.join(format!("{name}.csv"));
        fs::write(&path, csv_text(&rows).unwrap()).unwrap();
        path
    };
    fs::create_dir_all(dir).unwrap();
    files.into_iter().map(put).collect()
}

/// The page without its list of files, and without the line that tells of scattered games.
fn page(text: &str) -> String {
    let (before, rest) = text.split_once("<h3>Files read</h3>").expect("the page lists the files");
    let (_, after) = rest.split_once("<details class=\"settings\">").expect("the settings follow");
    let told = before.lines().filter(|line| !line.contains("scattered game"));
    told.chain(after.lines()).collect::<Vec<_>>().join("\n")
}

/// Every file that must not differ, by its path below the folder.
fn results(inputs: &[PathBuf], out: &Path, threads: usize) -> BTreeMap<PathBuf, Vec<u8>> {
    audit(inputs, out, threads, FramesMode::All);
    let (mut found, mut open) = (BTreeMap::new(), vec![out.to_path_buf()]);
    while let Some(at) = open.pop() {
        for path in fs::read_dir(at).unwrap().map(|e| e.unwrap().path()) {
            let name = path.strip_prefix(out).unwrap().to_path_buf();
            let is_table = ["pursuits", "carries", "frames"].iter().any(|t| name.starts_with(t));
            if path.is_dir() {
                open.push(path);
            } else if name.ends_with("index.html") {
                found.insert(name, page(&fs::read_to_string(&path).unwrap()).into_bytes());
            } else if is_table || ["players", "teams", "clips"].contains(&name.file_stem().unwrap().to_str().unwrap()) {
                found.insert(name, fs::read(&path).unwrap());
            }
        }
    }
    // Three tables of two games, players and teams in two forms, the clips, the page.
    assert_eq!(found.len(), 12, "{:?}", found.keys());
    found
}

fn assert_same(what: &str, a: &BTreeMap<PathBuf, Vec<u8>>, b: &BTreeMap<PathBuf, Vec<u8>>) {
    assert_eq!(a.keys().collect::<Vec<_>>(), b.keys().collect::<Vec<_>>(), "{what}");
    let other: Vec<&PathBuf> = a.keys().filter(|path| a[*path] != b[*path]).collect();
    assert!(other.is_empty(), "{what}: {other:?} differ");
}

#[test]
fn another_order_and_other_files_give_the_same_bytes() {
    let dir = tempfile::tempdir().unwrap();
    let games = games();
    let all: Vec<DemoRow> = games.concat();
    let by_game = |r: &DemoRow| r.game_id.clone();
    let plain = results(&write(&dir.path().join("plain"), split(&all, by_game)), &dir.path().join("plain out"), 1);

    let half = |r: &DemoRow| if r.frame <= 40 { "first" } else { "last" };
    let few = |r: &DemoRow| if r.mover_id == BALL_ID || r.mover_id.ends_with(['0', '1', '2', '3']) { "some" } else { "others" };
    let one = |rows: Vec<DemoRow>| BTreeMap::from([("tracking".to_owned(), rows)]);
    let cases: Vec<(&str, BTreeMap<String, Vec<DemoRow>>)> = vec![
        ("plays shuffled", split(&games.iter().flat_map(|g| plays_shuffled(g)).collect::<Vec<_>>(), by_game)),
        ("rows shuffled, a file a game", split(&games.iter().flat_map(|g| shuffled(g.clone(), 2)).collect::<Vec<_>>(), by_game)),
        ("both games in one file", one(all.clone())),
        ("the games the other way round", one(games.iter().rev().flatten().cloned().collect())),
        ("all rows shuffled in one file", one(shuffled(all.clone(), 3))),
        ("a file a play", split(&all, |r| format!("{}-{}", r.game_id, r.play_id))),
        ("halves of plays", split(&all, |r| format!("{}-{}", r.game_id, half(r)))),
        ("halves of plays, both games in each", split(&all, |r| half(r).to_owned())),
        ("by movers", split(&all, |r| format!("{}-{}", few(r), r.game_id))),
        ("a file a mover", split(&all, |r| r.mover_id.clone())),
    ];
    for (i, (what, files)) in cases.into_iter().enumerate() {
        let inputs = write(&dir.path().join(format!("in {i}")), files);
        assert_same(what, &plain, &results(&inputs, &dir.path().join(format!("out {i}")), 2));
    }
}

#[test]
fn any_number_of_threads_gives_the_same_bytes() {
    let dir = tempfile::tempdir().unwrap();
    let inputs = write(&dir.path().join("in"), split(&games().concat(), |r| r.game_id.clone()));
    let one = results(&inputs, &dir.path().join("one"), 1);
    for threads in [2, 4] {
        assert_same("threads", &one, &results(&inputs, &dir.path().join(threads.to_string()), threads));
    }
}

/// The numbers of the invented files have two decimals (times four), so that text says the same as Parquet.
#[test]
fn text_and_parquet_give_the_same_bytes() {
    let dir = tempfile::tempdir().unwrap();
    let of = |format: Format, name: &str| {
        let folder = dir.path().join(name);
        write_games(&folder, format, &options(), |_| {}).unwrap();
        results(&[folder], &dir.path().join(format!("{name} out")), 2)
    };
    assert_same("text and Parquet", &of(Format::Csv, "csv"), &of(Format::Parquet, "parquet"));
}
