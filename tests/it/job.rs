//! The main job on the bundled demo, as a user runs it, held against the demo's own truth.

use std::collections::{BTreeMap, BTreeSet};
use std::fs;
use std::path::{Path, PathBuf};
use std::process::Command;
use tailchase::demo::{DemoOptions, generate_game, rows, text::csv_text};
use tailchase::store::{CarryRow, PlayerRow, PursuitRow, read_all, read_table};

fn demo() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("fixtures/demo")
}

fn audit(arguments: &[&str]) -> (Option<i32>, String, String) {
    let run = Command::new(env!("CARGO_BIN_EXE_tailchase")).arg("audit").args(arguments).output().expect("starts");
    (run.status.code(), String::from_utf8_lossy(&run.stdout).into_owned(), String::from_utf8_lossy(&run.stderr).into_owned())
}

fn truth(name: &str) -> Vec<BTreeMap<String, String>> {
    let mut reader = csv::Reader::from_path(demo().join(name)).expect("the truth is there");
    reader.deserialize().map(|row| row.expect("a row")).collect()
}

#[test]
fn the_bundled_demo_is_audited_as_its_truth_says() {
    let out = tempfile::tempdir().expect("a folder");
    let out_text = out.path().to_str().expect("a name");
    let (code, table, words) = audit(&[demo().to_str().expect("a name"), "--out", out_text, "--frames", "all"]);
    assert_eq!(code, Some(0), "{words}");
    assert!(table.contains("report/index.html") && table.contains("own yd"), "{table}");

    // Carriers: at least 98 % found, and within two frames at both ends in 95 %.
    let carries: Vec<CarryRow> = read_all(out.path()).expect("carries");
    let planted = truth("truth_carries.csv");
    assert!(planted.len() > 100);
    let mut found = 0;
    let mut near = 0;
    for row in &planted {
        let number = |key: &str| row[key].parse::<i64>().expect("a frame");
        let mine = carries.iter().find(|c| {
            c.play == row["play_id"]
                && c.carrier == row["carrier_id"]
                && c.end_frame >= number("start_frame")
                && c.start_frame <= number("end_frame")
        });
        if let Some(c) = mine {
            found += 1;
            let ends_near = (c.end_frame - number("end_frame")).abs() <= 2;
            near += usize::from(ends_near && (c.start_frame - number("start_frame")).abs() <= 2);
        }
    }
    assert!(found as f64 >= 0.98 * planted.len() as f64, "{found} of {} carriers", planted.len());
    assert!(near as f64 >= 0.95 * planted.len() as f64, "{near} of {} carries", planted.len());

    // Characters: those who had enough chances, the sound ones rank above the faulty ones.
    let players: Vec<PlayerRow> = read_table(&out.path().join("players.parquet")).expect("players");
    let character: BTreeMap<String, String> =
        truth("truth_players.csv").into_iter().map(|row| (row["player_id"].clone(), row["character"].clone())).collect();
    let ranks = |sound: bool| -> Vec<f64> {
        players.iter().filter(|p| !p.too_few && (character[&p.player] == "sound") == sound).map(|p| p.rank as f64).collect()
    };
    let mean = |ranks: Vec<f64>| ranks.iter().sum::<f64>() / ranks.len() as f64;
    assert!(ranks(true).len() >= 3 && ranks(false).len() >= 3);
    let (sound, faulty) = (mean(ranks(true)), mean(ranks(false)));
    assert!(sound < faulty, "mean rank {sound:.1} of the sound, {faulty:.1} of the faulty");

    // Every account balances, and the page says so for every one it draws.
    let pursuits: Vec<PursuitRow> = read_all(out.path()).expect("pursuits");
    let mut accounts = 0;
    for row in pursuits.iter().filter(|r| r.conceded_yd.is_some()) {
        let parts = [row.late_yd, row.flat_yd, row.deep_yd, row.pace_yd, row.block_yd, row.move_yd];
        let sum: f64 = parts.iter().map(|p| p.expect("all six or none")).sum();
        assert!((sum - row.conceded_yd.expect("filtered")).abs() <= 1e-9, "play {} pursuit {}", row.play, row.pursuit);
        accounts += 1;
    }
    assert!(accounts > 500);
    let page = fs::read_to_string(out.path().join("report/index.html")).expect("the page");
    assert!(!page.contains("does not add up") && page.contains("<svg"));
    let endings: BTreeSet<&str> = pursuits.iter().map(|p| p.ending.as_str()).collect();
    assert!(endings.contains("stop") && endings.contains("chance_lost") && endings.contains("contact_lost"), "{endings:?}");
}

/// The same game with its columns renamed, in another order, with others between, in metres from the field's centre.
#[test]
fn another_dress_gives_the_same_table() {
    let folder = tempfile::tempdir().expect("a folder");
    let plain = folder.path().join("plain.csv");
    let rows = rows(&generate_game(0, &DemoOptions { games: 1, plays_per_game: 12, ..DemoOptions::default() }));
    fs::write(&plain, csv_text(&rows).expect("text")).expect("written");

    let mut reader = csv::Reader::from_path(&plain).expect("opens");
    let header = reader.headers().expect("a header").clone();
    let column = |name: &str| header.iter().position(|h| h == name).unwrap_or_else(|| panic!("no column {name} in {header:?}"));
    let dressed = folder.path().join("dressed.csv");
    let mut writer = csv::Writer::from_path(&dressed).expect("opens");
    writer
        .write_record([
            "Remark",
            "Y Pos",
            "Tag-Event",
            "moverID",
            "X Pos",
            "Squad",
            "Nr",
            "FRAME",
            "spot",
            "Full.Name",
            "seconds",
            "play",
            "Match",
            "dir",
            "pace",
        ])
        .expect("a line");
    for record in reader.records() {
        let record = record.expect("a row");
        let cell = |name: &str| record.get(column(name)).unwrap_or_default().to_owned();
        let metres = |name: &str, centre_yd: f64| {
            cell(name).parse::<f64>().map_or_else(|_| String::new(), |yd| format!("{}", (yd - centre_yd) * 0.9144))
        };
        let pace = cell("speed").parse::<f64>().map_or_else(|_| String::new(), |yps| format!("{}", yps * 0.9144));
        writer
            .write_record([
                "a, \"b\"\nc".to_owned(),
                metres("y", 80.0 / 3.0),
                cell("event"),
                cell("mover_id"),
                metres("x", 60.0),
                cell("side"),
                cell("jersey"),
                cell("frame"),
                cell("position"),
                cell("name"),
                cell("time_s"),
                cell("play_id"),
                cell("game_id"),
                cell("heading"),
                pace,
            ])
            .expect("a line");
    }
    writer.flush().expect("written");
    let mapping = folder.path().join("mapping.toml");
    fs::write(
        &mapping,
        "units = \"m\"\norigin = \"centre\"\nspeed = \"mps\"\n[columns]\nevent = \"Tag-Event\"\nside = \"Squad\"\njersey = \"Nr\"\nposition = \"spot\"\n\
         game = \"Match\"\ntime = \"seconds\"\nspeed = \"pace\"\nheading = \"dir\"\nmover = \"moverID\"\nname = \"Full.Name\"\n",
    )
    .expect("written");

    let run = |file: &Path, out: &str, more: &[&str]| {
        let out = folder.path().join(out);
        let mut arguments = vec![file.to_str().expect("a name"), "--out", out.to_str().expect("a name"), "--format", "csv"];
        arguments.extend(more);
        let (code, table, words) = audit(&arguments);
        assert!(matches!(code, Some(0 | 1)), "{words}");
        // To the printed digit: what lies beyond the sixth significant one is the rounding of metres.
        let players: Vec<PlayerRow> = read_table(&out.join("players.parquet")).expect("players");
        (table, players)
    };
    let (_, plain_players) = run(&plain, "one", &[]);
    let (_, dressed_players) = run(&dressed, "two", &["--mapping", mapping.to_str().expect("a name")]);
    let printed = |players: &[PlayerRow]| tailchase::report::players_table(players, tailchase::report::Format::Table);
    assert_eq!(printed(&plain_players), printed(&dressed_players));
    assert!(plain_players.iter().any(|p| p.chances > 0));
}

/// Ranking again under other settings says how far each rank moves; a run without it says nothing.
#[test]
fn sensitivity_says_how_far_a_rank_moves() {
    let folder = tempfile::tempdir().expect("a folder");
    let game = folder.path().join("game.csv");
    let rows = rows(&generate_game(1, &DemoOptions { games: 2, plays_per_game: 25, ..DemoOptions::default() }));
    fs::write(&game, csv_text(&rows).expect("text")).expect("written");
    let out = folder.path().join("out");
    let players = |more: &[&str]| -> Vec<PlayerRow> {
        let mut arguments = vec![game.to_str().expect("a name"), "--out", out.to_str().expect("a name")];
        arguments.extend(more);
        let (code, _, words) = audit(&arguments);
        assert!(matches!(code, Some(0 | 1)), "{words}");
        read_table(&out.join("players.parquet")).expect("players")
    };
    let tried = players(&["--sensitivity"]);
    assert!(tried.iter().all(|p| p.rank_swing.is_some()));
    assert!(tried.iter().any(|p| p.rank_swing > Some(0)), "no setting moves anybody");
    let plain = players(&[]);
    assert!(plain.iter().all(|p| p.rank_swing.is_none()));
    assert_eq!(plain.len(), tried.len());
}
