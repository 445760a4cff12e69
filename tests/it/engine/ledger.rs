//! The account: it balances, perfect steps cost nothing, and its limits are the textbook chases.

use super::{near, published, v2};
use proptest::prelude::*;
use serde::Deserialize;
use tailchase::base::{Stream, V2};
use tailchase::engine::chase::Chase;
use tailchase::engine::ledger::{Chaser, Ledger, keep};
use tailchase::engine::path::TopSpeed;
use tailchase::engine::reach::{Drag, State};
use tailchase::model::Settings;

#[derive(Deserialize)]
struct Pursuits {
    chase: Vec<ChaseCase>,
    frames: Frames,
}

#[derive(Deserialize)]
struct ChaseCase {
    p: [f64; 2],
    q: [f64; 2],
    way: [f64; 2],
    speed: f64,
    quarry: f64,
    capture: f64,
    straight: f64,
    lost: f64,
}

#[derive(Deserialize)]
struct Frames {
    rows: Vec<[f64; 9]>,
}

/// A field without lines, the account starting at once.
fn open_field() -> Settings {
    let mut s = Settings::default();
    (s.field.length_yd, s.field.width_yd, s.field.end_zone_yd) = (1e6, 1e6, 0.0);
    (s.clock.downfield_yps, s.clock.sustained_s, s.clock.reaction_s) = (-1e9, 0.0, 0.0);
    s
}

fn constant_speed() -> Settings {
    let mut s = open_field();
    s.motion.alpha_per_s = 1e15;
    s.carry.reach_yd = 1e-9;
    s.motion.constant_velocity = true;
    s.motion.foresight_s = 60.0;
    s
}

/// Running at the man at constant speed: Runge–Kutta between frames, frames spaced so that the last is the capture.
fn run_at_the_man(case: &ChaseCase, frames: usize) -> (Vec<f64>, Vec<State>, Vec<State>) {
    // Turned so that the quarry runs towards +x, in the middle of the field.
    let way = v2(case.way).unit().expect("a direction");
    let turn = |p: V2| V2::new(p.dot(way), way.cross(p)) + V2::new(5e5, 5e5);
    let (mut p, q0) = (turn(v2(case.p)), turn(v2(case.q)));
    let dt = case.capture / frames as f64;
    let quarry = |t: f64| q0 + V2::EAST * (case.quarry * t);
    let heading = |p: V2, t: f64| (quarry(t) - p).unit().unwrap_or(V2::EAST) * case.speed;
    let (mut t_s, mut chaser, mut carrier) = (Vec::new(), Vec::new(), Vec::new());
    let steps = 400;
    let h = dt / f64::from(steps);
    for frame in 0..=frames {
        let t = frame as f64 * dt;
        t_s.push(t);
        carrier.push(State { pos_yd: quarry(t), vel_yps: V2::EAST * case.quarry });
        let here = if frame == frames { quarry(t) } else { p };
        chaser.push(State { pos_yd: here, vel_yps: heading(p, t) });
        for s in 0..if frame == frames { 0 } else { steps } {
            let t = t + f64::from(s) * h;
            let a = heading(p, t);
            let b = heading(p + a * (h / 2.0), t + h / 2.0);
            let c = heading(p + b * (h / 2.0), t + h / 2.0);
            let d = heading(p + c * h, t + h);
            p += (a + b * 2.0 + c * 2.0 + d) * (h / 6.0);
        }
    }
    near("caught at the printed time", (p - quarry(case.capture)).norm(), 0.0, 1e-3);
    (t_s, carrier, chaser)
}

fn account(t_s: &[f64], carrier: Vec<State>, states: &[State], top: TopSpeed, settings: &Settings) -> (Chase, Ledger) {
    let chase = Chase::new(t_s, carrier, 9.0, settings);
    let blocked = vec![false; states.len()];
    let ledger = keep(&chase, &Chaser { first: 0, states, blocked: &blocked, top, ends_in_contact: false }, &settings.clock);
    (chase, ledger)
}

#[test]
fn running_at_the_man_costs_what_the_textbook_says() {
    let cases = published::<Pursuits>("pursuit").chase;
    assert_eq!(cases.len(), 5);
    let settings = constant_speed();
    for case in cases {
        let (t_s, carrier, chaser) = run_at_the_man(&case, 500);
        let (_, ledger) = account(&t_s, carrier, &chaser, TopSpeed { yps: case.speed, sigma_yps: 0.0 }, &settings);
        let account = ledger.account.expect("an account");
        near("yards lost", account.conceded_yd, case.lost, 1e-6);
        near("by the line", account.entries.flat_yd + account.entries.deep_yd, case.lost, 1e-6);
        near("nothing else", account.entries.pace_yd.abs() + account.entries.late_yd.abs() + account.entries.move_yd.abs(), 0.0, 1e-6);
        near("ideal", ledger.values[0].t_star_s.expect("meets"), case.straight, 1e-8);
    }
}

#[test]
fn frames_of_the_first_chase() {
    use tailchase::engine::bearing::{Sight, Spread};
    let data: Pursuits = published("pursuit");
    assert_eq!(data.frames.rows.len(), 9);
    for [t, x, y, separation, bearing, rate, closing, cpa, miss] in data.frames.rows {
        let carrier = State { pos_yd: V2::new(10.0, 6.0 * t), vel_yps: V2::new(0.0, 6.0) };
        let place = V2::new(x, y);
        let heading = (carrier.pos_yd - place).unit().expect("apart");
        let seen = Sight::new(carrier, State { pos_yd: place, vel_yps: heading * 9.0 }, Spread::default()).expect("apart");
        // Eight printed decimals of the place, half a unit off, turn a line of 0.3 yd by 1e-6 deg and its rate by 1e-5.
        near("range", seen.range_yd, separation, 2e-8);
        near("bearing", seen.bearing_rad.to_degrees(), bearing, 2e-6);
        near("line rate", seen.line_rate_radps.to_degrees(), rate, 2e-5);
        near("closing", seen.closing_yps, closing, 1e-6);
        near("time", seen.cpa_s, cpa, 1e-6);
        near("miss", seen.miss_yd.abs(), miss, 1e-6);
    }
}

/// A carrier who weaves, sampled at `rate` frames a second.
fn weave(rate: f64, seconds: f64, seed: u64) -> (Vec<f64>, Vec<State>) {
    let mut draws = Stream::new(seed, "weave");
    let (amplitude, pulse, phase) = (draws.between(0.0, 3.0), draws.between(0.5, 2.0), draws.between(0.0, 6.0));
    let (speed, y0) = (draws.between(6.0, 8.5), draws.between(20.0, 34.0));
    let at = |t: f64| State {
        pos_yd: V2::new(30.0 + speed * t, y0 + amplitude * (pulse * t + phase).sin()),
        vel_yps: V2::new(speed, amplitude * pulse * (pulse * t + phase).cos()),
    };
    let t_s: Vec<f64> = (0..=(seconds * rate) as usize).map(|i| i as f64 / rate).collect();
    let states = t_s.iter().map(|t| at(*t)).collect();
    (t_s, states)
}

/// With the top speed known exactly, following the best push keeps the expected spot and brings T* down a second a second.
#[test]
fn perfect_steps_cost_nothing() {
    let mut settings = open_field();
    settings.motion.alpha_per_s = 1.3;
    let drag = Drag::of(&settings);
    let top = TopSpeed { yps: 9.0, sigma_yps: 0.0 };
    let mut met = 0;
    for seed in 0..40 {
        let (t_s, carrier) = weave(10.0, 6.0, seed);
        let mut draws = Stream::new(seed, "defender");
        let start = State {
            pos_yd: carrier[0].pos_yd + V2::polar(draws.between(-1.2, 1.2)) * draws.between(8.0, 20.0),
            vel_yps: V2::polar(draws.between(-3.0, 3.0)) * draws.between(0.0, 6.0),
        };
        let chase = Chase::new(&t_s, carrier.clone(), 9.0, &settings);
        let path = chase.hindsight();
        let Some(ideal) = path.earliest(0, start, top.yps) else { continue };
        let (mut state, mut states) = (start, vec![start]);
        for now in 0..t_s.len() - 1 {
            let Some(meeting) = path.earliest(now, state, top.yps) else { panic!("seed {seed}: lost a perfect chase at {now}") };
            near("expected spot", path.expected(now, state, top, now + 1).x_yd, ideal.spot_yd.x, 1e-9);
            near("time left", meeting.t_s, ideal.t_s - t_s[now], 1e-9);
            if meeting.t_s <= t_s[now + 1] - t_s[now] {
                met += 1;
                break;
            }
            state = drag.step(state, meeting.aim_yd.unit().expect("a way"), top.yps, t_s[now + 1] - t_s[now]);
            states.push(state);
        }
    }
    assert!(met >= 30, "only {met} chases ran to the end");
}

/// The expectation over top speeds in one pass against the same by brute force over many top speeds.
#[test]
fn the_expected_spot_is_the_mean_over_top_speeds() {
    let settings = open_field();
    // As sure of it as the settings are by default (3 %), and half as sure.
    for (seed, sigma_yps, within_yd) in (0..20).flat_map(|seed| [(seed, 0.225, 0.015), (seed, 0.5, 0.02)]) {
        let (t_s, carrier) = weave(10.0, 5.0, seed);
        let who = State { pos_yd: carrier[0].pos_yd + V2::new(9.0, 9.0 - seed as f64), vel_yps: V2::new(1.0, -2.0) };
        let chase = Chase::new(&t_s, carrier, 9.0, &settings);
        let path = chase.hindsight();
        let top = TopSpeed { yps: 7.5, sigma_yps };
        let found = path.expected(0, who, top, 1);
        let n = 4000;
        let (mut sum, mut hits) = (0.0, 0.0);
        for i in 0..n {
            let z = tailchase::base::normal::quantile((f64::from(i) + 0.5) / f64::from(n));
            let met = path.earliest(0, who, top.yps + z * top.sigma_yps);
            sum += met.map_or(chase.end_yd().x, |m| m.spot_yd.x) / f64::from(n);
            hits += f64::from(u8::from(met.is_some())) / f64::from(n);
        }
        // The needed speed is taken as linear between points, halved where steep.
        near("spot", found.x_yd, sum, within_yd);
        near("chance", found.chance, hits, 2e-3);
    }
}

fn random_account(seed: u64, settings: &Settings) -> (Chase, Ledger) {
    let (t_s, carrier) = weave(10.0, 5.0, seed);
    let mut draws = Stream::new(seed, "any track");
    let mut state = State { pos_yd: carrier[0].pos_yd + V2::polar(draws.between(-3.1, 3.1)) * draws.between(2.0, 20.0), vel_yps: V2::ZERO };
    let drag = Drag::of(settings);
    let mut states = vec![state];
    let mut blocked = vec![draws.chance(0.2)];
    let mut push = V2::polar(draws.between(-3.1, 3.1));
    for w in t_s.windows(2) {
        if draws.chance(0.15) {
            push = V2::polar(draws.between(-3.1, 3.1)) * draws.uniform();
        }
        state = drag.step(state, push, 9.0, w[1] - w[0]);
        states.push(State { pos_yd: state.pos_yd + V2::new(draws.normal(), draws.normal()) * 0.05, vel_yps: state.vel_yps });
        blocked.push(draws.chance(0.2));
    }
    let chase = Chase::new(&t_s, carrier, 9.0, settings);
    let ledger = keep(
        &chase,
        &Chaser { first: 0, states: &states, blocked: &blocked, top: TopSpeed { yps: 8.7, sigma_yps: 0.26 }, ends_in_contact: false },
        &settings.clock,
    );
    (chase, ledger)
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 400, failure_persistence: None, ..ProptestConfig::default() })]
    #[test]
    fn every_account_balances(seed in 0_u64..1_000_000) {
        let (_, ledger) = random_account(seed, &Settings::default());
        let account = ledger.account.expect("the weave runs downfield");
        prop_assert!((account.entries.sum_yd() - account.conceded_yd).abs() <= 1e-9);
        let n = ledger.values.len() - 1;
        let direct = ledger.values[n].expected_x_yd - ledger.values[account.starts_at].expected_x_yd;
        prop_assert!((direct - account.conceded_yd).abs() <= 1e-12);
        prop_assert!(ledger.steps[..account.starts_at].iter().all(Option::is_none));
        prop_assert!(ledger.values.iter().all(|v| (0.0..=1.0 + 1e-12).contains(&v.chance) && v.expected_x_yd.is_finite()));
    }
}

/// A shift changes nothing, a mirror image nothing but left and right.
#[test]
fn shift_and_mirror_leave_the_account() {
    let settings = Settings::default();
    let mut wide = settings.clone();
    (wide.field.length_yd, wide.field.end_zone_yd) = (400.0, 0.0);
    for seed in 0..30 {
        let (t_s, carrier) = weave(10.0, 5.0, seed);
        let mut draws = Stream::new(seed, "mirror");
        let drag = Drag::of(&wide);
        let mut state = State { pos_yd: carrier[0].pos_yd + V2::polar(draws.between(-1.0, 1.0)) * 12.0, vel_yps: V2::ZERO };
        let mut states = vec![state];
        for w in t_s.windows(2) {
            state = drag.step(state, V2::polar(draws.between(1.5, 4.0)) * draws.uniform(), 9.0, w[1] - w[0]);
            states.push(state);
        }
        let entries = |change: &dyn Fn(State) -> State| {
            let carrier: Vec<State> = carrier.iter().map(|s| change(*s)).collect();
            let states: Vec<State> = states.iter().map(|s| change(*s)).collect();
            account(&t_s, carrier, &states, TopSpeed { yps: 9.0, sigma_yps: 0.27 }, &wide).1.account.expect("an account").entries.list()
        };
        let plain = entries(&|s| s);
        let shifted = entries(&|s| State { pos_yd: s.pos_yd + V2::new(50.0, 0.0), ..s });
        let width = wide.field.width_yd;
        let mirrored = entries(&|s| State { pos_yd: V2::new(s.pos_yd.x, width - s.pos_yd.y), vel_yps: V2::new(s.vel_yps.x, -s.vel_yps.y) });
        for i in 0..6 {
            near("shifted", shifted[i], plain[i], 1e-9);
            near("mirrored", mirrored[i], plain[i], 1e-9);
        }
    }
}
