//! The ledger: where the yards went, step by step, in an account that balances.
//!
//! The value of a state is the expected spot J at which the defender meets the carrier on the path really run.
//! Each step's change of J is charged by walking from what he did to the best he could have done, one thing at a time:
//!
//! ```text
//! did     the real next state
//! A       best direction on the foreseen path, same push      did − A        line: deep or flat
//! B       best direction on the path really run, same push    A − B          the carrier's move
//! C       the same direction, full push                       B − C          pace
//!                                                             C − J before   drift
//! ```
//!
//! With the top speed known exactly, full push the best way costs nothing and there is no drift. With V̂ ± σ there is:
//! on the knife's edge a chance of one half turns to one or none though he does all he can. What brought him there is
//! to be charged with it, so drift goes to the headings in proportion to what stands under them so far; as long as
//! nothing does, it counts as pace.
//!
//! The steps telescope, so that the six headings add up to where it ended less J at the start.

use super::breaking::break_frame;
use super::chase::Chase;
use super::path::{Meeting, Path, TopSpeed};
use super::reach::State;
use crate::base::{Sum, V2};
use crate::model::settings::ClockSettings;

/// Yards by heading. A negative entry is a gain and stays.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Entries {
    pub late_yd: f64,
    pub flat_yd: f64,
    pub deep_yd: f64,
    pub pace_yd: f64,
    pub block_yd: f64,
    pub move_yd: f64,
}

impl Entries {
    pub fn list(&self) -> [f64; 6] {
        [self.late_yd, self.flat_yd, self.deep_yd, self.pace_yd, self.block_yd, self.move_yd]
    }

    fn from_list([late_yd, flat_yd, deep_yd, pace_yd, block_yd, move_yd]: [f64; 6]) -> Entries {
        Entries { late_yd, flat_yd, deep_yd, pace_yd, block_yd, move_yd }
    }

    fn plus(&self, other: &Entries) -> Entries {
        let (mut sum, other) = (self.list(), other.list());
        for (a, b) in sum.iter_mut().zip(other) {
            *a += b;
        }
        Entries::from_list(sum)
    }

    /// Yards shared out in proportion to the losses that stand here; as pace where none do.
    fn shared_out(&self, yards: f64) -> Entries {
        let losses = self.list().map(|yd| yd.max(0.0));
        let total: f64 = losses.iter().sum();
        if total < LEAST_LOSS_YD {
            return Entries { pace_yd: yards, ..Entries::default() };
        }
        Entries::from_list(losses.map(|loss| yards * loss / total))
    }

    pub fn sum_yd(&self) -> f64 {
        self.list().into_iter().collect::<Sum>().value()
    }
}

/// One defender's way against a carry: frames counted from the carry's start, `states[0]` at frame `first`.
#[derive(Clone, Copy, Debug)]
pub struct Chaser<'a> {
    pub first: usize,
    pub states: &'a [State],
    /// One for each of `states`: held by a blocker.
    pub blocked: &'a [bool],
    pub top: TopSpeed,
    /// Whether the last state is a contact.
    pub ends_in_contact: bool,
}

/// The values at one frame.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FrameValue {
    pub expected_x_yd: f64,
    pub chance: f64,
    /// Speed needed from here; none at the path's last point out of contact.
    pub need_yps: Option<f64>,
    /// Seconds to the hindsight meeting at top speed; none when there is none left.
    pub t_star_s: Option<f64>,
    /// Push of the step that starts here, share of full; none at the last frame.
    pub push: Option<V2>,
}

/// A pursuit's account, and what was read off on the way.
#[derive(Clone, Debug, PartialEq)]
pub struct Ledger {
    /// One for each of the chaser's states.
    pub values: Vec<FrameValue>,
    /// One for each step; steps before the clock are none.
    pub steps: Vec<Option<Entries>>,
    /// The account; none when there was nothing to chase in the pursuit's time.
    pub account: Option<Account>,
    /// First state from which he had broken on the ball; none when he never did.
    pub break_at: Option<usize>,
}

/// The sum of the steps from the clock on.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Account {
    /// State (index into the chaser's) at which the account starts.
    pub starts_at: usize,
    pub entries: Entries,
    /// Where it really ended less the expected spot at the start.
    pub conceded_yd: f64,
}

/// Losses smaller than this in sum are nothing that drift could be laid to.
const LEAST_LOSS_YD: f64 = 0.05;
/// A hair, so that a meeting found to the last digits counts as one.
const CONTACT_HAIR_YD: f64 = 1e-6;

/// Keeps the account of one pursuit.
pub fn keep(chase: &Chase, chaser: &Chaser, clock: &ClockSettings) -> Ledger {
    let path = chase.hindsight();
    let drag = chase.grid.drag;
    let n = chaser.states.len();
    let mut values = Vec::with_capacity(n);
    let mut first_hits = Vec::with_capacity(n);
    let mut meetings = Vec::with_capacity(n);
    for (i, state) in chaser.states.iter().enumerate() {
        let now = chaser.first + i;
        let expected = path.expected(now, *state, chaser.top, now + 1);
        let meeting = path.earliest_from(now, *state, chaser.top.yps, expected.first_hit);
        let push = chaser
            .states
            .get(i + 1)
            .map(|next| drag.push_used(state.vel_yps, next.vel_yps, chaser.top.yps, chase.grid.t_s[now + 1] - chase.grid.t_s[now]));
        values.push(FrameValue {
            expected_x_yd: expected.x_yd,
            chance: expected.chance,
            need_yps: path.need_yps(now, *state),
            t_star_s: meeting.map(|m| m.t_s),
            push,
        });
        first_hits.push(expected.first_hit);
        meetings.push(meeting);
    }

    if chaser.ends_in_contact {
        let last = &mut values[n - 1];
        (last.expected_x_yd, last.chance) = (contact_spot_yd(chase, chaser).x, 1.0);
        (last.need_yps, last.t_star_s) = (Some(0.0), Some(0.0));
    }
    let starts_at = chase.clock.map(|c| c.max(chaser.first) - chaser.first).filter(|s| *s < n);
    let break_at = break_frame(chase, chaser, &meetings, clock);
    let mut steps = vec![None; n.saturating_sub(1)];
    let account = starts_at.map(|starts_at| {
        let mut so_far = Entries::default();
        for i in starts_at..n.saturating_sub(1) {
            let change_yd = values[i + 1].expected_x_yd - values[i].expected_x_yd;
            let entries = if chaser.blocked[i] {
                Entries { block_yd: change_yd, ..Entries::default() }
            } else if break_at.is_none_or(|b| i < b) {
                Entries { late_yd: change_yd, ..Entries::default() }
            } else {
                let (entries, drift_yd) = step(chase, &path, chaser, i, &values, first_hits[i], meetings[i]);
                entries.plus(&so_far.shared_out(drift_yd))
            };
            so_far = so_far.plus(&entries);
            steps[i] = Some(entries);
        }
        close(starts_at, &steps, values[n - 1].expected_x_yd - values[starts_at].expected_x_yd)
    });
    Ledger { values, steps, account, break_at }
}

/// Charges the step from state `i` to the next; the second value is the step's drift.
fn step(
    chase: &Chase,
    path: &Path,
    chaser: &Chaser,
    i: usize,
    values: &[FrameValue],
    hit: usize,
    meeting: Option<Meeting>,
) -> (Entries, f64) {
    let now = chaser.first + i;
    let state = chaser.states[i];
    let (before_yd, did_yd) = (values[i].expected_x_yd, values[i + 1].expected_x_yd);
    let push = values[i].push.unwrap_or(V2::ZERO);
    let size = push.norm();
    let top = chaser.top;
    // What a push of this size cannot outrun, no state after the step can reach either.
    let modelled = size * top.yps <= top.yps + 6.0 * top.sigma_yps;
    let from_point = if modelled { hit } else { now + 2 };
    if modelled && hit >= path.len() && values[i + 1].chance == 0.0 {
        return (Entries::default(), 0.0); // out of reach whatever he does
    }
    let dt_s = chase.grid.t_s[now + 1] - chase.grid.t_s[now];
    let drag = chase.grid.drag;
    let value_of = |way: V2, size: f64| {
        // A meeting inside the step counts where it is: running on through it would be no fault of the line.
        if let Some(met) = meeting.filter(|m| m.t_s <= dt_s) {
            let there = drag.step(state, way * size, top.yps, met.t_s);
            if (there.pos_yd - met.spot_yd).norm() <= drag.reach_yd + CONTACT_HAIR_YD {
                return met.spot_yd.x;
            }
        }
        path.expected(now + 1, drag.step(state, way * size, top.yps, dt_s), top, from_point).x_yd
    };

    let to_carrier = chase.carrier[now].pos_yd - state.pos_yd;
    let fallback = to_carrier.unit().or(push.unit()).unwrap_or(V2::EAST);
    let foreseen_way = chase.foresight.path(now).aim(0, state, top.yps).and_then(|m| m.aim_yd.unit()).unwrap_or(fallback);
    let known_way = meeting.or_else(|| path.aim(now, state, top.yps)).and_then(|m| m.aim_yd.unit()).unwrap_or(fallback);

    let foreseen_yd = value_of(foreseen_way, size);
    let known_yd = value_of(known_way, size);
    let full_yd = value_of(known_way, 1.0);
    let line_yd = did_yd - foreseen_yd;
    let deeper = push.x > foreseen_way.x * size;
    let entries = Entries {
        flat_yd: if deeper { 0.0 } else { line_yd },
        deep_yd: if deeper { line_yd } else { 0.0 },
        move_yd: foreseen_yd - known_yd,
        pace_yd: known_yd - full_yd,
        ..Entries::default()
    };
    (entries, full_yd - before_yd)
}

/// The carrier's spot at the contact that ends a pursuit: where between the last two frames the gap came down to the
/// reach, both running straight in between; at the last frame where that cannot be told.
pub fn contact_spot_yd(chase: &Chase, chaser: &Chaser) -> V2 {
    let last = chaser.states.len() - 1;
    let now = chaser.first + last;
    if last == 0 {
        return chase.spot_yd(now);
    }
    let gap = |i: usize| chase.carrier[chaser.first + i].pos_yd - chaser.states[i].pos_yd;
    let (before, change) = (gap(last - 1), gap(last) - gap(last - 1));
    // |before + s · change|² = reach², the smaller root.
    let reach_yd = chase.grid.drag.reach_yd;
    let (a, half_b, c) = (change.norm2(), before.dot(change), before.norm2() - reach_yd * reach_yd);
    let rest = half_b * half_b - a * c;
    let share = if c <= 0.0 || a < 1e-18 || rest < 0.0 { 1.0 } else { ((-half_b - rest.sqrt()) / a).clamp(0.0, 1.0) };
    chase.spot_yd(now - 1).lerp(chase.spot_yd(now), share)
}

fn close(starts_at: usize, steps: &[Option<Entries>], conceded_yd: f64) -> Account {
    let total = |heading: fn(&Entries) -> f64| steps.iter().flatten().map(heading).collect::<Sum>().value();
    Account {
        starts_at,
        entries: Entries {
            late_yd: total(|e| e.late_yd),
            flat_yd: total(|e| e.flat_yd),
            deep_yd: total(|e| e.deep_yd),
            pace_yd: total(|e| e.pace_yd),
            block_yd: total(|e| e.block_yd),
            move_yd: total(|e| e.move_yd),
        },
        conceded_yd,
    }
}
