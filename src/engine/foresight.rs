//! The foreseeable path: what could be known of the carrier's way at a frame.
//!
//! The drag model with a push towards unit(present direction + pull · downfield) at a share of his top speed, or at
//! his present speed if that is higher. Near a sideline he turns up along it at the same speed; the path ends at
//! the goal line. Constant velocity is available by a setting, for the textbook cases.

use super::grid::Grid;
use super::path::Path;
use super::reach::{Drag, State};
use crate::base::V2;
use crate::model::{Field, Settings};

/// Step of a predicted path, seconds: one for every file, so that the frame rate cannot change a prediction.
pub const STEP_S: f64 = 0.1;
/// Below this speed the present direction fades into straight downfield, yd/s.
const FADE_YPS: f64 = 3.0;

/// Predicted paths, one for each frame of a carry, over one grid.
#[derive(Debug)]
pub struct Foresight {
    grid: Grid,
    x_yd: Vec<f64>,
    y_yd: Vec<f64>,
    /// Start of each frame's path in the two vectors, and one more for the end.
    starts: Vec<usize>,
}

/// What a prediction needs beside the carrier's state.
#[derive(Clone, Copy, Debug)]
pub struct Forecast {
    pub field: Field,
    pub drag: Drag,
    pub pull: f64,
    pub pace_share: f64,
    pub sideline_margin_yd: f64,
    pub constant_velocity: bool,
    pub horizon_s: f64,
}

impl Forecast {
    pub fn of(settings: &Settings) -> Forecast {
        let m = &settings.motion;
        Forecast {
            field: settings.field(),
            drag: Drag::of(settings),
            pull: m.foresight_pull,
            pace_share: m.foresight_pace,
            sideline_margin_yd: m.sideline_margin_yd,
            constant_velocity: m.constant_velocity,
            horizon_s: m.foresight_s,
        }
    }
}

impl Foresight {
    /// Predicted paths from each of `states` (the carrier's, turned so that he attacks +x).
    pub fn new(states: impl Iterator<Item = State>, carrier_top_yps: f64, forecast: &Forecast) -> Foresight {
        let steps = (forecast.horizon_s / STEP_S).round().max(1.0) as usize;
        let grid = Grid::new((0..=steps).map(|i| i as f64 * STEP_S).collect(), forecast.drag);
        let mut out = Foresight { grid, x_yd: Vec::new(), y_yd: Vec::new(), starts: vec![0] };
        let coast_s: Vec<f64> = out.grid.t_s.iter().map(|t| forecast.drag.coast_s(*t)).collect();
        for state in states {
            predict(state, carrier_top_yps, forecast, &out.grid.t_s, &coast_s, &mut out.x_yd, &mut out.y_yd);
            out.starts.push(out.x_yd.len());
        }
        out
    }

    /// The path foreseen at the `frame`-th of the states; its point 0 is the present.
    pub fn path(&self, frame: usize) -> Path<'_> {
        let range = self.starts[frame]..self.starts[frame + 1];
        Path { grid: &self.grid, x_yd: &self.x_yd[range.clone()], y_yd: &self.y_yd[range] }
    }
}

fn predict(state: State, top_yps: f64, f: &Forecast, t_s: &[f64], coast_s: &[f64], x_yd: &mut Vec<f64>, y_yd: &mut Vec<f64>) {
    let speed_yps = state.vel_yps.norm();
    let (push_yps, coasting) = if f.constant_velocity {
        (state.vel_yps, false)
    } else {
        let present = state.vel_yps.unit().unwrap_or(V2::EAST);
        let faded = V2::EAST.lerp(present, (speed_yps / FADE_YPS).min(1.0));
        let way = (faded + V2::EAST * f.pull).unit().unwrap_or(V2::EAST);
        (way * (f.pace_share * top_yps).max(speed_yps), true)
    };
    let goal_x_yd = if f.field.end_zone_yd > 0.0 { f.field.goal_x_yd() } else { f64::INFINITY };
    let (low_yd, high_yd) = (f.sideline_margin_yd, f.field.width_yd - f.sideline_margin_yd);
    let on_curve = |i: usize| {
        let (a, t) = (coast_s[i], t_s[i]);
        if coasting { state.pos_yd + state.vel_yps * a + push_yps * (t - a) } else { state.pos_yd + push_yps * t }
    };
    // Once on the sideline: where, when, and the speed he keeps.
    let mut turned: Option<(V2, f64, f64)> = None;
    let mut before = state.pos_yd;
    for i in 0..t_s.len() {
        let mut spot = match turned {
            None => on_curve(i),
            Some((at, since_s, along_yps)) => V2::new(at.x + along_yps * (t_s[i] - since_s), at.y),
        };
        let outwards = (spot.y > high_yd && spot.y > before.y) || (spot.y < low_yd && spot.y < before.y);
        if turned.is_none() && i > 0 && outwards {
            let line_yd = if spot.y > high_yd { high_yd.max(before.y) } else { low_yd.min(before.y) };
            let share = ((line_yd - before.y) / (spot.y - before.y)).clamp(0.0, 1.0);
            let corner = V2::new(before.lerp(spot, share).x, line_yd);
            let step_s = t_s[i] - t_s[i - 1];
            let along_yps = (spot - before).norm() / step_s;
            let since_s = t_s[i - 1] + share * step_s;
            turned = Some((corner, since_s, along_yps));
            spot = V2::new(corner.x + along_yps * (t_s[i] - since_s), line_yd);
        }
        x_yd.push(spot.x.min(goal_x_yd));
        y_yd.push(spot.y);
        if spot.x >= goal_x_yd {
            break;
        }
        before = spot;
    }
}
