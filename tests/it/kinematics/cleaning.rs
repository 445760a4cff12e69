//! Untidy tracks: repeats, jumps, swaps, gaps, and the honest sudden movements that must not be taken for any of them.

use super::simulated::{restless_runner, runner};
use proptest::prelude::*;
use tailchase::base::{Stream, V2};
use tailchase::kinematics::*;
use tailchase::model::settings::SmoothingSettings;
use tailchase::model::{FindingKind, Findings, RawTrack, SetAside, SourceRow};

/// (frame, x, y) rows in the order that a reader hands over: by frame, then x, then y.
fn raw(rows: &[(u32, f64, f64)]) -> RawTrack {
    let mut numbered: Vec<(u32, f64, f64, u32)> = rows.iter().enumerate().map(|(i, r)| (r.0, r.1, r.2, i as u32 + 1)).collect();
    numbered.sort_by(|a, b| a.0.cmp(&b.0).then(a.1.total_cmp(&b.1)).then(a.2.total_cmp(&b.2)));
    RawTrack {
        frame_index: numbered.iter().map(|r| r.0).collect(),
        x_yd: numbered.iter().map(|r| r.1).collect(),
        y_yd: numbered.iter().map(|r| r.2).collect(),
        source: numbered.iter().map(|r| SourceRow { file: 0, row: r.3 }).collect(),
        ..RawTrack::default()
    }
}

fn clean(rows: &[(u32, f64, f64)], time_s: &[f64]) -> (Cleaned, Findings) {
    let mut findings = Findings::default();
    let cleaned = clean_track(&raw(rows), time_s, &SmoothingSettings::default(), &mut findings, &|f| format!("frame {f:04}"));
    (cleaned, findings)
}

fn times(n: usize, hz: f64) -> Vec<f64> {
    (0..n).map(|k| k as f64 / hz).collect()
}

/// A run of 60 frames at 10 Hz, 7 yd/s in a slight bend, 0.03 yd noise.
fn run() -> Vec<(u32, f64, f64)> {
    let mut s = Stream::new(2, "run");
    (0..60)
        .map(|k| {
            let t = f64::from(k) * 0.1;
            (k, 20.0 + 7.0 * t + 0.03 * s.normal(), 10.0 + 0.4 * t * t + 0.03 * s.normal())
        })
        .collect()
}

fn rows_set_aside(cleaned: &Cleaned, why: SetAside) -> Vec<u32> {
    cleaned.set_aside.iter().filter(|s| s.1 == why).map(|s| s.0.row).collect()
}

#[test]
fn a_tidy_track_stays_as_it_is() {
    let rows = run();
    let (cleaned, findings) = clean(&rows, &times(60, 10.0));
    assert_eq!(cleaned.segments.len(), 1);
    assert_eq!((cleaned.segments[0].first, cleaned.segments[0].end()), (0, 60));
    assert!(cleaned.segments[0].seen.iter().all(|s| *s));
    assert_eq!(cleaned.segments[0].pos_yd[7], V2::new(rows[7].1, rows[7].2));
    assert!(cleaned.set_aside.is_empty() && findings.list().is_empty());
}

#[test]
fn exact_repeats_leave_one_row_and_are_counted() {
    let mut rows = run();
    rows.extend([rows[5], rows[5], rows[40]]);
    let (cleaned, findings) = clean(&rows, &times(60, 10.0));
    assert_eq!(cleaned.segments, clean(&run(), &times(60, 10.0)).0.segments);
    assert_eq!(rows_set_aside(&cleaned, SetAside::ExactRepeat), [61, 62, 63]);
    assert_eq!(findings.count(FindingKind::ExactRepeat), 3);
    assert_eq!(findings.list()[0].first_place, "frame 0005");
}

#[test]
fn of_conflicting_repeats_the_one_on_his_way_is_kept() {
    for frame in [0, 1, 2, 30, 58, 59] {
        for off in [-3.0, 0.9, 25.0] {
            let mut rows = run();
            let (f, x, y) = rows[frame];
            rows.push((f, x + off, y - 0.5 * off));
            let (cleaned, findings) = clean(&rows, &times(60, 10.0));
            assert_eq!(rows_set_aside(&cleaned, SetAside::ConflictingRepeat), [61], "frame {frame}, off by {off}");
            assert_eq!(cleaned.segments, clean(&run(), &times(60, 10.0)).0.segments);
            assert_eq!(findings.count(FindingKind::ConflictingRepeat), 1);
        }
    }
    // A second man under the same id for a second, then for the whole play.
    for range in [20..30, 0..60] {
        let mut rows = run();
        let other: Vec<_> = rows[range.clone()].iter().map(|r| (r.0, r.1 + 0.01, 60.0 - r.2)).collect();
        rows.extend(other);
        let (cleaned, _) = clean(&rows, &times(60, 10.0));
        assert_eq!(cleaned.segments.len(), 1);
        let y = &cleaned.segments[0].pos_yd;
        assert!(y.windows(2).all(|w| (w[1].y - w[0].y).abs() < 1.5), "the track changes the man");
        assert_eq!(rows_set_aside(&cleaned, SetAside::ConflictingRepeat).len(), range.len());
    }
}

#[test]
fn jumps_are_set_aside_and_bridged() {
    for (name, frames, off) in [
        ("single, far", 30..31, V2::new(20.0, -9.0)),
        ("single, small", 30..31, V2::new(0.0, 1.2)),
        ("two, small", 30..32, V2::new(-1.0, 1.2)),
        ("three, middling", 30..33, V2::new(-1.5, 1.8)),
        ("four, far", 30..34, V2::new(-15.0, 3.0)),
        ("near the start", 2..3, V2::new(6.0, 0.0)),
        ("at the start", 0..2, V2::new(0.0, 30.0)),
        ("at the end", 57..60, V2::new(0.0, 30.0)),
    ] {
        let mut rows = run();
        for r in &mut rows[frames.clone()] {
            (r.1, r.2) = (r.1 + off.x, r.2 + off.y);
        }
        let (cleaned, findings) = clean(&rows, &times(60, 10.0));
        let expected: Vec<u32> = frames.clone().map(|k| k as u32 + 1).collect();
        assert_eq!(rows_set_aside(&cleaned, SetAside::Jump), expected, "{name}");
        assert_eq!(cleaned.segments.len(), 1, "{name}");
        assert_eq!(findings.count(FindingKind::Jump), frames.len() as u64, "{name}");
        let inside = frames.start > 0 && frames.end < 60;
        assert_eq!(findings.count(FindingKind::GapBridged), u64::from(inside), "{name}");
        assert_eq!(cleaned.segments[0].seen.iter().filter(|s| !**s).count(), if inside { frames.len() } else { 0 }, "{name}");
    }
}

#[test]
fn ids_swapped_and_swapped_back_are_told_apart() {
    // Two men 15 yd apart, swapped for a second: too long to bridge, so the track is split around it.
    let mut rows = run();
    for r in &mut rows[25..35] {
        r.2 += 15.0;
    }
    let (cleaned, findings) = clean(&rows, &times(60, 10.0));
    assert_eq!(rows_set_aside(&cleaned, SetAside::Jump), (26..=35).collect::<Vec<u32>>());
    assert_eq!(cleaned.segments.iter().map(|s| (s.first, s.end())).collect::<Vec<_>>(), [(0, 25), (35, 60)]);
    assert_eq!(findings.count(FindingKind::GapSplit), 1);

    // Swapped for good: both parts are somebody's, neither is thrown away, nobody runs from one to the other.
    let mut rows = run();
    for r in &mut rows[25..] {
        r.2 += 15.0;
    }
    let (cleaned, findings) = clean(&rows, &times(60, 10.0));
    assert!(cleaned.set_aside.is_empty());
    assert_eq!(cleaned.segments.iter().map(|s| (s.first, s.end())).collect::<Vec<_>>(), [(0, 25), (25, 60)]);
    assert_eq!(findings.count(FindingKind::Jump), 1);
}

#[test]
fn gaps_are_bridged_up_to_the_setting_and_split_beyond() {
    for (missing, segments) in [(1, 1), (5, 1), (6, 2), (20, 2)] {
        let mut rows = run();
        rows.drain(20..20 + missing);
        let (cleaned, findings) = clean(&rows, &times(60, 10.0));
        assert_eq!(cleaned.segments.len(), segments, "{missing} missing");
        assert_eq!(findings.count(FindingKind::GapBridged), u64::from(segments == 1));
        assert_eq!(findings.count(FindingKind::GapSplit), u64::from(segments == 2));
        if segments == 1 {
            let (a, b) = (V2::new(run()[19].1, run()[19].2), V2::new(run()[20 + missing].1, run()[20 + missing].2));
            let expected = a.lerp(b, 1.0 / (missing + 1) as f64);
            assert!((cleaned.segments[0].pos_yd[20] - expected).norm() < 1e-12);
            assert!(!cleaned.segments[0].seen[20] && cleaned.segments[0].seen[19]);
        }
    }
    // Frames absent for everyone show only in the times.
    let mut t = times(60, 10.0);
    t[30..].iter_mut().for_each(|t| *t += 0.1);
    assert_eq!(clean(&run(), &t).0.segments.len(), 1);
    t[30..].iter_mut().for_each(|t| *t += 1.0);
    let (cleaned, findings) = clean(&run(), &t);
    assert_eq!((cleaned.segments.len(), findings.count(FindingKind::GapSplit)), (2, 1));
}

#[test]
fn ragged_short_missing_and_empty_tracks() {
    let t = times(60, 10.0);
    let (cleaned, _) = clean(&run()[7..50], &t);
    assert_eq!((cleaned.segments[0].first, cleaned.segments[0].end()), (7, 50));
    let (cleaned, findings) = clean(&run()[..2], &t);
    assert!(cleaned.segments.is_empty());
    assert_eq!(rows_set_aside(&cleaned, SetAside::TrackTooShort), [1, 2]);
    assert_eq!(findings.count(FindingKind::TooShort), 1);
    assert_eq!(clean(&[], &t).0, Cleaned::default());
    let mut rows = run();
    rows[10].1 = f64::NAN;
    rows[11].2 = f64::INFINITY;
    rows.push((99, 1.0, 1.0));
    let (cleaned, findings) = clean(&rows, &t);
    assert_eq!(rows_set_aside(&cleaned, SetAside::MissingCoordinate).len(), 2);
    assert_eq!(rows_set_aside(&cleaned, SetAside::MissingKey), [61]);
    assert_eq!((cleaned.segments.len(), findings.count(FindingKind::GapBridged)), (1, 1));
}

#[test]
fn honest_starts_cuts_and_blows_are_never_jumps() {
    let mut rows_seen = 0;
    for hz in [5.0, 10.0, 25.0, 60.0] {
        for sigma in [0.0, 0.05, 0.1] {
            for i in 0..60 {
                let mut r = restless_runner(&format!("honest {i}"), hz, 8.0, 0.5, sigma, (0.3, 1.5));
                // Stopped dead at 6 s, as by a tackle.
                let dead = (6.0 * hz) as usize;
                let mut s = Stream::new(4, &format!("dead {i}"));
                for k in dead..r.seen.pos_yd.len() {
                    r.seen.pos_yd[k] = r.truth_pos[dead] + V2::new(s.normal(), s.normal()) * sigma;
                }
                let rows: Vec<_> = r.seen.pos_yd.iter().enumerate().map(|(k, p)| (k as u32, p.x, p.y)).collect();
                rows_seen += rows.len();
                let (cleaned, _) = clean(&rows, &r.time_s);
                assert_eq!(cleaned.set_aside, [], "{hz} Hz, sigma {sigma}, runner {i}");
                assert_eq!(cleaned.segments.len(), 1);
            }
        }
    }
    assert!(rows_seen > 100_000);
}

#[test]
fn coarse_velocities_are_near_and_bridge_holes() {
    let r = runner("coarse", 10.0, 6.0, 0.5, 0.03);
    let mut rows: Vec<_> = r.seen.pos_yd.iter().enumerate().map(|(k, p)| (k as u32, p.x, p.y)).collect();
    rows.drain(30..33);
    let (cleaned, _) = clean(&rows, &r.time_s);
    let coarse = coarse_track(&cleaned, &r.time_s);
    assert_eq!(coarse.pieces.len(), 1);
    let piece = &coarse.pieces[0];
    assert!(piece.acc_ypss.is_empty() && piece.cov.is_empty() && piece.vel_yps.len() == 61);
    let worst = (0..61).map(|k| (piece.vel(k) - r.truth_vel[k]).norm()).fold(0.0, f64::max);
    assert!(worst < 2.0, "{worst}");
    // A straight run at any rate, even or not: the exact speed, ends included.
    for hz in [3.0, 5.0, 10.0, 60.0] {
        let rows: Vec<_> = (0..20).map(|k| (k, 2.0 * f64::from(k) / hz, 5.0)).collect();
        let (cleaned, _) = clean(&rows, &times(20, hz));
        assert!(coarse_track(&cleaned, &times(20, hz)).pieces[0].vel_yps.iter().all(|v| (*v - V2::new(2.0, 0.0)).norm() < 1e-9));
    }
}

#[test]
fn own_speed_and_heading_are_compared_and_reported_only_when_off() {
    let r = runner("own", 10.0, 12.0, 0.2, 0.03);
    let noise = tailchase::model::Noise { jerk_density: 28.0, sigma_yd: 0.03 };
    let track = smooth(&r.seen, &r.time_s, noise, &[], &mut SmoothWork::default());
    let rows: Vec<_> = r.seen.pos_yd.iter().enumerate().map(|(k, p)| (k as u32, p.x, p.y)).collect();
    let judge = |speed: &dyn Fn(usize) -> f64, heading: &dyn Fn(usize) -> f64| {
        let mut raw = raw(&rows);
        raw.speed_yps = (0..rows.len()).map(speed).collect();
        raw.heading_rad = (0..rows.len()).map(heading).collect();
        let mut check = OwnCheck::default();
        check.add(&raw, &track);
        let mut findings = Findings::default();
        check.judge(&mut findings, &|| "here".to_string());
        (check, findings)
    };
    let (speed, heading) = (|k: usize| r.truth_vel[k].norm(), |k: usize| r.truth_vel[k].angle_rad());
    let (check, findings) = judge(&speed, &heading);
    assert!(findings.list().is_empty());
    assert!(check.speed_median_yps().is_some_and(|m| m < 0.2) && check.heading_median_deg().is_some_and(|m| m < 5.0));
    // Speed in metres taken for yards; heading clockwise taken for counter-clockwise.
    let (check, findings) = judge(&|k| 0.9144 * speed(k) - 0.5, &|k| -heading(k));
    assert!(findings.count(FindingKind::SpeedDisagrees) > 30 && findings.count(FindingKind::HeadingDisagrees) > 10);
    assert!(check.speed_median_yps().is_some_and(|m| m > 0.5));
    // A column without values says nothing.
    let (check, findings) = judge(&|_| f64::NAN, &|_| f64::NAN);
    assert_eq!((check.speed_median_yps(), check.heading_median_deg(), findings.list().len()), (None, None, 0));
    // Parts add up in any order.
    let (a, _) = judge(&speed, &heading);
    let (b, _) = judge(&|_| 0.0, &heading);
    let (mut ab, mut ba) = (a.clone(), b.clone());
    ab.merge(&b);
    ba.merge(&a);
    assert_eq!(ab, ba);
}

proptest! {
    #[test]
    fn every_row_is_used_once_or_set_aside_once(
        rows in prop::collection::vec((0_u32..40, -30.0..150.0_f64, -20.0..75.0_f64), 0..120),
        holes in prop::collection::vec(0.02..0.9_f64, 39),
    ) {
        let mut time_s = vec![0.0];
        holes.iter().for_each(|h| time_s.push(time_s[time_s.len() - 1] + h));
        let (cleaned, findings) = clean(&rows, &time_s);
        let used: usize = cleaned.segments.iter().map(|s| s.seen.iter().filter(|b| **b).count()).sum();
        prop_assert_eq!(used + cleaned.set_aside.len(), rows.len());
        let mut sources: Vec<u32> = cleaned.set_aside.iter().map(|s| s.0.row).collect();
        sources.dedup();
        prop_assert_eq!(sources.len(), cleaned.set_aside.len());
        for (a, b) in cleaned.segments.iter().zip(cleaned.segments.iter().skip(1)) {
            prop_assert!(a.end() <= b.first);
        }
        for s in &cleaned.segments {
            prop_assert!(s.seen[0] && s.seen[s.seen.len() - 1] && s.pos_yd.len() == s.seen.len() && s.pos_yd.iter().all(|p| p.is_finite()));
            let noise = tailchase::model::Noise { jerk_density: 28.0, sigma_yd: 0.05 };
            let track = smooth(s, &time_s, noise, &[], &mut SmoothWork::default());
            prop_assert!(track.vel_yps.iter().all(|v| v.is_finite()) && track.cov.iter().all(|c| c.vv > 0.0 && c.pp > 0.0));
        }
        // The order of rows changes only which of two equal rows is set aside.
        let backwards: Vec<_> = rows.iter().rev().copied().collect();
        let (again, findings_again) = clean(&backwards, &time_s);
        prop_assert_eq!(again.segments, cleaned.segments);
        prop_assert_eq!(findings_again, findings);
    }
}
