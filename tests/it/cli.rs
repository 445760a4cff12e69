//! The command line: what is printed where, which exit code, which message.

use std::path::Path;
use std::process::{Command, Output};
use tailchase::cli::{RANGES, check_settings, settings_toml};
use tailchase::model::Settings;
use tailchase::store::{AuditInfo, GameMark, GameTables, PursuitRow, RunInfo, game_folder, read_marks, write_audit_info, write_game};

fn tailchase(arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_tailchase")).args(arguments).output().unwrap()
}

fn stdout(output: &Output) -> String {
    String::from_utf8(output.stdout.clone()).unwrap()
}

/// Exit code 2 and this message, nothing on stdout.
fn assert_fails(arguments: &[&str], message: &str) {
    let output = tailchase(arguments);
    let stderr = String::from_utf8(output.stderr.clone()).unwrap();
    assert!(stderr.contains(message), "{arguments:?} said {stderr:?}");
    assert_eq!(output.status.code(), Some(2), "{arguments:?}");
    assert_eq!(stdout(&output), "", "{arguments:?}");
}

fn pursuit(play: &str, number: i64, defender: &str, own_yd: f64) -> PursuitRow {
    PursuitRow {
        game: "g 1".to_string(),
        play: play.to_string(),
        carry: 1,
        pursuit: number,
        carrier: "9".to_string(),
        defender: defender.to_string(),
        defender_name: Some(format!("Name {defender}")),
        defender_side: Some(if defender == "52" { "North" } else { "South" }.to_string()),
        position: Some("CB".to_string()),
        start_s: 3.0,
        end_s: 5.0,
        ending: "chance_lost".to_string(),
        charged: true,
        conceded_yd: Some(own_yd),
        late_yd: Some(own_yd),
        flat_yd: Some(0.0),
        deep_yd: Some(0.0),
        pace_yd: Some(0.0),
        block_yd: Some(0.0),
        move_yd: Some(0.0),
        ..PursuitRow::default()
    }
}

/// A small audit, written through the store.
fn write_audit(out: &Path) {
    let pursuits = [pursuit("1", 1, "52", 2.0), pursuit("1", 2, "60", 7.5), pursuit("2", 1, "52", 1.0)];
    let mark = GameMark { game: "g 1".to_string(), pursuits: 3, ..GameMark::default() };
    write_game(out, &mark, &GameTables { pursuits: &pursuits, ..GameTables::default() }).unwrap();
    write_audit_info(out, &AuditInfo::sum_up(RunInfo::default(), &read_marks(out).unwrap(), None)).unwrap();
}

#[test]
fn every_command_has_help_with_an_example() {
    let help = tailchase(&["--help"]);
    assert_eq!(help.status.code(), Some(0));
    for command in ["demo", "inspect", "audit", "rank", "scout", "clips", "sheet", "settings"] {
        assert!(stdout(&help).contains(&format!("\n  {command} ")), "{command} is not listed");
        let output = tailchase(&[command, "--help"]);
        assert_eq!(output.status.code(), Some(0), "{command}");
        assert!(stdout(&output).contains(&format!("  tailchase {command} ")), "{command} has no example");
    }
    assert_fails(&["audit"], "required arguments were not provided");
    assert_fails(&["audit", "x", "--out", "y", "--field", "wide"], "expected american, canadian or LENGTHxWIDTH");
    assert_fails(&["dance"], "unrecognized subcommand");
}

#[test]
fn printed_settings_read_back_the_same() {
    let text = stdout(&tailchase(&["settings"]));
    assert_eq!(toml::from_str::<Settings>(&text).unwrap(), Settings::default());
    let mut changed = Settings::default();
    changed.motion.alpha_per_s = 1.1;
    changed.motion.constant_velocity = true;
    changed.rating.seed = 7;
    let text = settings_toml(&changed).unwrap();
    assert_eq!(toml::from_str::<Settings>(&text).unwrap(), changed);

    let dir = tempfile::tempdir().unwrap();
    let file = dir.path().join("mine.toml");
    std::fs::write(&file, &text).unwrap();
    assert_eq!(stdout(&tailchase(&["settings", "--settings", file.to_str().unwrap()])), text);
    for (group, settings) in Settings::GROUPS {
        assert!(text.contains(&format!("\n[{group}]\n")));
        for (name, unit, meaning) in *settings {
            let value = text.find(&format!("\n{name} = ")).unwrap_or_else(|| panic!("{group}.{name} is not printed"));
            let comment = format!("# {meaning}\n# unit: {unit}; default: ");
            let line = text[..value].rfind(&comment).map(|at| text[at + comment.len()..value].lines().count());
            assert_eq!(line, Some(1), "{group}.{name} does not stand under its own comment");
        }
    }
}

#[test]
fn every_number_among_the_settings_has_a_range_and_keeps_to_it() {
    let table = toml::Table::try_from(Settings::default()).unwrap();
    for (group, settings) in Settings::GROUPS {
        for (name, ..) in *settings {
            let value = &table[*group][*name];
            let has_range = RANGES.iter().any(|(g, n, ..)| g == group && n == name);
            assert_eq!(has_range, value.is_float() || value.is_integer(), "{group}.{name}");
        }
    }
    check_settings(&Settings::default(), "defaults").unwrap();
    let mut wrong = Settings::default();
    wrong.motion.alpha_per_s = f64::NAN;
    let error = check_settings(&wrong, "mine.toml").unwrap_err().to_string();
    assert_eq!(error, "mine.toml, setting motion.alpha_per_s: expected a number from 0.1 to 1000, found NaN");
    wrong = Settings::default();
    wrong.field.end_zone_yd = 60.0;
    let error = check_settings(&wrong, "mine.toml").unwrap_err().to_string();
    assert_eq!(error, "mine.toml, setting field.end_zone_yd: expected less than half of field.length_yd, found 60");
}

#[test]
fn a_bad_settings_file_says_where() {
    let dir = tempfile::tempdir().unwrap();
    let file = dir.path().join("mine.toml");
    let path = file.to_str().unwrap();
    std::fs::write(&file, "[clock]\nreaction_s = 0.2\nreaktion_s = 0.3\n").unwrap();
    assert_fails(&["settings", "--settings", path], "mine.toml, line 3: expected a setting in TOML, found: unknown field `reaktion_s`");
    std::fs::write(&file, "[clock]\nreaction_s = -0.2\n").unwrap();
    assert_fails(&["settings", "--settings", path], "mine.toml, setting clock.reaction_s: expected a number from 0 to 10, found -0.2");
    assert_fails(&["settings", "--settings", "no such file"], "no such file: expected a settings file, found a file that cannot be read: ");
}

#[test]
fn commands_that_read_an_audit_refuse_another_folder() {
    let dir = tempfile::tempdir().unwrap();
    for command in ["rank", "scout", "clips", "sheet"] {
        assert_fails(
            &[command, dir.path().to_str().unwrap()],
            "expected an audit's folder with audit.json, found none (run `tailchase audit FILES --out ",
        );
    }
}

#[test]
fn rank_and_scout_read_the_audit() {
    let dir = tempfile::tempdir().unwrap();
    let out = dir.path().to_str().unwrap();
    write_audit(dir.path());
    let text = stdout(&tailchase(&["rank", out, "--format", "csv"]));
    let mut reader = csv::Reader::from_reader(text.as_bytes());
    let player = reader.headers().unwrap().iter().position(|name| name == "player").unwrap();
    let mut players: Vec<String> = reader.records().map(|r| r.unwrap()[player].to_string()).collect();
    players.sort();
    assert_eq!(players, ["52", "60"]);

    let json = stdout(&tailchase(&["rank", out, "--side", "north", "--format", "json"]));
    let rows: Vec<serde_json::Value> = serde_json::from_str(&json).unwrap();
    assert_eq!((rows.len(), rows[0]["player"].as_str(), rows[0]["chances"].as_i64()), (1, Some("52"), Some(2)));
    assert_eq!(rows[0]["steer_n"], serde_json::Value::Null, "missing is null");

    let none = tailchase(&["rank", out, "--position", "QB"]);
    assert_eq!(none.status.code(), Some(0));
    assert!(String::from_utf8(none.stderr).unwrap().contains("nobody in this audit fits that choice"));

    let teams = stdout(&tailchase(&["scout", out]));
    assert!(teams.contains("North") && teams.contains("South"), "{teams}");
    let south = stdout(&tailchase(&["scout", out, "--side", "SOUTH"]));
    assert!(south.contains("Name 60") && !south.contains("Name 52"), "{south}");
    assert_fails(&["scout", out, "--side", "East"], "expected side \"East\", found the sides North, South");
}

#[test]
fn clips_and_sheet_read_the_audit() {
    let dir = tempfile::tempdir().unwrap();
    let out = dir.path().to_str().unwrap();
    write_audit(dir.path());
    let text = stdout(&tailchase(&["clips", out, "--top", "2", "--format", "csv"]));
    let lines: Vec<&str> = text.lines().collect();
    assert_eq!(lines.len(), 3, "{text}");
    // 2 s before a start at 3.0 s, 1.5 s after an end at 5.0 s.
    assert!(lines[1].starts_with("g 1,1,1,6.5,play,Name 60,"), "{text}");

    let costliest = tailchase(&["sheet", out]);
    assert_eq!(costliest.status.code(), Some(0));
    assert!(stdout(&costliest).starts_with("Name 60 (CB, South)"), "{}", stdout(&costliest));
    let chosen = stdout(&tailchase(&["sheet", out, "--game", "g 1", "--defender", "name 52"]));
    assert!(chosen.starts_with("Name 52 (CB, North)") && chosen.contains("game g 1, play 1, carry 1, pursuit 1"), "{chosen}");
    assert_fails(&["sheet", out, "--game", "g 1", "--play", "9"], "expected a pursuit of game g 1, play 9, found none (`tailchase clips ");
    assert_fails(&["sheet", out, "--game", "../g"], "found none");
}

#[test]
fn what_a_figure_leaves_out_is_said() {
    let dir = tempfile::tempdir().unwrap();
    let out = dir.path().to_str().unwrap();
    let mut pursuits = [pursuit("1", 1, "52", 2.0), pursuit("1", 2, "60", 7.5), pursuit("2", 1, "52", 1.0)];
    (pursuits[0].flat_yd, pursuits[1].defender_side) = (None, None);
    let mark = GameMark { game: "g 1".to_string(), pursuits: 3, ..GameMark::default() };
    write_game(dir.path(), &mark, &GameTables { pursuits: &pursuits, ..GameTables::default() }).unwrap();
    write_audit_info(dir.path(), &AuditInfo::sum_up(RunInfo::default(), &read_marks(dir.path()).unwrap(), None)).unwrap();
    let (broken, sideless) = ("1 charged pursuits have no whole account", "1 pursuits of defenders without a side");
    let said = |arguments: &[&str]| {
        let text = String::from_utf8(tailchase(arguments).stderr).unwrap();
        (text.contains(broken), text.contains(sideless))
    };
    assert_eq!(said(&["rank", out]), (true, false));
    assert_eq!(said(&["scout", out]), (true, true));
    assert_eq!(said(&["rank", out, "--side", "south"]), (false, false), "the broken one is on the other side");
    assert_eq!(said(&["scout", out, "--quiet"]), (false, false));
}

#[test]
fn one_game_is_read_alone_and_clips_come_from_all() {
    let dir = tempfile::tempdir().unwrap();
    let out = dir.path().to_str().unwrap();
    for (game, own_yd) in [("10", 1.0), ("9", 5.0), ("a/b", 3.0)] {
        let pursuits =
            [pursuit("1", 1, "52", own_yd), pursuit("2", 1, "60", own_yd + 1.0)].map(|p| PursuitRow { game: game.to_string(), ..p });
        let mark = GameMark { game: game.to_string(), pursuits: 2, ..GameMark::default() };
        write_game(dir.path(), &mark, &GameTables { pursuits: &pursuits, ..GameTables::default() }).unwrap();
    }
    write_audit_info(dir.path(), &AuditInfo::sum_up(RunInfo::default(), &read_marks(dir.path()).unwrap(), None)).unwrap();
    let games = |more: &[&str]| -> Vec<String> {
        let text = stdout(&tailchase(&[&["clips", out, "--format", "csv"], more].concat()));
        text.lines().skip(1).map(|line| line.split(',').take(2).collect::<Vec<_>>().join(" ")).collect()
    };
    assert_eq!(games(&[]), ["9 2", "9 1", "a/b 2", "a/b 1", "10 2", "10 1"], "costliest first");
    assert_eq!(games(&["--top", "1"]), ["9 2"]);
    assert_eq!(games(&["--order", "best", "--top", "2"]), ["10 1", "10 2"]);
    assert_eq!(games(&["--order", "film"]), ["9 1", "9 2", "10 1", "10 2", "a/b 1", "a/b 2"]);
    assert_eq!(games(&["--game", "a/b"]), ["a/b 2", "a/b 1"]);
    assert_eq!(games(&["--game", "none"]), [""; 0]);
    // A damaged table of another game is in nobody's way.
    std::fs::write(game_folder(dir.path(), "pursuits", "10"), "no table").unwrap();
    assert_eq!(games(&["--game", "9"]), ["9 2", "9 1"]);
    assert!(stdout(&tailchase(&["sheet", out, "--game", "9"])).contains("game 9, play 2"));
    assert_fails(&["clips", out], "part.parquet: not readable as Parquet");
}
