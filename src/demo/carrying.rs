//! A carry on the stage: the carrier runs his plan, defenders break on him, contacts are won or lost.

use super::ball::{BallState, Landing};
use super::event::DemoEvent;
use super::job::Job;
use super::league::Character;
use super::plan::Plan;
use super::stage::{GRASP_YD, Stage};
use crate::base::V2;

/// Chance that a contact ends in a stop: free to tackle, held by a blocker, not yet on his way.
const STOP_CHANCE: (f64, f64, f64) = (0.75, 0.3, 0.4);
/// No carry lasts longer, seconds.
const LONGEST_S: f64 = 25.0;

/// How an invented carry ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum CarryStop {
    Down,
    Out,
    Score,
    Fumble,
    Lateral,
}

impl CarryStop {
    /// The word used in the truth table.
    pub fn word(self) -> &'static str {
        match self {
            CarryStop::Down => "down",
            CarryStop::Out => "out_of_bounds",
            CarryStop::Score => "touchdown",
            CarryStop::Fumble => "fumble",
            CarryStop::Lateral => "lateral",
        }
    }
}

/// What a carrier means to do, and what fate has for him.
#[derive(Clone, Debug)]
pub struct Intent {
    pub plan: Plan,
    /// He loses the ball in the contact that would have stopped him.
    pub fumbles: bool,
    /// Team-mate to whom he tosses the ball once he is near enough, and how long he runs before.
    pub lateral: Option<(usize, f64)>,
}

/// A carry as it happened, in the stage's axes: the carrier attacks +x.
#[derive(Clone, Copy, Debug)]
pub struct StageCarry {
    pub actor: usize,
    pub start_s: f64,
    pub end_s: f64,
    pub stop: CarryStop,
    pub start_yd: V2,
    pub end_yd: V2,
    /// Whether +x of the stage was −x of the file.
    pub turned: bool,
}

impl Stage<'_> {
    /// Runs a carry by `carrier`, from now to its end; the ball comes with him.
    pub fn carry(&mut self, carrier: usize, intent: &Intent) -> StageCarry {
        let start_s = self.now_s();
        let start_yd = self.pos(carrier);
        self.ball.state = BallState::Held(carrier);
        self.carrier = Some(carrier);
        self.actors[carrier].job = Job::Lead;
        self.actors[carrier].engaged_until_s = None;
        self.alarm(carrier);
        let stop = self.run_with_ball(carrier, intent, start_s);
        self.carrier = None;
        let carry = StageCarry {
            actor: carrier,
            start_s,
            end_s: self.now_s(),
            stop,
            start_yd,
            end_yd: self.pos(carrier),
            turned: self.is_turned(),
        };
        self.actors[carrier].job = Job::Halt;
        carry
    }

    /// The other side sees him: everyone breaks after his reaction time, the late ones later.
    fn alarm(&mut self, carrier: usize) {
        let (now_s, home) = (self.now_s(), self.actors[carrier].home);
        for k in 0..self.actors.len() {
            let reaction_s = self.draws.between(0.2, 0.3);
            let dawdle_s = self.draws.between(0.7, 1.6);
            let grasp_yd = GRASP_YD * self.draws.between(0.8, 1.2);
            let actor = &mut self.actors[k];
            if actor.home == home {
                actor.breaks_s = f64::INFINITY;
                continue;
            }
            actor.grasp_yd = grasp_yd;
            actor.breaks_s = now_s + reaction_s;
            if actor.athlete.character == Character::Late {
                actor.breaks_s += dawdle_s;
                actor.job = Job::Stand;
            }
        }
    }

    fn run_with_ball(&mut self, carrier: usize, intent: &Intent, start_s: f64) -> CarryStop {
        let mut touched = false;
        // (when he is down, how hard he is braked)
        let mut falling: Option<(f64, f64)> = None;
        let mut shaken_until_s = 0.0;
        loop {
            let now_s = self.now_s();
            let since_s = now_s - start_s;
            let body = self.actors[carrier].body;
            if body.pos_yd.x >= self.field.goal_x_yd() {
                self.mark(DemoEvent::Touchdown);
                return CarryStop::Score;
            }
            if body.pos_yd.y < 0.0 || body.pos_yd.y > self.field.width_yd {
                self.mark(DemoEvent::OutOfBounds);
                return CarryStop::Out;
            }
            if let Some((down_s, force)) = falling {
                if now_s >= down_s && (intent.fumbles || body.vel_yps.norm() < 1.2) || since_s > LONGEST_S {
                    self.mark(if intent.fumbles { DemoEvent::Fumble } else { DemoEvent::Tackle });
                    return if intent.fumbles { CarryStop::Fumble } else { CarryStop::Down };
                }
                self.actors[carrier].body.jolt(body.brake(force));
            } else {
                let share = if now_s < shaken_until_s { 0.4 } else { 1.0 };
                self.actors[carrier].body.want(intent.plan.will(since_s, &body, &self.field) * share);
                if self.toss(carrier, intent, since_s) {
                    return CarryStop::Lateral;
                }
                match self.contact(carrier) {
                    Some(stopped) => {
                        if !touched {
                            self.mark(DemoEvent::FirstContact);
                            touched = true;
                        }
                        if stopped {
                            let hold_s = if intent.fumbles { 0.1 } else { self.draws.between(0.3, 0.7) };
                            falling = Some((now_s + hold_s, 0.5 + 0.2 / hold_s.max(0.4)));
                        } else {
                            shaken_until_s = now_s + 0.35;
                        }
                    }
                    None if since_s > LONGEST_S => falling = Some((now_s, 1.0)),
                    None => {}
                }
            }
            self.step();
        }
    }

    /// Whether somebody gets to the carrier in this step, and if so whether he stops him.
    fn contact(&mut self, carrier: usize) -> Option<bool> {
        let now_s = self.now_s();
        let (spot_yd, home) = (self.pos(carrier), self.actors[carrier].home);
        for k in 0..self.actors.len() {
            let actor = &self.actors[k];
            let gap = actor.body.pos_yd - spot_yd;
            if actor.home == home || gap.norm2() > actor.grasp_yd * actor.grasp_yd || now_s < actor.stumbles_until_s + 0.5 {
                continue;
            }
            let held = now_s < actor.held_until_s;
            let chance = match (held, now_s >= actor.breaks_s) {
                (true, _) => STOP_CHANCE.1,
                (false, true) => STOP_CHANCE.0,
                (false, false) => STOP_CHANCE.2,
            };
            if self.draws.chance(chance) {
                return Some(true);
            }
            let stumble_s = self.draws.between(0.5, 1.0);
            let actor = &mut self.actors[k];
            actor.stumbles_until_s = now_s + stumble_s;
            actor.body.jolt(actor.body.brake(0.6));
            return Some(false);
        }
        None
    }

    /// Tosses the ball back to the team-mate once he is placed for it.
    fn toss(&mut self, carrier: usize, intent: &Intent, since_s: f64) -> bool {
        let Some((mate, after_s)) = intent.lateral else { return false };
        let gap = self.pos(mate) - self.pos(carrier);
        if since_s < after_s || gap.x > -0.5 || gap.norm() > 13.0 {
            return false;
        }
        self.mark(DemoEvent::Lateral);
        self.send_ball(Landing::Hands(mate), (gap.norm() / 16.0).max(0.24));
        true
    }
}
