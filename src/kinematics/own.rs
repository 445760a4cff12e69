//! The file's own speed and heading against the derived ones. The derived ones are used; the disagreement is reported.

use crate::base::wrap_rad;
use crate::model::{FindingKind, Findings, RawTrack, Track};

const SPEED_BIN_YPS: f64 = 0.01;
const SPEED_BINS: usize = 2000;
const HEADING_BIN_DEG: f64 = 0.1;
const HEADING_BINS: usize = 1800;
/// Below this speed a heading means nothing, yd/s.
const SLOWEST_YPS: f64 = 2.0;
/// Median differences beyond which a file's own values count as disagreeing. Own choice: a file's own speed lags by a frame or two,
/// a file's own heading turns some degrees late.
const SPEED_LIMIT_YPS: f64 = 0.5;
const HEADING_LIMIT_DEG: f64 = 20.0;
/// Rows needed for a verdict.
const FEWEST_ROWS: u64 = 30;

/// Absolute differences counted in fine bins, so that a file of any length needs the same memory, and parts can be added in any
/// order.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct OwnCheck {
    speed: Vec<u64>,
    heading: Vec<u64>,
}

impl OwnCheck {
    /// Takes in the rows of `raw` that `track` covers. Values that are not numbers are passed over.
    pub fn add(&mut self, raw: &RawTrack, track: &Track) {
        for (i, frame) in raw.frame_index.iter().enumerate() {
            let frame = *frame as usize;
            if !track.covers(frame) || frame - track.first >= track.vel_yps.len() {
                continue;
            }
            let v = track.vel(frame);
            if let Some(own) = raw.speed_yps.get(i).filter(|s| s.is_finite()) {
                count(&mut self.speed, SPEED_BINS, (own - v.norm()).abs() / SPEED_BIN_YPS);
            }
            if let Some(own) = raw.heading_rad.get(i).filter(|h| h.is_finite() && v.norm() >= SLOWEST_YPS) {
                count(&mut self.heading, HEADING_BINS, wrap_rad(own - v.angle_rad()).abs().to_degrees() / HEADING_BIN_DEG);
            }
        }
    }

    pub fn merge(&mut self, other: &OwnCheck) {
        for (mine, theirs) in [(&mut self.speed, &other.speed), (&mut self.heading, &other.heading)] {
            if mine.len() < theirs.len() {
                mine.resize(theirs.len(), 0);
            }
            for (a, b) in mine.iter_mut().zip(theirs) {
                *a += b;
            }
        }
    }

    /// Median absolute difference of speeds, yd/s, to the width of a bin (0.01); none without rows.
    pub fn speed_median_yps(&self) -> Option<f64> {
        median_bin(&self.speed).map(|b| (b as f64 + 0.5) * SPEED_BIN_YPS)
    }

    /// Median absolute difference of headings among frames at 2 yd/s or more, degrees, to the width of a bin (0.1); none without
    /// rows.
    pub fn heading_median_deg(&self) -> Option<f64> {
        median_bin(&self.heading).map(|b| (b as f64 + 0.5) * HEADING_BIN_DEG)
    }

    /// Adds a finding where a median lies beyond its limit, counting the rows beyond it.
    pub fn judge(&self, findings: &mut Findings, place: &dyn Fn() -> String) {
        let speed = (FindingKind::SpeedDisagrees, &self.speed, SPEED_LIMIT_YPS / SPEED_BIN_YPS);
        let heading = (FindingKind::HeadingDisagrees, &self.heading, HEADING_LIMIT_DEG / HEADING_BIN_DEG);
        for (kind, bins, limit) in [speed, heading] {
            let limit = limit.round() as usize;
            if bins.iter().sum::<u64>() >= FEWEST_ROWS && median_bin(bins).is_some_and(|b| b >= limit) {
                findings.add(kind, bins.iter().skip(limit).sum(), place);
            }
        }
    }
}

fn count(bins: &mut Vec<u64>, most: usize, at: f64) {
    let bin = (at as usize).min(most - 1);
    if bins.len() <= bin {
        bins.resize(bin + 1, 0);
    }
    bins[bin] += 1;
}

/// Bin that holds the middle row (the lower one of two).
fn median_bin(bins: &[u64]) -> Option<usize> {
    let half = bins.iter().sum::<u64>().div_ceil(2);
    let mut below = 0;
    (half > 0).then(|| {
        bins.iter().position(|b| {
            below += b;
            below >= half
        })
    })?
}
