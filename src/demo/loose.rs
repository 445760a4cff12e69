//! Second carries: a ball picked up after a fumble, a ball tossed back to a team-mate.

use super::ball::{BallState, Landing};
use super::carrying::{Intent, StageCarry};
use super::convoy::{convoy, nearest, take_away};
use super::event::DemoEvent;
use super::job::Job;
use super::plan::Plan;
use super::stage::Stage;
use crate::base::V2;

/// The ball lies loose; somebody falls on it, picks it up and runs, more often one of the other side.
pub(super) fn recovery(stage: &mut Stage, loser: usize) -> StageCarry {
    let vel_yps = stage.actors[loser].body.vel_yps * 0.4 + V2::polar(stage.draws.between(0.0, std::f64::consts::TAU)) * 3.0;
    stage.ball.state = BallState::Loose { from_yd: stage.ball_yd(), vel_yps, since_s: stage.now_s() };
    let home = stage.actors[loser].home;
    let lost = stage.draws.chance(0.75);
    let spot_yd = stage.ball_yd() + vel_yps * 0.5;
    let able = |stage: &Stage, k: &usize| *k != loser && (stage.actors[*k].home != home) == lost;
    let among: Vec<usize> = (0..stage.actors.len()).filter(|k| able(stage, k)).collect();
    let finder = nearest(stage, spot_yd, among).unwrap_or(loser);
    let everyone = 0..stage.actors.len();
    stage.assign(everyone, Job::Trail);
    stage.actors[loser].job = Job::Halt;
    stage.actors[finder].job = Job::Rush { pace: 0.85 };
    stage.actors[finder].held_until_s = 0.0;
    stage.run_until(4.0, |s| (s.pos(finder) - s.ball_yd()).norm() < 0.7);
    stage.mark(DemoEvent::Recovery);
    let sign = if stage.draws.chance(0.5) { 1.0 } else { -1.0 };
    let plan = Plan::open_field(&mut stage.draws, sign);
    if lost {
        return take_away(stage, finder, plan);
    }
    convoy(stage, finder, 0.5);
    stage.carry(finder, &Intent { plan, fumbles: false, lateral: None })
}

/// The tossed ball arrives and the team-mate goes on with it.
pub(super) fn after_toss(stage: &mut Stage) -> Option<StageCarry> {
    let BallState::Flight { to: Landing::Hands(mate), .. } = stage.ball.state else { return None };
    stage.run_until(2.0, |s| matches!(s.ball.state, BallState::Held(_)));
    stage.mark(DemoEvent::Caught);
    let sign = if stage.draws.chance(0.5) { 1.0 } else { -1.0 };
    let plan = Plan::open_field(&mut stage.draws, sign);
    Some(stage.carry(mate, &Intent { plan, fumbles: false, lateral: None }))
}
