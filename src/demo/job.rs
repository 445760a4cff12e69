//! What the actors are about: thoughts, ten a second, that turn jobs into wills.

use super::chase::Quarry;
use super::stage::Stage;
use crate::base::V2;

/// What an actor does while he does not go after the carrier.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Job {
    /// Sways on the spot.
    Stand,
    /// Comes to a stand.
    Halt,
    /// Runs to a spot and stays.
    Seek { spot_yd: V2, pace: f64 },
    /// Stays at an offset from another actor.
    Cover { man: usize, offset_yd: V2, pace: f64 },
    /// Goes for the ball.
    Rush { pace: f64 },
    /// Gets between a man and the ball and holds him for a time drawn from this range, seconds.
    Block { man: usize, hold_s: (f64, f64) },
    /// Jogs after the ball.
    Trail,
    /// Steered from elsewhere (the carrier).
    Lead,
}

/// How near a blocker must come to take hold, and how far he may be dragged off, yards.
const ENGAGE_YD: f64 = 1.25;
const HOLD_YD: f64 = 1.7;

impl Stage<'_> {
    /// Sets every actor's will but the carrier's.
    pub fn think(&mut self) {
        let quarry = self.carrier.map(|c| Quarry::seen(&self.actors[c].body, &self.forecast));
        let ball_yd = self.ball_yd();
        for k in 0..self.actors.len() {
            if self.actors[k].job != Job::Lead {
                let will = self.will_of(k, quarry.as_ref(), ball_yd);
                self.actors[k].body.want(will);
            }
        }
    }

    fn will_of(&mut self, k: usize, quarry: Option<&Quarry>, ball_yd: V2) -> V2 {
        let now_s = self.now_s();
        let actor = &self.actors[k];
        if now_s < actor.stumbles_until_s {
            return actor.body.brake(0.3);
        }
        let pursues = self.carrier.is_some_and(|c| self.actors[c].home != actor.home) && now_s >= actor.breaks_s;
        let will = match quarry {
            Some(quarry) if pursues => {
                let athlete = actor.athlete;
                // At arm's length everybody goes at the man.
                let near = (ball_yd - actor.body.pos_yd).norm() < 1.6;
                let way = if near { quarry.bearing(&actor.body) } else { quarry.direction(&actor.body, athlete.character) };
                way * athlete.push
            }
            _ => self.job_will(k, ball_yd),
        };
        let actor = &self.actors[k];
        // A held man drives against a blocker who takes most of it out of him.
        if now_s < actor.held_until_s { will * 0.12 - actor.body.vel_yps * (0.8 / actor.body.top_speed_yps) } else { will }
    }

    fn job_will(&mut self, k: usize, ball_yd: V2) -> V2 {
        let body = self.actors[k].body;
        match self.actors[k].job {
            Job::Stand => body.brake(0.5) + V2::polar(self.draws.between(0.0, std::f64::consts::TAU)) * 0.03,
            Job::Halt => body.brake(0.55),
            Job::Lead => body.will,
            Job::Seek { spot_yd, pace } => body.seek(spot_yd, V2::ZERO, pace),
            Job::Cover { man, offset_yd, pace } => {
                let other = &self.actors[man].body;
                body.seek(other.pos_yd + offset_yd, other.vel_yps, pace)
            }
            Job::Rush { pace } => (ball_yd - body.pos_yd).unit().map_or(V2::ZERO, |way| way * pace),
            Job::Trail => {
                let gap = ball_yd - body.pos_yd;
                if gap.norm() < 6.0 { body.brake(0.4) } else { body.seek(ball_yd, V2::ZERO, 0.45) }
            }
            Job::Block { man, hold_s } => self.block(k, man, hold_s, ball_yd),
        }
    }

    fn block(&mut self, k: usize, man: usize, hold_s: (f64, f64), ball_yd: V2) -> V2 {
        let now_s = self.now_s();
        let body = self.actors[k].body;
        let foe = self.actors[man].body;
        let gap_yd = (foe.pos_yd - body.pos_yd).norm();
        match self.actors[k].engaged_until_s {
            Some(until_s) if now_s >= until_s || gap_yd > HOLD_YD => {
                self.actors[k].job = Job::Trail;
                self.actors[k].engaged_until_s = None;
                self.actors[man].free_until_s = now_s + 1.0;
            }
            Some(_) => self.actors[man].held_until_s = now_s + 0.11,
            None if gap_yd < ENGAGE_YD && now_s >= self.actors[man].free_until_s => {
                self.actors[k].engaged_until_s = Some(now_s + self.draws.between(hold_s.0, hold_s.1));
                self.actors[man].held_until_s = now_s + 0.11;
            }
            None => {}
        }
        // He stands a little on the ball's side of his man; until he has him, he cuts him off further ahead.
        let lead_yd = if gap_yd < 2.0 { 0.85 } else { (0.35 * gap_yd).clamp(0.85, 5.0) };
        let between = (ball_yd - foe.pos_yd).unit().unwrap_or(V2::EAST);
        body.seek(foe.pos_yd + between * lead_yd, foe.vel_yps, 1.0)
    }
}
