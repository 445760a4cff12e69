//! Rows that say something else.

use super::ranges::{each, plays};
use crate::base::angle::from_nautical_rad;
use crate::base::{Stream, V2};
use crate::demo::row::DemoRow;
use crate::demo::tags::rounded;
use std::collections::BTreeMap;

pub(super) fn uneven(rows: &mut [DemoRow], draws: &mut Stream) -> usize {
    let mut offsets: BTreeMap<(String, i64), f64> = BTreeMap::new();
    each(rows, |row| {
        if row.frame == 1 {
            offsets.entry((row.play_id.clone(), 1)).or_insert(0.0);
        }
        let step_s = if row.frame > 1 { row.time_s / (row.frame - 1) as f64 } else { 0.0 };
        let offset_s = *offsets.entry((row.play_id.clone(), row.frame)).or_insert_with(|| step_s * draws.between(-0.15, 0.15));
        row.time_s += (offset_s * 1e4).round() / 1e4;
        if let (Some(speed), Some(heading)) = (row.speed, row.heading) {
            let by = V2::polar(from_nautical_rad(heading)) * (speed * offset_s);
            row.x = row.x.map(|x| rounded(x + by.x));
            row.y = row.y.map(|y| rounded(y + by.y));
        }
        true
    })
}

pub(super) fn renumber(rows: &mut [DemoRow], by: i64) -> usize {
    each(rows, |row| {
        row.frame += by;
        true
    })
}

pub(super) fn two_events(rows: &mut [DemoRow]) -> usize {
    let mut changed = 0;
    for range in plays(rows) {
        let part = &mut rows[range];
        let gains = ["caught", "handoff", "kick_received", "interception", "recovery"];
        let Some(at) = part.iter().find(|r| r.event.as_deref().is_some_and(|e| gains.contains(&e))).map(|r| r.frame) else { continue };
        changed += each(part, |row| {
            let free = row.frame == at + 1 && row.event.is_none();
            if free {
                row.event = Some("first_contact".to_owned());
            }
            free
        });
    }
    changed
}
