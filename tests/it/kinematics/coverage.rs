//! Are the error bars honest? Simulated defenders who stand, start suddenly, run and cut.

use super::simulated::{Runner, restless_runner, runner, squad};
use tailchase::base::V2;
use tailchase::kinematics::savgol::filter;
use tailchase::kinematics::*;
use tailchase::model::settings::SmoothingSettings;
use tailchase::model::{Noise, Track};

const RATES_HZ: [f64; 5] = [5.0, 10.0, 25.0, 50.0, 60.0];
const Z95: f64 = 1.959963984540054;

fn estimated(runners: &[Runner]) -> Noise {
    let sample: Vec<(&Segment, &[f64])> = runners.iter().map(|r| (&r.seen, r.time_s.as_slice())).collect();
    estimate_noise(&sample, &SmoothingSettings::default())
}

fn smoothed(runners: &[Runner], noise: Noise) -> Vec<Track> {
    let mut work = SmoothWork::default();
    runners.iter().map(|r| smooth(&r.seen, &r.time_s, noise, &[], &mut work)).collect()
}

#[derive(Default)]
struct Share {
    inside: usize,
    all: usize,
}
impl Share {
    fn add(&mut self, is_inside: bool) {
        self.inside += usize::from(is_inside);
        self.all += 1;
    }
    fn value(&self) -> f64 {
        self.inside as f64 / self.all as f64
    }
}

/// Frames at which the line rate of two runners 20 yd apart (shifted so) lies in its 95 % band, by the delta method.
fn line_rate_share(a: (&Runner, &Track), b: (&Runner, &Track), from: usize, share: &mut Share) {
    let shift = V2::new(15.0, 12.0);
    for k in from..a.1.len() {
        let rate = |pa: V2, va: V2, pb: V2, vb: V2| {
            let (r, w) = (pb + shift - pa, vb - va);
            (r, w, r.cross(w) / r.norm2())
        };
        let (r, _, truth) = rate(a.0.truth_pos[k], a.0.truth_vel[k], b.0.truth_pos[k], b.0.truth_vel[k]);
        if r.norm() < 3.0 {
            continue;
        }
        let (r, w, got) = rate(a.1.pos_yd[k], a.1.vel_yps[k], b.1.pos_yd[k], b.1.vel_yps[k]);
        let by_place = (V2::new(w.y, -w.x) - r * (2.0 * got)) / r.norm2();
        let by_speed = V2::new(-r.y, r.x) / r.norm2();
        let (c, d) = (a.1.cov[k], b.1.cov[k]);
        let var = by_place.norm2() * (c.pp + d.pp) + 2.0 * by_place.dot(by_speed) * (c.pv + d.pv) + by_speed.norm2() * (c.vv + d.vv);
        share.add((got - truth).abs() <= Z95 * var.sqrt());
    }
}

struct Coverage {
    place: Share,
    speed: Share,
    near_cut: Share,
    line: Share,
}

fn coverage(runners: &[Runner], tracks: &[Track], from: usize) -> Coverage {
    let mut out = Coverage { place: Share::default(), speed: Share::default(), near_cut: Share::default(), line: Share::default() };
    for (r, t) in runners.iter().zip(tracks) {
        for k in from..t.len() {
            let (dp, dv, c) = (t.pos_yd[k] - r.truth_pos[k], t.vel_yps[k] - r.truth_vel[k], t.cov[k]);
            for (e_p, e_v) in [(dp.x, dv.x), (dp.y, dv.y)] {
                out.place.add(e_p.abs() <= Z95 * c.pp.sqrt());
                out.speed.add(e_v.abs() <= Z95 * c.vv.sqrt());
                if r.since_cut_s[k] <= 0.2 {
                    out.near_cut.add(e_v.abs() <= Z95 * c.vv.sqrt());
                }
            }
        }
    }
    for i in (0..runners.len() - 1).step_by(2) {
        line_rate_share((&runners[i], &tracks[i]), (&runners[i + 1], &tracks[i + 1]), from, &mut out.line);
    }
    out
}

/// Standing a second, then eight seconds of starts and cuts; the last half second of standing counts in.
fn assert_covered(hz: f64, sigma: f64, every_s: (f64, f64)) {
    let runners: Vec<Runner> = (0..200).map(|i| restless_runner(&format!("coverage {i}"), hz, 9.0, 1.0, sigma, every_s)).collect();
    let noise = estimated(&runners);
    let c = coverage(&runners, &smoothed(&runners, noise), (0.5 * hz) as usize);
    println!(
        "{hz} Hz, sigma {sigma}, cuts {every_s:?} s: q {:.1}, sigma {:.4}; covered: place {:.4}, velocity {:.4} (near cuts {:.4}), line rate {:.4}",
        noise.jerk_density,
        noise.sigma_yd,
        c.place.value(),
        c.speed.value(),
        c.near_cut.value(),
        c.line.value()
    );
    for (what, share) in [("place", &c.place), ("velocity", &c.speed), ("line rate", &c.line)] {
        assert!((0.93..=0.97).contains(&share.value()), "{hz} Hz, sigma {sigma}, {what}: {}", share.value());
    }
    assert!((noise.sigma_yd / sigma - 1.0).abs() < 0.05, "{hz} Hz: sigma {sigma} estimated as {}", noise.sigma_yd);
}

#[test]
fn ninety_five_percent_bands_cover_what_they_say_at_every_rate() {
    for hz in RATES_HZ {
        for sigma in [0.05, 0.1] {
            assert_covered(hz, sigma, (0.5, 2.5));
        }
    }
}

#[test]
fn and_whether_cuts_are_many_or_few() {
    for every_s in [(0.3, 0.8), (0.5, 1.5), (1.0, 3.0), (2.0, 5.0), (5.0, 9.0)] {
        for sigma in [0.05, 0.1] {
            assert_covered(10.0, sigma, every_s);
        }
    }
}

#[test]
fn velocity_near_starts_and_cuts_beats_a_seven_point_filter() {
    for (hz, sigma, every_s) in [(10.0, 0.05, (0.5, 2.5)), (10.0, 0.1, (0.5, 2.5)), (10.0, 0.05, (2.0, 5.0)), (10.0, 0.1, (2.0, 5.0))] {
        let runners: Vec<Runner> = (0..150).map(|i| restless_runner(&format!("near {i}"), hz, 9.0, 1.0, sigma, every_s)).collect();
        let noise = estimated(&runners);
        let mut work = SmoothWork::default();
        // squared errors and counts: all frames, frames within 0.2 s of a start or cut
        let (mut ours, mut even, mut seven) = ([0.0; 2], [0.0; 2], [0.0; 2]);
        let mut count = [0.0; 2];
        for r in &runners {
            let found = smooth(&r.seen, &r.time_s, noise, &[], &mut work);
            let evenly = smooth_evenly(&r.seen, &r.time_s, noise, &[], &mut work);
            let axis = |of: fn(&V2) -> f64| filter(&r.seen.pos_yd.iter().map(of).collect::<Vec<_>>(), 7, 2, 1, 1.0 / hz).unwrap();
            let (sx, sy) = (axis(|p| p.x), axis(|p| p.y));
            for k in 0..found.len() {
                let truth = r.truth_vel[k];
                for group in 0..=usize::from(r.since_cut_s[k] <= 0.2) {
                    count[group] += 1.0;
                    ours[group] += (found.vel_yps[k] - truth).norm2();
                    even[group] += (evenly.vel_yps[k] - truth).norm2();
                    seven[group] += (V2::new(sx[k], sy[k]) - truth).norm2();
                }
            }
        }
        let rms = |s: [f64; 2], g: usize| (s[g] / count[g]).sqrt();
        println!(
            "{hz} Hz, sigma {sigma}, cuts {every_s:?} s: rms velocity error all/near: smoother {:.3}/{:.3}, without cuts {:.3}/{:.3}, seven points {:.3}/{:.3}",
            rms(ours, 0),
            rms(ours, 1),
            rms(even, 0),
            rms(even, 1),
            rms(seven, 0),
            rms(seven, 1)
        );
        for g in 0..2 {
            assert!(rms(ours, g) < 0.95 * rms(seven, g), "group {g}: {} against seven points {}", rms(ours, g), rms(seven, g));
        }
        assert!(rms(ours, 1) < rms(even, 1), "{} against {} without cuts", rms(ours, 1), rms(even, 1));
    }
}

#[test]
fn the_same_run_at_any_rate_agrees_within_the_bars() {
    let sigma = 0.05;
    let all: Vec<(f64, Vec<Runner>)> = RATES_HZ.iter().map(|hz| (*hz, squad("rates", 60, *hz, 1.0, sigma))).collect();
    let tracks: Vec<Vec<Track>> = all.iter().map(|(_, r)| smoothed(r, estimated(r))).collect();
    for a in 0..RATES_HZ.len() {
        for b in a + 1..RATES_HZ.len() {
            let mut share = Share::default();
            for (ta, tb) in tracks[a].iter().zip(&tracks[b]) {
                // Times that both rates share: every fifth of a second.
                for k in 0..=45_usize {
                    let at = |hz: f64| (k as f64 * 0.2 * hz).round() as usize;
                    let (ka, kb) = (at(RATES_HZ[a]), at(RATES_HZ[b]));
                    if ka < ta.len() && kb < tb.len() {
                        let d = ta.vel_yps[ka] - tb.vel_yps[kb];
                        let sd = (ta.cov[ka].vv + tb.cov[kb].vv).sqrt();
                        share.add(d.x.abs() <= Z95 * sd);
                        share.add(d.y.abs() <= Z95 * sd);
                    }
                }
            }
            println!("{} and {} Hz: velocities agree within their 95 % band in {:.4}", RATES_HZ[a], RATES_HZ[b], share.value());
            assert!(share.value() >= 0.93);
        }
    }
}

#[test]
fn twenty_seconds_of_huddle_do_not_dilute_the_density() {
    let runners = squad("huddle", 60, 10.0, 20.0, 0.05);
    let noise = estimated(&runners);
    let c = coverage(&runners, &smoothed(&runners, noise), 195);
    println!("after a huddle: q {:.1}; velocity covered {:.4}", noise.jerk_density, c.speed.value());
    assert!((0.93..=0.97).contains(&c.speed.value()), "{}", c.speed.value());
}

#[test]
fn rounded_and_noise_free_places_are_no_trouble() {
    let mut runners = squad("rounded", 60, 10.0, 1.0, 0.0);
    for r in &mut runners {
        for p in &mut r.seen.pos_yd {
            *p = V2::new((p.x * 100.0).round() / 100.0, (p.y * 100.0).round() / 100.0);
        }
    }
    let noise = estimated(&runners);
    let c = coverage(&runners, &smoothed(&runners, noise), 5);
    println!("rounded to 0.01 yd: q {:.1}, sigma {:.4}; velocity covered {:.4}", noise.jerk_density, noise.sigma_yd, c.speed.value());
    // Rounding is uniform with standard deviation 0.01/sqrt(12) = 0.0029.
    assert!((0.0025..=0.006).contains(&noise.sigma_yd), "{}", noise.sigma_yd);
    assert!(c.speed.value() >= 0.93, "{}", c.speed.value());

    // A mover on rails, and one who never moves: finite noise, finite tracks.
    for step in [0.8, 0.0] {
        let n = 300;
        let segment =
            Segment { first: 0, pos_yd: (0..n).map(|k| V2::new(step * f64::from(k), 5.0)).collect(), seen: vec![true; n as usize] };
        let times: Vec<f64> = (0..n).map(|k| f64::from(k) * 0.1).collect();
        let noise = estimate_noise(&[(&segment, &times)], &SmoothingSettings::default());
        assert!(noise.jerk_density > 0.0 && noise.sigma_yd > 0.0 && noise.jerk_density.is_finite() && noise.sigma_yd < 0.01, "{noise:?}");
        let track = smooth(&segment, &times, noise, &[], &mut SmoothWork::default());
        assert!(track.vel_yps.iter().all(|v| (v.x - 10.0 * step).abs() < 0.1 && v.y.abs() < 0.1));
        assert!(track.cov.iter().all(|c| c.vv > 0.0 && c.pp > 0.0 && c.aa > 0.0));
    }
}

#[test]
fn settings_override_and_too_little_data_falls_back() {
    let runners = squad("settings", 40, 10.0, 1.0, 0.1);
    let sample: Vec<(&Segment, &[f64])> = runners.iter().map(|r| (&r.seen, r.time_s.as_slice())).collect();
    let free = estimate_noise(&sample, &SmoothingSettings::default());
    assert_eq!(free, estimate_noise(&sample, &SmoothingSettings::default()));
    let fixed_sigma = estimate_noise(&sample, &SmoothingSettings { sigma_yd: free.sigma_yd, ..Default::default() });
    assert!((fixed_sigma.jerk_density / free.jerk_density - 1.0).abs() < 0.02, "{fixed_sigma:?} and {free:?}");
    assert_eq!(fixed_sigma.sigma_yd, free.sigma_yd);
    let fixed_q = estimate_noise(&sample, &SmoothingSettings { jerk_density: free.jerk_density, ..Default::default() });
    assert!((fixed_q.sigma_yd / free.sigma_yd - 1.0).abs() < 0.01, "{fixed_q:?} and {free:?}");
    let both = SmoothingSettings { jerk_density: 7.0, sigma_yd: 0.2, ..Default::default() };
    assert_eq!(estimate_noise(&sample, &both), Noise { jerk_density: 7.0, sigma_yd: 0.2 });
    assert_eq!(estimate_noise(&[], &SmoothingSettings::default()), noise::DEFAULT);
    let one = runner("one", 10.0, 3.0, 0.1, 0.1);
    assert_eq!(estimate_noise(&[(&one.seen, &one.time_s)], &SmoothingSettings::default()), noise::DEFAULT);
}
