//! Blocked frames: a heuristic with its thresholds in the settings.
//!
//! A team-mate of the carrier stands in a defender's way when he is within `block_range_yd` of him, nearer than
//! the carrier, and inside `block_sector_deg` of the defender's direction to where the carrier will be in half a
//! second (the meeting point is not known at this layer). Such a frame is blocked when the two hardly move
//! against each other (`block_relative_speed_yps`), or when the defender gets towards that place at less than
//! 60 % of the highest speed he reached in this pursuit. Blocked stretches shorter than `block_time_s` do not count.

use crate::model::settings::CarrySettings;
use crate::model::{Play, Track};

/// How far ahead the carrier is looked at, s.
const LEAD_S: f64 = 0.5;
/// Share of his own highest speed below which a defender is held.
const HELD_SHARE: f64 = 0.6;

/// One defender's chase and who can be in its way.
pub(super) struct Chase<'a> {
    pub runner: &'a Track,
    pub defender: &'a Track,
    pub mates: &'a [&'a Track],
    pub start: usize,
    pub end: usize,
}

/// One flag for each frame of the chase.
pub(super) fn blocked(play: &Play, chase: &Chase, settings: &CarrySettings) -> Vec<bool> {
    let range2 = settings.block_range_yd * settings.block_range_yd;
    let edge = settings.block_sector_deg.to_radians().cos();
    let calm2 = settings.block_relative_speed_yps * settings.block_relative_speed_yps;
    let mut flags = vec![false; chase.end + 1 - chase.start];
    let mut top_yps: Option<f64> = None;
    for (flag, frame) in flags.iter_mut().zip(chase.start..) {
        let (place, velocity) = (chase.defender.pos(frame), chase.defender.vel(frame));
        let gap2 = (chase.runner.pos(frame) - place).norm2();
        for mate in chase.mates {
            if !mate.covers(frame) {
                continue;
            }
            let off = mate.pos(frame) - place;
            let off2 = off.norm2();
            if off2 > range2 || off2 > gap2 {
                continue;
            }
            let Some(way) = (chase.runner.pos(frame) + chase.runner.vel(frame) * LEAD_S - place).unit() else { continue };
            if off.dot(way) < edge * off2.sqrt() {
                continue;
            }
            let mut held = || velocity.dot(way) < HELD_SHARE * *top_yps.get_or_insert_with(|| highest_speed_yps(chase));
            if (mate.vel(frame) - velocity).norm2() <= calm2 || held() {
                *flag = true;
                break;
            }
        }
    }
    drop_short(play, chase.start, &mut flags, settings.block_time_s);
    flags
}

fn highest_speed_yps(chase: &Chase) -> f64 {
    (chase.start..=chase.end).map(|f| chase.defender.vel(f).norm2()).fold(0.0, f64::max).sqrt()
}

/// Clears stretches that last less than `least_s`, a stretch of n frames lasting n steps.
fn drop_short(play: &Play, first: usize, flags: &mut [bool], least_s: f64) {
    let time_s = |f: usize| play.time_s.get(f).copied();
    let mut from = 0;
    while from < flags.len() {
        if !flags[from] {
            from += 1;
            continue;
        }
        let mut to = from;
        while to + 1 < flags.len() && flags[to + 1] {
            to += 1;
        }
        let step_s = if first + from > 0 { time_s(first + from).zip(time_s(first + from - 1)) } else { time_s(1).zip(time_s(0)) };
        let lasted_s = time_s(first + to).zip(time_s(first + from)).map_or(0.0, |(b, a)| b - a) + step_s.map_or(0.0, |(b, a)| b - a);
        if lasted_s < least_s - 1e-6 {
            flags[from..=to].fill(false);
        }
        from = to + 1;
    }
}
