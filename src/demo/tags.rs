//! What the tags see of exact tracks: noise on every coordinate, two decimals.

use crate::base::angle::nautical_deg;
use crate::base::{Stream, V2};

/// Noise of a tag's own speed relative to that of its coordinates, yd/s per yd. Own choice.
const SPEED_NOISE_PER_S: f64 = 1.0;
/// Below this speed the tag keeps its last heading, yd/s.
const HEADING_SPEED_YPS: f64 = 0.3;

/// One mover's track from the play's first frame on: as seen and as it was.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct DemoTrack {
    /// With noise, rounded to 0.01 yd.
    pub seen_yd: Vec<V2>,
    /// With noise, rounded to 0.01 yd/s.
    pub seen_speed_yps: Vec<f64>,
    /// Degrees clockwise from +y, rounded to 0.01.
    pub seen_heading_deg: Vec<f64>,
    pub pos_yd: Vec<V2>,
    pub vel_yps: Vec<V2>,
}

/// The track that tags with this noise make of exact (place, velocity) states.
pub fn seen(exact: impl ExactSizeIterator<Item = (V2, V2)>, noise_yd: f64, noise: &mut Stream) -> DemoTrack {
    let n = exact.len();
    let mut track = DemoTrack {
        seen_yd: Vec::with_capacity(n),
        seen_speed_yps: Vec::with_capacity(n),
        seen_heading_deg: Vec::with_capacity(n),
        pos_yd: Vec::with_capacity(n),
        vel_yps: Vec::with_capacity(n),
    };
    let mut heading_deg = f64::NAN;
    for (pos, vel) in exact {
        let (mut place, mut speed_yps) = (pos, vel.norm());
        if speed_yps > HEADING_SPEED_YPS || heading_deg.is_nan() {
            heading_deg = rounded(nautical_deg(vel.angle_rad())) % 360.0;
        }
        if noise_yd > 0.0 {
            let (a, b) = pair(noise);
            place += V2::new(a, b) * noise_yd;
            speed_yps = (speed_yps + noise.normal() * noise_yd * SPEED_NOISE_PER_S).max(0.0);
        }
        track.seen_yd.push(V2::new(rounded(place.x), rounded(place.y)));
        track.seen_speed_yps.push(rounded(speed_yps));
        track.seen_heading_deg.push(heading_deg);
        track.pos_yd.push(pos);
        track.vel_yps.push(vel);
    }
    track
}

/// Two independent standard normals (Box & Muller 1958, both halves).
#[inline]
fn pair(noise: &mut Stream) -> (f64, f64) {
    let radius = (-2.0 * (1.0 - noise.uniform()).ln()).sqrt();
    let way = V2::polar(std::f64::consts::TAU * noise.uniform());
    (radius * way.x, radius * way.y)
}

/// To two decimals.
#[inline]
pub fn rounded(value: f64) -> f64 {
    (value * 100.0).round() / 100.0
}
