//! Closest point of approach, bearing drift, fields and units.

use super::{near, published, v2};
use serde::Deserialize;
use tailchase::base::angle::{from_nautical_rad, nautical_deg};
use tailchase::base::{V2, units};
use tailchase::engine::bearing::{Sight, Spread};
use tailchase::engine::reach::State;
use tailchase::model::Field;

#[derive(Deserialize)]
struct RelativeMotion {
    radar_plot: RadarPlot,
    track_pair: Vec<TrackPair>,
    course: Vec<Course>,
    fixed_miss: FixedMiss,
}

#[derive(Deserialize)]
struct RadarPlot {
    fixes: Vec<[f64; 3]>,
    printed: Plot,
    computed: Plot,
}

#[derive(Deserialize)]
struct Plot {
    moved_yd: f64,
    direction_deg: f64,
    speed_kn: f64,
    cpa_bearing_deg: f64,
    cpa_range_yd: f64,
    cpa_min: f64,
}

#[derive(Deserialize)]
struct TrackPair {
    r: [f64; 2],
    w: [f64; 2],
    cpa: f64,
    miss: f64,
    tolerance: f64,
}

#[derive(Deserialize)]
struct Course {
    defender: [f64; 2],
    defender_v: [f64; 2],
    carrier: [f64; 2],
    carrier_v: [f64; 2],
    t: Vec<f64>,
    nautical_deg: Option<f64>,
    line_rate_degps: Vec<f64>,
    closing: Option<f64>,
    cpa: f64,
    miss: f64,
}

#[derive(Deserialize)]
struct FixedMiss {
    speed: f64,
    miss: f64,
    range: Vec<f64>,
    line_rate_degps: Vec<f64>,
}

fn sight(r: V2, w: V2) -> Sight {
    Sight::new(State { pos_yd: r, vel_yps: w }, State::default(), Spread::default()).expect("apart")
}

#[test]
fn handbook_radar_plot() {
    let plot = published::<RelativeMotion>("relative_motion").radar_plot;
    assert_eq!(plot.fixes.len(), 4);
    let place = |fix: &[f64; 3]| V2::polar(from_nautical_rad(fix[1])) * fix[2];
    let (first, last) = (place(&plot.fixes[0]), place(&plot.fixes[3]));
    let minutes = plot.fixes[3][0] - plot.fixes[0][0];
    let moved = last - first;
    let w = moved / (minutes * 60.0); // yd/s
    let seen = sight(first, w);
    let spot = first + w * seen.cpa_s;
    // Graphical work: the handbook's own digits, ±1°, ±0.1 kn, ±1 %, ±1 min.
    for (expected, tolerances) in
        [(&plot.printed, [0.01 * 4035.0, 1.0, 0.1, 1.0, 69.0, 1.0]), (&plot.computed, [1e-3, 1e-6, 1e-6, 1e-6, 1e-4, 1e-6])]
    {
        near("moved", moved.norm(), expected.moved_yd, tolerances[0]);
        near("direction", nautical_deg(moved.angle_rad()), expected.direction_deg, tolerances[1]);
        near("speed", w.norm() / units::YPS_PER_KN, expected.speed_kn, tolerances[2]);
        near("bearing at the closest point", nautical_deg(spot.angle_rad()), expected.cpa_bearing_deg, tolerances[3]);
        near("closest", seen.miss_yd.abs(), expected.cpa_range_yd, tolerances[4]);
        near("minutes", seen.cpa_s / 60.0, expected.cpa_min, tolerances[5]);
    }
}

#[test]
fn closest_approach_of_two_tracks() {
    let pairs = published::<RelativeMotion>("relative_motion").track_pair;
    assert_eq!(pairs.len(), 2);
    for pair in pairs {
        let seen = sight(v2(pair.r), v2(pair.w));
        near("time", seen.cpa_s, pair.cpa, pair.tolerance);
        near("miss", seen.miss_yd.abs(), pair.miss, pair.tolerance);
    }
}

#[test]
fn steady_bearing_and_near_miss() {
    let courses = published::<RelativeMotion>("relative_motion").course;
    assert_eq!(courses.len(), 2);
    for course in courses {
        for (t_s, rate) in course.t.iter().zip(&course.line_rate_degps) {
            let at = |p: [f64; 2], v: [f64; 2]| State { pos_yd: v2(p) + v2(v) * *t_s, vel_yps: v2(v) };
            let carrier = at(course.carrier, course.carrier_v);
            let defender = at(course.defender, course.defender_v);
            let seen = Sight::new(carrier, defender, Spread::default()).expect("apart");
            near("line rate", seen.line_rate_radps.to_degrees().abs(), *rate, 1e-6);
            near("time left", seen.cpa_s + t_s, course.cpa, 1e-9);
            near("miss", seen.miss_yd.abs(), course.miss, 1e-9);
            if let Some(bearing) = course.nautical_deg {
                near("bearing", nautical_deg(seen.bearing_rad), bearing, 1e-6);
                assert!(seen.on_course(1.25) && seen.steady(1.25));
            }
            if let Some(closing) = course.closing {
                near("closing speed", seen.closing_yps, closing, 1e-6);
            }
        }
    }
}

#[test]
fn a_fixed_miss_turns_the_line_faster_near_contact() {
    let fixed = published::<RelativeMotion>("relative_motion").fixed_miss;
    for (range_yd, rate) in fixed.range.iter().zip(&fixed.line_rate_degps) {
        let back_yd = (range_yd * range_yd - fixed.miss * fixed.miss).max(0.0).sqrt();
        let seen = sight(V2::new(back_yd, fixed.miss), V2::new(-fixed.speed, 0.0));
        near("line rate", seen.line_rate_radps.to_degrees(), *rate, 1e-8);
        // A large rate at short range does not clear the course: the miss stays inside the reach.
        assert!(seen.steady(1.25) || seen.cpa_s <= 0.0);
    }
}

/// The delta method against brute force: the spread of the measures over jittered places and velocities.
#[test]
fn sigmas_agree_with_simulation() {
    let spread = Spread { place_yd2: 0.0025, cross: 0.004, velocity_yps2: 0.16 };
    let (r, w) = (V2::new(12.0, 5.0), V2::new(-6.0, 1.0));
    let exact = Sight::new(State { pos_yd: r, vel_yps: w }, State::default(), spread).expect("apart");
    let mut draws = tailchase::base::Stream::new(1, "sigmas");
    let n = 40_000;
    // A pair (place, velocity) with the wanted covariance, by Cholesky.
    let l11 = spread.place_yd2.sqrt();
    let l21 = spread.cross / l11;
    let l22 = (spread.velocity_yps2 - l21 * l21).sqrt();
    let mut sums = [[0.0; 2]; 4];
    for _ in 0..n {
        let (a, b, c, d) = (draws.normal(), draws.normal(), draws.normal(), draws.normal());
        let seen = sight(r + V2::new(a, b) * l11, w + V2::new(l21 * a + l22 * c, l21 * b + l22 * d));
        for (sum, v) in sums.iter_mut().zip([seen.bearing_rad, seen.line_rate_radps, seen.closing_yps, seen.miss_yd]) {
            sum[0] += v;
            sum[1] += v * v;
        }
    }
    let claimed = [exact.bearing_sigma_rad, exact.line_rate_sigma_radps, exact.closing_sigma_yps, exact.miss_sigma_yd];
    for (sum, claimed) in sums.iter().zip(claimed) {
        let mean = sum[0] / f64::from(n);
        let sd = (sum[1] / f64::from(n) - mean * mean).sqrt();
        // 40,000 draws give a standard deviation to 0.35 %; the rest is the delta method's curvature.
        near("sigma ratio", sd / claimed, 1.0, 0.02);
    }
}

#[derive(Deserialize)]
struct FieldsUnits {
    field: Vec<FieldSize>,
    units: Units,
}

#[derive(Deserialize)]
struct FieldSize {
    name: String,
    length: f64,
    width: f64,
    goal: f64,
}

#[derive(Deserialize)]
struct Units {
    mph_per_yps: f64,
    yd_per_m: f64,
    yps_per_kn: f64,
    mph_of_m_per_s: f64,
    width_m: f64,
    length_m: f64,
}

#[test]
fn fields_and_units() {
    let data: FieldsUnits = published("fields_units");
    assert_eq!(data.field.len(), 2);
    for row in &data.field {
        let field = if row.name == "american" { Field::AMERICAN } else { Field::CANADIAN };
        near(&row.name, field.length_yd, row.length, 1e-12);
        near(&row.name, field.width_yd, row.width, 1e-12);
        near(&row.name, field.goal_x_yd(), row.goal, 1e-12);
    }
    near("mph", units::MPH_PER_YPS, data.units.mph_per_yps, 1e-12);
    near("yd per m", units::YD_PER_M, data.units.yd_per_m, 1e-12);
    near("knot", units::YPS_PER_KN, data.units.yps_per_kn, 1e-12);
    near("m/s in mph", units::mph(units::YD_PER_M), data.units.mph_of_m_per_s, 1e-12);
    near("width", Field::AMERICAN.width_yd * units::M_PER_YD, data.units.width_m, 1e-12);
    near("length", Field::AMERICAN.length_yd * units::M_PER_YD, data.units.length_m, 1e-12);
}
