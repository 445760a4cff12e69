//! The fast road and the general one give the same answer; bridging, boosting, speed.

use super::simulated::{runner, squad};
use std::time::Instant;
use tailchase::base::{Stream, V2};
use tailchase::kinematics::rts::{Prior, rts};
use tailchase::kinematics::state::white_jerk;
use tailchase::kinematics::*;
use tailchase::model::settings::SmoothingSettings;
use tailchase::model::{Findings, Noise, RawTrack, SourceRow, Track};

const SAME: f64 = 1e-9;

fn assert_same(a: &Track, b: &Track, what: &str) {
    assert_eq!((a.first, a.len(), a.cov.len()), (b.first, b.len(), b.cov.len()), "{what}");
    for k in 0..a.len() {
        for (p, q) in [(a.pos_yd[k], b.pos_yd[k]), (a.vel_yps[k], b.vel_yps[k]), (a.acc_ypss[k], b.acc_ypss[k])] {
            assert!((p - q).norm() <= SAME, "{what}, frame {k}: {p:?} and {q:?}");
        }
        let (c, d) = (a.cov[k], b.cov[k]);
        for (x, y) in [(c.pp, d.pp), (c.pv, d.pv), (c.pa, d.pa), (c.vv, d.vv), (c.va, d.va), (c.aa, d.aa)] {
            assert!((x - y).abs() <= SAME * y.abs().max(1.0), "{what}, covariance of frame {k}: {x} and {y}");
        }
    }
}

#[test]
fn steady_gains_give_what_the_general_road_gives() {
    let mut work = SmoothWork::default();
    let mut found = 0;
    for hz in [5.0, 10.0, 25.0, 50.0, 60.0] {
        for frames in [1, 2, 3, 4, 7, 20, 60, 61, 300, 20, 900] {
            for (q, sigma) in [(28.0, 0.05), (28.0, 0.1), (300.0, 0.003), (2.0, 0.2)] {
                let noise = Noise { jerk_density: q, sigma_yd: sigma };
                let mut r = runner("same", hz, frames as f64 / hz, 0.5, sigma);
                r.seen.pos_yd.truncate(frames);
                r.seen.seen.truncate(frames);
                let fast = smooth_evenly(&r.seen, &r.time_s, noise, &[], &mut work);
                // A boost by one changes nothing but the road.
                let general = smooth_evenly(&r.seen, &r.time_s, noise, &[Boost { frame: 0, factor: 1.0 }], &mut SmoothWork::default());
                assert_same(&fast, &general, &format!("{hz} Hz, {frames} frames, q {q}, sigma {sigma}"));
                let fast = smooth(&r.seen, &r.time_s, noise, &[], &mut work);
                let general = smooth(&r.seen, &r.time_s, noise, &[Boost { frame: 0, factor: 1.0 }], &mut SmoothWork::default());
                assert_same(&fast, &general, &format!("with cuts, {hz} Hz, {frames} frames, q {q}, sigma {sigma}"));
                found += usize::from(fast != smooth_evenly(&r.seen, &r.time_s, noise, &[], &mut work));
            }
        }
    }
    assert!(found > 20, "cuts were found in {found} runs only");
}

#[test]
fn what_was_smoothed_before_never_changes_a_result() {
    let noises = [Noise { jerk_density: 28.0, sigma_yd: 0.05 }, Noise { jerk_density: 9.0, sigma_yd: 0.1 }];
    let mut runs = Vec::new();
    for (i, hz) in [10.0, 5.0, 25.0, 60.0, 12.5, 10.0, 50.0, 30.0].into_iter().enumerate() {
        let mut r = runner(&format!("order {i}"), hz, 5.0 + i as f64, 0.5, 0.05);
        r.seen.seen[17] = i % 3 != 0;
        runs.push((r, noises[i % 2], [Boost { frame: 20, factor: 30.0 }], i % 2));
    }
    let one = |i: usize, work: &mut SmoothWork| {
        let (r, noise, boost, boosts) = &runs[i];
        smooth(&r.seen, &r.time_s, *noise, &boost[..*boosts], work)
    };
    let fresh: Vec<Track> = (0..runs.len()).map(|i| one(i, &mut SmoothWork::default())).collect();
    let mut work = SmoothWork::default();
    let mut order = Stream::new(1, "order");
    for _ in 0..100 {
        let i = order.below(runs.len());
        assert_eq!(one(i, &mut work), fresh[i]);
    }
}

#[test]
fn the_general_road_is_the_plain_smoother_with_holes_and_uneven_steps() {
    for name in 0..20 {
        let mut s = Stream::new(5, &format!("holes {name}"));
        let r = runner(&format!("holes {name}"), 10.0, 6.0, 0.5, 0.05);
        let times: Vec<f64> = r.time_s.iter().map(|t| t + 0.03 * s.uniform()).collect();
        let mut segment = r.seen.clone();
        for k in 1..segment.seen.len() - 1 {
            segment.seen[k] = !s.chance(0.2);
            if !segment.seen[k] {
                segment.pos_yd[k] = V2::new(1e6, -1e6); // an unseen place must not count
            }
        }
        let noise = Noise { jerk_density: 28.0, sigma_yd: 0.05 };
        let boost = Boost { frame: 30, factor: 30.0 };
        let track = smooth_evenly(&segment, &times, noise, &[boost], &mut SmoothWork::default());
        // The steps next to the blow are all that lie within 0.1 s of it; the room is 30 − 1 times 0.2 s, for twice the longer one.
        let factor = 1.0 + 29.0 * 0.1 / (times[31] - times[30]).max(times[30] - times[29]);
        let density = |k: usize| if k == 30 || k == 31 { 28.0 * factor } else { 28.0 };
        let steps: Vec<_> = (1..times.len()).map(|k| white_jerk(times[k] - times[k - 1], density(k))).collect();
        let r2 = 0.05 * 0.05;
        let cov = [[r2, 0.0, 0.0], [0.0, 100.0, 0.0], [0.0, 0.0, 100.0]];
        let axis = |of: fn(V2) -> f64| {
            let mut z: Vec<Option<f64>> = segment.pos_yd.iter().zip(&segment.seen).map(|(p, s)| s.then_some(of(*p))).collect();
            z[0] = None;
            rts(&z, &steps, r2, &Prior { mean: [of(segment.pos_yd[0]), 0.0, 0.0], cov })
        };
        let (x, y) = (axis(|p| p.x), axis(|p| p.y));
        for k in 0..times.len() {
            for (i, got) in [track.pos_yd[k], track.vel_yps[k], track.acc_ypss[k]].into_iter().enumerate() {
                let want = V2::new(x.smoothed[k][i], y.smoothed[k][i]);
                assert!((got - want).norm() <= SAME, "frame {k}, entry {i}: {got:?} and {want:?}");
            }
            assert!((track.cov[k].pv - x.plan.smoothed[k][0][1]).abs() <= SAME);
            assert!((track.cov[k].aa - x.plan.smoothed[k][2][2]).abs() <= SAME);
        }
    }
}

#[test]
fn a_range_is_as_good_as_the_whole() {
    let mut work = SmoothWork::default();
    for hz in [5.0, 10.0, 25.0, 60.0] {
        for sigma in [0.02, 0.05, 0.1] {
            let r = runner("range", hz, 12.0, 1.0, sigma);
            let noise = Noise { jerk_density: 28.0, sigma_yd: sigma };
            let whole = smooth(&r.seen, &r.time_s, noise, &[], &mut work);
            let (from, to) = ((4.0 * hz) as usize, (8.0 * hz) as usize);
            let part = smooth_range(&r.seen, from..to, &r.time_s, noise, &[], &mut work);
            assert_eq!((part.first, part.end(), part.cov.len()), (from, to, to - from));
            let worst = (from..to).map(|k| (part.vel(k) - whole.vel(k)).norm()).fold(0.0, f64::max);
            let sd = whole.cov[from].vv.sqrt();
            println!("{hz} Hz, sigma {sigma}: a range's velocity differs by {worst:.4} yd/s at most, its sd is {sd:.3}");
            assert!(worst < 0.2 * sd, "{worst} against {sd}");
        }
    }
    let r = runner("range", 10.0, 4.0, 1.0, 0.05);
    let noise = Noise { jerk_density: 28.0, sigma_yd: 0.05 };
    assert!(smooth_range(&r.seen, 90..99, &r.time_s, noise, &[], &mut work).is_empty());
    assert!(smooth_range(&r.seen, 3..3, &r.time_s, noise, &[], &mut work).is_empty());
    assert_eq!(smooth_range(&r.seen, 0..999, &r.time_s, noise, &[], &mut work), smooth(&r.seen, &r.time_s, noise, &[], &mut work));
}

#[test]
fn a_boost_keeps_a_blow_from_smearing_backwards() {
    // 8 yd/s, then dead within one frame at 3 s.
    let (mut plain, mut boosted) = (0.0, 0.0);
    for i in 0..40 {
        let mut s = Stream::new(3, &format!("blow {i}"));
        let time_s: Vec<f64> = (0..60).map(|k| f64::from(k) * 0.1).collect();
        let place = |t: f64| V2::new(8.0 * t.min(3.0), 20.0);
        let pos_yd = time_s.iter().map(|t| place(*t) + V2::new(s.normal(), s.normal()) * 0.05).collect();
        let segment = Segment { first: 0, pos_yd, seen: vec![true; 60] };
        let noise = Noise { jerk_density: 28.0, sigma_yd: 0.05 };
        let error = |boosts: &[Boost]| {
            let t = smooth(&segment, &time_s, noise, boosts, &mut SmoothWork::default());
            (25..29).map(|k| (t.vel(k) - V2::new(8.0, 0.0)).norm2()).sum::<f64>()
        };
        plain += error(&[]);
        boosted += error(&[Boost { frame: 30, factor: 300.0 }]);
    }
    println!("squared error before a blow: {plain:.1} plain, {boosted:.1} boosted");
    assert!(boosted < 0.5 * plain, "{boosted} against {plain}");
}

#[test]
fn speed_of_clean_and_smooth() {
    let settings = SmoothingSettings::default();
    let squad = squad("speed", 22, 10.0, 1.0, 0.05);
    let raws: Vec<RawTrack> = squad
        .iter()
        .map(|r| RawTrack {
            frame_index: (0..r.time_s.len() as u32).collect(),
            x_yd: r.seen.pos_yd.iter().map(|p| p.x).collect(),
            y_yd: r.seen.pos_yd.iter().map(|p| p.y).collect(),
            source: (0..r.time_s.len() as u32).map(|row| SourceRow { file: 0, row }).collect(),
            ..RawTrack::default()
        })
        .collect();
    let noise = Noise { jerk_density: 28.0, sigma_yd: 0.05 };
    let mut work = SmoothWork::default();
    let mut findings = Findings::default();
    let rows: usize = raws.iter().map(|r| r.frame_index.len()).sum();
    // The quickest of many passes: what the code costs when the machine does nothing else.
    let mut best = [f64::INFINITY; 5];
    let mut check = 0.0;
    for pass in 0..200 {
        let mut ns = [0; 5];
        for (raw, r) in raws.iter().zip(&squad) {
            let t = Instant::now();
            let cleaned = clean_track(raw, &r.time_s, &settings, &mut findings, &|_| String::new());
            ns[0] += t.elapsed().as_nanos();
            let segment = &cleaned.segments[0];
            let t = Instant::now();
            check += coarse_track(&cleaned, &r.time_s).pieces[0].vel_yps[3].x;
            ns[1] += t.elapsed().as_nanos();
            let t = Instant::now();
            check += smooth_evenly(segment, &r.time_s, noise, &[], &mut work).vel_yps[3].x;
            ns[2] += t.elapsed().as_nanos();
            let t = Instant::now();
            check += smooth(segment, &r.time_s, noise, &[], &mut work).vel_yps[3].x;
            ns[3] += t.elapsed().as_nanos();
            // Another boost every time, so that no plan is found ready made.
            let boost = Boost { frame: 40 + pass % 2, factor: 30.0 };
            let t = Instant::now();
            check += smooth(segment, &r.time_s, noise, &[boost], &mut work).vel_yps[3].x;
            ns[4] += t.elapsed().as_nanos();
        }
        for (b, n) in best.iter_mut().zip(ns) {
            *b = b.min(n as f64 / rows as f64);
        }
    }
    println!(
        "ns per row: clean {:.1}, coarse {:.1}, smooth without cuts {:.1}, smooth {:.1}, smooth with a boost {:.1}",
        best[0], best[1], best[2], best[3], best[4]
    );
    let sample: Vec<(&Segment, &[f64])> = squad.iter().map(|r| (&r.seen, r.time_s.as_slice())).cycle().take(110).collect();
    let t = Instant::now();
    let estimate = estimate_noise(&sample, &settings);
    println!("noise estimate: {:?} in {:?}", estimate, t.elapsed());
    assert!(check.is_finite() && findings.list().is_empty());
}
