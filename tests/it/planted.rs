//! Planted faults: simulated defenders with one fault each, and what the account charges them with.

use std::collections::BTreeMap;
use tailchase::audit::{judge, noise_of, prepare, smooth_play};
use tailchase::demo::planted::{Fault, PathKind, planted_play};
use tailchase::engine::capability::SpeedBook;
use tailchase::engine::path::TopSpeed;
use tailchase::kinematics::SmoothWork;
use tailchase::model::{Play, Settings};

/// Yards by the defender's own headings, and how many accounts.
struct Family {
    late: f64,
    flat: f64,
    deep: f64,
    pace: f64,
    own: f64,
    plays: usize,
}

/// All families audited as one game, so that the top speeds read off it are the same for all.
fn families(seeds: u64, rate_hz: f64, noise_yd: f64, settings: &Settings) -> BTreeMap<(Fault, PathKind), Family> {
    let mut plays: Vec<((Fault, PathKind), Play)> = Vec::new();
    for fault in Fault::ALL {
        for path in PathKind::ALL {
            for seed in 0..seeds {
                plays.push(((fault, path), planted_play(fault, path, seed, rate_hz, noise_yd).0));
            }
        }
    }
    let prepared: Vec<_> = plays.iter().map(|(_, play)| prepare(play, settings)).collect();
    let pairs: Vec<_> = plays.iter().map(|(_, play)| play).zip(&prepared).collect();
    let noise = noise_of(&pairs, settings);
    let mut smoothed: Vec<_> =
        pairs.iter().map(|(play, prepared)| smooth_play(play, prepared, noise, settings, &mut SmoothWork::default())).collect();
    let mut speeds = SpeedBook::default();
    for one in &mut smoothed {
        speeds.merge(std::mem::take(&mut one.speeds));
    }
    let tops = speeds.top_speeds(&settings.motion);
    let mut out: BTreeMap<(Fault, PathKind), Family> = BTreeMap::new();
    for (((key, play), prepared), smoothed) in plays.iter().zip(&prepared).zip(&smoothed) {
        let family = out.entry(*key).or_insert(Family { late: 0.0, flat: 0.0, deep: 0.0, pace: 0.0, own: 0.0, plays: 0 });
        let audit = judge(play, prepared, smoothed, &tops, settings);
        for row in audit.carries.iter().flat_map(|c| &c.pursuits).map(|p| &p.row) {
            let (Some(late), Some(flat), Some(deep), Some(pace)) = (row.late_yd, row.flat_yd, row.deep_yd, row.pace_yd) else {
                continue;
            };
            family.plays += 1;
            family.late += late;
            family.flat += flat;
            family.deep += deep;
            family.pace += pace;
            family.own += late + flat + deep + pace;
        }
    }
    out
}

/// Share of a family's own yards that stands under a heading.
fn share(families: &BTreeMap<(Fault, PathKind), Family>, fault: Fault, heading: fn(&Family) -> f64) -> f64 {
    let of = |g: fn(&Family) -> f64| families.iter().filter(|((f, _), _)| *f == fault).map(|(_, f)| g(f)).sum::<f64>();
    of(heading) / of(|f| f.own)
}

fn own_a_play(families: &BTreeMap<(Fault, PathKind), Family>, fault: Fault) -> f64 {
    let of = |g: fn(&Family) -> f64| families.iter().filter(|((f, _), _)| *f == fault).map(|(_, f)| g(f)).sum::<f64>();
    of(|f| f.own) / of(|f| f.plays as f64)
}

/// Least shares under the planted heading: at the man (flat), slow (pace), flat, late.
fn holds(noise_yd: f64, least: [f64; 4]) {
    let found = families(40, 10.0, noise_yd, &Settings::default());
    assert!(found.values().all(|f| f.plays >= 39), "accounts are missing");
    let shares = [
        share(&found, Fault::AtTheMan, |f| f.flat),
        share(&found, Fault::Slow, |f| f.pace),
        share(&found, Fault::Flat, |f| f.flat),
        share(&found, Fault::Late, |f| f.late),
    ];
    for ((name, share), least) in ["at the man", "slow", "flat", "late"].into_iter().zip(shares).zip(least) {
        assert!(share >= least, "{name}: {share:.2} of the own yards under the planted heading, expected {least}; noise {noise_yd}");
    }
    let sound = own_a_play(&found, Fault::None);
    assert!(sound < 1.5, "sound defenders are charged {sound:.2} yd");
    // Too deep costs little, too flat much: common practice says so too, no source.
    let (deep, flat) = (own_a_play(&found, Fault::Deep), own_a_play(&found, Fault::Flat));
    assert!(deep < 0.5 * flat, "deep {deep:.2} against flat {flat:.2}");
    assert!(share(&found, Fault::Deep, |f| f.deep) > 0.5);
}

#[test]
fn exact_tracks() {
    holds(0.0, [0.95, 0.95, 0.80, 0.95]);
}

#[test]
fn a_tenth_of_a_yard_of_noise() {
    holds(0.1, [0.95, 0.95, 0.60, 0.92]);
}

/// The same play at 10 and at 50 frames a second: the account agrees within 5 % or 0.3 yd.
#[test]
fn the_account_does_not_depend_on_the_frame_rate() {
    let settings = Settings::default();
    let (slow, fast) = (accounts(10.0, &settings), accounts(50.0, &settings));
    assert_eq!(slow.len(), fast.len());
    let mut apart = Vec::new();
    for ((what, a), (_, b)) in slow.iter().zip(&fast) {
        if (a - b).abs() > (0.05 * a.abs().max(b.abs())).max(0.3) {
            apart.push(format!("{what}: {a:.2} at 10 Hz, {b:.2} at 50 Hz"));
        }
    }
    assert!(apart.is_empty(), "{} of {}: {apart:#?}", apart.len(), slow.len());
}

fn accounts(rate_hz: f64, settings: &Settings) -> Vec<(String, f64)> {
    let mut out = Vec::new();
    for fault in Fault::ALL {
        for path in PathKind::ALL {
            for seed in 0..4 {
                let (play, truth) = planted_play(fault, path, seed, rate_hz, 0.0);
                let prepared = prepare(&play, settings);
                let noise = noise_of(&[(&play, &prepared)], settings);
                let smoothed = smooth_play(&play, &prepared, noise, settings, &mut SmoothWork::default());
                let tops = play
                    .movers
                    .iter()
                    .zip(truth.top_speeds_yps)
                    .map(|(m, yps)| (m.id.clone(), TopSpeed { yps, sigma_yps: 0.03 * yps }))
                    .collect();
                let audit = judge(&play, &prepared, &smoothed, &tops, settings);
                let row = &audit.carries[0].pursuits[0].row;
                out.push((format!("{fault:?} {path:?} {seed}"), row.conceded_yd.unwrap_or(f64::NAN)));
            }
        }
    }
    out
}
