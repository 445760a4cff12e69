//! What all accounts of one carry share: the path really run, what could be foreseen of it, the clock.

use super::clock::clock_frame;
use super::foresight::{Forecast, Foresight};
use super::grid::Grid;
use super::path::Path;
use super::reach::{Drag, State};
use crate::base::V2;
use crate::model::{Field, Settings};

/// A carry seen by its pursuers. Frames are counted from the carry's start; the carrier attacks +x.
#[derive(Debug)]
pub struct Chase {
    pub carrier: Vec<State>,
    pub grid: Grid,
    pub field: Field,
    pub foresight: Foresight,
    /// First frame of the account; none when the carrier never got going.
    pub clock: Option<usize>,
    x_yd: Vec<f64>,
    y_yd: Vec<f64>,
}

impl Chase {
    /// `t_s` and `carrier` have one entry a frame from the carry's start to its end, both not empty.
    pub fn new(t_s: &[f64], carrier: Vec<State>, carrier_top_yps: f64, settings: &Settings) -> Chase {
        let field = settings.field();
        let goal_x_yd = if field.end_zone_yd > 0.0 { field.goal_x_yd() } else { f64::INFINITY };
        // Spots beyond the goal line count as on it.
        let x_yd = carrier.iter().map(|s| s.pos_yd.x.min(goal_x_yd)).collect();
        let y_yd = carrier.iter().map(|s| s.pos_yd.y).collect();
        let vel_yps: Vec<V2> = carrier.iter().map(|s| s.vel_yps).collect();
        Chase {
            grid: Grid::new(t_s.to_vec(), Drag::of(settings)),
            field,
            foresight: Foresight::new(carrier.iter().copied(), carrier_top_yps, &Forecast::of(settings)),
            clock: clock_frame(t_s, &vel_yps, &settings.clock),
            carrier,
            x_yd,
            y_yd,
        }
    }

    pub fn len(&self) -> usize {
        self.carrier.len()
    }

    pub fn is_empty(&self) -> bool {
        self.carrier.is_empty()
    }

    /// The path really run, to where the carry ended.
    pub fn hindsight(&self) -> Path<'_> {
        Path { grid: &self.grid, x_yd: &self.x_yd, y_yd: &self.y_yd }
    }

    /// Where the carry ended, on the path.
    pub fn end_yd(&self) -> V2 {
        let last = self.len() - 1;
        V2::new(self.x_yd[last], self.y_yd[last])
    }

    /// Spot of the path at a frame: the carrier's place, on the goal line where he is beyond it.
    pub fn spot_yd(&self, frame: usize) -> V2 {
        V2::new(self.x_yd[frame], self.y_yd[frame])
    }
}
