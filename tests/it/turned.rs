//! A play turned by 180° has the same audit; its mirror image differs in left and right alone.

use tailchase::audit::audit_play;
use tailchase::demo::planted::{Fault, PathKind, planted_play};
use tailchase::demo::{DemoOptions, generate_game};
use tailchase::model::{Attack, Play, RawTrack, Settings};
use tailchase::store::PursuitRow;

/// What 120 − x loses of the last digits, carried through smoother and account.
const ROUNDING: f64 = 1e-6;

fn changed(play: &Play, change: impl Fn(f64, f64) -> (f64, f64), flips_x: bool) -> Play {
    let track = |t: &RawTrack| {
        let (x_yd, y_yd) = t.x_yd.iter().zip(&t.y_yd).map(|(x, y)| change(*x, *y)).unzip();
        RawTrack { x_yd, y_yd, heading_rad: Vec::new(), ..t.clone() }
    };
    let mut out = Play { tracks: play.tracks.iter().map(track).collect(), ball: play.ball.as_ref().map(track), ..play.clone() };
    if flips_x {
        out.hints.attack = play.hints.attack.map(|a| match a {
            Attack::TowardsPlusX => Attack::TowardsMinusX,
            Attack::TowardsMinusX => Attack::TowardsPlusX,
        });
    }
    out
}

fn pursuits(play: &Play) -> Vec<PursuitRow> {
    // The noise is given: its search ends within 1e-5 of the best, which would be all that differs.
    let mut settings = Settings::default();
    (settings.smoothing.jerk_density, settings.smoothing.sigma_yd) = (40.0, 0.05);
    audit_play(play, &settings).carries.into_iter().flat_map(|c| c.pursuits).map(|p| p.row).collect()
}

fn same(what: &str, a: Option<f64>, b: Option<f64>) {
    match (a, b) {
        (Some(a), Some(b)) => assert!((a - b).abs() <= ROUNDING * a.abs().max(1.0), "{what}: {a} and {b}"),
        (None, None) => {}
        other => panic!("{what}: {other:?}"),
    }
}

fn compare(play: &Play) -> usize {
    let (length, width) = (play.field.length_yd, play.field.width_yd);
    let plain = pursuits(play);
    let turned = pursuits(&changed(play, |x, y| (length - x, width - y), true));
    let mirrored = pursuits(&changed(play, |x, y| (x, width - y), false));
    for (other, left_right, y) in [(&turned, 1.0, false), (&mirrored, -1.0, true)] {
        assert_eq!(plain.len(), other.len());
        for (a, b) in plain.iter().zip(other) {
            assert_eq!((&a.defender, &a.ending, a.start_frame, a.end_frame), (&b.defender, &b.ending, b.start_frame, b.end_frame));
            assert_eq!((&a.contact_side, &a.steer_word, a.charged), (&b.contact_side, &b.steer_word, b.charged));
            for (what, a, b) in [
                ("conceded", a.conceded_yd, b.conceded_yd),
                ("late", a.late_yd, b.late_yd),
                ("flat", a.flat_yd, b.flat_yd),
                ("deep", a.deep_yd, b.deep_yd),
                ("pace", a.pace_yd, b.pace_yd),
                ("block", a.block_yd, b.block_yd),
                ("move", a.move_yd, b.move_yd),
                ("efficiency", a.efficiency, b.efficiency),
                ("ideal", a.ideal_x_yd, b.ideal_x_yd),
                ("lean", a.lean_deg, b.lean_deg),
                ("closing", Some(a.closing_median_yps), Some(b.closing_median_yps)),
                ("line rate", Some(a.line_rate_median_degps), Some(left_right * b.line_rate_median_degps)),
                ("across", a.ideal_y_yd, b.ideal_y_yd.map(|spot| if y { width - spot } else { spot })),
            ] {
                same(what, a, b);
            }
        }
    }
    plain.len()
}

#[test]
fn planted_plays_turned_and_mirrored() {
    let mut seen = 0;
    for fault in Fault::ALL {
        for path in PathKind::ALL {
            seen += compare(&planted_play(fault, path, 5, 10.0, 0.05).0);
        }
    }
    assert!(seen >= 18);
}

#[test]
fn full_plays_turned_and_mirrored() {
    let options = DemoOptions { games: 1, plays_per_game: 25, direction_column: true, ..DemoOptions::default() };
    let seen: usize = generate_game(0, &options).to_plays().iter().map(compare).sum();
    assert!(seen > 150, "{seen}");
}
