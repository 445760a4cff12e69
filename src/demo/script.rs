//! A play from the wait before it to its last whistle.

use super::carrying::{CarryStop, Intent, StageCarry};
use super::job::Job;
use super::kicks::{kick, punted};
use super::kind::PlayKind;
use super::loose::{after_toss, recovery};
use super::passes::pass;
use super::runs::{run, run_plan, scramble};
use super::stage::Stage;
use crate::base::V2;

/// Plays the whole of `kind` on a stage that is set up for it, and gives its carries. `line_yd`: where the ball starts.
pub fn perform(stage: &mut Stage, kind: PlayKind, line_yd: f64) -> Vec<StageCarry> {
    let wait_s = stage.draws.between(0.8, 2.2);
    stage.run_for(wait_s);
    let sign = if stage.draws.chance(0.5) { 1.0 } else { -1.0 };
    let mut carries = Vec::new();
    match kind {
        PlayKind::RunInside | PlayKind::RunOutside | PlayKind::RunCutBack | PlayKind::FumbleReturn => {
            let intent = Intent { plan: run_plan(kind, sign, &mut stage.draws), fumbles: kind == PlayKind::FumbleReturn, lateral: None };
            carries.push(run(stage, &intent, sign));
        }
        PlayKind::Scramble => carries.extend(scramble(stage, line_yd, sign)),
        PlayKind::KickReturn => carries.push(kick(stage, V2::new(35.0, 26.6), 61.0)),
        PlayKind::PuntReturn => carries.push(punted(stage, line_yd)),
        _ => carries.extend(pass(stage, kind, line_yd, sign)),
    }
    match carries.last().map(|c| (c.actor, c.stop)) {
        Some((loser, CarryStop::Fumble)) => carries.push(recovery(stage, loser)),
        Some((_, CarryStop::Lateral)) => carries.extend(after_toss(stage)),
        _ => {}
    }
    let everyone = 0..stage.actors.len();
    stage.assign(everyone, Job::Halt);
    carries
}
