//! Team-mates of a carrier in the open field, and what happens when possession changes hands.

use super::carrying::{Intent, StageCarry};
use super::job::Job;
use super::plan::Plan;
use super::stage::Stage;
use crate::base::V2;

pub(super) fn nearest(stage: &Stage, spot_yd: V2, among: impl IntoIterator<Item = usize>) -> Option<usize> {
    among.into_iter().min_by(|a, b| (stage.pos(*a) - spot_yd).norm2().total_cmp(&(stage.pos(*b) - spot_yd).norm2()))
}

/// Team-mates who are ahead of the carrier or near him look for somebody to block.
pub(super) fn convoy(stage: &mut Stage, carrier: usize, share: f64) {
    let home = stage.actors[carrier].home;
    let mut taken = Vec::new();
    for k in 0..stage.actors.len() {
        if k == carrier || stage.actors[k].home != home {
            continue;
        }
        let free: Vec<usize> = (0..stage.actors.len()).filter(|m| stage.actors[*m].home != home && !taken.contains(m)).collect();
        let man = nearest(stage, stage.pos(k), free);
        let blocks = stage.draws.chance(share);
        match man {
            Some(man) if blocks => {
                taken.push(man);
                stage.actors[k].engaged_until_s = None;
                stage.actors[k].job = Job::Block { man, hold_s: (0.5, 2.5) };
            }
            _ => stage.actors[k].job = Job::Trail,
        }
    }
}

/// Possession changes: a half turn, then the new carrier runs.
pub(super) fn take_away(stage: &mut Stage, carrier: usize, plan: Plan) -> StageCarry {
    stage.turn();
    convoy(stage, carrier, 0.8);
    stage.carry(carrier, &Intent { plan, fumbles: false, lateral: None })
}
