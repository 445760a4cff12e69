//! Rows of a tracking file, as they are written.

use super::game::{DemoGame, DemoPlay};
use super::tags::DemoTrack;

/// Names of the file's columns; `carrier` only where the options ask for it.
pub const COLUMNS: [&str; 15] = [
    "game_id", "play_id", "frame", "time_s", "mover_id", "name", "side", "position", "jersey", "x", "y", "speed", "heading", "event",
    "carrier",
];
/// Id and name of the ball.
pub const BALL_ID: &str = "ball";

/// One row, lent by the game it comes from. Yards, yd/s, degrees clockwise from +y.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct RowRef<'a> {
    pub game_id: &'a str,
    pub play_id: &'a str,
    pub frame: i64,
    pub time_s: f64,
    pub mover_id: &'a str,
    pub name: &'a str,
    pub side: Option<&'a str>,
    pub position: Option<&'a str>,
    pub jersey: Option<&'a str>,
    pub x: f64,
    pub y: f64,
    pub speed: f64,
    pub heading: Option<f64>,
    pub event: Option<&'a str>,
    pub carrier: Option<&'a str>,
}

/// One row that can be spoiled; what is missing is written as an empty field.
#[derive(Clone, Debug, PartialEq)]
pub struct DemoRow {
    pub game_id: String,
    pub play_id: String,
    pub frame: i64,
    pub time_s: f64,
    pub mover_id: String,
    pub name: String,
    pub side: Option<String>,
    pub position: Option<String>,
    pub jersey: Option<String>,
    pub x: Option<f64>,
    pub y: Option<f64>,
    pub speed: Option<f64>,
    pub heading: Option<f64>,
    pub event: Option<String>,
    pub carrier: Option<String>,
    /// A free text that nobody needs; a column of its own where any row has one.
    pub note: Option<String>,
}

impl RowRef<'_> {
    fn to_owned(self) -> DemoRow {
        let text = |t: Option<&str>| t.map(str::to_owned);
        DemoRow {
            game_id: self.game_id.to_owned(),
            play_id: self.play_id.to_owned(),
            frame: self.frame,
            time_s: self.time_s,
            mover_id: self.mover_id.to_owned(),
            name: self.name.to_owned(),
            side: text(self.side),
            position: text(self.position),
            jersey: text(self.jersey),
            x: Some(self.x),
            y: Some(self.y),
            speed: Some(self.speed),
            heading: self.heading,
            event: text(self.event),
            carrier: text(self.carrier),
            note: None,
        }
    }
}

/// All rows of a game: plays one after the other, in each the movers one after the other, the ball last.
pub fn rows(game: &DemoGame) -> Vec<DemoRow> {
    let mut out = Vec::with_capacity(row_count(game));
    visit(game, |row| out.push(row.to_owned()));
    out
}

pub fn row_count(game: &DemoGame) -> usize {
    game.plays.iter().map(|p| p.movers.len() * p.player_frames + p.time_s.len()).sum()
}

/// Shows every row of the game in the order of the file.
pub fn visit<'a>(game: &'a DemoGame, mut show: impl FnMut(RowRef<'a>)) {
    for play in &game.plays {
        let marks = Marks::of(game, play);
        for mover in &play.movers {
            let athlete = &game.athletes[mover.athlete];
            let blank = RowRef {
                mover_id: &athlete.id,
                name: &athlete.name,
                side: Some(&athlete.side),
                position: Some(&athlete.position),
                jersey: Some(&athlete.jersey),
                ..blank(game, play)
            };
            track_rows(play, &mover.track, &marks, blank, true, &mut show);
        }
        track_rows(play, &play.ball, &marks, blank(game, play), false, &mut show);
    }
}

/// Event and carrier of every frame of a play.
struct Marks<'a> {
    event: Vec<Option<&'static str>>,
    carrier: Vec<Option<&'a str>>,
}

impl<'a> Marks<'a> {
    fn of(game: &'a DemoGame, play: &DemoPlay) -> Marks<'a> {
        let frames = play.time_s.len();
        let mut event = vec![None; frames];
        if game.events {
            for (frame, what) in &play.events {
                event[*frame] = Some(what.text());
            }
        }
        let id = |mover: usize| &*game.athletes[play.movers[mover].athlete].id;
        let named = |frame| if game.carrier_column { play.carrier_at(frame).map(id) } else { None };
        Marks { event, carrier: (0..frames).map(named).collect() }
    }
}

fn blank<'a>(game: &'a DemoGame, play: &'a DemoPlay) -> RowRef<'a> {
    RowRef {
        game_id: &game.id,
        play_id: &play.id,
        frame: 0,
        time_s: 0.0,
        mover_id: BALL_ID,
        name: BALL_ID,
        side: None,
        position: None,
        jersey: None,
        x: 0.0,
        y: 0.0,
        speed: 0.0,
        heading: None,
        event: None,
        carrier: None,
    }
}

fn track_rows<'a>(
    play: &DemoPlay,
    track: &DemoTrack,
    marks: &Marks<'a>,
    blank: RowRef<'a>,
    has_heading: bool,
    show: &mut impl FnMut(RowRef<'a>),
) {
    for (f, spot) in track.seen_yd.iter().enumerate() {
        show(RowRef {
            frame: f as i64 + 1,
            time_s: play.time_s[f],
            x: spot.x,
            y: spot.y,
            speed: track.seen_speed_yps[f],
            heading: has_heading.then(|| track.seen_heading_deg[f]),
            event: marks.event[f],
            carrier: marks.carrier[f],
            ..blank
        });
    }
}
