//! Invented games as the program's own plays, without a file between.

use super::game::{DemoGame, DemoPlay};
use super::league::Athlete;
use super::tags::DemoTrack;
use crate::base::angle::from_nautical_rad;
use crate::model::play::SourceRow;
use crate::model::{Mover, Play, PlayHints, RawTrack};

impl DemoGame {
    /// What reading the game's file would give: marks and hints as far as the options write them.
    pub fn to_plays(&self) -> Vec<Play> {
        self.plays.iter().map(|play| self.to_play(play)).collect()
    }

    fn to_play(&self, play: &DemoPlay) -> Play {
        let mut row = 0;
        let tracks = play.movers.iter().map(|m| raw(&m.track, true, &mut row)).collect();
        let ball = raw(&play.ball, false, &mut row);
        let events =
            if self.events { play.events.iter().map(|(frame, event)| (*frame as u32, event.mark())).collect() } else { Vec::new() };
        let mut carrier_marks = Vec::new();
        if self.carrier_column {
            carrier_marks.extend((0..play.time_s.len()).filter_map(|f| Some((f as u32, play.carrier_at(f)? as u32))));
        }
        Play {
            game: self.id.clone(),
            play: play.id.clone(),
            field: self.field,
            frames: (1..=play.time_s.len() as i64).collect(),
            time_s: play.time_s.clone(),
            movers: play.movers.iter().map(|m| mover(&self.athletes[m.athlete])).collect(),
            tracks,
            ball: Some(ball),
            events,
            hints: PlayHints {
                carrier_marks,
                carrier: None,
                attack: self.direction_column.then_some(play.attack),
                kind: Some(play.kind.word().into()),
                film_start_s: None,
            },
        }
    }
}

impl DemoPlay {
    /// Who carries at a frame: index of the mover. Of two carries that touch, the earlier one.
    pub fn carrier_at(&self, frame: usize) -> Option<usize> {
        self.carries.iter().find(|c| c.start_frame <= frame && frame <= c.end_frame).map(|c| c.carrier)
    }
}

fn mover(athlete: &Athlete) -> Mover {
    Mover {
        id: athlete.id.clone(),
        name: Some(athlete.name.clone()),
        side: Some(athlete.side.clone()),
        position: Some(athlete.position.clone()),
        jersey: Some(athlete.jersey.clone()),
    }
}

fn raw(track: &DemoTrack, heading: bool, row: &mut u32) -> RawTrack {
    let n = track.seen_yd.len();
    let first = *row + 1;
    *row += n as u32;
    RawTrack {
        frame_index: (0..n as u32).collect(),
        x_yd: track.seen_yd.iter().map(|p| p.x).collect(),
        y_yd: track.seen_yd.iter().map(|p| p.y).collect(),
        speed_yps: track.seen_speed_yps.clone(),
        heading_rad: if heading { track.seen_heading_deg.iter().map(|d| from_nautical_rad(*d)).collect() } else { Vec::new() },
        source: (0..n as u32).map(|k| SourceRow { file: 0, row: first + k }).collect(),
    }
}
