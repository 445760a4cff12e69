//! What pooling and ranks must hold for any input, edges included.

use proptest::prelude::*;
use std::collections::BTreeMap;
use tailchase::stats::{RankDraws, TauMethod, TauPosterior, pool, pool_at, rank_intervals, tau2};

#[test]
fn pooling_edges() {
    let one = pool(&[3.0], &[2.0], TauMethod::Reml).unwrap();
    assert_eq!((one.tau2, one.mean, one.units[0].value, one.units[0].variance, one.i2), (0.0, 3.0, 3.0, 2.0, 0.0));
    let same = pool(&[1.5; 6], &[0.3; 6], TauMethod::Reml).unwrap();
    assert!(same.tau2 == 0.0 && same.units.iter().all(|u| u.value == same.mean && u.variance.is_finite()));
    for method in [TauMethod::DerSimonianLaird, TauMethod::Hedges, TauMethod::MaximumLikelihood, TauMethod::Reml, TauMethod::PauleMandel] {
        assert_eq!(tau2(&[], &[], method), None);
        assert_eq!(tau2(&[1.0, 2.0], &[1.0, 0.0], method), None);
        assert_eq!(tau2(&[1.0, f64::NAN], &[1.0, 1.0], method), None);
        assert_eq!(tau2(&[1.0, 2.0], &[1.0], method), None);
        // Errors of a millionth and of a million side by side.
        assert!(tau2(&[1.0, 2.0, 900.0], &[1e-12, 1e-12, 1e12], method).unwrap().is_finite());
    }
    assert_eq!(tau2(&[1.0, 2.0, 3.0], &[0.1; 3], TauMethod::EfronMorris), None);
    assert_eq!(pool_at(&[1.0], &[1.0], -1.0), None);
    assert!(TauPosterior::flat(&[1.0, 2.0], &[1.0, 1.0]).is_none());
}

#[test]
fn rank_intervals_say_what_is_known() {
    let how = RankDraws { draws: 2000, seed: 5, level: 0.95 };
    // Far apart: certain. Nothing apart: anything.
    let clear = rank_intervals(&["a", "b", "c", "d"], &[30.0, 10.0, 20.0, 0.0], &[0.01; 4], how).unwrap();
    assert_eq!(clear, [(4, 4), (2, 2), (3, 3), (1, 1)]);
    let vague = rank_intervals(&["a", "b", "c", "d"], &[1.0; 4], &[1.0; 4], how).unwrap();
    assert_eq!(vague, [(1, 4); 4]);
    // Two units with τ² = 0: the REML value is held, and chance decides.
    assert_eq!(rank_intervals(&["a", "b"], &[1.0, 1.1], &[1.0, 1.0], how).unwrap(), [(1, 2), (1, 2)]);
    assert_eq!(rank_intervals(&["a"], &[1.0], &[1.0], how).unwrap(), [(1, 1)]);
    assert!(rank_intervals(&["a"], &[1.0], &[1.0], RankDraws { draws: 0, ..how }).is_none());
}

proptest! {
    #[test]
    fn shrunken_between_own_and_common(units in prop::collection::vec((-50.0..50.0_f64, 1e-3..40.0_f64), 1..25), method in 0..5_usize) {
        let methods = [TauMethod::DerSimonianLaird, TauMethod::Hedges, TauMethod::MaximumLikelihood, TauMethod::Reml, TauMethod::PauleMandel];
        let (y, v): (Vec<f64>, Vec<f64>) = units.into_iter().unzip();
        let p = pool(&y, &v, methods[method]).unwrap();
        prop_assert!(p.tau2 >= 0.0 && p.tau2.is_finite() && (0.0..=1.0).contains(&p.i2));
        for (u, (y, v)) in p.units.iter().zip(y.iter().zip(&v)) {
            prop_assert!(u.value >= p.mean.min(*y) && u.value <= p.mean.max(*y));
            prop_assert!((0.0..=1.0).contains(&u.weight) && u.variance > 0.0 && u.variance <= v.max(p.se * p.se) + 1e-12);
        }
    }

    #[test]
    fn likelihood_peak_is_a_peak(units in prop::collection::vec((-5.0..5.0_f64, 0.01..4.0_f64), 2..15), restricted: bool) {
        // The log likelihood written out again, plainly: no τ² of a fine net may beat the one found.
        let (y, v): (Vec<f64>, Vec<f64>) = units.into_iter().unzip();
        let height = |t: f64| {
            let w: Vec<f64> = v.iter().map(|v| 1.0 / (v + t)).collect();
            let total: f64 = w.iter().sum();
            let mean = w.iter().zip(&y).map(|(w, y)| w * y).sum::<f64>() / total;
            let fit: f64 = w.iter().zip(&y).map(|(w, y)| 0.5 * (w.ln() - w * (y - mean).powi(2))).sum();
            fit - if restricted { 0.5 * total.ln() } else { 0.0 }
        };
        let found = tau2(&y, &v, if restricted { TauMethod::Reml } else { TauMethod::MaximumLikelihood }).unwrap();
        let best = (0..4000).map(|i| height(f64::from(i) * 0.02)).fold(f64::NEG_INFINITY, f64::max);
        prop_assert!(height(found) >= best - 1e-9, "τ² {found}: {} against {best}", height(found));
    }

    #[test]
    fn rank_intervals_do_not_depend_on_order(values in prop::collection::vec(-3.0..3.0_f64, 3..8), turn in 1..7_usize) {
        let ids: Vec<String> = (0..values.len()).map(|i| format!("p{i}")).collect();
        let mut order: Vec<usize> = (0..values.len()).collect();
        let how = RankDraws { draws: 300, seed: 1, level: 0.9 };
        let run = |order: &[usize]| {
            let names: Vec<&str> = order.iter().map(|i| ids[*i].as_str()).collect();
            let y: Vec<f64> = order.iter().map(|i| values[*i]).collect();
            let found = rank_intervals(&names, &y, &vec![0.5; y.len()], how).unwrap();
            order.iter().copied().zip(found).collect::<BTreeMap<_, _>>()
        };
        let straight = run(&order);
        let by = turn % values.len();
        order.rotate_left(by);
        prop_assert_eq!(straight, run(&order));
    }
}
