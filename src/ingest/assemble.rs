//! A game's rows to plays: keys checked, rows grouped, clocks set, oddities counted, every row accounted for.

use super::IngestError;
use super::clock::NO_TIME;
use super::draft::{Draft, Drafting};
use super::game::{Game, RawGame, RowAccount};
use super::marks::{Marks, attack};
use super::oddities::look_at;
use super::order::natural_order;
use super::rate::game_rate_hz;
use super::roster::Roster;
use super::row::{NO_FRAME, Row};
use super::texts::NONE;
use super::timebase::{by_frames, by_stamps};
use crate::model::{FindingKind, Findings, Play, PlayHints, SetAside, SourceRow};
use std::sync::Arc;

impl RawGame {
    /// Groups the rows into plays. Nothing depends on the order in which the rows came.
    ///
    /// # Errors
    /// When neither stamps, speeds nor a mapping tell the frame rate.
    pub fn assemble(self) -> Result<Game, IngestError> {
        let mut findings = Findings::default();
        let roster = Roster::of(&self, &mut findings);
        let marks = Marks::of(&self);
        let by_frame = self.rows.iter().any(|r| r.frame != NO_FRAME);
        let mut set_aside: Vec<(SourceRow, SetAside)> = Vec::new();
        let sorted = Sorted::of(&self, &roster, by_frame, &mut set_aside);
        count_gaps(&self, &set_aside, &mut findings);

        let mut drafting = Drafting {
            raw: &self,
            roster: &roster,
            by_frame,
            has_speed: self.rows.iter().any(|r| !r.speed_yps.is_nan()),
            has_heading: self.rows.iter().any(|r| !r.heading_rad.is_nan()),
            place: vec![u32::MAX; self.texts.len()],
        };
        let drafts: Vec<Draft> = sorted.plays.iter().map(|p| drafting.draft(&p.rows, p.code, &mut set_aside)).collect();
        let mut plays = Vec::with_capacity(drafts.len());
        let origin_us = drafts.iter().filter_map(first_stamp).min();
        let clocks = self.clocks(&drafts)?;
        for ((rows, draft), time_s) in sorted.plays.iter().zip(drafts).zip(clocks) {
            let repeats = draft.repeats;
            let play = self.play(rows, draft, time_s, &marks, origin_us, &mut findings);
            look_at(&play, repeats, &mut findings);
            plays.push(play);
        }
        set_aside.sort_unstable();
        let mut account = RowAccount { rows_read: self.rows.len() as u64, ..RowAccount::default() };
        for (_, why) in &set_aside {
            *account.set_aside.entry(*why).or_default() += 1;
        }
        account.in_plays = account.rows_read - account.set_aside_total();
        if self.is_scattered {
            findings.add(FindingKind::ScatteredGame, 1, || format!("game {}", self.id));
        }
        self.context.give_back(self.rows);
        Ok(Game { id: self.id, plays, findings, account, set_aside, replaces: self.replaces })
    }

    /// Seconds of each play's frames.
    fn clocks(&self, drafts: &[Draft]) -> Result<Vec<Vec<f64>>, IngestError> {
        let stamped: Vec<Option<Vec<f64>>> = drafts.iter().map(|d| by_stamps(&d.frames, &d.stamps)).collect();
        if let Some(step_s) = median_step_s(&stamped).filter(|s| !USUAL_STEPS_S.contains(s)) {
            return Err(IngestError::BadClock { game: self.id.to_string(), step_s });
        }
        if stamped.iter().all(Option::is_some) {
            return Ok(stamped.into_iter().flatten().collect());
        }
        let unknown = || IngestError::UnknownRate { game: self.id.to_string() };
        let rate_hz = game_rate_hz(drafts, self.context.frame_rate_hz).ok_or_else(unknown)?;
        Ok(drafts.iter().zip(stamped).map(|(d, s)| s.unwrap_or_else(|| by_frames(&d.frames, rate_hz))).collect())
    }

    fn play(
        &self,
        sorted: &PlayRows,
        draft: Draft,
        time_s: Vec<f64>,
        marks: &Marks,
        origin_us: Option<i64>,
        findings: &mut Findings,
    ) -> Play {
        let id = &self.texts[sorted.code as usize];
        let rows: Vec<&Row> = sorted.rows.iter().chain(&sorted.marked).map(|i| &self.rows[*i as usize]).collect();
        let told = self.context.tables.play(&self.id, id);
        let carrier = told.and_then(|t| t.carrier.as_ref()).and_then(|c| draft.movers.iter().position(|m| m.id == *c));
        let since_start_s = first_stamp(&draft).zip(origin_us).map(|(us, from)| (us - from) as f64 / 1e6);
        Play {
            game: Arc::clone(&self.id),
            play: Arc::clone(id),
            field: self.context.field,
            time_s,
            events: marks.events(self, id, &draft, &rows, findings),
            hints: PlayHints {
                carrier_marks: marks.carriers(self, &draft, &rows),
                carrier: carrier.map(|c| c as u32),
                attack: attack(&rows).or(told.and_then(|t| t.attack)),
                kind: told.and_then(|t| t.kind.clone()),
                film_start_s: self.context.tables.film_start_s(&self.id, id, since_start_s),
            },
            frames: draft.frames,
            movers: draft.movers,
            tracks: draft.tracks,
            ball: draft.ball,
        }
    }
}

/// Steps beyond these are no tracking data: the time column is in another unit, or is no time.
const USUAL_STEPS_S: std::ops::RangeInclusive<f64> = 0.002..=5.0;

/// Median over the plays of their mean step.
fn median_step_s(clocks: &[Option<Vec<f64>>]) -> Option<f64> {
    let span = |t: &Vec<f64>| (t.len() > 1).then(|| (t[t.len() - 1] - t[0]) / (t.len() - 1) as f64);
    let mut steps: Vec<f64> = clocks.iter().flatten().filter_map(span).collect();
    steps.sort_by(f64::total_cmp);
    steps.get(steps.len() / 2).copied()
}

fn first_stamp(draft: &Draft) -> Option<i64> {
    draft.stamps.iter().flatten().next().copied()
}

/// Places of a play's rows in the game.
struct PlayRows {
    code: u32,
    rows: Vec<u32>,
    /// Rows set aside for want of a coordinate; their marks count.
    marked: Vec<u32>,
}

struct Sorted {
    /// In natural order of id.
    plays: Vec<PlayRows>,
}

impl Sorted {
    fn of(raw: &RawGame, roster: &Roster, by_frame: bool, set_aside: &mut Vec<(SourceRow, SetAside)>) -> Sorted {
        let mut place = vec![u32::MAX; raw.texts.len()];
        let mut plays: Vec<PlayRows> = Vec::new();
        for (i, row) in raw.rows.iter().enumerate() {
            let has_time = if by_frame { row.frame != NO_FRAME } else { row.time_us != NO_TIME };
            let has_mover = row.mover != NONE || roster.is_ball(row.mover, row.attribute);
            if row.play == NONE || !has_time || !has_mover {
                set_aside.push((row.source(), SetAside::MissingKey));
                continue;
            }
            if place[row.play as usize] == u32::MAX {
                place[row.play as usize] = plays.len() as u32;
                plays.push(PlayRows { code: row.play, rows: Vec::new(), marked: Vec::new() });
            }
            let play = &mut plays[place[row.play as usize] as usize];
            if row.has_place() {
                play.rows.push(i as u32);
            } else {
                set_aside.push((row.source(), SetAside::MissingCoordinate));
                if row.event != NONE || row.carrier != NONE {
                    play.marked.push(i as u32);
                }
            }
        }
        plays.retain(|p| !p.rows.is_empty());
        plays.sort_by(|a, b| natural_order(&raw.texts[a.code as usize], &raw.texts[b.code as usize]));
        Sorted { plays }
    }
}

/// Counts rows without keys or places; the first place named is the first in order of file and row.
fn count_gaps(raw: &RawGame, set_aside: &[(SourceRow, SetAside)], findings: &mut Findings) {
    for (why, kind) in [(SetAside::MissingKey, FindingKind::MissingKey), (SetAside::MissingCoordinate, FindingKind::MissingCoordinate)] {
        let count = set_aside.iter().filter(|s| s.1 == why).count() as u64;
        let first = set_aside.iter().filter(|s| s.1 == why).map(|s| s.0).min();
        if let Some(source) = first {
            let file = raw.context.files.get(usize::from(source.file)).map(|f| f.display().to_string()).unwrap_or_default();
            findings.add(kind, count, || format!("game {}: {file}, row {}", raw.id, source.row));
        }
    }
}
