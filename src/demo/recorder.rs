//! Samples of the stage at the file's rate, exact, turned back to the file's axes.

use super::ball::Ball;
use super::stage::Actor;
use crate::base::V2;
use crate::model::Field;

/// Exact places and velocities, one block of actors a sample.
#[derive(Clone, Debug)]
pub struct Recorder {
    pub rate_hz: f64,
    pub actors: usize,
    /// (place, velocity), actor within sample.
    pub states: Vec<(V2, V2)>,
    pub ball_yd: Vec<V2>,
    corner_yd: V2,
}

impl Recorder {
    pub fn new(actors: usize, rate_hz: f64, field: Field) -> Recorder {
        Recorder {
            rate_hz,
            actors,
            states: Vec::with_capacity(actors * 128),
            ball_yd: Vec::with_capacity(128),
            corner_yd: V2::new(field.length_yd, field.width_yd),
        }
    }

    pub fn frames(&self) -> usize {
        self.ball_yd.len()
    }

    /// The first frame at or after `time_s`.
    pub fn frame_at(&self, time_s: f64) -> usize {
        (time_s * self.rate_hz - 1e-6).ceil().max(0.0) as usize
    }

    /// Takes every sample that falls into the step that starts at `now_s`.
    #[inline]
    pub fn sample(&mut self, now_s: f64, actors: &[Actor<'_>], ball: &Ball, turned: bool) {
        loop {
            let time_s = self.frames() as f64 / self.rate_hz;
            let ahead_s = time_s - now_s;
            if ahead_s >= super::body::STEP_S - 1e-9 {
                return;
            }
            let first = self.states.len();
            for actor in actors {
                let state = if ahead_s.abs() < 1e-9 { (actor.body.pos_yd, actor.body.vel_yps) } else { actor.body.after(ahead_s) };
                self.states.push(state);
            }
            let ball_yd = ball.place(time_s, |k| self.states[first + k].0);
            self.ball_yd.push(if turned { self.corner_yd - ball_yd } else { ball_yd });
            if turned {
                for state in &mut self.states[first..] {
                    *state = (self.corner_yd - state.0, -state.1);
                }
            }
        }
    }
}
