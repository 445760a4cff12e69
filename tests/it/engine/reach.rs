//! Reach and the sprint law.

use super::{near, published};
use serde::Deserialize;
use tailchase::base::{V2, units};
use tailchase::engine::reach::{Drag, State};

#[derive(Deserialize)]
struct Sprint {
    disc: Disc,
    time_to_spot: Vec<TimeToSpot>,
    sprint: Vec<SprintCase>,
    dash: Vec<Dash>,
}

#[derive(Deserialize)]
struct Disc {
    alpha: f64,
    top: f64,
    from: [f64; 4],
    rows: Vec<[f64; 4]>,
}

#[derive(Deserialize)]
struct TimeToSpot {
    from: [f64; 4],
    spot: [f64; 2],
    t: f64,
}

#[derive(Deserialize)]
struct SprintCase {
    top: f64,
    tau: f64,
    rows: Vec<[f64; 3]>,
}

#[derive(Deserialize)]
struct Dash {
    top_mps: f64,
    tau: f64,
    t: [f64; 3],
}

fn state(s: [f64; 4]) -> State {
    State { pos_yd: V2::new(s[0], s[1]), vel_yps: V2::new(s[2], s[3]) }
}

#[test]
fn reachable_disc() {
    let disc = published::<Sprint>("sprint").disc;
    assert_eq!(disc.rows.len(), 4);
    let drag = Drag { alpha_per_s: disc.alpha, reach_yd: 0.0 };
    for [t, radius, x, y] in disc.rows {
        let (centre, r) = drag.disc(state(disc.from), disc.top, t);
        near("radius", r, radius, 1e-9);
        near("centre x", centre.x, x, 1e-9);
        near("centre y", centre.y, y, 1e-9);
        // Full push in any direction lands on the circle, and asks for the top speed exactly.
        for i in 0..8 {
            let way = V2::polar(f64::from(i));
            let there = drag.step(state(disc.from), way, disc.top, t);
            near("on the circle", (there.pos_yd - centre).norm(), r, 1e-9);
            near("needed", drag.needed_yps(state(disc.from), there.pos_yd, t), disc.top, 1e-9);
        }
    }
}

#[test]
fn least_time_to_a_spot() {
    let data: Sprint = published("sprint");
    assert_eq!(data.time_to_spot.len(), 5);
    let drag = Drag { alpha_per_s: data.disc.alpha, reach_yd: 0.0 };
    for case in data.time_to_spot {
        near("time", drag.time_to_spot_s(state(case.from), V2::new(case.spot[0], case.spot[1]), data.disc.top), case.t, 1e-9);
    }
}

#[test]
fn sprint_law_and_published_dashes() {
    let data: Sprint = published("sprint");
    assert_eq!((data.sprint.len(), data.dash.len()), (2, 3));
    for case in data.sprint {
        let drag = Drag { alpha_per_s: 1.0 / case.tau, reach_yd: 0.0 };
        for [t, v, x] in case.rows {
            let there = drag.step(State::default(), V2::EAST, case.top, t);
            near("speed", there.vel_yps.x, v, 1e-9);
            near("way", there.pos_yd.x, x, 1e-9);
        }
    }
    for dash in data.dash {
        let drag = Drag { alpha_per_s: 1.0 / dash.tau, reach_yd: 0.0 };
        let top_yps = dash.top_mps * units::YD_PER_M;
        for (yards, t) in [10.0, 20.0, 40.0].into_iter().zip(dash.t) {
            near("dash", drag.time_to_spot_s(State::default(), V2::new(yards, 0.0), top_yps), t, 1e-7);
        }
    }
}

#[test]
fn the_push_of_a_step_is_read_back() {
    let drag = Drag { alpha_per_s: 1.3, reach_yd: 1.25 };
    let from = state([10.0, 20.0, 3.0, -4.0]);
    let push = V2::new(0.3, -0.6);
    let there = drag.step(from, push, 9.0, 0.1);
    let read = drag.push_used(from.vel_yps, there.vel_yps, 9.0, 0.1);
    near("push x", read.x, push.x, 1e-12);
    near("push y", read.y, push.y, 1e-12);
}
