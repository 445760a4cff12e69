//! An invented game: what the tags saw and what really was.

use super::carrying::{CarryStop, StageCarry};
use super::event::DemoEvent;
use super::kind::PlayKind;
use super::league::{Athlete, League, club_count, pairing};
use super::lineup::{Teams, kickoff, punt, scrimmage};
use super::options::DemoOptions;
use super::script::perform;
use super::stage::Stage;
use super::tags::{DemoTrack, seen};
use crate::base::{Stream, V2};
use crate::model::{Attack, Field};
use std::sync::Arc;

/// One of the 22 in a play.
#[derive(Clone, Debug, PartialEq)]
pub struct DemoMover {
    /// Index into [`DemoGame::athletes`].
    pub athlete: usize,
    pub track: DemoTrack,
}

/// A carry as it really was. Frames are indices into [`DemoPlay::time_s`], inclusive: the first at or after the moment.
#[derive(Clone, Debug, PartialEq)]
pub struct CarryTruth {
    /// Index into [`DemoPlay::movers`].
    pub carrier: usize,
    pub start_frame: usize,
    pub end_frame: usize,
    pub start_s: f64,
    pub end_s: f64,
    pub stop: CarryStop,
    pub attack: Attack,
    /// Yards won downfield.
    pub gain_yd: f64,
}

#[derive(Clone, Debug, PartialEq)]
pub struct DemoPlay {
    pub id: Arc<str>,
    pub kind: PlayKind,
    /// Way of the side that starts with the ball (that kicks, on a kick-off).
    pub attack: Attack,
    /// Short label of that side.
    pub offence: Arc<str>,
    /// Where the ball starts, yards from the back line of the side that starts with it.
    pub line_yd: f64,
    /// Seconds of every frame; the ball's track may be longer than the players'.
    pub time_s: Vec<f64>,
    /// Frames in which the players are seen.
    pub player_frames: usize,
    /// In order of id.
    pub movers: Vec<DemoMover>,
    pub ball: DemoTrack,
    /// (frame index, event), one a frame at most, in order.
    pub events: Vec<(usize, DemoEvent)>,
    pub carries: Vec<CarryTruth>,
}

#[derive(Clone, Debug, PartialEq)]
pub struct DemoGame {
    pub id: Arc<str>,
    pub field: Field,
    /// Both squads, home first.
    pub athletes: Vec<Athlete>,
    pub plays: Vec<DemoPlay>,
    pub rate_hz: f64,
    /// Whether rows carry event texts, and whether they name the carrier.
    pub events: bool,
    pub carrier_column: bool,
    pub direction_column: bool,
}

/// Game `index` of the season. Depends on the options (threads aside) and the index alone.
pub fn generate_game(index: usize, options: &DemoOptions) -> DemoGame {
    let mut league = League::new(options.seed);
    let (round, home, away) = pairing(index, club_count(options.games));
    let away_squad = std::mem::take(&mut league.squads[away]);
    let mut athletes = std::mem::take(&mut league.squads[home]);
    let home_size = athletes.len();
    athletes.extend(away_squad);
    let mut draws = Stream::new(options.seed, &format!("game {index}"));
    let mut plays = Vec::with_capacity(options.plays_per_game);
    let mut number = 20 + draws.below(30);
    let mut home_has_ball = draws.chance(0.5);
    let opening_turned = draws.chance(0.5);
    for k in 0..options.plays_per_game {
        // Drives of some six plays; the sides change ends at half time.
        home_has_ball ^= draws.chance(1.0 / 6.0);
        let second_half = 2 * k >= options.plays_per_game;
        let setup = Setup {
            athletes: &athletes,
            home_size,
            options,
            unit: format!("game {index} play {k}"),
            id: number.to_string().into(),
            home_has_ball,
            turned: opening_turned ^ second_half ^ home_has_ball,
        };
        plays.push(generate_play(&setup));
        number += 18 + draws.below(12);
    }
    DemoGame {
        id: format!("{}", 2_087_000_000_u64 + (round as u64 + 1) * 1_000 + index as u64 % 1_000).into(),
        field: Field::AMERICAN,
        athletes,
        plays,
        rate_hz: options.rate_hz,
        events: options.events,
        carrier_column: options.carrier_column,
        direction_column: options.direction_column,
    }
}

/// What one play needs to be made.
struct Setup<'a> {
    athletes: &'a [Athlete],
    home_size: usize,
    options: &'a DemoOptions,
    unit: String,
    id: Arc<str>,
    home_has_ball: bool,
    turned: bool,
}

fn generate_play(setup: &Setup) -> DemoPlay {
    let options = setup.options;
    let mut draws = Stream::new(options.seed, &setup.unit);
    let (home, away) = setup.athletes.split_at(setup.home_size);
    let (attack, defend) = if setup.home_has_ball { (home, away) } else { (away, home) };
    let teams = Teams { attack, defend, attack_home: setup.home_has_ball };
    let kind = PlayKind::drawn(&mut draws);
    let mut line_yd = draws.between(18.0, 92.0);
    let lineup = match kind {
        PlayKind::KickReturn => {
            line_yd = 35.0;
            kickoff(teams, &mut draws)
        }
        PlayKind::PuntReturn => {
            line_yd = draws.between(20.0, 58.0);
            punt(teams, line_yd, &mut draws)
        }
        PlayKind::DeepCatch => {
            line_yd = draws.between(18.0, 66.0);
            scrimmage(teams, line_yd, &mut draws)
        }
        _ => scrimmage(teams, line_yd, &mut draws),
    };
    let mut stage = Stage::new(lineup.actors, lineup.ball_yd, setup.turned, options.rate_hz, draws);
    let carries = perform(&mut stage, kind, line_yd);
    let linger_s = stage.draws.between(0.3, 1.0);
    stage.run_for(linger_s);
    let over_s = stage.now_s();
    let runs_on_s = if stage.draws.chance(0.2) { stage.draws.between(0.1, 1.2) } else { 0.0 };
    stage.run_for(runs_on_s);
    told(setup, kind, line_yd, &stage, &carries, over_s)
}

/// Puts what the stage recorded into the order of a file.
fn told(setup: &Setup, kind: PlayKind, line_yd: f64, stage: &Stage, carries: &[StageCarry], over_s: f64) -> DemoPlay {
    let (athletes, options) = (setup.athletes, setup.options);
    let recorder = &stage.recorder;
    let frames = recorder.frames();
    let player_frames = recorder.frame_at(over_s).clamp(1, frames);
    let mut order: Vec<usize> = (0..stage.actors.len()).collect();
    order.sort_by(|a, b| stage.actors[*a].athlete.id.cmp(&stage.actors[*b].athlete.id));
    let mut noise = Stream::new(options.seed, &format!("{} tags", setup.unit));
    let index_of = |athlete: &Athlete| athletes.iter().position(|a| a.id == athlete.id).unwrap_or(0);
    let movers = order
        .iter()
        .map(|actor| {
            let exact = (0..player_frames).map(|f| recorder.states[f * recorder.actors + actor]);
            DemoMover { athlete: index_of(stage.actors[*actor].athlete), track: seen(exact, options.noise_yd, &mut noise) }
        })
        .collect();
    let ball_states = ball_states(&recorder.ball_yd, recorder.rate_hz);
    let carries = carries
        .iter()
        .map(|c| CarryTruth {
            carrier: order.iter().position(|k| *k == c.actor).unwrap_or(0),
            start_frame: recorder.frame_at(c.start_s).min(player_frames - 1),
            end_frame: recorder.frame_at(c.end_s).min(player_frames - 1),
            start_s: c.start_s,
            end_s: c.end_s,
            stop: c.stop,
            attack: way(c.turned),
            gain_yd: c.end_yd.x - c.start_yd.x,
        })
        .collect();
    let mut events: Vec<(usize, DemoEvent)> = Vec::new();
    for (time_s, event) in &stage.events {
        // One text a frame: the second of two goes into the next frame.
        let frame = recorder.frame_at(*time_s).max(events.last().map_or(0, |e| e.0 + 1));
        events.push((frame.min(player_frames - 1), *event));
    }
    events.dedup_by_key(|e| e.0);
    let attack_club = stage.actors[0].athlete;
    DemoPlay {
        id: setup.id.clone(),
        kind,
        attack: way(setup.turned),
        offence: attack_club.side.clone(),
        line_yd,
        time_s: (0..frames).map(|f| frame_time_s(f, recorder.rate_hz)).collect(),
        player_frames,
        movers,
        ball: seen(ball_states.into_iter(), options.noise_yd, &mut noise),
        events,
        carries,
    }
}

/// Time of a frame as files write it, to 0.1 ms.
pub fn frame_time_s(frame: usize, rate_hz: f64) -> f64 {
    (frame as f64 / rate_hz * 1e4).round() / 1e4
}

fn way(turned: bool) -> Attack {
    if turned { Attack::TowardsMinusX } else { Attack::TowardsPlusX }
}

/// Places with velocities by central differences (one-sided at the ends).
fn ball_states(places: &[V2], rate_hz: f64) -> Vec<(V2, V2)> {
    let last = places.len().saturating_sub(1);
    (0..places.len())
        .map(|f| {
            let (before, after) = (f.saturating_sub(1), (f + 1).min(last));
            let span = (after - before).max(1) as f64;
            (places[f], (places[after] - places[before]) * (rate_hz / span))
        })
        .collect()
}
