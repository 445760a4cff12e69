//! Starts of planted plays, drawn so that the defender can make it.

use super::{CARRIER_TOP_YPS, CONTACT_YD, DEFENDER_TOP_YPS, PathKind};
use crate::base::{Stream, V2};
use crate::demo::body::{ALPHA_PER_S, Body, Law, STEP_S};
use crate::demo::plan::Plan;
use crate::engine::reach::{Drag, State};
use crate::engine::{grid::Grid, path::Path};
use crate::model::Field;

/// Share of full push at which the carrier runs; measured carriers do not use their whole top speed either.
const CARRIER_PACE: f64 = 0.92;

/// The start is drawn so that this share of his top speed would do: no knife's edge, which the lag of the legs decides.
const EASY_SHARE: f64 = 0.92;

pub(super) struct Start {
    /// At the carry's start.
    pub carrier: Body,
    pub plan: Plan,
    pub defender_yd: V2,
    pub ideal_s: f64,
}

/// Draws starts until one has a meeting that the defender can make with a little to spare.
pub(super) fn feasible_start(path: PathKind, field: Field, draws: &mut Stream) -> Start {
    loop {
        let (carrier, plan) = carrier_start(path, field, draws);
        let spots = alone(carrier, &plan, field);
        let drag = Drag { alpha_per_s: ALPHA_PER_S, reach_yd: CONTACT_YD };
        let grid = Grid::new((0..spots.len()).map(|k| k as f64 * STEP_S).collect(), drag);
        let (x_yd, y_yd): (Vec<f64>, Vec<f64>) = spots.iter().map(|p| (p.x, p.y)).unzip();
        let way = Path { grid: &grid, x_yd: &x_yd, y_yd: &y_yd };
        for _ in 0..20 {
            let side = if draws.chance(0.5) { 1.0 } else { -1.0 };
            let bearing_rad = side * draws.between(10.0, 85.0_f64).to_radians();
            let defender_yd = carrier.pos_yd + V2::polar(bearing_rad) * draws.between(8.0, 20.0);
            if !field.contains(defender_yd, -1.0) {
                continue;
            }
            let who = State { pos_yd: defender_yd, vel_yps: V2::ZERO };
            let easy = way.earliest(0, who, EASY_SHARE * DEFENDER_TOP_YPS);
            if let (Some(_), Some(meeting)) = (easy, way.earliest(0, who, DEFENDER_TOP_YPS))
                && meeting.t_s > 1.2
            {
                return Start { carrier, plan, defender_yd, ideal_s: meeting.t_s };
            }
        }
    }
}

fn carrier_start(path: PathKind, field: Field, draws: &mut Stream) -> (Body, Plan) {
    let goal_x_yd = field.goal_x_yd();
    let x_yd = goal_x_yd - draws.between(38.0, 66.0);
    let side = if draws.chance(0.5) { 1.0 } else { -1.0 };
    let mut rad = |low: f64, high: f64| side * draws.between(low, high).to_radians();
    let (mut plan, offset_yd) = match path {
        PathKind::Straight => (Plan::straight(rad(-14.0, 14.0)), 0.0),
        PathKind::Sideline => {
            let (out, up) = (rad(35.0, 65.0), rad(8.0, 25.0));
            (Plan::turning(&[(draws.between(1.2, 2.2), out), (30.0, up)]), 4.0 * side)
        }
        PathKind::Cutting => {
            let first = rad(10.0, 35.0);
            let second = first - rad(40.0, 65.0);
            let third = second + rad(30.0, 55.0);
            let last = rad(-10.0, 10.0);
            let mut hold_s = || draws.between(0.8, 1.6);
            let legs = [(hold_s(), first), (hold_s(), second), (hold_s(), third), (30.0, last)];
            let cuts = 1 + draws.below(3);
            (Plan::turning(&legs[..=cuts]), 0.0)
        }
    };
    plan.pace = CARRIER_PACE;
    let spot_yd = V2::new(x_yd, 0.5 * field.width_yd + offset_yd + draws.between(-5.0, 5.0));
    let speed_yps = draws.between(4.5, 7.0);
    let mut carrier = Body::standing(spot_yd, CARRIER_TOP_YPS);
    carrier.vel_yps = plan.direction(0.0) * speed_yps;
    // He has come along evenly so far.
    carrier.jolt(carrier.vel_yps / CARRIER_TOP_YPS);
    (carrier, plan)
}

/// The carrier's places, step by step, when nobody stops him: to the goal line, out, or 12 s.
fn alone(mut carrier: Body, plan: &Plan, field: Field) -> Vec<V2> {
    let law = Law::new(STEP_S);
    let mut spots = Vec::new();
    for k in 0..(12.0 / STEP_S) as usize {
        let p = carrier.pos_yd;
        spots.push(V2::new(p.x.min(field.goal_x_yd()), p.y));
        if p.x >= field.goal_x_yd() || p.y < 0.0 || p.y > field.width_yd {
            break;
        }
        carrier.want(plan.will(k as f64 * STEP_S, &carrier, &field));
        carrier.follow(&law);
        carrier.advance(&law);
    }
    spots
}
