//! A planted chase, stepped from the lead-in to the blow.

use super::start::Start;
use super::{CONTACT_YD, DEFENDER_TOP_YPS, Fault, LEAD_IN_S, PlantedEnd};
use crate::base::V2;
use crate::demo::body::{Body, Law, STEP_S};
use crate::demo::chase::{Quarry, TILT_RAD, expectation, tilted};
use crate::model::Field;

/// Seconds kept after the end.
const TAIL_S: f64 = 0.6;

/// Steps between two decisions of the defender: 0.1 s.
const STEPS_PER_THOUGHT: usize = 5;

pub(super) struct Run {
    /// (place, velocity) of carrier, defender and ball, one a frame.
    pub states: Vec<[(V2, V2); 3]>,
    pub end_s: f64,
    pub end: PlantedEnd,
}

pub(super) fn chase(fault: Fault, start: &Start, stands_s: f64, field: Field, rate_hz: f64) -> Run {
    let law = Law::new(STEP_S);
    let forecast = expectation(field, CONTACT_YD);
    let mut carrier = start.carrier;
    carrier.pos_yd -= carrier.vel_yps * LEAD_IN_S;
    let mut defender = Body::standing(start.defender_yd, DEFENDER_TOP_YPS);
    let mut states: Vec<[(V2, V2); 3]> = Vec::new();
    let mut over: Option<(f64, PlantedEnd)> = None;
    let mut side = None;
    for k in 0.. {
        let now_s = k as f64 * STEP_S;
        let since_s = now_s - LEAD_IN_S;
        if over.is_none() && since_s > -1e-9 {
            over = ending(&carrier, &defender, field, since_s).map(|end| (now_s, end));
        }
        match over {
            Some((end_s, _)) if now_s > end_s + TAIL_S => break,
            Some(_) => {
                carrier.jolt(carrier.brake(1.0));
                defender.jolt(defender.brake(1.0));
            }
            None if since_s > -1e-9 => {
                carrier.want(start.plan.will(since_s, &carrier, &field));
                if k % STEPS_PER_THOUGHT == 0 && since_s >= stands_s - 1e-9 {
                    defender.want(push(fault, &Quarry::seen(&carrier, &forecast), &defender, &mut side));
                }
            }
            None => {}
        }
        carrier.follow(&law);
        defender.follow(&law);
        while states.len() as f64 / rate_hz < now_s + STEP_S - 1e-9 {
            let ahead_s = states.len() as f64 / rate_hz - now_s;
            let (runner, chaser) = (carrier.after(ahead_s), defender.after(ahead_s));
            states.push([runner, chaser, (runner.0 + V2::new(0.2, 0.2), runner.1)]);
        }
        carrier.advance(&law);
        defender.advance(&law);
    }
    let (end_s, end) = over.unwrap_or((0.0, PlantedEnd::Out));
    Run { states, end_s, end }
}

fn ending(carrier: &Body, defender: &Body, field: Field, since_s: f64) -> Option<PlantedEnd> {
    let p = carrier.pos_yd;
    if (p - defender.pos_yd).norm() <= CONTACT_YD {
        Some(PlantedEnd::Contact)
    } else if p.x >= field.goal_x_yd() {
        Some(PlantedEnd::Score)
    } else if p.y < 0.0 || p.y > field.width_yd || since_s > 30.0 {
        Some(PlantedEnd::Out)
    } else {
        None
    }
}

/// `side`: on which side of straight downfield his best direction lay at first, +1 left. A flat line keeps to it: in a tail
/// chase the best direction wavers about straight downfield, and a tilt that changed sides with it would be a weave at less
/// than full push, which is another fault.
fn push(fault: Fault, quarry: &Quarry, defender: &Body, side: &mut Option<f64>) -> V2 {
    let best = quarry.best_direction(defender);
    let side = *side.get_or_insert(if best.y < 0.0 { -1.0 } else { 1.0 });
    match fault {
        Fault::None | Fault::Late => best,
        Fault::AtTheMan => quarry.bearing(defender),
        Fault::Slow => best * 0.85,
        Fault::Deep => tilted(best, TILT_RAD),
        Fault::Flat => best.rotated(side * TILT_RAD),
    }
}
