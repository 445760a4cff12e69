//! Quantiles, circular edges and regression against the libraries that printed the numbers.

use tailchase::stats::circular::bessel_ratio;
use tailchase::stats::{Circular, cluster_variance, clustered_means, least_squares, median, quantile, within_fit};

/// Printed by double-precision libraries with other operation orders.
const LIBRARY: f64 = 1e-12;
/// The same after solving a badly scaled system.
const ILL_CONDITIONED: f64 = 1e-9;

#[test]
fn bessel_ratio_against_scipy() {
    // scipy.special.ive(1, k) / scipy.special.ive(0, k), scipy 1.17.1; both branches, and both sides of their border.
    let table = [
        (0.01, 0.004999937501041651),
        (0.5, 0.24249961258080188),
        (2.0, 0.6977746579640081),
        (10.0, 0.9485998259548458),
        (50.0, 0.9899489673784977),
        (300.0, 0.9983319397905333),
        (699.0, 0.9992844362184528),
        (701.0, 0.9992864784998089),
        (5000.0, 0.9998999949989995),
    ];
    for (kappa, ratio) in table {
        assert!((bessel_ratio(kappa) - ratio).abs() < 2e-15, "{kappa}: {}", bessel_ratio(kappa));
    }
}

#[test]
fn circular_edges() {
    assert_eq!(Circular::of(&[]), None);
    assert_eq!(Circular::of(&[f64::NAN]), None);
    let opposed = Circular::of(&[0.0, std::f64::consts::PI]).unwrap();
    assert_eq!((opposed.mean_rad, opposed.sd_rad(), opposed.kappa()), (None, None, Some(0.0)));
    let same = Circular::of(&[1.0, 1.0, 1.0]).unwrap();
    assert!((same.mean_rad.unwrap() - 1.0).abs() < LIBRARY);
    assert_eq!(same.kappa(), None);
}

#[test]
fn quantiles_against_numpy() {
    // numpy.quantile(x, p), numpy 2.4.6, default method "linear" (definition 7).
    let x = [3.1, -2.0, 7.5, 0.25, 4.0, 11.0, -6.5, 2.2, 2.2];
    let table = [(0.0, -6.5), (0.05, -4.7), (0.1, -2.9), (0.25, 0.25), (0.5, 2.2), (0.73, 3.856), (0.9, 8.2), (0.99, 10.72), (1.0, 11.0)];
    for (p, value) in table {
        assert!((quantile(&x, p).unwrap() - value).abs() < LIBRARY, "{p}");
    }
    assert_eq!(median(&x), Some(2.2));
    assert_eq!(quantile(&[5.0], 0.3), Some(5.0));
    for refused in [quantile(&[], 0.5), quantile(&[1.0, f64::NAN], 0.5), quantile(&[1.0], 1.5), quantile(&[1.0], f64::NAN)] {
        assert_eq!(refused, None);
    }
}

fn close(found: &[f64], expected: &[f64], tolerance: f64) {
    assert_eq!(found.len(), expected.len());
    for (f, e) in found.iter().zip(expected) {
        assert!((f - e).abs() <= tolerance * (1.0 + e.abs()), "{found:?} against {expected:?}");
    }
}

#[test]
fn regression_against_numpy() {
    let one = vec![1.0; 7];
    let a = vec![0.5, 1.5, 2.5, 4.0, 5.5, 7.0, 8.0];
    let b = vec![2.0, 1.0, 4.5, 3.0, 0.5, 2.5, 6.0];
    let y = [2.1, 3.9, 1.2, 6.5, 9.8, 8.1, 4.4];
    let w = [1.0, 2.0, 0.5, 1.5, 1.0, 3.0, 0.25];
    let columns = [one.clone(), a.clone(), b.clone()];
    // numpy.linalg.lstsq(A, y, rcond=None)[0] and [1], numpy 2.4.6.
    let fit = least_squares(&columns, &y, None, 0.0).unwrap();
    close(&fit.coefficients, &[4.486044108881378, 1.043834691039141, -1.316590502682296], LIBRARY);
    close(&[fit.residual_ss], &[4.4753757202463795], LIBRARY);
    // numpy.linalg.inv(A.T @ A).
    close(&fit.inverse[0], &[0.6450228491953113, -0.062427975362606816, -0.08742300814623483], LIBRARY);
    close(&fit.inverse[2], &[-0.08742300814623491, -0.014702960460957674, 0.053248559507252144], LIBRARY);
    // numpy.linalg.lstsq(A * sqrt(w)[:, None], y * sqrt(w), rcond=None).
    let fit = least_squares(&columns, &y, Some(&w), 0.0).unwrap();
    close(&fit.coefficients, &[3.9900868728435936, 1.0324103647789011, -1.0854523650061778], LIBRARY);
    close(&[fit.residual_ss], &[6.193262869535994], LIBRARY);
    // numpy.linalg.lstsq(vstack([A, sqrt(0.7) * eye(3)]), concatenate([y, zeros(3)]), rcond=None)[0].
    let fit = least_squares(&columns, &y, None, 0.7).unwrap();
    close(&fit.coefficients, &[3.0797604112646217, 1.1473007595195415, -1.0761988304002192], LIBRARY);
    // A third column that repeats the first two is left out; the fitted values are numpy's A2 @ lstsq(A2, y, rcond=None)[0].
    let repeat: Vec<f64> = a.iter().map(|a| 2.0 * a - 1.0).collect();
    let fit = least_squares(&[one, a.clone(), repeat.clone(), b.clone()], &y, None, 0.0).unwrap();
    assert_eq!((fit.kept.as_slice(), fit.rank), ([true, true, false, true].as_slice(), 3));
    let fitted: Vec<f64> = (0..7).map(|i| fit.predict(&[1.0, a[i], repeat[i], b[i]])).collect();
    let numpy_fitted = [
        2.3747804490363538,
        4.735205642757792,
        1.1709735744088956,
        4.711611364991054,
        9.56883965825551,
        8.501410689449628,
        4.937178621100732,
    ];
    close(&fitted, &numpy_fitted, LIBRARY);
}

#[test]
fn regression_keeps_digits_when_badly_scaled() {
    // numpy.linalg.lstsq(vander(1..12, 6, increasing=True), sin(t) + 0.1 t, rcond=None)[0], numpy 2.4.6.
    let t: Vec<f64> = (1..=12).map(f64::from).collect();
    let columns: Vec<Vec<f64>> = (0..6).map(|p| t.iter().map(|t| t.powi(p)).collect()).collect();
    let y: Vec<f64> = t.iter().map(|t| t.sin() + 0.1 * t).collect();
    let expected =
        [-2.7395619233888335, 6.507160350970364, -3.49762731800616, 0.7313937000593767, -0.06470352814674402, 0.0020370766508166736];
    close(&least_squares(&columns, &y, None, 0.0).unwrap().coefficients, &expected, ILL_CONDITIONED);
}

#[test]
fn regression_refuses() {
    assert!(least_squares(&[vec![1.0, 2.0]], &[1.0], None, 0.0).is_none());
    assert!(least_squares(&[vec![f64::NAN]], &[1.0], None, 0.0).is_none());
    assert!(least_squares(&[vec![1.0]], &[1.0], Some(&[-1.0]), 0.0).is_none());
    assert!(least_squares(&[vec![1.0]], &[1.0], None, -1.0).is_none());
    assert!(least_squares(&[], &[], None, 0.0).is_none());
    assert_eq!(least_squares(&[vec![0.0, 0.0]], &[1.0, 2.0], None, 0.0).unwrap().rank, 0);
}

#[test]
fn within_slopes_against_dummies_in_numpy() {
    // numpy.linalg.lstsq(column_stack([x1, x2, eye(3)[u]]), y, rcond=None): slopes, and residual sum over 9 - 5.
    let unit = [0, 0, 0, 1, 1, 1, 1, 2, 2];
    let x1 = vec![1.0, 2.0, 4.0, 3.0, 5.0, 6.0, 9.0, 0.5, 2.5];
    let x2 = vec![0.3, -1.0, 2.0, 0.7, 1.1, -0.4, 2.2, 3.0, -2.0];
    let y = [1.5, 2.0, 4.4, 9.9, 11.2, 11.0, 15.1, -3.0, -2.2];
    let fit = within_fit(&unit, &[x1.clone(), x2], &y).unwrap();
    close(&fit.fit.coefficients, &[0.8263553225769855, 0.2584943705850513], LIBRARY);
    close(&[fit.residual_variance], &[0.20128369058154977], LIBRARY);
    assert_eq!(fit.df, 4);
    // A column that is constant within each unit says nothing here.
    let height = unit.iter().map(|u| 180.1 + *u as f64).collect();
    assert_eq!(within_fit(&unit, &[height, x1], &y).unwrap().fit.kept, [false, true]);
    assert!(within_fit(&[0, 1], &[vec![1.0, 2.0]], &[1.0, 2.0]).is_none());
}

#[test]
fn clustered_errors() {
    // numpy: 3/2 · Σ_g (Σ (y − ȳ))²/36, and the sandwich (XᵀX)⁻¹ Xᵀ_g e_g e_gᵀ X_g (XᵀX)⁻¹ · 3/2 with X a column of ones.
    let clusters = vec![vec![1.0, 2.5], vec![4.0], vec![0.5, -1.0, 3.0]];
    close(&[cluster_variance(&clusters).unwrap()], &[0.48842592592592604], LIBRARY);
    // Two equal values in two games among others that scatter: never certain. Worked by hand: no cell has two values, so
    // σ_w² = (0 + 2 + 8)/3, model variance of a mean of two 5/3; moderated (10 · 5/3 + 1 · 0)/11.
    let units = vec![vec![vec![2.0], vec![2.0]], vec![vec![1.0], vec![3.0]], vec![vec![0.0], vec![4.0]]];
    let means = clustered_means(&units, 0.1);
    close(&[means[0].unwrap().variance.unwrap()], &[50.0 / 33.0], LIBRARY);
    // A single game: only the pooled variance is there. σ_w² = 2 from the one cell with two values; the second unit has one.
    let means = clustered_means(&[vec![vec![1.0, 3.0]], vec![vec![7.0]], vec![]], 0.1);
    close(&[means[0].unwrap().variance.unwrap(), means[1].unwrap().variance.unwrap()], &[1.0, 2.0], LIBRARY);
    assert_eq!(means[2], None);
    // One value in all: nothing is known. All values equal: the resolution remains.
    assert_eq!(clustered_means(&[vec![vec![1.0]]], 0.1)[0].unwrap().variance, None);
    close(&[clustered_means(&[vec![vec![1.0, 1.0]]], 0.1)[0].unwrap().variance.unwrap()], &[0.005], LIBRARY);
}

#[test]
fn clustered_variance_is_right_on_average() {
    // Game effects of variance 1 on top of noise of variance 4; 5 games of 1 to 4 pursuits. A variance that takes the pursuits as
    // independent would say 4.6/n on average and miss the shared part.
    let mut stream = tailchase::base::Stream::new(11, "clusters");
    let (mut error, mut claimed, mut naive) = (0.0, 0.0, 0.0);
    let leagues = 400;
    for _ in 0..leagues {
        let units: Vec<Vec<Vec<f64>>> = (0..12)
            .map(|_| {
                (0..5)
                    .map(|_| {
                        let (day, m) = (stream.normal(), 1 + stream.below(4));
                        (0..m).map(|_| day + 2.0 * stream.normal()).collect()
                    })
                    .collect()
            })
            .collect();
        for (c, unit) in clustered_means(&units, 0.1).into_iter().flatten().zip(&units) {
            error += c.mean * c.mean / (12 * leagues) as f64;
            claimed += c.variance.unwrap() / (12 * leagues) as f64;
            let square: f64 = unit.iter().flatten().map(|v| (v - c.mean).powi(2)).sum();
            naive += square / (c.n * (c.n - 1)) as f64 / (12 * leagues) as f64;
        }
    }
    assert!((claimed / error - 1.0).abs() < 0.06, "claimed {claimed}, real {error}");
    assert!(naive < 0.92 * error, "naive {naive}, real {error}");
}
