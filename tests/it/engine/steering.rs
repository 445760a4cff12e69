//! The steering fit on trajectories with known gains.

use super::{near, published};
use serde::Deserialize;
use tailchase::base::{V2, wrap_rad};
use tailchase::engine::steering::{Instant, SteeringWord, fit};

#[derive(Deserialize)]
struct Laws {
    law: Vec<Law>,
}

#[derive(Deserialize)]
struct Law {
    n: f64,
    k: f64,
    states: Vec<[f64; 3]>,
}

/// Runs the law against the quarry of the fixture by Runge–Kutta steps; (t, place, heading, bearing) at 10 Hz.
fn run(law: &Law, sway: f64) -> Vec<(f64, V2, f64, f64)> {
    let quarry = |t: f64| (V2::new(20.0, 6.0 * t + sway * (3.0 * t).sin()), V2::new(0.0, 6.0 + 3.0 * sway * (3.0 * t).cos()));
    let rates = |t: f64, p: V2, g: f64| {
        let (q, u) = quarry(t);
        let v = V2::polar(g) * 8.0;
        let r = q - p;
        let line_rate = r.cross(u - v) / r.norm2();
        (v, law.n * line_rate - law.k * wrap_rad(g - r.angle_rad()))
    };
    let (mut p, mut g) = (V2::ZERO, 0.0);
    let steps = 100;
    let dt = 0.1 / f64::from(steps);
    let mut out = Vec::new();
    for frame in 0..41 {
        let t0 = f64::from(frame) * 0.1;
        let r = quarry(t0).0 - p;
        if r.norm() < 0.5 {
            break;
        }
        out.push((t0, p, g, r.angle_rad()));
        for s in 0..steps {
            let t = t0 + f64::from(s) * dt;
            let (a, b) = rates(t, p, g);
            let (c, d) = rates(t + dt / 2.0, p + a * (dt / 2.0), g + b * dt / 2.0);
            let (e, f) = rates(t + dt / 2.0, p + c * (dt / 2.0), g + d * dt / 2.0);
            let (h, i) = rates(t + dt, p + e * dt, g + f * dt);
            p += (a + c * 2.0 + e * 2.0 + h) * (dt / 6.0);
            g += (b + 2.0 * d + 2.0 * f + i) * dt / 6.0;
        }
    }
    out
}

fn instants(track: &[(f64, V2, f64, f64)]) -> Vec<Instant> {
    track
        .windows(3)
        .map(|w| Instant {
            t_s: w[1].0,
            heading_rate_radps: wrap_rad(w[2].2 - w[0].2) / (w[2].0 - w[0].0),
            line_rate_radps: wrap_rad(w[2].3 - w[0].3) / (w[2].0 - w[0].0),
            deviation_rad: wrap_rad(w[1].2 - w[1].3),
            weight: 1.0,
        })
        .collect()
}

#[test]
fn trajectories_agree_with_the_reference_integrator() {
    let laws = published::<Laws>("steering").law;
    assert_eq!(laws.len(), 5);
    for law in laws {
        let track = run(&law, 0.0);
        for (i, [x, y, heading_deg]) in law.states.iter().enumerate() {
            let (_, p, g, _) = track[10 * (i + 1)];
            near("x", p.x, *x, 1e-6);
            near("y", p.y, *y, 1e-6);
            near("heading", g.to_degrees(), *heading_deg, 1e-5);
        }
    }
}

#[test]
fn gains_are_read_back() {
    for law in published::<Laws>("steering").law {
        let fitted = fit(&instants(&run(&law, 0.0)), 0.0).expect("enough instants");
        // Central differences at 10 Hz cost the mixed law up to 3e-4 in the reference, too.
        near("N", fitted.n, law.n, 2e-3);
        near("K", fitted.k_per_s, law.k, 2e-3);
        near("explained", fitted.explained, 1.0, 1e-4);
        let word = if law.k > 0.0 { SteeringWord::Mixed } else { SteeringWord::Leads };
        assert_eq!(fitted.word(), Some(word), "N {} K {}", law.n, law.k);
    }
}

/// A one-parameter fit would call the mixed law N = 0.94, a plausible number for a wrong law; two parameters tell.
#[test]
fn a_delay_is_found() {
    let law = Law { n: 2.6, k: 0.0, states: vec![] };
    let mut all = instants(&run(&law, 1.0));
    let late: Vec<f64> = all.iter().map(|i| i.heading_rate_radps).collect();
    for i in (3..all.len()).rev() {
        all[i].heading_rate_radps = late[i - 3];
    }
    let fitted = fit(&all, 0.6).expect("enough instants");
    near("delay", fitted.delay_s, 0.3, 1e-9);
    near("N", fitted.n, 2.6, 0.02);
}

#[test]
fn too_little_says_nothing() {
    let law = Law { n: 3.0, k: 0.0, states: vec![] };
    let all = instants(&run(&law, 0.0));
    assert!(fit(&all[..8], 0.6).is_none());
    assert!(fit(&[], 0.6).is_none());
}
