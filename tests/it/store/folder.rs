//! The audit's folder: ids as names, games replaced one by one, marks, the sum in audit.json, a dead run's leavings.

use super::{mark, message, pursuits};
use std::collections::{BTreeMap, BTreeSet};
use std::fs;
use std::path::{Path, PathBuf};
use tailchase::model::{FindingKind, Findings, SetAside, Settings};
use tailchase::store::{
    AuditInfo, CarryRow, FrameRow, GameMark, GameTables, InputEntry, NoiseEntry, PursuitRow, RowAccount, RunInfo, Staged, StoreError,
    decode_id, encode_id, finding_entries, fingerprint, game_files, game_folder, mark_path, merge_findings, prepare_out, prune_games,
    read_all, read_audit_info, read_marks, read_table, write_audit_info, write_game, write_mark, write_text,
};

#[test]
fn a_failing_write_leaves_the_old_file_and_no_part() {
    let dir = tempfile::tempdir().unwrap();
    let path = dir.path().join("page.html");
    write_text(&path, "old").unwrap();
    let failing = Staged::write(&path, |out| {
        out.write_all(b"half").unwrap();
        Err(StoreError::Busy { path: PathBuf::from("x") })
    });
    assert!(failing.is_err());
    assert_eq!(fs::read_to_string(&path).unwrap(), "old");
    let not_committed =
        Staged::write(&path, |out| out.write_all(b"new").map_err(|_| StoreError::Busy { path: PathBuf::from("x") })).unwrap();
    drop(not_committed);
    assert_eq!(fs::read_to_string(&path).unwrap(), "old");
    assert_eq!(fs::read_dir(dir.path()).unwrap().count(), 1);
    write_text(&path, "new").unwrap();
    assert_eq!(fs::read_to_string(&path).unwrap(), "new");
}

#[test]
fn hostile_ids_stay_inside_the_folder_and_apart() {
    let long = "é".repeat(400);
    let longer = format!("{long}x");
    let ids = [
        "",
        ".",
        "..",
        "../../etc/passwd",
        "a/b",
        "a\\b",
        "C:",
        "game=1",
        "x\0y",
        "nul\n",
        "ünï",
        "%2E",
        "%",
        "a.",
        ".a",
        "2031_01-A.b",
        &long,
        &longer,
    ];
    let names: BTreeSet<String> = ids.iter().map(|id| encode_id(id)).collect();
    assert_eq!(names.len(), ids.len(), "every id has a name of its own");
    for id in ids {
        let path = game_folder(Path::new("out"), "pursuits", id);
        let parts: Vec<_> = path.components().map(|c| c.as_os_str().to_str().unwrap().to_string()).collect();
        assert_eq!(parts.len(), 4, "{id:?} gives {path:?}");
        assert!(parts.iter().all(|p| p != ".." && p.len() < 240));
        if id.len() < 60 {
            assert_eq!(decode_id(&encode_id(id)).as_deref(), Some(id));
        }
    }
    assert_eq!(encode_id("2031_01-A.b"), "2031_01-A.b");
    assert_eq!(
        [decode_id("%"), decode_id("%2"), decode_id("%zz"), decode_id("a%41"), decode_id("%FF")],
        [Some(String::new()), None, None, None, None]
    );

    let dir = tempfile::tempdir().unwrap();
    for id in ids {
        write_game(dir.path(), &mark(id), &GameTables { pursuits: &pursuits(id, 1), ..GameTables::default() }).unwrap();
    }
    let read: BTreeSet<String> = read_all::<PursuitRow>(dir.path()).unwrap().into_iter().map(|r| r.game).collect();
    assert_eq!(read, ids.iter().map(|id| id.to_string()).collect());
    assert_eq!(read_marks(dir.path()).unwrap().len(), ids.len());
}

#[test]
fn auditing_a_game_again_replaces_its_folders_and_nothing_else() {
    let dir = tempfile::tempdir().unwrap();
    let out = dir.path();
    let frames = vec![FrameRow { game: "a".to_string(), ..FrameRow::default() }];
    for game in ["a", "b"] {
        write_game(out, &mark(game), &GameTables { pursuits: &pursuits(game, 3), frames: &frames, ..GameTables::default() }).unwrap();
    }
    let other = fs::read(game_folder(out, "pursuits", "b")).unwrap();
    let again = GameMark { pursuits: 1, ..mark("a") };
    write_game(out, &again, &GameTables { pursuits: &pursuits("a", 1), ..GameTables::default() }).unwrap();
    assert_eq!(read_table::<PursuitRow>(&game_folder(out, "pursuits", "a")).unwrap().len(), 1);
    assert!(!game_folder(out, "frames", "a").exists(), "frames that the new run does not keep are gone");
    assert_eq!(fs::read(game_folder(out, "pursuits", "b")).unwrap(), other);
    assert!(game_folder(out, "frames", "b").is_file());
    assert_eq!(read_marks(out).unwrap()["a"], again);

    prune_games(out, &BTreeSet::from(["b".to_string()])).unwrap();
    assert_eq!(game_files(out, "pursuits").unwrap(), [game_folder(out, "pursuits", "b")]);
    assert_eq!(read_marks(out).unwrap().keys().collect::<Vec<_>>(), ["b"]);
}

#[test]
fn a_game_that_cannot_be_written_stays_as_it_was() {
    let dir = tempfile::tempdir().unwrap();
    let out = dir.path();
    write_game(out, &mark("a"), &GameTables { pursuits: &pursuits("a", 3), ..GameTables::default() }).unwrap();
    let before = fs::read(game_folder(out, "pursuits", "a")).unwrap();
    let broken = [CarryRow { gain_yd: f64::NAN, ..CarryRow::default() }];
    write_game(out, &mark("a"), &GameTables { pursuits: &pursuits("a", 1), carries: &broken, ..GameTables::default() }).unwrap_err();
    assert_eq!(fs::read(game_folder(out, "pursuits", "a")).unwrap(), before);
    assert_eq!(read_marks(out).unwrap().len(), 1);
    assert_eq!(fs::read_dir(out.join("pursuits/game=a")).unwrap().count(), 1);
}

#[test]
fn a_mark_holds_for_the_same_inputs_and_settings_only() {
    let dir = tempfile::tempdir().unwrap();
    let out = dir.path();
    let done = mark("a");
    write_game(out, &done, &GameTables { pursuits: &pursuits("a", 1), ..GameTables::default() }).unwrap();
    assert!(done.still_holds("a", &["h1".to_string()]));
    assert!(!done.still_holds("b", &["h1".to_string()]));
    assert!(!done.still_holds("a", &["h1".to_string(), "h2".to_string()]));
    assert_ne!(fingerprint(&["1", ""]), fingerprint(&["1"]));

    write_mark(out, &mark("without tables")).unwrap();
    fs::write(mark_path(out, "half"), "{\"game\": ").unwrap();
    assert_eq!(read_marks(out).unwrap().keys().collect::<Vec<_>>(), ["a"], "a mark without tables or cut short is no mark");
    fs::remove_file(game_folder(out, "pursuits", "a")).unwrap();
    assert!(read_marks(out).unwrap().is_empty());
}

#[test]
fn the_output_folder_is_checked_before_any_work() {
    let dir = tempfile::tempdir().unwrap();
    let fresh = dir.path().join("new/deep");
    let held = prepare_out(&fresh).unwrap();
    assert_eq!(held.path(), fresh);
    assert!(matches!(prepare_out(&fresh), Err(StoreError::Busy { .. })), "one run at a time");
    drop(held);
    prepare_out(&fresh).unwrap();

    let file = dir.path().join("file");
    fs::write(&file, "x").unwrap();
    assert!(message(&prepare_out(&file).unwrap_err()).ends_with("file: expected a folder, found a file (choose another --out)"));
    assert!(matches!(prepare_out(&file.join("below")), Err(StoreError::Io { .. })));

    let foreign = dir.path().join("foreign");
    fs::create_dir(&foreign).unwrap();
    fs::write(foreign.join("thesis.doc"), "mine").unwrap();
    let error = message(&prepare_out(&foreign).unwrap_err());
    assert!(error.ends_with("foreign: expected an empty folder or an earlier audit, found other files (choose another --out)"), "{error}");
    assert_eq!(fs::read_dir(&foreign).unwrap().count(), 1, "nothing was put into it");

    let hidden = dir.path().join("hidden");
    fs::create_dir(&hidden).unwrap();
    fs::write(hidden.join(".gitkeep"), "").unwrap();
    prepare_out(&hidden).unwrap();
}

#[test]
fn stale_parts_of_a_dead_run_go_and_nothing_else() {
    let dir = tempfile::tempdir().unwrap();
    let out = dir.path().join("o");
    drop(prepare_out(&out).unwrap());
    write_game(&out, &mark("a"), &GameTables { pursuits: &pursuits("a", 2), ..GameTables::default() }).unwrap();
    let stale = [
        "pursuits/game=a/part.parquet.part",
        "frames/game=b/part.parquet.part",
        "done/game=b.json.part",
        "audit.json.part",
        "report/index.html.part",
    ];
    let mine = ["notes.part", "pursuits/mine.part"];
    for name in stale.iter().chain(&mine) {
        fs::create_dir_all(out.join(name).parent().unwrap()).unwrap();
        fs::write(out.join(name), "half").unwrap();
    }
    drop(prepare_out(&out).unwrap());
    for name in stale {
        assert!(!out.join(name).exists(), "{name}");
    }
    for name in mine {
        assert!(out.join(name).exists(), "{name}");
    }
    assert!(!out.join("frames/game=b").exists());
    assert_eq!(read_all::<PursuitRow>(&out).unwrap().len(), 2);
}

#[test]
fn audit_json_sums_up_all_games_and_balances() {
    let dir = tempfile::tempdir().unwrap();
    let mut rows = RowAccount { read: 10, used: 7, ..RowAccount::default() };
    rows.set_aside(SetAside::Jump, 3);
    rows.set_aside(SetAside::ExactRepeat, 0);
    assert!(rows.balances());
    let mut findings = Findings::default();
    findings.add(FindingKind::Jump, 3, || "game b, play 2".to_string());
    let done = |game: &str, hash: &str, made_with: &str| GameMark {
        inputs: vec![hash.to_string()],
        made_with: made_with.to_string(),
        rows: rows.clone(),
        findings: finding_entries(&findings),
        carries: 2,
        model_frames: 100,
        beyond_model_frames: 3,
        ..mark(game)
    };
    let marks = BTreeMap::from([("a".to_string(), done("a", "new", "m2")), ("b".to_string(), done("b", "old", "m1"))]);
    let input = |path: &str, hash: &str, loose: u64| InputEntry {
        path: path.to_string(),
        hash: hash.to_string(),
        loose_rows: RowAccount { read: loose, used: 0, set_aside: BTreeMap::from([(SetAside::MissingKey.word().to_string(), loose)]) },
        ..InputEntry::default()
    };
    let earlier = AuditInfo { inputs: vec![input("b.csv", "old", 1), input("c.csv", "gone", 9)], ..AuditInfo::default() };
    let run = RunInfo {
        made_with: "m2".to_string(),
        inputs: vec![input("a.csv", "new", 4)],
        settings: Settings::default(),
        ..RunInfo::default()
    };
    let info = AuditInfo::sum_up(run, &marks, Some(&earlier));
    assert_eq!(info.inputs.iter().map(|i| i.path.as_str()).collect::<Vec<_>>(), ["a.csv", "b.csv"]);
    assert_eq!((info.rows.read, info.rows.used, info.rows.set_aside_total(), info.carries), (25, 14, 11, 4));
    assert!(info.rows.balances());
    assert_eq!(info.beyond_model_share, Some(0.03));
    assert_eq!(info.games_made_otherwise(), 1);
    assert_eq!(info.findings.len(), 1);
    assert_eq!(info.findings[0].count, 6);

    write_audit_info(dir.path(), &info).unwrap();
    assert_eq!(read_audit_info(dir.path()).unwrap(), info);
    let error = message(&read_audit_info(&dir.path().join("nowhere")).unwrap_err());
    assert!(error.contains("expected an audit's folder with audit.json, found none (run `tailchase audit FILES --out "), "{error}");
    fs::write(dir.path().join("audit.json"), "{}").unwrap();
    assert!(matches!(read_audit_info(dir.path()), Err(StoreError::Json { .. })));
}

#[test]
fn numbers_in_a_mark_do_not_creep() {
    let dir = tempfile::tempdir().unwrap();
    let out = dir.path();
    let mut stream = tailchase::base::Stream::new(1, "marks");
    for _ in 0..200 {
        let value = stream.between(-8.0, 8.0).exp();
        let noise = Some(NoiseEntry { jerk_density_yd2ps5: value, sigma_yd: 1.0 / value });
        write_game(out, &GameMark { noise, ..mark("a") }, &GameTables::default()).unwrap();
        let (first, text) = (read_marks(out).unwrap().remove("a").unwrap(), fs::read(mark_path(out, "a")).unwrap());
        write_mark(out, &first).unwrap();
        assert_eq!(fs::read(mark_path(out, "a")).unwrap(), text);
        assert!((first.noise.unwrap().jerk_density_yd2ps5 / value - 1.0).abs() < 1e-11);
    }
}

#[test]
fn findings_merge_the_same_in_any_order() {
    let list = |count, place: &str| {
        let mut f = Findings::default();
        f.add(FindingKind::OffField, count, || place.to_string());
        f.add(FindingKind::Jump, 1, || "z".to_string());
        finding_entries(&f)
    };
    let (a, b) = (list(2, "game b"), list(5, "game a"));
    let merged = merge_findings([a.as_slice(), b.as_slice()]);
    assert_eq!(merged, merge_findings([b.as_slice(), a.as_slice()]));
    let off = merged.iter().find(|f| f.kind == "off_field").unwrap();
    assert_eq!((off.count, off.first_place.as_str()), (7, "game a"));
}
