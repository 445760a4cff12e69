//! The same plays filmed at 5 to 60 frames a second: the same carries, and bearings that agree within their error bars.

use crate::road::{Audited, audit_rows};
use std::collections::{BTreeMap, BTreeSet};
use tailchase::base::Stream;
use tailchase::demo::tags::seen;
use tailchase::demo::{DemoGame, DemoOptions, DemoTrack, generate_game, rows};
use tailchase::engine::bearing::TWO_SIDED;
use tailchase::pipeline::FramesMode;
use tailchase::store::FrameRow;

const RATES_HZ: [f64; 5] = [5.0, 10.0, 25.0, 50.0, 60.0];
/// Share of the comparisons in which two files differ by less than their common 95 % bar.
const AGREE: f64 = 0.93;
/// Frames at 5 Hz are 0.2 s apart: no start or end can be dated better than that by one of the files.
const SAME_MOMENT_S: f64 = 0.2 + 1e-6;
/// A quarterback's run starts where he last stood; at 5 Hz and 0.1 yd noise whether he stood for a moment cannot always be told.
const STARTS_APART: usize = 1;

/// The game at a rate: motion and events are those of the seed alone; the noise is drawn anew for each rate.
fn game_at(rate_hz: f64, noise_yd: f64) -> DemoGame {
    let mut game = generate_game(0, &DemoOptions { rate_hz, noise_yd, seed: 9, plays_per_game: 24, ..DemoOptions::default() });
    for play in &mut game.plays {
        let mut noise = Stream::new(77, &format!("{} {rate_hz}", play.id));
        let mut again = |track: &mut DemoTrack| {
            let exact: Vec<_> = track.pos_yd.iter().copied().zip(track.vel_yps.iter().copied()).collect();
            *track = seen(exact.into_iter(), noise_yd, &mut noise);
        };
        play.movers.iter_mut().for_each(|m| again(&mut m.track));
        again(&mut play.ball);
    }
    game
}

/// One audit for each rate; files of the same plays.
fn audits(noise_yd: f64) -> Vec<(f64, Audited)> {
    let audited = |hz: f64| audit_rows(&rows(&game_at(hz, noise_yd)), FramesMode::All);
    RATES_HZ.iter().map(|hz| (*hz, audited(*hz))).collect()
}

/// Every two of them.
fn twos(audits: &[(f64, Audited)]) -> impl Iterator<Item = (String, &Audited, &Audited)> {
    let after = |i: usize| audits[i + 1..].iter();
    (0..audits.len()).flat_map(move |i| {
        let (hz, a) = &audits[i];
        after(i).map(move |(other_hz, b)| (format!("{hz} and {other_hz} Hz"), a, b))
    })
}

/// Carries and pursuing pairs are the same, and start and end at the same moment.
fn same_carries(which: &str, a: &Audited, b: &Audited) {
    let carries =
        |a: &Audited| a.carries.iter().map(|c| (c.play.clone(), c.carry, c.carrier.clone(), c.attack.clone())).collect::<Vec<_>>();
    assert_eq!(carries(a), carries(b), "{which}");
    let mut apart = 0;
    for (x, y) in a.carries.iter().zip(&b.carries) {
        assert!((x.end_s - y.end_s).abs() <= SAME_MOMENT_S, "{which}, play {}: ends {} and {}", x.play, x.end_s, y.end_s);
        apart += usize::from((x.start_s - y.start_s).abs() > SAME_MOMENT_S);
    }
    assert!(apart <= STARTS_APART, "{which}: {apart} of {} start at another moment", a.carries.len());
    let pairs = |a: &Audited| a.pursuits.iter().map(|p| (p.play.clone(), p.carry, p.defender.clone())).collect::<BTreeSet<_>>();
    assert_eq!(pairs(a), pairs(b), "{which}");
}

/// Line rate, closing speed and miss at the instants that both files have.
fn agreement(which: &str, a: &Audited, b: &Audited) {
    let key = |f: &FrameRow| (f.play.clone(), f.carry, f.defender.clone(), (f.time_s * 1e4).round() as i64);
    let others: BTreeMap<_, &FrameRow> = b.frames.iter().map(|f| (key(f), f)).collect();
    let shared: Vec<(&FrameRow, &FrameRow)> = a.frames.iter().filter_map(|f| Some((f, *others.get(&key(f))?))).collect();
    assert!(shared.len() > 1000, "{which}: {} common instants", shared.len());
    type Figure = fn(&FrameRow) -> (Option<f64>, Option<f64>);
    let figures: [(&str, Figure); 3] = [
        ("line rate", |f| (f.line_rate_degps, f.line_rate_sigma_degps)),
        ("closing speed", |f| (f.closing_yps, f.closing_sigma_yps)),
        ("miss", |f| (f.miss_yd, f.miss_sigma_yd)),
    ];
    for (what, figure) in figures {
        let agrees = |x: &FrameRow, y: &FrameRow| match (figure(x), figure(y)) {
            ((Some(u), Some(su)), (Some(v), Some(sv))) => (u - v).abs() <= TWO_SIDED * su.hypot(sv),
            _ => false,
        };
        let share = shared.iter().filter(|(x, y)| agrees(x, y)).count() as f64 / shared.len() as f64;
        println!("{which}: {what} agrees in {share:.4} of {}", shared.len());
        assert!(share >= AGREE, "{which}: {what} agrees in {share:.4} of {}", shared.len());
    }
}

fn agree_at(noise_yd: f64) {
    let audits = audits(noise_yd);
    assert!(audits[0].1.carries.len() > 15);
    for (which, a, b) in twos(&audits) {
        same_carries(&which, a, b);
        agreement(&which, a, b);
    }
}

#[test]
fn files_at_any_rate_agree_within_the_error_bars() {
    agree_at(0.05);
}

#[test]
fn and_so_they_do_with_twice_the_noise() {
    agree_at(0.1);
}
