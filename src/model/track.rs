//! Clean tracks: one value a frame, with covariance.

use crate::base::V2;

/// Noise of a file: what the smoother needs.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Noise {
    /// Spectral density q of the white-noise jerk, yd²/s⁵.
    pub jerk_density: f64,
    /// Standard deviation of a coordinate, yd (√r).
    pub sigma_yd: f64,
}

/// Covariance of (position, velocity, acceleration) in one axis; both axes share it.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Cov {
    pub pp: f64,
    pub pv: f64,
    pub pa: f64,
    pub vv: f64,
    pub va: f64,
    pub aa: f64,
}

/// A clean piece of one mover's way, one entry for each frame index from `first` on, without holes
/// (short gaps are bridged by the smoother). Yards, yd/s, yd/s².
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Track {
    pub first: usize,
    pub pos_yd: Vec<V2>,
    pub vel_yps: Vec<V2>,
    pub acc_ypss: Vec<V2>,
    pub cov: Vec<Cov>,
}

impl Track {
    pub fn len(&self) -> usize {
        self.pos_yd.len()
    }
    pub fn is_empty(&self) -> bool {
        self.pos_yd.is_empty()
    }
    /// One past the last frame index.
    pub fn end(&self) -> usize {
        self.first + self.len()
    }
    pub fn covers(&self, frame_index: usize) -> bool {
        frame_index >= self.first && frame_index < self.end()
    }
    pub fn pos(&self, frame_index: usize) -> V2 {
        self.pos_yd[frame_index - self.first]
    }
    pub fn vel(&self, frame_index: usize) -> V2 {
        self.vel_yps[frame_index - self.first]
    }
}

/// All pieces of one mover's way in a play, in order of time; more than one where a gap was too long to bridge.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct MoverTrack {
    pub pieces: Vec<Track>,
}

impl MoverTrack {
    pub fn at(&self, frame_index: usize) -> Option<&Track> {
        self.pieces.iter().find(|p| p.covers(frame_index))
    }
    pub fn pos(&self, frame_index: usize) -> Option<V2> {
        self.at(frame_index).map(|p| p.pos(frame_index))
    }
    pub fn vel(&self, frame_index: usize) -> Option<V2> {
        self.at(frame_index).map(|p| p.vel(frame_index))
    }
}
