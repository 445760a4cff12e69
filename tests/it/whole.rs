//! The program from files to report: resumed, repeated, refused.

use std::collections::BTreeMap;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Output};

fn tailchase(arguments: &[&Path]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_tailchase")).args(arguments).output().unwrap()
}

fn stderr(output: &Output) -> String {
    String::from_utf8(output.stderr.clone()).unwrap()
}

/// Two small invented games in a folder of their own.
fn invent(dir: &Path, format: &str) -> PathBuf {
    let games = dir.join("games");
    let words = ["--games", "2", "--plays", "6", "--quiet", "--format", format].map(Path::new);
    let output = tailchase(&[&[Path::new("demo"), &games], &words[..]].concat());
    assert_eq!(output.status.code(), Some(0), "{}", stderr(&output));
    games
}

fn trackings(games: &Path) -> Vec<PathBuf> {
    let mut files: Vec<PathBuf> = fs::read_dir(games).unwrap().map(|e| e.unwrap().path()).collect();
    files.retain(|f| f.file_name().unwrap().to_str().unwrap().starts_with("tracking_"));
    files.sort();
    assert_eq!(files.len(), 2);
    files
}

fn audit(inputs: &[PathBuf], out: &Path, more: &[&str]) -> Output {
    let mut arguments: Vec<&Path> = vec![Path::new("audit")];
    arguments.extend(inputs.iter().map(PathBuf::as_path));
    arguments.extend([Path::new("--out"), out]);
    arguments.extend(more.iter().map(Path::new));
    tailchase(&arguments)
}

fn assert_done(output: &Output) {
    assert!(matches!(output.status.code(), Some(0 | 1)), "{}", stderr(output));
}

/// Every file under a folder with its contents, by path below it.
fn contents(folder: &Path) -> BTreeMap<PathBuf, Vec<u8>> {
    let (mut found, mut open) = (BTreeMap::new(), vec![folder.to_path_buf()]);
    while let Some(at) = open.pop() {
        for path in fs::read_dir(at).unwrap().map(|e| e.unwrap().path()) {
            if path.is_dir() {
                open.push(path);
            } else {
                found.insert(path.strip_prefix(folder).unwrap().to_path_buf(), fs::read(&path).unwrap());
            }
        }
    }
    found
}

fn assert_same(a: &Path, b: &Path) {
    let (a, b) = (contents(a), contents(b));
    assert_eq!(a.keys().collect::<Vec<_>>(), b.keys().collect::<Vec<_>>());
    for (path, bytes) in &a {
        assert!(b[path] == *bytes, "{} differs", path.display());
    }
}

#[test]
fn the_number_of_threads_and_the_order_of_files_change_no_byte() {
    let dir = tempfile::tempdir().unwrap();
    let mut files = trackings(&invent(dir.path(), "csv"));
    let (one, two) = (dir.path().join("one"), dir.path().join("two"));
    assert_done(&audit(&files, &one, &["--threads", "1"]));
    files.reverse();
    assert_done(&audit(&files, &two, &["--threads", "3"]));
    assert_same(&one, &two);
    assert!(contents(&one).keys().any(|p| p.ends_with("report/index.html")));
}

#[test]
fn a_run_cut_short_goes_on_and_ends_the_same() {
    let dir = tempfile::tempdir().unwrap();
    let files = trackings(&invent(dir.path(), "parquet"));
    let (whole, resumed) = (dir.path().join("whole"), dir.path().join("resumed"));
    assert_done(&audit(&files, &whole, &[]));

    // As a run leaves it that died after its first game, in the middle of the second.
    let first = audit(&files[..1], &resumed, &[]);
    assert_done(&first);
    fs::remove_file(resumed.join("audit.json")).unwrap();
    let torn = resumed.join("pursuits/game=torn");
    fs::create_dir(&torn).unwrap();
    fs::write(torn.join("part.parquet.part"), "half").unwrap();
    let second = audit(&files, &resumed, &[]);
    assert_done(&second);
    assert!(stderr(&second).contains("games: 1 audited, 1 kept from before, 2 in the folder"), "{}", stderr(&second));
    assert_same(&whole, &resumed);

    let third = audit(&files, &resumed, &[]);
    assert!(stderr(&third).contains("games: 0 audited, 2 kept from before"), "{}", stderr(&third));
    let fresh = audit(&files, &resumed, &["--fresh"]);
    assert!(stderr(&fresh).contains("games: 2 audited, 0 kept from before"), "{}", stderr(&fresh));
    assert_same(&whole, &resumed);
}

#[test]
fn games_of_earlier_runs_stay_until_a_fresh_start() {
    let dir = tempfile::tempdir().unwrap();
    let files = trackings(&invent(dir.path(), "csv"));
    let (out, alone) = (dir.path().join("out"), dir.path().join("alone"));
    assert_done(&audit(&files[..1], &out, &[]));
    let before = contents(&out);
    let second = audit(&files[1..], &out, &[]);
    assert_done(&second);
    assert!(stderr(&second).contains("1 audited, 0 kept from before, 2 in the folder"), "{}", stderr(&second));
    let after = contents(&out);
    for (path, bytes) in before.iter().filter(|(path, _)| path.to_str().unwrap().contains("game=")) {
        assert!(after[path] == *bytes, "{} was touched", path.display());
    }
    assert_done(&audit(&files[1..], &out, &["--fresh"]));
    assert_done(&audit(&files[1..], &alone, &[]));
    assert_same(&out, &alone);
}

#[test]
fn bad_input_fails_with_a_message_and_leaves_nothing() {
    let dir = tempfile::tempdir().unwrap();
    let games = invent(dir.path(), "parquet");
    let out = dir.path().join("out");
    let cases: [(&str, Vec<u8>, &str); 5] = [
        ("empty.csv", Vec::new(), "empty.csv"),
        ("no_x.csv", b"game,play,frame,id,y\n1,1,1,a,2\n".to_vec(), "no_x.csv, row 0: expected a column for x"),
        ("cut.parquet", fs::read(&trackings(&games)[0]).unwrap()[..5000].to_vec(), "cut.parquet: expected a whole Parquet file"),
        (
            "text.csv",
            b"game,play,frame,time,id,side,x,y\n1,1,1,0.0,a,H,far,2\n1,1,2,0.1,a,H,3,2\n".to_vec(),
            "text.csv, row 1, column x: expected",
        ),
        ("notes.csv", b"\n".to_vec(), "notes.csv"),
    ];
    for (name, bytes, message) in cases {
        let file = dir.path().join(name);
        fs::write(&file, bytes).unwrap();
        let output = audit(&[file], &out, &[]);
        assert_eq!(output.status.code(), Some(2), "{name}: {}", stderr(&output));
        assert!(stderr(&output).starts_with("tailchase: ") && stderr(&output).contains(message), "{name}: {}", stderr(&output));
        assert!(output.stdout.is_empty(), "{name}");
        let left: Vec<_> =
            if out.exists() { contents(&out).into_keys().filter(|p| p != Path::new(".tailchase")).collect() } else { Vec::new() };
        assert!(left.is_empty(), "{name} left {left:?}");
    }
    let nothing = dir.path().join("nothing");
    fs::create_dir(&nothing).unwrap();
    for input in [nothing, dir.path().join("absent.csv")] {
        assert_eq!(audit(&[input], &out, &[]).status.code(), Some(2));
    }
    let file = dir.path().join("a file");
    fs::write(&file, "mine").unwrap();
    let output = audit(&trackings(&games), &file, &[]);
    assert_eq!(output.status.code(), Some(2));
    assert!(stderr(&output).contains("a file: expected a folder, found a file"), "{}", stderr(&output));
    let output = audit(&trackings(&games), &file.join("below"), &[]);
    assert_eq!(output.status.code(), Some(2), "a folder that cannot be made");
    assert_eq!(fs::read_to_string(&file).unwrap(), "mine");
}

#[test]
fn a_failed_run_leaves_the_earlier_audit_as_it_was() {
    let dir = tempfile::tempdir().unwrap();
    let files = trackings(&invent(dir.path(), "csv"));
    let out = dir.path().join("out");
    assert_done(&audit(&files, &out, &[]));
    let before = contents(&out);
    let broken = dir.path().join("broken.csv");
    let text = fs::read_to_string(&files[0]).unwrap();
    let lines: Vec<&str> = text.lines().take(40).collect();
    fs::write(&broken, format!("{}\n1,2\n", lines.join("\n"))).unwrap();
    let output = audit(&[broken], &out, &[]);
    assert_eq!(output.status.code(), Some(2), "{}", stderr(&output));
    assert_eq!(contents(&out), before);
}

#[test]
fn an_edited_table_redoes_the_games_and_a_moved_one_does_not() {
    let dir = tempfile::tempdir().unwrap();
    let games = invent(dir.path(), "parquet");
    let (files, out) = (trackings(&games), dir.path().join("out"));
    for (flag, name) in [("--players", "players.csv"), ("--plays", "plays.csv")] {
        let here = games.join(name);
        let moved = dir.path().join(format!("moved_{name}"));
        let run = |table: &Path| stderr(&audit(&files, &out, &[flag, table.to_str().unwrap()]));
        let first = run(&here);
        assert!(first.contains("games: 2 audited, 0 kept from before"), "{first}");
        fs::copy(&here, &moved).unwrap();
        let again = run(&moved);
        assert!(again.contains("games: 0 audited, 2 kept from before"), "{again}");
        let text = fs::read_to_string(&moved).unwrap();
        fs::write(&moved, text.trim_end()).unwrap();
        let edited = run(&moved);
        assert!(edited.contains("games: 2 audited, 0 kept from before"), "{edited}");
    }
}

#[test]
fn the_clip_list_holds_each_game_costliest_first() {
    let dir = tempfile::tempdir().unwrap();
    let files = trackings(&invent(dir.path(), "csv"));
    let out = dir.path().join("out");
    assert_done(&audit(&files, &out, &[]));
    let list = fs::read_to_string(out.join("clips.csv")).unwrap();
    let mut rows: Vec<(String, f64)> = Vec::new();
    for record in csv::Reader::from_reader(list.as_bytes()).records() {
        let record = record.unwrap();
        rows.push((record[0].to_owned(), record[7].parse().unwrap()));
    }
    let command = tailchase(&[Path::new("clips"), &out, Path::new("--format"), Path::new("csv")]);
    let command = String::from_utf8(command.stdout).unwrap();
    let sorted = |text: &str| text.lines().map(str::to_owned).collect::<std::collections::BTreeSet<_>>();
    assert_eq!(sorted(&list), sorted(&command), "the same clips as the command lists");
    assert!(rows.len() > 20);
    assert!(rows.windows(2).all(|w| w[0].0 < w[1].0 || (w[0].0 == w[1].0 && w[0].1 >= w[1].1)));
    assert_ne!(rows[0].0, rows[rows.len() - 1].0);
}
