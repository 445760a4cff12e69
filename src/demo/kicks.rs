//! Kick-offs and punts, and the men who bring them back.

use super::ball::Landing;
use super::carrying::StageCarry;
use super::convoy::take_away;
use super::event::DemoEvent;
use super::job::Job;
use super::lineup::{RETURNER, SNAPPER};
use super::plan::Plan;
use super::stage::Stage;
use crate::base::V2;

pub(super) fn kick(stage: &mut Stage, tee_yd: V2, length_yd: f64) -> StageCarry {
    stage.actors[0].job = Job::Seek { spot_yd: tee_yd + V2::new(1.0, 0.0), pace: 0.7 };
    stage.run_until(3.0, |s| (s.pos(0) - tee_yd).norm() < 1.0);
    stage.mark(DemoEvent::Kick);
    let landing_yd = tee_yd + V2::new(length_yd + stage.draws.between(0.0, 10.0), stage.draws.between(-10.0, 10.0));
    let flight_s = stage.draws.between(3.7, 4.3);
    returned(stage, landing_yd, flight_s)
}

pub(super) fn punted(stage: &mut Stage, line_yd: f64) -> StageCarry {
    stage.mark(DemoEvent::BallSnap);
    stage.send_ball(Landing::Hands(0), 0.75);
    for k in 0..8 {
        stage.actors[14 + k].job = Job::Block { man: 3 + k, hold_s: (1.0, 2.5) };
    }
    stage.actors[SNAPPER].job = Job::Halt;
    let ready_s = 0.75 + stage.draws.between(1.0, 1.3);
    stage.run_for(ready_s);
    stage.mark(DemoEvent::Kick);
    let landing_yd = V2::new((line_yd + stage.draws.between(38.0, 50.0)).min(106.0), 26.6 + stage.draws.between(-14.0, 14.0));
    let flight_s = stage.draws.between(3.6, 4.2);
    returned(stage, landing_yd, flight_s)
}

/// The kick flies, the cover runs down its lanes, the blockers fall back, and the returner goes.
fn returned(stage: &mut Stage, landing_yd: V2, flight_s: f64) -> StageCarry {
    stage.send_ball(Landing::Hands(RETURNER), flight_s);
    stage.actors[RETURNER].job = Job::Seek { spot_yd: landing_yd, pace: 0.9 };
    for k in 1..11 {
        let lane_yd = V2::new(landing_yd.x - stage.draws.between(6.0, 34.0), stage.pos(k).y.lerp_to(landing_yd.y, 0.35));
        stage.actors[k].job = Job::Seek { spot_yd: lane_yd, pace: stage.draws.between(0.8, 0.95) };
    }
    stage.actors[0].job = Job::Trail;
    for k in 12..22 {
        let spot_yd = V2::new(landing_yd.x - stage.draws.between(14.0, 26.0), stage.pos(k).y.lerp_to(landing_yd.y, 0.4));
        stage.actors[k].job = Job::Seek { spot_yd, pace: 0.85 };
    }
    stage.run_for(flight_s);
    stage.mark(DemoEvent::KickReceived);
    let sign = if stage.draws.chance(0.5) { 1.0 } else { -1.0 };
    let mut plan = Plan::open_field(&mut stage.draws, sign);
    // First straight up the field, then what he has in mind.
    let ahead_s = stage.draws.between(0.4, 1.2);
    for leg in &mut plan.legs {
        leg.0 += ahead_s;
    }
    plan.legs.insert(0, (ahead_s, 0.0));
    take_away(stage, RETURNER, plan)
}

/// A number moved a share of the way to another.
trait LerpTo {
    fn lerp_to(self, other: f64, share: f64) -> f64;
}

impl LerpTo for f64 {
    fn lerp_to(self, other: f64, share: f64) -> f64 {
        self + (other - self) * share
    }
}
