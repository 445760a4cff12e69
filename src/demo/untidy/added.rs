//! Rows that are too many.

use super::ranges::{plays, tracks};
use crate::base::{Stream, V2};
use crate::demo::row::{BALL_ID, DemoRow};
use crate::demo::tags::rounded;

pub(super) fn repeat(rows: &mut Vec<DemoRow>, draws: &mut Stream, share: f64, change: impl Fn(&mut DemoRow, &mut Stream)) -> usize {
    let before = rows.len();
    let mut out = Vec::with_capacity(before + before / 20);
    for row in rows.drain(..) {
        let again = draws.chance(share).then(|| row.clone());
        out.push(row);
        if let Some(mut again) = again {
            change(&mut again, draws);
            out.push(again);
        }
    }
    *rows = out;
    rows.len() - before
}

pub(super) fn play_twice(rows: &mut Vec<DemoRow>) -> usize {
    let again: Vec<DemoRow> = plays(rows).into_iter().step_by(5).flat_map(|range| rows[range].to_vec()).collect();
    let n = again.len();
    rows.extend(again);
    n
}

pub(super) fn ball_runs_on(rows: &mut Vec<DemoRow>) -> usize {
    let before = rows.len();
    let mut out = Vec::with_capacity(before + before / 40);
    for range in plays(rows) {
        let part = &rows[range];
        out.extend_from_slice(part);
        let Some(last) = part.iter().rfind(|r| r.mover_id == BALL_ID) else { continue };
        let step_s = if last.frame > 1 { last.time_s / (last.frame - 1) as f64 } else { 0.1 };
        for k in 1..=12 {
            let mut row = last.clone();
            row.frame += k;
            row.time_s = ((row.time_s + k as f64 * step_s) * 1e4).round() / 1e4;
            row.event = None;
            row.carrier = None;
            row.speed = Some(0.0);
            out.push(row);
        }
    }
    *rows = out;
    rows.len() - before
}

pub(super) fn bench(rows: &mut Vec<DemoRow>, draws: &mut Stream) -> usize {
    let before = rows.len();
    let mut out = Vec::with_capacity(before + before / 5);
    for range in plays(rows) {
        let part = &rows[range];
        out.extend_from_slice(part);
        let mut sides: Vec<&String> = part.iter().filter_map(|r| r.side.as_ref()).collect();
        sides.dedup();
        let frames: Vec<&DemoRow> = part.iter().filter(|r| r.mover_id == part[0].mover_id).collect();
        for (k, spot) in [(-28.0, 70.0), (139.0, -18.0), (55.0, -3.5), (61.0, 57.2)].into_iter().enumerate() {
            for model in &frames {
                let mut row = (*model).clone();
                row.mover_id = (90_001 + k).to_string();
                row.name = format!("Bench Nobody-{k}");
                row.side = sides.get(k % sides.len().max(1)).map(|s| (*s).clone());
                (row.position, row.jersey) = (Some("WR".to_owned()), None);
                row.x = Some(rounded(spot.0 + draws.between(-0.1, 0.1)));
                row.y = Some(rounded(spot.1 + draws.between(-0.1, 0.1)));
                (row.speed, row.heading) = (Some(0.0), Some(90.0));
                out.push(row);
            }
        }
    }
    *rows = out;
    rows.len() - before
}

pub(super) fn huddle(rows: &mut Vec<DemoRow>, draws: &mut Stream) -> usize {
    let before = rows.len();
    let mut out = Vec::with_capacity(before * 3);
    for range in tracks(rows) {
        let part = &rows[range];
        let last = &part[part.len() - 1];
        let step_s = if last.frame > 1 { last.time_s / (last.frame - 1) as f64 } else { 0.1 };
        let frames = (20.0 / step_s).round() as i64;
        // Everyone but the ball strolls a loop and comes back to where the play finds him.
        let roam_yd = if part[0].mover_id == BALL_ID { 0.0 } else { draws.between(0.5, 4.0) };
        let way = V2::polar(draws.between(0.0, std::f64::consts::TAU)) * roam_yd;
        for k in 0..frames {
            let mut row = part[0].clone();
            row.frame += k;
            row.time_s = ((part[0].time_s + k as f64 * step_s) * 1e4).round() / 1e4;
            let away = 1.0 - (std::f64::consts::TAU * k as f64 / frames as f64).cos();
            row.x = row.x.map(|x| rounded(x + way.x * away));
            row.y = row.y.map(|y| rounded(y + way.y * away));
            (row.event, row.carrier) = (None, None);
            out.push(row);
        }
        for row in part {
            let mut row = row.clone();
            row.frame += frames;
            row.time_s = ((row.time_s + frames as f64 * step_s) * 1e4).round() / 1e4;
            out.push(row);
        }
    }
    *rows = out;
    rows.len() - before
}
