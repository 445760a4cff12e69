//! The stage: 22 actors and a ball, stepped through time on a fixed grid, sampled at the file's rate.
//!
//! Whoever has the ball attacks +x here; when possession changes hands the whole stage makes a half turn. Samples
//! are turned back, so that the field stands still for the reader.

use super::ball::{Ball, BallState, Landing};
use super::body::{Body, Law, STEP_S};
use super::chase::expectation;
use super::event::DemoEvent;
use super::job::Job;
use super::league::Athlete;
use super::recorder::Recorder;
use crate::base::{Stream, V2};
use crate::engine::foresight::Forecast;
use crate::model::Field;

/// Gap at which invented defenders hope to get hold of a carrier, yards.
pub const GRASP_YD: f64 = 1.0;
/// Steps between two thoughts: 0.1 s.
const STEPS_PER_THOUGHT: u64 = 5;

/// One of the 22.
#[derive(Clone, Debug)]
pub struct Actor<'a> {
    pub athlete: &'a Athlete,
    pub home: bool,
    pub body: Body,
    pub job: Job,
    /// When he goes after the carrier, if the other side has the ball; infinite for never.
    pub breaks_s: f64,
    /// A blocker's grip on his man ends here.
    pub engaged_until_s: Option<f64>,
    /// Held by a blocker until then.
    pub held_until_s: f64,
    /// Cannot be held again before.
    pub free_until_s: f64,
    /// Stumbles after a lost contact until then.
    pub stumbles_until_s: f64,
    /// Gap at which he tries next, yards.
    pub grasp_yd: f64,
}

impl<'a> Actor<'a> {
    pub fn new(athlete: &'a Athlete, home: bool, pos_yd: V2) -> Actor<'a> {
        Actor {
            athlete,
            home,
            body: Body::standing(pos_yd, athlete.top_speed_yps),
            job: Job::Stand,
            breaks_s: f64::INFINITY,
            engaged_until_s: None,
            held_until_s: 0.0,
            free_until_s: 0.0,
            stumbles_until_s: 0.0,
            grasp_yd: GRASP_YD,
        }
    }
}

/// Everything that moves, and the clock.
pub struct Stage<'a> {
    pub field: Field,
    pub actors: Vec<Actor<'a>>,
    pub ball: Ball,
    pub draws: Stream,
    /// The actor who runs with the ball, while somebody does.
    pub carrier: Option<usize>,
    pub forecast: Forecast,
    /// (seconds, what happened), in order of time.
    pub events: Vec<(f64, DemoEvent)>,
    pub recorder: Recorder,
    turned: bool,
    steps: u64,
    law: Law,
}

impl<'a> Stage<'a> {
    /// A stage before its first step. `turned`: the side that starts attacks −x in the file.
    pub fn new(actors: Vec<Actor<'a>>, ball_yd: V2, turned: bool, rate_hz: f64, draws: Stream) -> Stage<'a> {
        let field = Field::AMERICAN;
        Stage {
            field,
            recorder: Recorder::new(actors.len(), rate_hz, field),
            actors,
            ball: Ball::resting(ball_yd),
            draws,
            carrier: None,
            forecast: expectation(field, GRASP_YD),
            events: Vec::new(),
            turned,
            steps: 0,
            law: Law::new(STEP_S),
        }
    }

    pub fn now_s(&self) -> f64 {
        self.steps as f64 * STEP_S
    }

    pub fn is_turned(&self) -> bool {
        self.turned
    }

    pub fn pos(&self, actor: usize) -> V2 {
        self.actors[actor].body.pos_yd
    }

    pub fn mark(&mut self, event: DemoEvent) {
        self.events.push((self.now_s(), event));
    }

    /// Gives the same job to several actors.
    pub fn assign(&mut self, actors: impl IntoIterator<Item = usize>, job: Job) {
        for k in actors {
            self.actors[k].job = job;
            self.actors[k].engaged_until_s = None;
        }
    }

    pub fn ball_yd(&self) -> V2 {
        self.ball.place(self.now_s(), |k| self.actors[k].body.pos_yd)
    }

    /// Sends the ball on its way, to be there `flight_s` from now.
    pub fn send_ball(&mut self, to: Landing, flight_s: f64) {
        let start_s = self.now_s();
        self.ball.state = BallState::Flight { from_yd: self.ball_yd(), to, start_s, end_s: start_s + flight_s };
        self.ball.grip_yd = V2::polar(self.draws.between(-1.2, 1.2)) * self.draws.between(0.15, 0.4);
    }

    /// Steps on for `seconds`.
    pub fn run_for(&mut self, seconds: f64) {
        for _ in 0..(seconds / STEP_S).round() as u64 {
            self.step();
        }
    }

    /// Steps on until `done`, `longest_s` at most.
    pub fn run_until(&mut self, longest_s: f64, done: impl Fn(&Stage) -> bool) {
        let last = self.steps + (longest_s / STEP_S) as u64;
        while self.steps < last && !done(self) {
            self.step();
        }
    }

    /// The other side has the ball now: a half turn of everything.
    pub fn turn(&mut self) {
        let corner_yd = V2::new(self.field.length_yd, self.field.width_yd);
        for actor in &mut self.actors {
            actor.body = actor.body.turned(corner_yd);
        }
        self.ball = self.ball.turned(corner_yd);
        self.turned = !self.turned;
    }

    /// One step: think when it is time to, let the legs follow, sample, move.
    pub fn step(&mut self) {
        if self.steps.is_multiple_of(STEPS_PER_THOUGHT) {
            self.think();
        }
        for actor in &mut self.actors {
            actor.body.follow(&self.law);
        }
        let now_s = self.now_s();
        self.recorder.sample(now_s, &self.actors, &self.ball, self.turned);
        for actor in &mut self.actors {
            actor.body.advance(&self.law);
        }
        self.steps += 1;
        if let BallState::Flight { to, end_s, .. } = self.ball.state
            && self.now_s() >= end_s - 1e-9
        {
            self.ball.state = match to {
                Landing::Hands(actor) => BallState::Held(actor),
                Landing::Spot(spot_yd) => BallState::Rest(spot_yd),
            };
        }
    }
}
