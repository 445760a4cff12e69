//! Plays on the ground: hand-offs and the quarterback who keeps the ball.

use super::ball::Landing;
use super::carrying::{Intent, StageCarry};
use super::event::DemoEvent;
use super::job::Job;
use super::kind::PlayKind;
use super::lineup::{CB, DE, DT, LB, OL, QB, RB, SAFETY, TE, WR};
use super::passes::drop_back;
use super::plan::Plan;
use super::stage::Stage;
use crate::base::{Stream, V2};

pub(super) fn run_plan(kind: PlayKind, sign: f64, draws: &mut Stream) -> Plan {
    let mut rad = |low: f64, high: f64| sign * draws.between(low, high).to_radians();
    let mut plan = match kind {
        PlayKind::RunOutside => {
            let (out, up) = (rad(62.0, 80.0), rad(12.0, 32.0));
            Plan::turning(&[(draws.between(0.9, 1.6), out), (30.0, up)])
        }
        PlayKind::RunCutBack => {
            let (out, back, up) = (rad(48.0, 65.0), rad(-45.0, -22.0), rad(-20.0, 15.0));
            Plan::turning(&[(draws.between(0.7, 1.1), out), (draws.between(0.7, 1.3), back), (30.0, up)])
        }
        _ => {
            let (hole, lane, up) = (rad(0.0, 25.0), rad(15.0, 50.0), rad(-20.0, 30.0));
            Plan::turning(&[(draws.between(0.7, 1.2), hole), (draws.between(0.5, 1.2), lane), (30.0, up)])
        }
    };
    plan.steps_out = draws.chance(0.25);
    plan.pace = draws.between(0.9, 1.0);
    plan
}

/// Blocks at the snap: the line on the front, the others on whoever is nearest to them; `hold_s` for the front.
pub(super) fn block_front(stage: &mut Stage, hold_s: (f64, f64), second_level: bool) {
    for (blocker, man) in [(OL[0], DE[0]), (OL[1], DT[0]), (OL[3], DT[1]), (OL[4], DE[1])] {
        stage.actors[blocker].job = Job::Block { man, hold_s };
    }
    let loose = if second_level { LB[1] } else { DT[0] };
    stage.actors[OL[2]].job = Job::Block { man: loose, hold_s };
    stage.assign(DE.into_iter().chain(DT), Job::Rush { pace: 0.8 });
}

pub(super) fn run(stage: &mut Stage, intent: &Intent, sign: f64) -> StageCarry {
    stage.mark(DemoEvent::BallSnap);
    stage.send_ball(Landing::Hands(QB), 0.4);
    block_front(stage, (0.8, 2.6), true);
    let flank = nearer(stage, TE, [LB[0], LB[2]]);
    stage.actors[TE].job = Job::Block { man: flank, hold_s: (0.6, 2.2) };
    for (receiver, man) in [(WR[0], CB[0]), (WR[1], CB[1]), (WR[2], if stage.draws.chance(0.5) { LB[2] } else { SAFETY[0] })] {
        if stage.draws.chance(0.8) {
            stage.actors[receiver].job = Job::Block { man, hold_s: (0.4, 1.6) };
        }
    }
    // The back comes across for the ball.
    let mesh_yd = stage.pos(QB) + V2::new(-0.3, sign * 0.9);
    stage.actors[RB].job = Job::Seek { spot_yd: mesh_yd + V2::new(2.0, sign * 2.0), pace: 0.55 };
    let mesh_s = stage.draws.between(0.7, 1.1);
    stage.run_for(mesh_s * 0.6);
    for k in LB {
        let spot_yd = stage.pos(k) + V2::new(-1.0, sign * 1.5);
        stage.actors[k].job = Job::Seek { spot_yd, pace: 0.4 };
    }
    stage.run_for(mesh_s * 0.4);
    stage.send_ball(Landing::Hands(RB), 0.16);
    stage.run_for(0.16);
    stage.mark(DemoEvent::Handoff);
    stage.actors[QB].job = Job::Halt;
    stage.carry(RB, intent)
}

fn nearer(stage: &Stage, to: usize, of: [usize; 2]) -> usize {
    let gap = |k: usize| (stage.pos(k) - stage.pos(to)).norm();
    if gap(of[0]) <= gap(of[1]) { of[0] } else { of[1] }
}

/// The quarterback looks for a throw and then goes himself. The carry starts where he is on his way; a run that ends
/// behind the line at `line_yd` is no carry, he never had the open field ahead.
pub(super) fn scramble(stage: &mut Stage, line_yd: f64, sign: f64) -> Option<StageCarry> {
    stage.mark(DemoEvent::BallSnap);
    stage.send_ball(Landing::Hands(QB), 0.2);
    drop_back(stage, 12.0);
    stage.run_for(0.2);
    let look_s = stage.draws.between(1.4, 2.4);
    stage.run_for(look_s);
    let way = |draws: &mut Stream, low: f64, high: f64| sign * draws.between(low, high).to_radians();
    let (out, up) = (way(&mut stage.draws, 40.0, 75.0), way(&mut stage.draws, -5.0, 25.0));
    let plan = Plan { steps_out: stage.draws.chance(0.5), ..Plan::turning(&[(stage.draws.between(0.8, 1.4), out), (30.0, up)]) };
    // He is on his way once he moves downfield; that is where the run begins for those who look on.
    let spot_yd = stage.pos(QB) + plan.direction(0.0) * 30.0;
    stage.actors[QB].job = Job::Seek { spot_yd, pace: 1.0 };
    stage.run_until(1.0, |s| s.actors[QB].body.vel_yps.x > 1.0);
    let carry = stage.carry(QB, &Intent { plan, fumbles: false, lateral: None });
    (carry.end_yd.x > line_yd + 0.5).then_some(carry)
}
