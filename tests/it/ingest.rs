//! Files to plays: the same plays whatever the file looks like, every row accounted for, every error in words.

use std::fs;
use std::io::Write;
use std::path::{Path, PathBuf};
use tailchase::ingest::{Game, IngestError, IngestOptions, InputSet, Mapping, inspect, open};
use tailchase::model::{Attack, EventMark, FindingKind, Play, SetAside, Settings, SourceRow};

/// One row of an invented game, as plain numbers.
#[derive(Clone)]
struct Line {
    game: &'static str,
    play: u32,
    frame: i64,
    who: usize,
    x: f64,
    y: f64,
    speed: f64,
    heading_deg: f64,
    event: &'static str,
}

const BALL: usize = 22;

fn hundredth(v: f64) -> f64 {
    (v * 100.0).round() / 100.0
}

/// Two games of two plays, 22 players and a ball, 12 frames at 10 Hz; frames counted from 3.
fn lines() -> Vec<Line> {
    let mut out = Vec::new();
    for game in ["G1", "G2"] {
        for play in [9, 10] {
            for who in 0..=BALL {
                for step in 0..12 {
                    let t = step as f64 / 10.0;
                    let event = match step {
                        1 => "ball_snap",
                        3 => "Hand Off",
                        9 => "tackle",
                        _ => "None",
                    };
                    out.push(Line {
                        game,
                        play,
                        frame: step + 3,
                        who,
                        x: hundredth(30.0 + who as f64 + 5.0 * t + play as f64),
                        y: hundredth(10.0 + 1.5 * who as f64 - 0.5 * t * t),
                        speed: 5.0,
                        heading_deg: hundredth(90.0 + t),
                        event,
                    });
                }
            }
        }
    }
    out
}

fn id(who: usize) -> String {
    if who == BALL { String::new() } else { (40 + who).to_string() }
}
fn name(who: usize) -> String {
    if who == BALL { "ball".into() } else { format!("\"O'Neill-Żak, {who}\"") }
}
fn side(who: usize) -> &'static str {
    ["Owls", "Larks", "ball"][if who == BALL { 2 } else { who / 11 }]
}

const HEADER: &str = "gameId,playId,playerId,displayName,frameId,time,jerseyNumber,club,position,playDirection,x,y,s,dir,event";

fn plain_line(l: &Line) -> String {
    let (id, name, side) = (id(l.who), name(l.who), side(l.who));
    let time = 0.1 * l.frame as f64 + 100.0;
    format!(
        "{},{},{id},{name},{},{time:.1},{},{side},LB,right,{},{},{},{},{}",
        l.game, l.play, l.frame, l.who, l.x, l.y, l.speed, l.heading_deg, l.event
    )
}

fn plain(lines: &[Line]) -> String {
    let rows: Vec<String> = lines.iter().map(plain_line).collect();
    format!("{HEADER}\n{}\n", rows.join("\n"))
}

struct Folder(tempfile::TempDir);

impl Folder {
    fn new() -> Folder {
        Folder(tempfile::tempdir().unwrap())
    }
    fn put(&self, name: &str, bytes: impl AsRef<[u8]>) -> PathBuf {
        let path = self.0.path().join(name);
        fs::create_dir_all(path.parent().unwrap()).unwrap();
        fs::write(&path, bytes).unwrap();
        path
    }
    fn path(&self) -> PathBuf {
        self.0.path().to_path_buf()
    }
}

fn mapping(text: &str) -> IngestOptions {
    IngestOptions { mapping: Some(Mapping::parse(text, Path::new("map.toml")).unwrap()), ..IngestOptions::default() }
}

fn read_with(paths: &[PathBuf], options: &IngestOptions) -> Result<Vec<Game>, IngestError> {
    let mut source = open(paths, options, &Settings::default())?;
    let mut games: Vec<Game> = Vec::new();
    while let Some(game) = source.next_game()? {
        assert!(game.account.balances());
        if game.replaces {
            games.retain(|g| g.id != game.id);
        }
        games.push(game);
    }
    let gameless = source.gameless();
    assert!(gameless.account.balances());
    games.sort_by(|a, b| a.id.cmp(&b.id));
    Ok(games)
}

fn read(path: PathBuf) -> Vec<Game> {
    read_with(&[path], &IngestOptions::default()).unwrap()
}

/// Reads one text as `game.csv`.
fn read_text(text: &str, options: &IngestOptions) -> Vec<Game> {
    let folder = Folder::new();
    read_with(&[folder.put("game.csv", text)], options).unwrap()
}

/// Plays without their places in the input.
fn bare(games: &[Game]) -> Vec<Play> {
    let mut plays: Vec<Play> = games.iter().flat_map(|g| g.plays.clone()).collect();
    for track in plays.iter_mut().flat_map(|p| p.tracks.iter_mut().chain(&mut p.ball)) {
        track.source = vec![SourceRow::default(); track.source.len()];
    }
    plays
}

/// A play with its numbers as printed to six decimals.
fn printed(play: &Play) -> String {
    let mut out = format!("{} {} {:?} {:?} {:?}\n", play.game, play.play, play.frames, play.events, play.hints);
    out.push_str(&play.time_s.iter().map(|t| format!("{t:.6} ")).collect::<String>());
    for (mover, track) in play.movers.iter().zip(&play.tracks) {
        out.push_str(&format!("\n{mover:?}"));
        for i in 0..track.frame_index.len() {
            let (x, y, s, h) = (track.x_yd[i], track.y_yd[i], track.speed_yps[i], track.heading_rad[i]);
            out.push_str(&format!(" {}:{x:.6},{y:.6},{s:.6},{h:.6}", track.frame_index[i]));
        }
    }
    out
}

fn shuffled(mut lines: Vec<Line>, seed: &str) -> Vec<Line> {
    let mut stream = tailchase::base::Stream::new(5, seed);
    for i in (1..lines.len()).rev() {
        lines.swap(i, stream.below(i + 1));
    }
    lines
}

#[test]
fn a_plain_file_is_read_as_it_stands() {
    let games = read_text(&plain(&lines()), &IngestOptions::default());
    assert_eq!(games.iter().map(|g| &*g.id).collect::<Vec<_>>(), ["G1", "G2"]);
    let play = &games[0].plays[0];
    assert_eq!((&*play.play, &*games[0].plays[1].play), ("9", "10"), "natural order");
    assert_eq!(play.frames, (3..15).collect::<Vec<i64>>());
    assert_eq!(play.time_s, (0..12).map(|i| f64::from(i) / 10.0).collect::<Vec<_>>());
    assert_eq!(play.movers.len(), 22);
    assert_eq!(play.movers[0].name.as_deref(), Some("O'Neill-Żak, 0"));
    assert!(play.movers[0].opposes(&play.movers[11]));
    assert_eq!(play.ball.as_ref().unwrap().x_yd[0], 61.0);
    assert_eq!(play.events, [(1, EventMark::Snap), (3, EventMark::HandOff), (9, EventMark::Down)]);
    assert_eq!(play.hints.attack, Some(Attack::TowardsPlusX));
    // 90 degrees clockwise from +y is +x.
    assert_eq!(play.tracks[0].heading_rad[0], 0.0);
    assert_eq!(games[0].account.rows_read, 2 * 23 * 12);
    assert!(games[0].findings.list().is_empty(), "{:?}", games[0].findings.list());
}

#[test]
fn renamed_metric_centred_and_reordered_columns_give_the_same_digits() {
    let plain_games = read_text(&plain(&lines()), &IngestOptions::default());
    let mut text = String::from("Note;Y.Pos;x m;Team;entity_ID;MATCH;Play No;tick;Full Name;jersey-no;pos;v;Course;what;way;secs\n");
    for l in lines() {
        let (x, y) = ((l.x - 60.0) * 0.9144, (l.y - 160.0 / 6.0) * 0.9144);
        let way = (90.0 - l.heading_deg).to_radians();
        let (id, name, side, speed) = (id(l.who), name(l.who), side(l.who), l.speed * 0.9144);
        let time = 0.1 * l.frame as f64;
        text.push_str(&format!(
            "\"a;b\nc\";{y};{x};{side};{id};{};{};{};{name};{};LB;{speed};{way};{};right;{time:.1}\n",
            l.game, l.play, l.frame, l.who, l.event
        ));
    }
    let options = mapping(
        "units = \"m\"\norigin = \"centre\"\nheading = \"rad_ccw_from_x\"\n[columns]\nframe = \"tick\"\nevent = \"what\"\nplay_direction = \"way\"\ntime = \"secs\"\n",
    );
    let games = read_text(&text, &options);
    let both = [&plain_games, &games].map(|g| g.iter().flat_map(|g| &g.plays).map(printed).collect::<Vec<_>>());
    assert_eq!(both[0], both[1]);
    assert_eq!(both[0].len(), 4);
}

#[test]
fn row_order_file_split_packing_and_separator_do_not_matter() {
    let expected = bare(&read_text(&plain(&lines()), &IngestOptions::default()));
    let mixed = shuffled(lines(), "rows");
    let text = plain(&mixed);

    let folder = Folder::new();
    assert_eq!(bare(&read(folder.put("mixed.csv", &text))), expected, "shuffled");
    let mut gz = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::fast());
    gz.write_all(text.as_bytes()).unwrap();
    assert_eq!(bare(&read(folder.put("a.csv.gz", gz.finish().unwrap()))), expected, "gzip");
    assert_eq!(bare(&read(folder.put("a.csv.zst", zstd::encode_all(text.as_bytes(), 3).unwrap()))), expected, "zstd");
    let tabs = plain(&lines()).replace("-Żak, ", "-Żak; ").replace(',', "\t").replace("-Żak; ", "-Żak, ");
    assert_eq!(bare(&read(folder.put("a.tsv", format!("\u{feff}{}", tabs.replace('\n', "\r\n"))))), expected, "tabs, BOM, CRLF");

    let split = Folder::new();
    for (i, part) in mixed.chunks(97).enumerate() {
        split.put(&format!("sub/{}.csv", 100 - i), plain(part));
    }
    split.put("README.txt", "not a table");
    split.put("truth.csv", "a,b\n1,2\n");
    let games = read(split.path());
    assert_eq!(bare(&games), expected, "split");
    assert!(games.iter().all(|g| g.findings.count(FindingKind::ScatteredGame) == 1));
    assert_eq!(bare(&read(split.path().join("sub/*.csv"))), expected, "pattern");
}

#[test]
fn parquet_gives_the_same_plays() {
    use polars::prelude::*;
    let all = lines();
    let text = |f: &dyn Fn(&Line) -> Option<String>| all.iter().map(f).collect::<Vec<Option<String>>>();
    let column = |name: &str, v: Vec<Option<String>>| Column::new(name.into(), v);
    let mut frame = DataFrame::new_infer_height(vec![
        column("game", text(&|l| Some(l.game.into()))),
        Column::new("play".into(), all.iter().map(|l| f64::from(l.play)).collect::<Vec<_>>()),
        Column::new("player_id".into(), all.iter().map(|l| (l.who != BALL).then_some(l.who as f64 + 40.0)).collect::<Vec<_>>()),
        column("name", text(&|l| Some(name(l.who).trim_matches('"').into()))),
        Column::new("frame".into(), all.iter().map(|l| l.frame as i32).collect::<Vec<_>>()),
        column("time", text(&|l| Some(format!("19:03:{:.1}", 0.1 * l.frame as f64 + 5.0)))),
        Column::new("jersey".into(), all.iter().map(|l| l.who as u32).collect::<Vec<_>>()),
        column("team", text(&|l| Some(side(l.who).into()))),
        column("position", text(&|_| Some("LB".into()))),
        column("play_direction", text(&|_| Some("right".into()))),
        Column::new("x".into(), all.iter().map(|l| l.x as f32).collect::<Vec<_>>()),
        Column::new("y".into(), all.iter().map(|l| l.y).collect::<Vec<_>>()),
        Column::new("speed".into(), all.iter().map(|l| l.speed as i64).collect::<Vec<_>>()),
        Column::new("dir".into(), all.iter().map(|l| l.heading_deg).collect::<Vec<_>>()),
        column("event", text(&|l| (l.event != "None").then(|| l.event.into()))),
    ])
    .unwrap();
    let folder = Folder::new();
    let path = folder.put("g.parquet", "");
    ParquetWriter::new(fs::File::create(&path).unwrap()).with_row_group_size(Some(100)).finish(&mut frame).unwrap();
    assert_eq!(bare(&read(path.clone())), bare(&read_text(&plain(&all), &IngestOptions::default())));

    let whole = fs::read(&path).unwrap();
    let cut = folder.put("cut.parquet", &whole[..whole.len() / 2]);
    assert!(matches!(read_with(&[cut], &IngestOptions::default()), Err(IngestError::BadParquet { .. })));
    let mut damaged = whole.clone();
    damaged[200..4000].fill(0xff);
    let damaged = folder.put("damaged.parquet", &damaged);
    assert!(matches!(read_with(&[damaged], &IngestOptions::default()), Err(IngestError::BadParquet { .. })));
}

#[test]
fn a_game_that_comes_again_is_redone_whole() {
    let all = lines();
    let of = |game: &str| all.iter().filter(|l| l.game == game).cloned().collect::<Vec<_>>();
    let (one, two) = (of("G1"), of("G2"));
    let folder = Folder::new();
    folder.put("1.csv", plain(&one[..400]));
    folder.put("2.csv", plain(&two));
    folder.put("3.csv", plain(&one[400..]));
    let mut source = open(&[folder.path()], &IngestOptions::default(), &Settings::default()).unwrap();
    let mut seen = Vec::new();
    while let Some(game) = source.next_game().unwrap() {
        seen.push((game.id.to_string(), game.account.rows_read, game.replaces, game.findings.count(FindingKind::ScatteredGame)));
    }
    let expected = [("G1", 400, false, 0), ("G1", 552, true, 1), ("G2", 552, false, 0)];
    assert_eq!(seen, expected.map(|(id, rows, again, found)| (id.to_string(), rows, again, found)));
    assert_eq!(bare(&read(folder.path())), bare(&read_text(&plain(&all), &IngestOptions::default())));
}

#[test]
fn untidiness_loses_no_play_and_every_row_is_accounted_for() {
    let of_play: Vec<Line> = lines().into_iter().filter(|l| l.game == "G1" && l.play == 9).collect();
    let mut rows: Vec<String> = Vec::new();
    for l in &of_play {
        // Frame 8 is absent for everyone, mover 3 starts late, mover 4 ends early, mover 21 is not there at all.
        if l.frame == 8 || (l.who == 3 && l.frame < 5) || (l.who == 4 && l.frame > 12) || l.who == 21 {
            continue;
        }
        let mut l = l.clone();
        match l.who {
            5 => (l.x, l.y) = (-28.0, 72.0),
            6 if l.frame == 6 => l.event = "band_plays",
            _ => {}
        }
        let mut text = plain_line(&l);
        if l.who == 7 && l.frame == 9 {
            text = text.replace(&format!(",{},{},5,", l.x, l.y), ",NA,,5,");
        }
        if l.who == 8 && l.frame == 9 {
            text = text.replace("G1,9,48,", "G1,,48,");
        }
        if l.who == 9 && l.frame > 9 {
            text = text.replace(",Owls,", ",Jays,");
        }
        if l.who == 10 {
            text = text.replace("G1,9,50,", "G1,9.0,50.0,");
        }
        rows.push(text);
        if l.who == 11 && l.frame == 10 {
            rows.push(plain_line(&l));
            rows.push(plain_line(&Line { x: l.x + 3.0, ..l }));
        }
    }
    let runs_on = Line { who: BALL, frame: 20, ..of_play[0].clone() };
    rows.push(plain_line(&runs_on));
    let text = format!("{HEADER}\n{}\n", rows.join("\n"));
    let folder = Folder::new();
    let path = folder.put("game.csv", &text);
    let game = &read(path)[0];
    let play = &game.plays[0];
    assert_eq!((game.plays.len(), play.movers.len()), (1, 21));
    assert_eq!(game.account.rows_read as usize, rows.len());
    let why: Vec<(SetAside, u64)> = game.account.set_aside.iter().map(|(w, n)| (*w, *n)).collect();
    assert_eq!(why, [(SetAside::MissingCoordinate, 1), (SetAside::MissingKey, 1), (SetAside::ExactRepeat, 1)]);
    assert_eq!(game.set_aside.len(), 3);
    let found: Vec<(&str, u64)> = game.findings.list().iter().map(|f| (f.kind.word(), f.count)).collect();
    assert_eq!(
        found,
        [
            ("missing_coordinate", 1),
            ("missing_key", 1),
            ("exact_repeat", 1),
            ("frame_missing_for_all", 6),
            ("ragged_start", 1),
            ("ragged_end", 1),
            ("ball_runs_on", 1),
            ("fewer_players", 1),
            ("off_field", 1),
            ("unknown_event", 1),
            ("name_conflict", 1),
        ]
    );
    // The conflicting repeat stays for the cleaning to resolve; id 50.0 is id 50; the first side in order of text is shown.
    let at = |id: &str| play.movers.iter().position(|m| &*m.id == id).unwrap();
    assert_eq!(play.tracks[at("51")].frame_index.len(), 12);
    assert_eq!(play.tracks[at("50")].frame_index.len(), 11);
    assert_eq!(play.movers[at("49")].side.as_deref(), Some("Jays"));
    // Every place can be traced to its line.
    let lines: Vec<&str> = text.lines().collect();
    for (mover, track) in play.movers.iter().zip(&play.tracks) {
        for (i, source) in track.source.iter().enumerate() {
            let cells: Vec<&str> = lines[source.row as usize].rsplit(',').collect();
            assert_eq!(cells[4].parse::<f64>().unwrap(), track.x_yd[i], "{}", mover.id);
        }
    }
    // Results do not depend on the order of the rows.
    rows.reverse();
    let turned = read_text(&format!("{HEADER}\n{}\n", rows.join("\n")), &IngestOptions::default());
    assert_eq!(bare(&turned), bare(std::slice::from_ref(game)));
    assert_eq!((&turned[0].account, turned[0].findings.list().len()), (&game.account, found.len()));
}

#[test]
fn a_play_given_twice_is_kept_once() {
    let one: Vec<Line> = lines().into_iter().filter(|l| l.game == "G1").collect();
    let twice: Vec<Line> = one.iter().chain(one.iter().filter(|l| l.play == 10)).cloned().collect();
    let games = read_text(&plain(&twice), &IngestOptions::default());
    assert_eq!(bare(&games), bare(&read_text(&plain(&one), &IngestOptions::default())));
    assert_eq!(games[0].findings.count(FindingKind::PlayGivenTwice), 1);
    assert_eq!(games[0].account.set_aside[&SetAside::ExactRepeat], 23 * 12);
}

/// A small file of three movers with chosen columns; `cell` gives a row's further cells.
fn small(header: &str, cell: impl Fn(usize, i64) -> String) -> String {
    let mut text = format!("play,frame,player,team,x,y,{header}\n");
    for who in 0..3_usize {
        for frame in 0..8_i64 {
            let x = 20.0 + 0.5 * frame as f64;
            text.push_str(&format!("1,{frame},{who},{},{x},{},{}\n", ["a", "b", "b"][who], 10 + who, cell(who, frame)));
        }
    }
    text
}

#[test]
fn carriers_balls_and_missing_columns() {
    let by_id = read_text(
        &small("time,carrier", |_, f| format!("{},{}", f as f64 * 0.1, if f > 2 { "1.0" } else { "" })),
        &IngestOptions::default(),
    );
    let marks: Vec<(u32, u32)> = (3..8).map(|f| (f, 1)).collect();
    assert_eq!(by_id[0].plays[0].hints.carrier_marks, marks);
    assert_eq!(&*by_id[0].id, "game", "the file's name");
    let by_truth = read_text(&small("time,has_ball", |w, f| format!("{},{}", f as f64 * 0.1, f > 2 && w == 1)), &IngestOptions::default());
    assert_eq!(by_truth[0].plays[0].hints.carrier_marks, marks);
    let columns = read_text(&small("time,ballX,ballY", |_, f| format!("{},{},7", f as f64 * 0.1, 40 + f)), &IngestOptions::default());
    let ball = columns[0].plays[0].ball.as_ref().unwrap();
    assert_eq!(ball.x_yd, (0..8).map(|f| f64::from(40 + f)).collect::<Vec<_>>());
    assert!(by_id[0].plays[0].ball.is_none());
    assert_eq!(by_id[0].findings.count(FindingKind::NoBall), 1);
    let named = read_text(&small("time", |_, f| format!("{}", f as f64 * 0.1)), &mapping("ball = [\"2\"]"));
    assert_eq!((named[0].plays[0].movers.len(), named[0].plays[0].ball.is_some()), (2, true));
}

#[test]
fn clocks() {
    let times = |text: &str, options: &IngestOptions| read_text(text, options)[0].plays[0].time_s.clone();
    let tenths: Vec<f64> = (0..8).map(|f| f64::from(f) / 10.0).collect();
    let none = IngestOptions::default();
    let stamp = |_: usize, f: i64| format!("2026-09-13T19:03:05.{f}00Z");
    assert_eq!(times(&small("timestamp", stamp), &none), tenths);
    let down = |_: usize, f: i64| format!("14:59.{}", 9 - f);
    assert_eq!(times(&small("time", down), &none), tenths, "a clock that counts down");
    let jitter = |w: usize, f: i64| format!("{:.3}", f as f64 * 0.1 + if w == 2 { 0.004 } else { 0.0 });
    assert_eq!(times(&small("time", jitter), &none), tenths, "the movers' median");
    let coarse = |_: usize, _: i64| "19:03:05".to_string();
    assert_eq!(times(&small("time", coarse), &mapping("frame_rate_hz = 10")), tenths, "whole seconds");
    assert_eq!(times(&small("note", |_, _| "n".into()), &mapping("frame_rate_hz = 10.0")), tenths);
    let alone = small("time", |_, f| format!("{}", f as f64 * 0.1)).replacen("frame", "note", 1);
    let play = read_text(&alone, &none)[0].plays[0].clone();
    assert_eq!((play.time_s, play.frames), (tenths.clone(), (1..=8).collect::<Vec<i64>>()), "times without frames");
    // 0.5 yd a frame at 12.5 yd/s is 25 Hz.
    let mut fast = String::from("play,frame,player,team,x,y,speed\n");
    for frame in 0..60 {
        fast.push_str(&format!("1,{frame},7,a,{},5,12.5\n", 20.0 + 0.5 * f64::from(frame)));
    }
    assert_eq!(times(&fast, &none)[1], 0.04, "rate from the file's own speeds");
}

#[test]
fn tables_of_plays_players_and_film() {
    let folder = Folder::new();
    let table = |name: &str, text: &str| Some(folder.put(name, text));
    let tracks = folder.put("game.csv", small("time", |_, f| format!("{}", f as f64 * 0.1 + 5.0)));
    let options = IngestOptions {
        plays: table("plays.csv", "game,play_id,ball_carrier_id,play_type,play_direction\ngame,1,2.0,\"kick, return\",left\n"),
        players: table("players.csv", "player_id,name,position\n0,\"Ada \"\"Bo\"\" Kern\",FS\n"),
        film: table("film.csv", "game;film_frame;fps\ngame;900;30\n"),
        mapping: None,
    };
    let games = read_with(&[folder.path()], &options).unwrap();
    let play = &games[0].plays[0];
    assert_eq!(
        (play.hints.carrier, play.hints.kind.as_deref(), play.hints.attack),
        (Some(2), Some("kick, return"), Some(Attack::TowardsMinusX))
    );
    assert_eq!(play.hints.film_start_s, Some(30.0));
    assert_eq!((play.movers[0].name.as_deref(), play.movers[0].position.as_deref()), (Some("Ada \"Bo\" Kern"), Some("FS")));
    assert_eq!(InputSet::collect(&[folder.path()], &[]).unwrap().files, [tracks]);
}

/// The error of one text as `game.csv`, its folder cut off.
fn error(name: &str, bytes: impl AsRef<[u8]>, options: &IngestOptions) -> String {
    let folder = Folder::new();
    let path = folder.put(name, bytes);
    let error = read_with(&[path], options).unwrap_err().to_string();
    error.replace(&format!("{}/", folder.path().display()), "")
}

#[test]
fn errors_in_words() {
    let none = IngestOptions::default();
    let csv = |bytes: &[u8]| error("game.csv", bytes, &none);
    let two = "play,frame,time,player,x,y,note\n1,1,0.1,7,3,4,n\n";
    insta::assert_snapshot!(csv(b"play,frame,time,player,y\n"), @r#"game.csv, row 0: expected a column for x, the place along the field, found the columns play, frame, time, player, y (add `x = "the column's name"` under [columns] in a mapping file)"#);
    insta::assert_snapshot!(csv(b"play,frame,time,player_id,entity_id,x,y\n"), @r#"game.csv, row 0: expected one column for the id of the player or ball, found player_id and entity_id (say which under [columns] in a mapping file: `mover = "player_id"`)"#);
    insta::assert_snapshot!(csv(format!("{two}1,2,0.2,7,abc,4,n\n").as_bytes()), @r#"game.csv, row 2, column x: expected a number, found "abc" (correct the cell, leave it empty, or map another column)"#);
    insta::assert_snapshot!(csv(two.replace(',', ";").replace(";3;", ";3,5;").as_bytes()), @r#"game.csv, row 1, column x: expected a number, found "3,5" (write the decimal sign as a point)"#);
    insta::assert_snapshot!(csv(two.replace("\n1,1,", "\n1,1.5,").as_bytes()), @r#"game.csv, row 1, column frame: expected a whole number, found "1.5" (correct the cell, leave it empty, or map another column)"#);
    insta::assert_snapshot!(csv(two.replace("0.1", "noon").as_bytes()), @r#"game.csv, row 1, column time: expected seconds or a clock time, found "noon" (correct the cell, leave it empty, or map another column)"#);
    insta::assert_snapshot!(csv(format!("{two}1,2,0.2,7\n").as_bytes()), @"game.csv, row 2: expected 7 fields, found 4 (a line cut short, a stray separator or a missing quote)");
    insta::assert_snapshot!(csv(format!("{two}1,2,0.2,7,3,4,\"open\n1,3,0.3,7,3,4,n\n").as_bytes()), @"game.csv, row 2, column note: expected a closing quote, found the end of the file (close the quote that opens there)");
    insta::assert_snapshot!(csv(b"play,frame,time,player,x,y\n1,1,0.1,K\xf6nig,3,4\n"), @r"game.csv, row 1, column player: expected UTF-8 text, found K\xf6nig (save the file as UTF-8)");
    insta::assert_snapshot!(csv(b"\xff\xfep\0l\0"), @"game.csv, row 0, column the header: expected UTF-8 text, found UTF-16 (save the file as UTF-8)");
    insta::assert_snapshot!(csv(b""), @"game.csv, row 0: expected a header row, found an empty file (export it again, or leave it out)");
    insta::assert_snapshot!(csv(b"play,frame,time,player,x,y\n"), @"game.csv, row 1: expected a data row, found nothing after the header (export it again, or leave it out)");
    insta::assert_snapshot!(csv(b"play,frame,player,x,y\n1,1,7,3,4\n"), @"game.csv: expected a time column, a speed column or a frame rate, found frames alone (add `frame_rate_hz = 10`, or the rate that it is, to a mapping file)");
    insta::assert_snapshot!(csv(b"play,frame,s,player,x,y\n1,1,0,7,3,4\n1,2,0,7,3,4\n"), @"game game: expected times or speeds that tell the frame rate, found none that do (add `frame_rate_hz = 10`, or the rate that it is, to a mapping file)");
    insta::assert_snapshot!(error("game.csv", two, &mapping("[columns]\nx = \"east\"")), @r#"game.csv, row 0, column east: expected this column of the mapping, found the columns play, frame, time, player, x, y, note (correct `x = "east"` in the mapping file)"#);
    insta::assert_snapshot!(error("game.parquet", "PAR1 and then nothing", &none), @"game.parquet: expected a whole Parquet file, found one that is cut short or damaged: parquet: File out of specification: The file must end with PAR1 (copy or export it again)");
    let path = |p: &str| open(&[p.into()], &none, &Settings::default()).err().unwrap().to_string();
    insta::assert_snapshot!(path("no/such/place"), @"no/such/place: expected a file, folder or pattern, found nothing there (check the spelling; put a pattern in quotes)");
    let folder = Folder::new();
    folder.put("plays.csv", "a\n1\n");
    let empty = path(folder.path().to_str().unwrap()).replace(folder.path().to_str().unwrap(), "DIR");
    insta::assert_snapshot!(empty, @"DIR: expected tracking files (.csv, .tsv, .txt or .parquet, also .gz or .zst), found none (give a folder that holds some; left out by name: DIR/plays.csv)");
    let bad = |text: &str| Mapping::parse(text, Path::new("map.toml")).unwrap_err().to_string();
    insta::assert_snapshot!(bad("units = \"m\"\nunit = 3\n"), @"map.toml: expected a mapping, found: line 2: unknown field `unit`, expected one of `units`, `origin`, `heading`, `speed`, `time`, `frame_rate_hz`, `ball`, `columns`, `events`, `field` (`inspect` prints one ready to edit)");
    insta::assert_snapshot!(bad("frame_rate_hz = -3.0"), @r#"mapping, frame_rate_hz: expected a number above 0, found "-3" (correct the mapping file)"#);
}

#[test]
fn an_inspection_tells_what_was_understood_and_gives_a_mapping_that_reads() {
    let folder = Folder::new();
    let text = plain(&lines()).replace("tackle", "band_plays").replace("playerId", "nnId");
    folder.put("game.csv", text);
    let seen = inspect(&[folder.path()], &IngestOptions::default(), &Settings::default()).unwrap();
    assert_eq!((seen.sample.games, seen.sample.plays, seen.sample.movers, seen.sample.rows), (2, 4, 22, 4 * 23 * 12));
    assert_eq!(seen.sample.frame_rate_hz, Some(10.0));
    assert!(seen.problems.is_empty(), "{:?}", seen.problems);
    let text = seen.to_text();
    assert!(text.contains("mover          column nnId (guessed)"), "{text}");
    assert!(text.contains("event \"band_plays\" on 92 rows: no meaning here"), "{text}");
    let again = mapping(&seen.mapping_toml);
    assert_eq!(bare(&read_with(&[folder.path()], &again).unwrap()), bare(&read(folder.path())));

    let feet = plain(&lines().into_iter().map(|l| Line { x: (l.x - 60.0) * 3.0, y: (l.y - 26.0) * 3.0, ..l }).collect::<Vec<_>>());
    folder.put("game.csv", feet);
    let seen = inspect(&[folder.path()], &IngestOptions::default(), &Settings::default()).unwrap();
    assert!(seen.notes.iter().any(|n| n.contains("origin = \"centre\"")), "{:?}", seen.notes);
    folder.put("bad.csv", "a,b\n1,2\n");
    let seen = inspect(&[folder.path()], &IngestOptions::default(), &Settings::default()).unwrap();
    assert_eq!(seen.problems.len(), 1);
}

#[test]
fn rows_without_a_game_are_accounted_for() {
    let folder = Folder::new();
    let path = folder.put("game.csv", plain(&lines()).replacen("\nG1,", "\n,", 3));
    let mut source = open(&[path], &IngestOptions::default(), &Settings::default()).unwrap();
    let mut rows = 0;
    while let Some(game) = source.next_game().unwrap() {
        rows += game.account.rows_read;
    }
    assert_eq!((rows, source.gameless().account.rows_read), (4 * 23 * 12 - 3, 3));
    assert_eq!(source.files()[0].content_hash().unwrap().len(), 32);
}

#[test]
fn packed_files_cut_short_and_files_that_are_no_text_are_errors() {
    let none = IngestOptions::default();
    let mut gz = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::fast());
    gz.write_all(plain(&lines()).as_bytes()).unwrap();
    let whole = gz.finish().unwrap();
    let text = error("game.csv.gz", &whole[..whole.len() / 2], &none);
    assert!(text.starts_with("game.csv.gz: expected a file that can be read, found: "), "{text}");
    let noise = [b"play,frame,time,player,x,y\n".to_vec(), vec![b'x'; 140 << 20]].concat();
    insta::assert_snapshot!(error("game.csv", noise, &none), @"game.csv, row 1: expected a line end within 64 MiB, found none (check that this is a text file)");
    // Numbers at the end of what they can hold lose no row and stop nothing.
    let wild = "play,frame,time,player,x,y\n1,9000000000000000,0.2,7,1e300,-1e300\n1,-9000000000000000,0.1,7,3,4\n";
    assert_eq!(read_text(wild, &none)[0].account.in_plays, 2);
    let in_ms = small("time", |_, f| (1_789_326_185_100 + 100 * f).to_string());
    insta::assert_snapshot!(error("game.csv", &in_ms, &none), @r#"game game: expected frames 0.002 to 5 s apart, found them 100 s apart (check the time column; `time = "milliseconds"` or another column in a mapping file)"#);
    assert_eq!(read_text(&in_ms, &mapping("time = \"milliseconds\""))[0].plays[0].time_s[1], 0.1);
    assert!(read_with(&[Folder::new().path().join("*.csv")], &none).is_err());
}

#[test]
fn one_file_by_two_names_is_read_once() {
    let folder = Folder::new();
    let path = folder.put("game.csv", plain(&lines()));
    let other = folder.path().join("sub/../game.csv");
    fs::create_dir(folder.path().join("sub")).unwrap();
    let games = read_with(&[path, other, folder.path(), folder.path().join("*.csv")], &IngestOptions::default()).unwrap();
    assert_eq!(games[0].account.rows_read, 2 * 23 * 12);
}
