//! Capability: top speeds read off a game's smoothed speeds, pooled towards the position group.

use super::path::TopSpeed;
use crate::model::Group;
use crate::model::settings::MotionSettings;
use std::collections::BTreeMap;
use std::sync::Arc;

/// Typical top speed of a position group, yd/s, measured on open league data (professional, 10 Hz).
fn typical_yps(group: Group) -> Option<f64> {
    Some(match group {
        Group::Cornerback => 9.8,
        Group::Safety => 9.5,
        Group::Linebacker => 8.7,
        Group::End => 7.7,
        Group::Tackle => 6.8,
        Group::Receiver => 9.6,
        Group::Back => 9.3,
        Group::TightEnd => 8.6,
        Group::Quarterback => 7.7,
        Group::OffensiveLine => 6.6,
        Group::Kicker => return None,
    })
}

/// For a position that the file does not give: the mean of a defence's groups.
const UNKNOWN_TOP_YPS: f64 = 8.8;

/// The position group's typical top speed, yd/s.
pub fn group_top_yps(position: Option<&str>) -> f64 {
    position.and_then(Group::of).and_then(typical_yps).unwrap_or(UNKNOWN_TOP_YPS)
}

const BIN_YPS: f64 = 0.02;
const BINS: usize = 800;

/// How long a player was seen at which speed: (bin, whole milliseconds) as they come, so that a play's log is small and
/// the order of adding cannot change a sum.
#[derive(Clone, Debug)]
struct SpeedLog {
    seen: Vec<(u16, u16)>,
    position: Option<Arc<str>>,
}

impl SpeedLog {
    fn new(position: Option<Arc<str>>) -> SpeedLog {
        SpeedLog { seen: Vec::new(), position }
    }

    fn add(&mut self, speed_yps: f64, dt_s: f64) {
        let bin = ((speed_yps / BIN_YPS) as usize).min(BINS - 1);
        self.seen.push((bin as u16, (dt_s * 1000.0).round() as u16));
    }

    /// Quantile of the speeds above a fast walk, and the seconds spent above `fast_yps`.
    fn read(&self, share: f64, fast_yps: f64) -> Option<(f64, f64)> {
        const WALK_YPS: f64 = 2.0;
        let mut milliseconds = [0_u64; BINS];
        for (bin, ms) in &self.seen {
            milliseconds[usize::from(*bin)] += u64::from(*ms);
        }
        let moving = &milliseconds[(WALK_YPS / BIN_YPS) as usize..];
        let total: u64 = moving.iter().sum();
        if total == 0 {
            return None;
        }
        let wanted = share * total as f64;
        let mut seen = 0.0;
        let mut top_yps = WALK_YPS;
        for (i, n) in moving.iter().enumerate() {
            let n = *n as f64;
            if n > 0.0 && seen + n >= wanted {
                top_yps = WALK_YPS + (i as f64 + ((wanted - seen) / n).clamp(0.0, 1.0)) * BIN_YPS;
                break;
            }
            seen += n;
        }
        let fast: u64 = milliseconds[((fast_yps / BIN_YPS) as usize).min(BINS)..].iter().sum();
        Some((top_yps, fast as f64 / 1000.0))
    }
}

/// The speeds of a game's players, by id.
#[derive(Clone, Debug, Default)]
pub struct SpeedBook {
    logs: BTreeMap<Arc<str>, SpeedLog>,
}

impl SpeedBook {
    /// Adds a stretch of frames of one player.
    pub fn add(&mut self, id: &Arc<str>, position: &Option<Arc<str>>, speeds_yps: impl Iterator<Item = f64>, dt_s: f64) {
        let log = self.logs.entry(id.clone()).or_insert_with(|| SpeedLog::new(position.clone()));
        if log.position.is_none() {
            log.position.clone_from(position);
        }
        for speed_yps in speeds_yps {
            log.add(speed_yps, dt_s);
        }
    }

    pub fn merge(&mut self, other: SpeedBook) {
        for (id, log) in other.logs {
            match self.logs.get_mut(&id) {
                None => {
                    self.logs.insert(id, log);
                }
                Some(mine) => {
                    mine.seen.extend_from_slice(&log.seen);
                    // Of two positions the first in order of text, so that the order of work cannot matter.
                    mine.position = match (mine.position.take(), log.position) {
                        (Some(a), Some(b)) => Some(a.min(b)),
                        (a, b) => a.or(b),
                    };
                }
            }
        }
    }

    /// Top speed of each player.
    ///
    /// V̂ = max(seen, (s·seen + w·group)/(s + w)), s = seconds spent above 0.7 of the group's top speed, w the prior's
    /// weight in seconds: what a player was seen to run he can run; below the group's figure he is believed slow only
    /// as far as he ran hard for long enough to show it.
    pub fn top_speeds(&self, settings: &MotionSettings) -> BTreeMap<Arc<str>, TopSpeed> {
        self.logs
            .iter()
            .map(|(id, log)| {
                let group_yps = group_top_yps(log.position.as_deref());
                let yps = match log.read(settings.top_speed_quantile, 0.7 * group_yps) {
                    None => group_yps,
                    Some((seen_yps, fast_s)) => {
                        let weight_s = settings.top_speed_prior_s;
                        let pooled_yps = (fast_s * seen_yps + weight_s * group_yps) / (fast_s + weight_s);
                        seen_yps.max(pooled_yps)
                    }
                };
                let yps = yps * settings.top_speed_scale;
                (id.clone(), TopSpeed { yps, sigma_yps: yps * settings.top_speed_sigma_share })
            })
            .collect()
    }
}
