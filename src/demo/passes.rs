//! Plays through the air: the pocket, the routes, the throw, and who comes down with it.

use super::ball::Landing;
use super::carrying::{Intent, StageCarry};
use super::convoy::{convoy, nearest, take_away};
use super::event::DemoEvent;
use super::job::Job;
use super::kind::PlayKind;
use super::lineup::{CB, LB, QB, RB, SAFETY, TE, WR};
use super::plan::Plan;
use super::runs::block_front;
use super::stage::Stage;
use crate::base::V2;

/// The quarterback looks, the line protects, receivers run, the defence covers.
pub(super) fn drop_back(stage: &mut Stage, depth_yd: f64) {
    block_front(stage, (2.4, 4.5), false);
    let pocket_yd = stage.pos(QB) + V2::new(-3.0, 0.0);
    stage.actors[QB].job = Job::Seek { spot_yd: pocket_yd, pace: 0.5 };
    stage.actors[RB].job = Job::Seek { spot_yd: stage.pos(RB) + V2::new(0.5, 0.0), pace: 0.4 };
    for k in [WR[0], WR[1], WR[2], TE] {
        let deep_yd = depth_yd * stage.draws.between(0.6, 1.4);
        let inward = (26.6 - stage.pos(k).y).signum() * stage.draws.between(-2.0, 7.0);
        let spot_yd = stage.pos(k) + V2::new(deep_yd, inward);
        stage.actors[k].job = Job::Seek { spot_yd, pace: 0.9 };
    }
    for (man, defender) in [(WR[0], CB[0]), (WR[1], CB[1])] {
        let cushion_yd = V2::new(stage.draws.between(1.0, 5.0), stage.draws.between(-1.0, 1.0));
        stage.actors[defender].job = Job::Cover { man, offset_yd: cushion_yd, pace: 0.9 };
    }
    for k in LB {
        let spot_yd = stage.pos(k) + V2::new(stage.draws.between(0.0, 5.0), stage.draws.between(-2.0, 2.0));
        stage.actors[k].job = Job::Seek { spot_yd, pace: 0.6 };
    }
    // The safeties stay deeper than the deepest route.
    for k in SAFETY {
        let spot_yd = stage.pos(k) + V2::new(stage.draws.between(0.3, 0.9) * depth_yd + 1.0, stage.draws.between(-3.0, 3.0));
        stage.actors[k].job = Job::Seek { spot_yd, pace: 0.9 };
    }
}

pub(super) fn pass(stage: &mut Stage, kind: PlayKind, line_yd: f64, sign: f64) -> Vec<StageCarry> {
    stage.mark(DemoEvent::BallSnap);
    stage.send_ball(Landing::Hands(QB), 0.4);
    let long = kind == PlayKind::DeepCatch || kind != PlayKind::ShortCatch && stage.draws.chance(0.4);
    let depth_yd = if long { stage.draws.between(16.0, 30.0) } else { stage.draws.between(1.0, 9.0) };
    drop_back(stage, if long { 20.0 } else { 9.0 });
    let target = [WR[0], WR[1], WR[2], TE, RB][stage.draws.below(if long { 3 } else { 5 })];
    let room_yd = (107.0 - line_yd).max(1.0);
    let spot_yd = V2::new(line_yd + depth_yd.min(room_yd), (stage.pos(target).y + sign * stage.draws.between(0.0, 6.0)).clamp(3.0, 50.0));
    stage.actors[target].job = Job::Seek { spot_yd, pace: if long { 0.85 } else { 0.75 } };
    let hold_s = if long { stage.draws.between(1.9, 2.6) } else { stage.draws.between(1.1, 1.9) };
    stage.run_for(0.4 + hold_s);
    stage.mark(DemoEvent::PassForward);
    // Whoever is free breaks on the ball in the air.
    for k in [SAFETY[0], SAFETY[1], LB[1]] {
        let spot_yd = stage.pos(target) + V2::new(stage.draws.between(2.0, 8.0), stage.draws.between(-3.0, 3.0));
        stage.actors[k].job = Job::Seek { spot_yd, pace: 0.9 };
    }
    let catcher = if kind == PlayKind::InterceptionReturn { thief(stage, target) } else { target };
    let way_yd = (stage.pos(target) - stage.pos(QB)).norm();
    let flight_s = (way_yd / stage.draws.between(17.0, 22.0)).max(0.4);
    if kind == PlayKind::Incomplete {
        let miss_yd = stage.pos(target) + stage.actors[target].body.vel_yps * flight_s + V2::new(4.0, sign * 3.0);
        stage.send_ball(Landing::Spot(miss_yd), flight_s);
        stage.run_for(flight_s);
        stage.mark(DemoEvent::Incomplete);
        return Vec::new();
    }
    if catcher != target {
        stage.actors[catcher].job = Job::Cover { man: target, offset_yd: V2::new(0.3, 0.0), pace: 1.0 };
    }
    stage.send_ball(Landing::Hands(catcher), flight_s);
    stage.run_for(flight_s);
    let plan = Plan::open_field(&mut stage.draws, sign);
    if catcher != target {
        stage.mark(DemoEvent::Interception);
        return vec![take_away(stage, catcher, plan)];
    }
    stage.mark(DemoEvent::Caught);
    convoy(stage, catcher, 0.5);
    let lateral = (kind == PlayKind::Lateral).then(|| (mate_for(stage, catcher), stage.draws.between(0.3, 0.8)));
    if let Some((mate, _)) = lateral {
        stage.actors[mate].job = Job::Cover { man: catcher, offset_yd: V2::new(-2.5, 4.0 * sign), pace: 1.0 };
    }
    vec![stage.carry(catcher, &Intent { plan, fumbles: false, lateral })]
}

/// The defender who takes the pass away: the one nearest to its target, linemen excepted.
fn thief(stage: &Stage, target: usize) -> usize {
    nearest(stage, stage.pos(target), LB.into_iter().chain(CB).chain(SAFETY)).unwrap_or(SAFETY[0])
}

/// The back or receiver nearest to the carrier, to trail him for a lateral.
fn mate_for(stage: &Stage, carrier: usize) -> usize {
    nearest(stage, stage.pos(carrier), WR.into_iter().chain([RB, TE]).filter(|k| *k != carrier)).unwrap_or(RB)
}
