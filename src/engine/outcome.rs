//! What a pursuit came to: the chance and when it went, efficiency, lean.

use super::chase::Chase;
use super::ledger::{Chaser, Ledger};
use crate::base::{V2, wrap_rad};

/// When the last chance went, and what it would have asked.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ChanceLost {
    /// State (index into the chaser's) that still had the chance.
    pub at: usize,
    /// Speed needed at the next state; none where no speed would do.
    pub need_after_yps: Option<f64>,
}

/// The chance's fate.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Chance {
    /// No speed of his would ever have done.
    Never,
    /// He had it and let it go.
    Lost(ChanceLost),
    /// He still had it when the pursuit ended: in contact, or because a team-mate made the stop first.
    Kept,
}

/// The chance over the pursuit from state `from` on: the last state at which the speed needed is within his top
/// speed, never to come back.
///
/// `teammate_contact`: the state at which a team-mate came to the contact that stopped the carrier. A chance that
/// goes only because of that is not lost, so up to there a carrier who could still be met on the foreseen path counts
/// as within reach.
pub fn chance(chase: &Chase, chaser: &Chaser, ledger: &Ledger, from: usize, teammate_contact: Option<usize>) -> Chance {
    let last = chaser.states.len() - 1;
    let within = |i: usize| ledger.values[i].need_yps.is_some_and(|need_yps| need_yps <= chaser.top.yps);
    if !(from..=last).any(within) {
        return Chance::Never;
    }
    let still_within = |i: usize| {
        within(i)
            || teammate_contact.is_some() && {
                let foreseen = chase.foresight.path(chaser.first + i);
                foreseen.earliest(0, chaser.states[i], chaser.top.yps).is_some()
            }
    };
    let until = teammate_contact.map_or(last, |c| c.clamp(from, last));
    let at = (from..=until).rev().find(|i| still_within(*i)).unwrap_or(from);
    if at == until {
        return Chance::Kept;
    }
    Chance::Lost(ChanceLost { at, need_after_yps: ledger.values[at + 1].need_yps })
}

/// Highest speed needed from state `from` until the chance went, or to the end. Yd/s.
pub fn need_peak_yps(ledger: &Ledger, from: usize, chance: Chance) -> Option<f64> {
    let until = match chance {
        Chance::Never => return None,
        Chance::Lost(lost) => lost.at + 1,
        Chance::Kept => ledger.values.len() - 1,
    };
    ledger.values[from..=until].iter().filter_map(|v| v.need_yps).max_by(f64::total_cmp)
}

/// Pursuit efficiency: T* at the start ÷ (time really used + T* left at the end), the carrier held at his last spot
/// after the carry. 0..1, 1 is a perfect chase. No result when he was in contact at the start.
pub fn efficiency(chase: &Chase, chaser: &Chaser, from: usize) -> Option<f64> {
    let last = chaser.states.len() - 1;
    let start_s = time_to_meet_s(chase, chaser, from);
    if start_s <= 0.0 {
        return None;
    }
    let used_s = chase.grid.t_s[chaser.first + last] - chase.grid.t_s[chaser.first + from];
    // Above 1 only where he out-did the model.
    Some((start_s / (used_s + time_to_meet_s(chase, chaser, last))).min(1.0))
}

fn time_to_meet_s(chase: &Chase, chaser: &Chaser, at: usize) -> f64 {
    let now = chaser.first + at;
    match chase.hindsight().earliest(now, chaser.states[at], chaser.top.yps) {
        Some(meeting) => meeting.t_s,
        None => {
            let left_s = chase.grid.t_s[chase.len() - 1] - chase.grid.t_s[now];
            chase.grid.drag.time_to_spot_after_s(chaser.states[at], chase.end_yd(), chaser.top.yps, left_s)
        }
    }
}

/// Signed heading errors against the line to the foreseen meeting, radians, deep positive, flat negative: one for each
/// state from `from` on at which he runs, is not held and is not yet upon the carrier.
pub fn leans_rad(chase: &Chase, chaser: &Chaser, from: usize) -> Vec<f64> {
    const RUNS_YPS: f64 = 2.0;
    let near_yd = 2.0 * chase.grid.drag.reach_yd;
    (from..chaser.states.len())
        .filter_map(|i| {
            let state = chaser.states[i];
            let now = chaser.first + i;
            if chaser.blocked[i] || state.vel_yps.norm() < RUNS_YPS || (chase.carrier[now].pos_yd - state.pos_yd).norm() < near_yd {
                return None;
            }
            let spot_yd = chase.foresight.path(now).aim(0, state, chaser.top.yps)?.spot_yd;
            let line = (spot_yd - state.pos_yd).unit()?;
            Some(lean_rad(state.vel_yps, line))
        })
        .collect()
}

fn lean_rad(heading: V2, line: V2) -> f64 {
    let error_rad = wrap_rad(heading.angle_rad() - line.angle_rad()).abs();
    let deeper = heading.x > line.x * heading.norm();
    if deeper { error_rad } else { -error_rad }
}
