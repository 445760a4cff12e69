//! What each layer costs on one invented game of 150 plays, and what the hottest loops cost.
//!
//! `cargo bench --bench layers`. Every bench checks its answer, so that a layer cannot get fast by doing less.

use divan::Bencher;
use divan::counter::ItemsCount;
use std::path::PathBuf;
use std::sync::LazyLock;
use tailchase::audit::{Prepared, Smoothed, judge, noise_of, prepare, smooth_play};
use tailchase::base::V2;
use tailchase::demo::{DemoOptions, Format, generate_game, write_games};
use tailchase::engine::capability::SpeedBook;
use tailchase::engine::chase::Chase;
use tailchase::engine::ledger::{Chaser, keep};
use tailchase::engine::path::TopSpeed;
use tailchase::engine::reach::{Drag, State};
use tailchase::ingest::{IngestOptions, open};
use tailchase::kinematics::SmoothWork;
use tailchase::model::{Noise, Play, Settings};
use tailchase::pipeline::{FramesMode, audit_game};
use tailchase::rating::rank_players;
use tailchase::store::PursuitRow;

fn main() {
    divan::main();
}

static OPTIONS: LazyLock<DemoOptions> = LazyLock::new(|| DemoOptions { games: 1, plays_per_game: 150, ..DemoOptions::default() });
static PLAYS: LazyLock<Vec<Play>> = LazyLock::new(|| generate_game(0, &OPTIONS).to_plays());
static FILES: LazyLock<tempfile::TempDir> = LazyLock::new(|| {
    let dir = tempfile::tempdir().expect("a temporary folder");
    for (format, name) in [(Format::Parquet, "parquet"), (Format::Csv, "csv")] {
        write_games(&dir.path().join(name), format, &OPTIONS, |_| {}).expect("written");
    }
    dir
});

fn rows() -> ItemsCount {
    ItemsCount::new(PLAYS.iter().flat_map(|p| &p.tracks).map(|t| t.x_yd.len()).sum::<usize>())
}

fn read(name: &str) -> usize {
    let path: PathBuf = FILES.path().join(name);
    let mut source = open(&[path], &IngestOptions::default(), &Settings::default()).expect("opens");
    let mut plays = 0;
    while let Some(game) = source.next_raw().expect("reads") {
        plays += game.rows();
    }
    plays
}

#[divan::bench]
fn a1_read_parquet(bencher: Bencher) {
    bencher.counter(rows()).bench(|| assert!(read("parquet") > 100_000));
}

#[divan::bench]
fn a2_read_csv(bencher: Bencher) {
    bencher.counter(rows()).bench(|| assert!(read("csv") > 100_000));
}

#[divan::bench]
fn b_group_into_plays(bencher: Bencher) {
    let path: PathBuf = FILES.path().join("parquet");
    let raw = || {
        let mut source = open(std::slice::from_ref(&path), &IngestOptions::default(), &Settings::default()).expect("opens");
        source.next_raw().expect("reads").expect("a game")
    };
    bencher.counter(rows()).with_inputs(raw).bench_values(|raw| assert_eq!(raw.assemble().expect("groups").plays.len(), 150));
}

fn prepared() -> Vec<Prepared> {
    PLAYS.iter().map(|p| prepare(p, &Settings::default())).collect()
}

fn noise(prepared: &[Prepared]) -> Noise {
    noise_of(&PLAYS.iter().zip(prepared).collect::<Vec<_>>(), &Settings::default())
}

#[divan::bench]
fn c_clean_and_find_carries(bencher: Bencher) {
    bencher.counter(rows()).bench(|| assert!(prepared().iter().filter(|p| !p.carries.is_empty()).count() > 100));
}

#[divan::bench]
fn d_noise(bencher: Bencher) {
    let prepared = prepared();
    bencher.counter(rows()).bench(|| assert!((0.03..0.08).contains(&noise(&prepared).sigma_yd)));
}

fn smoothed(prepared: &[Prepared], noise: Noise) -> Vec<Smoothed> {
    let mut work = SmoothWork::default();
    PLAYS.iter().zip(prepared).map(|(play, p)| smooth_play(play, p, noise, &Settings::default(), &mut work)).collect()
}

#[divan::bench]
fn e_smooth(bencher: Bencher) {
    let prepared = prepared();
    let noise = noise(&prepared);
    bencher.counter(rows()).bench(|| assert_eq!(smoothed(&prepared, noise).len(), 150));
}

#[divan::bench]
fn f_judge(bencher: Bencher) {
    let settings = Settings::default();
    let prepared = prepared();
    let mut smoothed = smoothed(&prepared, noise(&prepared));
    let mut book = SpeedBook::default();
    for one in &mut smoothed {
        book.merge(std::mem::take(&mut one.speeds));
    }
    let tops = book.top_speeds(&settings.motion);
    bencher.counter(rows()).bench(|| {
        let pursuits: usize = PLAYS
            .iter()
            .zip(&prepared)
            .zip(&smoothed)
            .map(|((play, p), s)| judge(play, p, s, &tops, &settings).carries.iter().map(|c| c.pursuits.len()).sum::<usize>())
            .sum();
        assert!(pursuits > 1000);
    });
}

fn pursuits() -> Vec<PursuitRow> {
    audit_game(&PLAYS, &Settings::default(), FramesMode::None).pursuits
}

#[divan::bench]
fn g_rank(bencher: Bencher) {
    let rows = pursuits();
    let settings = Settings::default();
    bencher.bench(|| assert!(rank_players(&rows, &settings.rating).len() > 20));
}

/// The whole account of one pursuit over a path of 60 frames: 59 steps of four passes each.
#[divan::bench]
fn h_account_of_60_frames(bencher: Bencher) {
    let settings = Settings::default();
    let t_s: Vec<f64> = (0..60).map(|i| f64::from(i) * 0.1).collect();
    let carrier: Vec<State> =
        t_s.iter().map(|t| State { pos_yd: V2::new(30.0 + 7.5 * t, 25.0 + 2.0 * t.sin()), vel_yps: V2::new(7.5, 2.0 * t.cos()) }).collect();
    let drag = Drag::of(&settings);
    let mut states = vec![State { pos_yd: V2::new(48.0, 12.0), vel_yps: V2::ZERO }];
    for i in 0..59 {
        let way = (carrier[i].pos_yd - states[i].pos_yd).unit().unwrap_or(V2::EAST);
        states.push(drag.step(states[i], way * 0.85, 9.2, 0.1));
    }
    let blocked = vec![false; 60];
    let chase = Chase::new(&t_s, carrier, 9.0, &settings);
    let chaser =
        Chaser { first: 0, states: &states, blocked: &blocked, top: TopSpeed { yps: 9.2, sigma_yps: 0.28 }, ends_in_contact: false };
    bencher.counter(ItemsCount::new(59_usize)).bench(|| {
        let ledger = keep(divan::black_box(&chase), divan::black_box(&chaser), &settings.clock);
        let account = ledger.account.expect("an account");
        assert!((account.entries.sum_yd() - account.conceded_yd).abs() < 1e-9);
    });
}
