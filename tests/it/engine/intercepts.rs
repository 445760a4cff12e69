//! Triangle, Apollonius circle, bisector, sideline; the general solver against the closed forms.

use super::{near, published, v2};
use serde::Deserialize;
use tailchase::base::angle::{from_nautical_rad, nautical_deg};
use tailchase::base::{V2, units};
use tailchase::engine::intercept::{EqualTime, SidelineCourse, equal_time, triangle};
use tailchase::engine::reach::{Drag, State};
use tailchase::engine::{grid::Grid, path::Path};
use tailchase::model::Field;

#[derive(Deserialize)]
struct Intercepts {
    triangle: Vec<TriangleCase>,
    refusal: Vec<Refusal>,
    rendezvous: Vec<Rendezvous>,
    parallel: Parallel,
}

#[derive(Deserialize)]
struct TriangleCase {
    case: String,
    p: [f64; 2],
    q: [f64; 2],
    u: [f64; 2],
    speed: f64,
    lead_deg: f64,
    t: f64,
    closes: Option<f64>,
    spot: [f64; 2],
    circle: Option<[f64; 3]>,
    bisector: Option<[f64; 3]>,
}

#[derive(Deserialize)]
struct Refusal {
    case: String,
    p: [f64; 2],
    q: [f64; 2],
    u: [f64; 2],
    speed: f64,
    why: String,
}

#[derive(Deserialize)]
struct Rendezvous {
    bearing_deg: f64,
    range_nm: f64,
    course_deg: f64,
    quarry_kn: f64,
    own_kn: f64,
    steer_printed_deg: Option<f64>,
    steer_deg: f64,
    hours: f64,
    run_nm: Option<f64>,
}

#[derive(Deserialize)]
struct Parallel {
    p: [f64; 2],
    q: [f64; 2],
    speed: f64,
    quarry_speed: f64,
    circle: [f64; 3],
    run: Vec<ParallelRun>,
}

#[derive(Deserialize)]
struct ParallelRun {
    heading: String,
    t: f64,
    at: [f64; 2],
}

/// The source prints ten significant digits.
const PRINTED: f64 = 1e-8;

#[test]
fn triangles_three_ways() {
    let cases = published::<Intercepts>("intercept").triangle;
    assert_eq!(cases.len(), 5);
    for case in cases {
        let (p, q, u) = (v2(case.p), v2(case.q), v2(case.u));
        let found = triangle(p, case.speed, q, u).unwrap_or_else(|e| panic!("{}: {e:?}", case.case));
        near(&case.case, found.t_s, case.t, PRINTED);
        near(&case.case, found.spot_yd.x, case.spot[0], 1e-7);
        near(&case.case, found.spot_yd.y, case.spot[1], 1e-7);
        near(&case.case, found.lead_rad.to_degrees(), case.lead_deg, PRINTED);
        assert_eq!(found.window_closes_s.is_some(), case.closes.is_some(), "{}", case.case);
        if let (Some(found), Some(expected)) = (found.window_closes_s, case.closes) {
            near(&case.case, found, expected, PRINTED);
        }
        // The equal-time locus: where it is, and that the carrier's ray crosses it at the meeting.
        let locus = equal_time(p, case.speed, q, u.norm()).expect("apart");
        match (locus, case.circle, case.bisector) {
            (EqualTime::Circle { centre_yd, radius_yd }, Some(c), None) => {
                near(&case.case, centre_yd.x, c[0], 1e-7);
                near(&case.case, centre_yd.y, c[1], 1e-7);
                near(&case.case, radius_yd, c[2], 1e-7);
            }
            (EqualTime::Bisector { normal, offset_yd }, None, Some(b)) => {
                near(&case.case, normal.x, b[0], PRINTED);
                near(&case.case, normal.y, b[1], PRINTED);
                near(&case.case, offset_yd, b[2], PRINTED);
            }
            other => panic!("{}: {other:?}", case.case),
        }
        let along_yd = locus.crossing_yd(q, u.unit().expect("moving")).expect("crosses");
        near(&case.case, along_yd / u.norm(), case.t, 1e-7);
        // The steady-bearing index is −1 at the start of every such run: closing speed is the whole relative speed.
        let course = (found.spot_yd - p).unit().expect("apart") * case.speed;
        near(&case.case, found.closing_yps, (u - course).norm(), 1e-7);
    }
}

/// The general solver over a sampled path, its drag so strong that the defender runs at constant speed.
#[test]
fn general_solver_in_the_limit_of_constant_speed() {
    let drag = Drag { alpha_per_s: 1e15, reach_yd: 0.0 };
    for case in published::<Intercepts>("intercept").triangle {
        let (p, q, u) = (v2(case.p), v2(case.q), v2(case.u));
        let t_s: Vec<f64> = (0..400).map(|i| f64::from(i) * 0.1).collect();
        let spots: Vec<V2> = t_s.iter().map(|t| q + u * *t).collect();
        let (x, y): (Vec<f64>, Vec<f64>) = spots.iter().map(|s| (s.x, s.y)).unzip();
        let grid = Grid::new(t_s, drag);
        let path = Path { grid: &grid, x_yd: &x, y_yd: &y };
        let met = path.earliest(0, State { pos_yd: p, vel_yps: V2::ZERO }, case.speed).expect("meets");
        near(&case.case, met.t_s, case.t, PRINTED);
    }
    for case in published::<Intercepts>("intercept").refusal {
        let (p, q, u) = (v2(case.p), v2(case.q), v2(case.u));
        let t_s: Vec<f64> = (0..400).map(|i| f64::from(i) * 0.1).collect();
        let (x, y): (Vec<f64>, Vec<f64>) = t_s.iter().map(|t| q + u * *t).map(|s| (s.x, s.y)).unzip();
        let grid = Grid::new(t_s, drag);
        let path = Path { grid: &grid, x_yd: &x, y_yd: &y };
        assert!(path.earliest(0, State { pos_yd: p, vel_yps: V2::ZERO }, case.speed).is_none(), "{}", case.case);
    }
}

#[test]
fn what_cannot_be_intercepted_says_why() {
    let cases = published::<Intercepts>("intercept").refusal;
    assert_eq!(cases.len(), 3);
    for case in cases {
        let found = triangle(v2(case.p), case.speed, v2(case.q), v2(case.u));
        assert_eq!(format!("{:?}", found.expect_err(&case.case)), case.why, "{}", case.case);
    }
}

#[test]
fn seamanship_problems() {
    let cases = published::<Intercepts>("intercept").rendezvous;
    assert_eq!(cases.len(), 4);
    for case in cases {
        let q = V2::polar(from_nautical_rad(case.bearing_deg)) * case.range_nm;
        let u = V2::polar(from_nautical_rad(case.course_deg)) * case.quarry_kn;
        let found = triangle(V2::ZERO, case.own_kn, q, u).expect("meets");
        let steer_deg = nautical_deg(found.spot_yd.angle_rad());
        near("steer", steer_deg, case.steer_deg, 1e-6);
        near("hours", found.t_s, case.hours, 1e-8);
        if let Some(printed) = case.steer_printed_deg {
            near("printed", steer_deg, printed, 0.5);
        }
        if let Some(run_nm) = case.run_nm {
            near("run", found.spot_yd.norm(), run_nm, 1e-7);
        }
    }
    // The unit conversion those knots would take here: one knot is 0.56 yd/s.
    near("knot", units::YPS_PER_KN, 0.5626032857003985, 1e-15);
}

/// A faster pursuer who keeps the line of sight's direction catches any dodging runner inside the first circle.
#[test]
fn parallel_navigation_captures_inside_the_first_circle() {
    let data = published::<Intercepts>("intercept").parallel;
    assert_eq!(data.run.len(), 3);
    for run in &data.run {
        let heading = |t: f64| match run.heading.as_str() {
            "pi/2 + 0.8 sin 2t" => std::f64::consts::FRAC_PI_2 + 0.8 * (2.0 * t).sin(),
            "pi/2, after 1 s -pi/3" => {
                if t < 1.0 {
                    std::f64::consts::FRAC_PI_2
                } else {
                    -std::f64::consts::FRAC_PI_3
                }
            }
            "pi/2 - 0.5 t" => std::f64::consts::FRAC_PI_2 - 0.5 * t,
            other => panic!("unknown heading {other}"),
        };
        let (mut p, mut q, mut t) = (v2(data.p), v2(data.q), 0.0);
        let dt = 1e-5;
        while (q - p).norm() > 1e-4 && t < 20.0 {
            let u = V2::polar(heading(t + dt / 2.0)) * data.quarry_speed;
            // Steering by the triangle against the carrier's present course keeps the bearing steady.
            let course = triangle(p, data.speed, q, u).expect("faster").spot_yd - p;
            p += course.unit().expect("apart") * (data.speed * dt);
            q += u * dt;
            t += dt;
        }
        near(&run.heading, t, run.t, 1e-3);
        near(&run.heading, q.x, run.at[0], 2e-3);
        near(&run.heading, q.y, run.at[1], 2e-3);
        let centre = V2::new(data.circle[0], data.circle[1]);
        assert!((q - centre).norm() < data.circle[2], "{}", run.heading);
    }
}

/// The tightest line on a straight piece is the Apollonius crossing; the safest lies arcsin κ from the perpendicular.
#[test]
fn tightest_and_safest_line_on_the_sideline() {
    let field = Field::AMERICAN;
    // Up the sideline already: 1 yd from it, straight downfield at 8; the defender 20 yd inside and level, at 6.
    let (carrier, v) = (V2::new(20.0, 1.0), V2::new(8.0, 0.0));
    let (defender, speed) = (V2::new(55.0, 16.0), 6.0);
    let course = SidelineCourse::new(carrier, v, &field, 1.0).expect("moving");
    let tight = course.tightest(defender, speed).expect("meets");
    let closed = triangle(defender, speed, carrier, v).expect("meets");
    near("tightest", tight.spot_yd.x, closed.spot_yd.x, 1e-9);
    let safe = course.safest(defender, speed).expect("has a margin");
    let slant_rad = ((safe.spot_yd.x - defender.x) / (defender.y - safe.spot_yd.y)).atan();
    near("safest", slant_rad, (speed / 8.0_f64).asin(), 1e-9);
    // No other spot has a larger margin, and the tightest has none.
    let most = course.curve(defender, speed, 2000).iter().map(|m| m.margin_s).fold(f64::MIN, f64::max);
    assert!(most <= safe.margin_s + 1e-12 && safe.margin_s > 0.0);
    near("no margin", tight.t_s - (tight.spot_yd - defender).norm() / speed, 0.0, 1e-9);

    // With equal speeds the crossing lies on the perpendicular bisector of the two places.
    let even = course.tightest(defender, 8.0).expect("meets");
    near("bisector", (even.spot_yd - defender).norm(), (even.spot_yd - carrier).norm(), 1e-9);
    // κ ≥ 1: the safest line runs off downfield and is cut at the goal line.
    near("cut", course.safest(defender, 8.5).expect("has a margin").spot_yd.x, field.goal_x_yd(), 1e-9);
}

#[test]
fn towards_the_sideline_and_up_it() {
    let field = Field::AMERICAN;
    let course = SidelineCourse::new(V2::new(30.0, 13.0), V2::new(6.0, -6.0), &field, 1.0).expect("moving");
    // 12 yd across at 45°: on the line 12 yd further down, 12√2/(6√2) = 2 s later.
    let met = course.tightest(V2::new(80.0, 5.0), 8.0).expect("meets");
    assert!(met.t_s > 2.0 && (met.spot_yd.y - 1.0).abs() < 1e-12, "{met:?}");
    let speed = 72.0_f64.sqrt();
    near("carrier's time", met.t_s, 2.0 + (met.spot_yd.x - 42.0) / speed, 1e-9);
    near("defender's time", met.t_s, (met.spot_yd - V2::new(80.0, 5.0)).norm() / 8.0, 1e-9);
}
