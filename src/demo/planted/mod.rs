//! The controlled family check: one carrier, one defender, one planted fault.
//!
//! The two athletes are the same in every family and their top speeds are known, so that whatever an audit charges
//! can be held against what was planted.

mod run;
mod start;

use super::game::frame_time_s;
use super::tags::{DemoTrack, seen};
use crate::base::Stream;
use crate::model::play::SourceRow;
use crate::model::{Attack, EventMark, Field, Mover, Play, PlayHints, RawTrack};
use run::chase;
use start::feasible_start;

/// Top speeds of the two, yd/s.
pub const CARRIER_TOP_YPS: f64 = 9.4;

pub const DEFENDER_TOP_YPS: f64 = 9.2;

/// Gap that counts as contact, yards.
pub const CONTACT_YD: f64 = 1.25;

/// Seconds before the carry, in which the carrier comes along evenly and the defender stands.
const LEAD_IN_S: f64 = 0.8;

/// What is wrong with the defender.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Fault {
    /// The best push that can be foreseen, from the start.
    None,
    /// Pushes towards where the carrier is.
    AtTheMan,
    /// Stands for 1.1 to 1.6 s, then the best.
    Late,
    /// The best direction at 85 % push.
    Slow,
    /// The best push turned 15° towards downfield.
    Deep,
    /// The best push turned 15° away from downfield.
    Flat,
}

impl Fault {
    pub const ALL: [Fault; 6] = [Fault::None, Fault::AtTheMan, Fault::Late, Fault::Slow, Fault::Deep, Fault::Flat];
}

/// What the carrier does.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum PathKind {
    Straight,
    /// Towards the sideline and up it.
    Sideline,
    /// One to three cuts that nobody can foresee.
    Cutting,
}

impl PathKind {
    pub const ALL: [PathKind; 3] = [PathKind::Straight, PathKind::Sideline, PathKind::Cutting];
}

/// How a planted play ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PlantedEnd {
    Contact,
    Score,
    Out,
}

/// What was planted, and what then really happened. Indices are those of the play.
#[derive(Clone, Debug, PartialEq)]
pub struct PlantedTruth {
    pub fault: Fault,
    pub path: PathKind,
    /// Mover indices.
    pub carrier: usize,
    pub defender: usize,
    /// One for each mover, yd/s.
    pub top_speeds_yps: [f64; 2],
    /// First frame of the carry, and the frame of contact, score or stepping out.
    pub start_frame: usize,
    pub end_frame: usize,
    pub end: PlantedEnd,
    /// How long a late defender stands, seconds from the carry's start; 0 for the others.
    pub stands_s: f64,
    pub start_range_yd: f64,
    /// Earliest meeting that was there to be had at the carry's start, seconds after it.
    pub ideal_s: f64,
    /// Exact tracks of the movers and of the ball.
    pub tracks: [DemoTrack; 2],
}

/// A planted play. The same seed and path give the same carrier and the same start for every fault.
pub fn planted_play(fault: Fault, path: PathKind, seed: u64, rate_hz: f64, noise_yd: f64) -> (Play, PlantedTruth) {
    let field = Field::AMERICAN;
    let mut draws = Stream::new(seed, &format!("planted {path:?}"));
    let start = feasible_start(path, field, &mut draws);
    let stands_s = if fault == Fault::Late { draws.between(1.1, 1.6) } else { 0.0 };
    let run = chase(fault, &start, stands_s, field, rate_hz);
    let mut noise = Stream::new(seed, &format!("planted tags {path:?} {fault:?}"));
    let [carrier, defender, ball] = [0, 1, 2].map(|k| seen(run.states.iter().map(|s| s[k]), noise_yd, &mut noise));
    let truth = PlantedTruth {
        fault,
        path,
        carrier: 0,
        defender: 1,
        top_speeds_yps: [CARRIER_TOP_YPS, DEFENDER_TOP_YPS],
        start_frame: frame_at(LEAD_IN_S, rate_hz),
        end_frame: frame_at(run.end_s, rate_hz),
        end: run.end,
        stands_s,
        start_range_yd: (start.carrier.pos_yd - start.defender_yd).norm(),
        ideal_s: start.ideal_s,
        tracks: [carrier, defender],
    };
    (as_play(&truth, &ball, seed, rate_hz, field), truth)
}

fn frame_at(time_s: f64, rate_hz: f64) -> usize {
    (time_s * rate_hz - 1e-6).ceil().max(0.0) as usize
}

fn as_play(truth: &PlantedTruth, ball: &DemoTrack, seed: u64, rate_hz: f64, field: Field) -> Play {
    let frames = ball.seen_yd.len();
    let mover = |id: &str, name: &str, side: &str, position: &str| Mover {
        id: id.into(),
        name: Some(name.into()),
        side: Some(side.into()),
        position: Some(position.into()),
        jersey: None,
    };
    let last_mark = match truth.end {
        PlantedEnd::Contact => EventMark::Down,
        PlantedEnd::Score => EventMark::Score,
        PlantedEnd::Out => EventMark::OutOfBounds,
    };
    Play {
        game: format!("planted-{:?}-{:?}", truth.fault, truth.path).into(),
        play: seed.to_string().into(),
        field,
        frames: (1..=frames as i64).collect(),
        time_s: (0..frames).map(|f| frame_time_s(f, rate_hz)).collect(),
        movers: vec![mover("101", "Orivis Kesstrand", "ATT", "RB"), mover("202", "Zanko Pellberth", "DEF", "CB")],
        tracks: truth.tracks.iter().map(raw).collect(),
        ball: Some(raw(ball)),
        events: vec![(truth.start_frame as u32, EventMark::Catch), (truth.end_frame as u32, last_mark)],
        hints: PlayHints { attack: Some(Attack::TowardsPlusX), ..PlayHints::default() },
    }
}

fn raw(track: &DemoTrack) -> RawTrack {
    let n = track.seen_yd.len();
    RawTrack {
        frame_index: (0..n as u32).collect(),
        x_yd: track.seen_yd.iter().map(|p| p.x).collect(),
        y_yd: track.seen_yd.iter().map(|p| p.y).collect(),
        speed_yps: Vec::new(),
        heading_rad: Vec::new(),
        source: vec![SourceRow::default(); n],
    }
}
