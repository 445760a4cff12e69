//! Cheap velocities: the slope of a least-squares line over ±0.2 s. Good enough to find carries, not to judge a pursuit.

use super::clean::Cleaned;
use crate::base::V2;
use crate::model::{MoverTrack, Track};

const HALF_WINDOW_S: f64 = 0.2;
/// Slack when a frame's distance in time is compared with the window.
const ROUNDING_S: f64 = 1e-9;

/// Positions as cleaned (straight lines across bridged holes) and velocities; accelerations and covariances stay empty.
///
/// The window always reaches at least one frame to either side where there is one, so that a velocity exists at any rate.
/// At the ends of a segment it is cut off.
pub fn coarse_track(cleaned: &Cleaned, time_s: &[f64]) -> MoverTrack {
    let pieces = cleaned.segments.iter().map(|segment| {
        let n = segment.pos_yd.len().min(time_s.len().saturating_sub(segment.first));
        let times = &time_s[segment.first.min(time_s.len())..][..n];
        let pos_yd = segment.pos_yd[..n].to_vec();
        let mut vel_yps = Vec::with_capacity(n);
        let (mut low, mut high) = (0, 0);
        for k in 0..n {
            while times[k] - times[low] > HALF_WINDOW_S + ROUNDING_S && low + 1 < k {
                low += 1;
            }
            while high + 1 < n && (times[high + 1] - times[k] <= HALF_WINDOW_S + ROUNDING_S || high < k + 1) {
                high += 1;
            }
            vel_yps.push(slope(&times[low..=high], &pos_yd[low..=high]));
        }
        Track { first: segment.first, pos_yd, vel_yps, acc_ypss: Vec::new(), cov: Vec::new() }
    });
    MoverTrack { pieces: pieces.collect() }
}

/// Slope of the least-squares line; zero for a single point.
fn slope(times: &[f64], pos_yd: &[V2]) -> V2 {
    let n = times.len() as f64;
    let (t0, p0) = (times[0], pos_yd[0]);
    let (mut st, mut stt, mut sp, mut stp) = (0.0, 0.0, V2::ZERO, V2::ZERO);
    for (t, p) in times.iter().zip(pos_yd) {
        let (t, p) = (t - t0, *p - p0);
        st += t;
        stt += t * t;
        sp += p;
        stp += p * t;
    }
    let spread = stt - st * st / n;
    if spread > 0.0 { (stp - sp * (st / n)) / spread } else { V2::ZERO }
}
