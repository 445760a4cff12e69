//! One play's rows to movers, frames and raw tracks, whatever order the rows came in.

use super::clock::NO_TIME;
use super::game::RawGame;
use super::roster::Roster;
use super::row::{NO_FRAME, Row};
use super::timebase::{frames_of_times, median_stamps};
use crate::model::{Mover, RawTrack, SetAside, SourceRow};
use std::cmp::Ordering;

/// A play before its clock is known.
pub(crate) struct Draft {
    pub frames: Vec<i64>,
    pub stamps: Vec<Option<i64>>,
    pub movers: Vec<Mover>,
    /// Code of each mover.
    pub codes: Vec<u32>,
    pub tracks: Vec<RawTrack>,
    pub ball: Option<RawTrack>,
    pub repeats: u64,
    /// Time of each row with its frame, sorted, where the file has times alone.
    times: Vec<(i64, i64)>,
}

/// What holds for the whole game while its plays are drafted.
pub(crate) struct Drafting<'a> {
    pub raw: &'a RawGame,
    pub roster: &'a Roster,
    pub by_frame: bool,
    pub has_speed: bool,
    pub has_heading: bool,
    /// For each text code the mover's place in the play at hand; `u32::MAX` between plays.
    pub place: Vec<u32>,
}

/// A row of one mover: its frame's index and the row's place in the game.
#[derive(Clone, Copy)]
struct At {
    frame: u32,
    row: u32,
}

impl Drafting<'_> {
    /// Groups the rows at `indices`; exact repeats go to `set_aside`.
    pub fn draft(&mut self, indices: &[u32], play: u32, set_aside: &mut Vec<(SourceRow, SetAside)>) -> Draft {
        let rows = &self.raw.rows;
        let times = if self.by_frame { Vec::new() } else { self.times(indices) };
        let frame_of = |row: &Row| if self.by_frame { row.frame } else { frame_at(&times, row.time_us) };
        let frames = distinct_frames(indices.iter().map(|i| frame_of(&rows[*i as usize])));
        let look_up = FrameLookUp::new(&frames);

        let mut codes: Vec<u32> = Vec::with_capacity(23);
        for i in indices {
            let row = &rows[*i as usize];
            if self.place[row.mover as usize] == u32::MAX && !self.roster.is_ball(row.mover, row.attribute) {
                self.place[row.mover as usize] = 0;
                codes.push(row.mover);
            }
        }
        codes.sort_by(|a, b| self.raw.texts[*a as usize].cmp(&self.raw.texts[*b as usize]));
        for (place, code) in codes.iter().enumerate() {
            self.place[*code as usize] = place as u32;
        }
        // The ball's rows come last.
        let mut lists: Vec<Vec<At>> = (0..=codes.len()).map(|_| Vec::with_capacity(frames.len() + 1)).collect();
        let mut stamps: Vec<(u32, i64)> = Vec::with_capacity(indices.len());
        for i in indices {
            let row = &rows[*i as usize];
            let frame = look_up.index(&frames, frame_of(row));
            let is_ball = self.roster.is_ball(row.mover, row.attribute);
            let place = if is_ball { codes.len() } else { self.place[row.mover as usize] as usize };
            lists[place].push(At { frame, row: *i });
            if row.time_us != NO_TIME {
                stamps.push((frame, row.time_us));
            }
        }
        for code in &codes {
            self.place[*code as usize] = u32::MAX;
        }
        let before = set_aside.len();
        let mut tracks: Vec<RawTrack> = lists.iter_mut().map(|list| self.track(list, set_aside)).collect();
        let repeats = (set_aside.len() - before) as u64;
        let ball = tracks.pop().filter(|t| !t.frame_index.is_empty()).or_else(|| self.ball_of_columns(play, &frames, &times));
        let movers = codes.iter().filter_map(|code| self.roster.mover(*code).cloned()).collect();
        let stamps = median_stamps(&mut stamps, frames.len());
        Draft { frames, stamps, movers, codes, tracks, ball, repeats, times }
    }

    fn track(&self, list: &mut [At], set_aside: &mut Vec<(SourceRow, SetAside)>) -> RawTrack {
        let rows = &self.raw.rows;
        if list.windows(2).any(|w| w[0].frame >= w[1].frame) {
            list.sort_unstable_by(|a, b| a.frame.cmp(&b.frame).then_with(|| in_order(&rows[a.row as usize], &rows[b.row as usize])));
        }
        let sized = |wanted: bool| Vec::with_capacity(if wanted { list.len() } else { 0 });
        let mut track = RawTrack {
            frame_index: Vec::with_capacity(list.len()),
            x_yd: sized(true),
            y_yd: sized(true),
            speed_yps: sized(self.has_speed),
            heading_rad: sized(self.has_heading),
            source: Vec::with_capacity(list.len()),
        };
        let mut last: Option<(u32, &Row)> = None;
        for at in list.iter() {
            let row = &rows[at.row as usize];
            if last.is_some_and(|(frame, l)| frame == at.frame && l.x_yd == row.x_yd && l.y_yd == row.y_yd) {
                set_aside.push((row.source(), SetAside::ExactRepeat));
                continue;
            }
            last = Some((at.frame, row));
            track.frame_index.push(at.frame);
            track.x_yd.push(row.x_yd);
            track.y_yd.push(row.y_yd);
            if self.has_speed {
                track.speed_yps.push(row.speed_yps);
            }
            if self.has_heading {
                track.heading_rad.push(row.heading_rad);
            }
            track.source.push(row.source());
        }
        track
    }

    /// The ball from its own columns on the movers' rows.
    fn ball_of_columns(&self, play: u32, frames: &[i64], times: &[(i64, i64)]) -> Option<RawTrack> {
        let mut spots: Vec<(u32, f64, f64, SourceRow)> = self
            .raw
            .ball
            .iter()
            .filter(|b| b.play == play)
            .filter_map(|b| {
                let frame = match self.by_frame {
                    true => b.frame,
                    false if b.time_us == NO_TIME => NO_FRAME,
                    false => frame_at(times, b.time_us),
                };
                Some((frames.binary_search(&frame).ok()? as u32, b.x_yd, b.y_yd, b.source))
            })
            .collect();
        spots.sort_unstable_by(|a, b| a.0.cmp(&b.0).then(a.1.total_cmp(&b.1)).then(a.2.total_cmp(&b.2)).then(a.3.cmp(&b.3)));
        spots.dedup_by(|b, a| a.0 == b.0 && a.1 == b.1 && a.2 == b.2);
        if spots.is_empty() {
            return None;
        }
        let nothing = |wanted: bool| if wanted { vec![f64::NAN; spots.len()] } else { Vec::new() };
        Some(RawTrack {
            frame_index: spots.iter().map(|s| s.0).collect(),
            x_yd: spots.iter().map(|s| s.1).collect(),
            y_yd: spots.iter().map(|s| s.2).collect(),
            speed_yps: nothing(self.has_speed),
            heading_rad: nothing(self.has_heading),
            source: spots.iter().map(|s| s.3).collect(),
        })
    }

    /// Distinct times of the rows with their frame numbers.
    fn times(&self, indices: &[u32]) -> Vec<(i64, i64)> {
        let rows = &self.raw.rows;
        let mut by_mover: Vec<(u32, i64)> = indices.iter().map(|i| (rows[*i as usize].mover, rows[*i as usize].time_us)).collect();
        by_mover.sort_unstable();
        let mut steps: Vec<i64> = by_mover.windows(2).filter(|w| w[0].0 == w[1].0 && w[1].1 > w[0].1).map(|w| w[1].1 - w[0].1).collect();
        steps.sort_unstable();
        let step_us = steps.get(steps.len() / 2).copied().unwrap_or(100_000);
        let mut distinct: Vec<i64> = by_mover.iter().map(|m| m.1).collect();
        distinct.sort_unstable();
        distinct.dedup();
        frames_of_times(&distinct, step_us)
    }
}

impl Draft {
    /// The index of the frame that a row belongs to, or of the next one where that frame has no place.
    pub fn frame_index(&self, row: &Row) -> u32 {
        let frame = if row.frame != NO_FRAME && self.times.is_empty() { row.frame } else { frame_at(&self.times, row.time_us) };
        let at = self.frames.partition_point(|f| *f < frame);
        at.min(self.frames.len().saturating_sub(1)) as u32
    }
}

fn frame_at(times: &[(i64, i64)], time_us: i64) -> i64 {
    let at = times.partition_point(|t| t.0 < time_us);
    times.get(at).or(times.last()).map_or(NO_FRAME, |t| t.1)
}

/// Order of two rows of one mover and frame, by what they say; by place in the input only where they say the same.
fn in_order(a: &Row, b: &Row) -> Ordering {
    (a.x_yd.total_cmp(&b.x_yd))
        .then(a.y_yd.total_cmp(&b.y_yd))
        .then(a.speed_yps.total_cmp(&b.speed_yps))
        .then(a.heading_rad.total_cmp(&b.heading_rad))
        .then(a.source().cmp(&b.source()))
}

/// Sorted distinct frame numbers. Rows mostly come in runs, and a play's numbers lie close together.
fn distinct_frames(numbers: impl Iterator<Item = i64> + Clone) -> Vec<i64> {
    let (mut low, mut high, mut count) = (i64::MAX, i64::MIN, 0_i64);
    for n in numbers.clone() {
        (low, high, count) = (low.min(n), high.max(n), count + 1);
    }
    let width = high.checked_sub(low).filter(|w| *w < 16 * count + 64);
    let Some(width) = width.filter(|w| *w >= 0) else {
        let mut all: Vec<i64> = numbers.collect();
        all.sort_unstable();
        all.dedup();
        return all;
    };
    let mut seen = vec![false; width as usize + 1];
    for n in numbers {
        seen[(n - low) as usize] = true;
    }
    seen.iter().enumerate().filter(|(_, s)| **s).map(|(i, _)| low + i as i64).collect()
}

/// From a frame number to its index: by a table where the numbers lie close together.
struct FrameLookUp {
    low: i64,
    table: Vec<u32>,
}

impl FrameLookUp {
    fn new(frames: &[i64]) -> FrameLookUp {
        let (Some(low), Some(high)) = (frames.first(), frames.last()) else { return FrameLookUp { low: 0, table: Vec::new() } };
        let width = high.checked_sub(*low).filter(|w| *w < 16 * frames.len() as i64 + 64).unwrap_or(-1);
        let mut table = vec![0_u32; (width + 1) as usize];
        if !table.is_empty() {
            for (i, f) in frames.iter().enumerate() {
                table[(f - low) as usize] = i as u32;
            }
        }
        FrameLookUp { low: *low, table }
    }

    #[inline]
    fn index(&self, frames: &[i64], frame: i64) -> u32 {
        match self.table.get(frame.wrapping_sub(self.low) as usize) {
            Some(i) => *i,
            None => frames.partition_point(|f| *f < frame) as u32,
        }
    }
}
