//! Published and independently computed values (fixtures/published/smoothing.toml names each source).

use tailchase::base::V2;
use tailchase::kinematics::rts::{Prior, rts};
use tailchase::kinematics::savgol::{filter, weights};
use tailchase::kinematics::state::{Step, white_jerk};
use toml::{Table, Value};

const WEIGHTS_TOLERANCE: f64 = 1e-13; // exact rationals, up to rounding of a few dozen operations
const FILTER_TOLERANCE: f64 = 1e-10;
const JERK_TOLERANCE: f64 = 1e-9;
const LEVEL_TOLERANCE: f64 = 1e-6;

fn fixture() -> Table {
    include_str!("../../../fixtures/published/smoothing.toml").parse().unwrap()
}
fn float(v: &Value) -> f64 {
    v.as_float().or(v.as_integer().map(|i| i as f64)).unwrap()
}
fn floats(v: &Value) -> Vec<f64> {
    v.as_array().unwrap().iter().map(float).collect()
}
fn whole(v: &Value) -> usize {
    v.as_integer().unwrap() as usize
}
fn near(got: f64, expected: f64, tolerance: f64, what: &str) {
    assert!((got - expected).abs() <= tolerance, "{what}: got {got}, expected {expected}");
}

#[test]
fn savitzky_golay_weights_are_the_published_fractions() {
    let t = fixture();
    let rows = t["weights"].as_array().unwrap();
    for row in rows {
        let (window, derivative) = (whole(&row["window"]), whole(&row["derivative"]));
        let expected: Vec<f64> = floats(&row["numerators"]).iter().map(|n| n / float(&row["divisor"])).collect();
        for degree in row["degrees"].as_array().unwrap() {
            let got = weights(window, whole(degree), derivative, (window / 2) as f64).unwrap();
            for (g, e) in got.iter().zip(&expected) {
                near(*g, *e, WEIGHTS_TOLERANCE, &format!("window {window}, degree {degree}, derivative {derivative}"));
            }
        }
    }
    assert_eq!(rows.len(), 16);
    let gains = t["noise_gain"].as_array().unwrap();
    for row in gains {
        let window = whole(&row["window"]);
        let w = weights(window, whole(&row["degree"]), whole(&row["derivative"]), (window / 2) as f64).unwrap();
        near(w.iter().map(|v| v * v).sum(), float(&row["gain"]), 1e-12, &format!("noise gain, {row}"));
    }
    assert_eq!(gains.len(), 8);
    assert_eq!(weights(5, 5, 0, 2.0), None, "a polynomial through more than all points");
    assert_eq!(filter(&[1.0; 4], 5, 2, 0, 1.0), None, "a window longer than the series");
}

#[test]
fn savitzky_golay_filter_agrees_with_scipy_up_to_the_edges() {
    let t = fixture();
    let rows = t["filter"].as_array().unwrap();
    for row in rows {
        let (window, degree, derivative) = (whole(&row["window"]), whole(&row["degree"]), whole(&row["derivative"]));
        let got = filter(&floats(&row["values"]), window, degree, derivative, float(&row["step"])).unwrap();
        let expected = floats(&row["expected"]);
        assert_eq!(got.len(), expected.len());
        for (g, e) in got.iter().zip(expected) {
            near(*g, e, FILTER_TOLERANCE, &format!("window {window}, derivative {derivative}"));
        }
    }
    assert_eq!(rows.len(), 5);
}

#[test]
fn rts_smoother_agrees_with_four_computations_across_a_missing_frame() {
    let t = fixture();
    let j = t["jerk"].as_table().unwrap();
    let z: Vec<Option<f64>> = floats(&j["z"]).into_iter().map(|v| v.is_finite().then_some(v)).collect();
    let variance = floats(&j["prior_variance"]);
    let mut cov = [[0.0; 3]; 3];
    (0..3).for_each(|i| cov[i][i] = variance[i]);
    let prior = Prior { mean: floats(&j["prior_mean"]).try_into().unwrap(), cov };
    let step = white_jerk(float(&j["step_s"]), float(&j["jerk_density"]));
    let s = rts(&z, &vec![step; z.len() - 1], float(&j["sigma_yd"]).powi(2), &prior);
    let frames = j["frame"].as_array().unwrap();
    for (k, row) in frames.iter().enumerate() {
        let (state, sd) = (floats(&row["smoothed"]), floats(&row["sd"]));
        for i in 0..3 {
            near(s.smoothed[k][i], state[i], JERK_TOLERANCE, &format!("frame {k}, entry {i}"));
            near(s.plan.smoothed[k][i][i].sqrt(), sd[i], JERK_TOLERANCE, &format!("sd of frame {k}, entry {i}"));
        }
    }
    assert_eq!(frames.len(), 12);
    let filtered = j["filtered"].as_array().unwrap();
    for row in filtered {
        let k = whole(&row["frame"]);
        for (got, expected) in s.filtered[k].iter().zip(floats(&row["state"])) {
            near(*got, expected, JERK_TOLERANCE, &format!("filtered, frame {k}"));
        }
    }
    assert_eq!(filtered.len(), 4);
    near(s.loglik.iter().sum(), float(&j["loglik"]), JERK_TOLERANCE, "log-likelihood");
}

#[test]
fn local_level_of_the_nile_agrees_with_the_state_space_library() {
    let t = fixture();
    let l = t["level"].as_table().unwrap();
    let (r, q) = (float(&l["noise_variance"]), float(&l["step_variance"]));
    let y = floats(&l["values"]);
    assert_eq!(y.len(), 100);
    // A flat prior and the first value together are a prior of that value with the noise's variance.
    let mut z: Vec<Option<f64>> = y.iter().map(|v| Some(*v)).collect();
    z[0] = None;
    let steps = vec![Step { f: [[1.0]], q: [[q]] }; 99];
    let s = rts(&z, &steps, r, &Prior { mean: [y[0]], cov: [[r]] });
    for (k, e) in floats(&l["smoothed_first"]).into_iter().enumerate() {
        near(s.smoothed[k][0], e, LEVEL_TOLERANCE, &format!("level {k}"));
    }
    for (k, e) in floats(&l["smoothed_last"]).into_iter().enumerate() {
        near(s.smoothed[97 + k][0], e, LEVEL_TOLERANCE, &format!("level {}", 97 + k));
    }
    near(s.plan.smoothed[0][0][0], float(&l["smoothed_variance_ends"]), LEVEL_TOLERANCE, "variance of the first");
    near(s.plan.smoothed[99][0][0], float(&l["smoothed_variance_ends"]), LEVEL_TOLERANCE, "variance of the last");
    near(s.plan.smoothed[49][0][0], float(&l["smoothed_variance_middle"]), LEVEL_TOLERANCE, "variance of the middle");
    near(s.plan.predicted[99][0][0], float(&l["steady_predicted_variance"]), LEVEL_TOLERANCE, "steady variance");
    near(s.plan.gain[99][0], float(&l["steady_gain"]), 1e-9, "steady gain");
    near(s.loglik.iter().sum(), float(&l["loglik"]), LEVEL_TOLERANCE, "log-likelihood");
}

#[test]
fn on_a_polynomial_both_filters_return_it() {
    // Any quadratic is reproduced by weights of degree 2 or more, so the smoother and the filter must agree on it.
    let z: Vec<f64> = (0..30).map(|k| 2.0 + 0.3 * f64::from(k) - 0.01 * f64::from(k * k)).collect();
    let velocity = filter(&z, 7, 2, 1, 0.1).unwrap();
    let segment = tailchase::kinematics::Segment { first: 0, pos_yd: z.iter().map(|x| V2::new(*x, -x)).collect(), seen: vec![true; 30] };
    let times: Vec<f64> = (0..30).map(|k| f64::from(k) * 0.1).collect();
    let noise = tailchase::model::Noise { jerk_density: 1e-6, sigma_yd: 1e-3 };
    let track = tailchase::kinematics::smooth(&segment, &times, noise, &[], &mut Default::default());
    for (k, v) in velocity.iter().enumerate() {
        // The weak prior on velocity and acceleration moves the answer by a millionth.
        near(track.vel_yps[k].x, *v, 1e-5, &format!("velocity, frame {k}"));
        near(track.acc_ypss[k].y, 2.0, 1e-4, &format!("acceleration, frame {k}"));
    }
}
