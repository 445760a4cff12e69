//! A carrier's path, run or predicted, and the one pass over it that answers everything: the speed needed at
//! every point, the earliest meeting, the chance, the expected meeting spot.

use super::grid::Grid;
use super::reach::State;
use super::root::first_zero;
use crate::base::V2;

/// A defender's capability: top speed and its standard error, yd/s.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TopSpeed {
    pub yps: f64,
    pub sigma_yps: f64,
}

/// A path over a grid: spots in yards, turned so that the carrier attacks +x. It ends where the slices end.
#[derive(Clone, Copy)]
pub struct Path<'a> {
    pub grid: &'a Grid,
    pub x_yd: &'a [f64],
    pub y_yd: &'a [f64],
}

/// Where and when a path can be met.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Meeting {
    /// Seconds from now.
    pub t_s: f64,
    pub spot_yd: V2,
    /// From the coasting centre to the spot: the direction of the best push. Zero when he is already there.
    pub aim_yd: V2,
}

/// Points looked at together, without a branch between them.
const LANES: usize = 4;
impl Path<'_> {
    pub fn len(&self) -> usize {
        self.x_yd.len()
    }

    pub fn is_empty(&self) -> bool {
        self.x_yd.is_empty()
    }

    #[inline(always)]
    pub(super) fn spot(&self, at: usize) -> V2 {
        V2::new(self.x_yd[at], self.y_yd[at])
    }

    #[inline(always)]
    pub(super) fn short_drive(&self, from: usize, at: usize, who: State) -> (f64, f64) {
        let (coast_s, drive_s) = self.grid.coast_drive_s(from, at);
        let gap_yd = (self.spot(at) - (who.pos_yd + who.vel_yps * coast_s)).norm();
        (gap_yd - self.grid.drag.reach_yd, drive_s)
    }

    /// Spot between two points, on the straight line between them.
    #[inline]
    pub(super) fn spot_between(&self, before: usize, share: f64) -> V2 {
        self.spot(before).lerp(self.spot(before + 1), share)
    }

    /// Whether the carrier is within reach at point `now`.
    pub fn in_contact(&self, now: usize, who: State) -> bool {
        (self.spot(now) - who.pos_yd).norm() <= self.grid.drag.reach_yd
    }

    /// Least speed with which the rest of the path can be met, yd/s.
    /// No result when `now` is the path's last point and he is not in contact.
    pub fn need_yps(&self, now: usize, who: State) -> Option<f64> {
        if self.in_contact(now, who) {
            return Some(0.0);
        }
        let mut best = [f64::INFINITY; LANES];
        let mut at = now + 1;
        while at + LANES <= self.len() {
            let (short_yd, drive_s) = self.short_drive_lanes(now, at, who);
            for lane in 0..LANES {
                let needed_yps = short_yd[lane] / drive_s[lane];
                best[lane] = if needed_yps < best[lane] { needed_yps } else { best[lane] };
            }
            at += LANES;
        }
        let rest = (at..self.len()).map(|at| self.needed_at(now, at, who));
        let least = rest.chain(best).fold(f64::INFINITY, f64::min);
        (now + 1 < self.len()).then_some(least.max(0.0))
    }

    /// The point that asks for the least speed. No result when `now` is the last point.
    fn easiest(&self, now: usize, who: State) -> Option<usize> {
        (now + 1..self.len()).min_by(|a, b| self.needed_at(now, *a, who).total_cmp(&self.needed_at(now, *b, who)))
    }

    /// First point at or after `from_point` that `top_yps` reaches; the length when none is.
    #[inline]
    pub(super) fn first_reached(&self, now: usize, who: State, top_yps: f64, from_point: usize) -> usize {
        let hit = |at: usize| {
            let (short_yd, drive_s) = self.short_drive(now, at, who);
            short_yd <= top_yps * drive_s
        };
        let mut at = from_point;
        while at + LANES <= self.len() {
            let (gap2_yd, drive_s) = self.gap2_drive_lanes(now, at, who);
            let mut any = false;
            for lane in 0..LANES {
                let radius_yd = self.grid.drag.reach_yd + top_yps * drive_s[lane];
                any |= gap2_yd[lane] <= radius_yd * radius_yd;
            }
            if any {
                break;
            }
            at += LANES;
        }
        while at < self.len() && !hit(at) {
            at += 1;
        }
        at
    }

    /// Squared gap to the coasting centre and seconds of driving, for a few neighbouring points at once.
    #[inline(always)]
    fn gap2_drive_lanes(&self, now: usize, at: usize, who: State) -> ([f64; LANES], [f64; LANES]) {
        let mut gap2_yd = [0.0; LANES];
        let mut drive_s = [0.0; LANES];
        let alpha = self.grid.drag.alpha_per_s;
        let (t_now_s, x, y) = (self.grid.t_s[now], &self.x_yd[at..at + LANES], &self.y_yd[at..at + LANES]);
        let t_s = &self.grid.t_s[at..at + LANES];
        let mut coast_s = [0.0; LANES];
        if self.grid.direct {
            for lane in 0..LANES {
                coast_s[lane] = self.grid.drag.coast_s(t_s[lane] - t_now_s);
            }
        } else {
            let (decay, inverse) = (&self.grid.decay[at..at + LANES], self.grid.inverse[now]);
            for lane in 0..LANES {
                coast_s[lane] = (1.0 - decay[lane] * inverse) / alpha;
            }
        }
        for lane in 0..LANES {
            let gx = x[lane] - (who.pos_yd.x + who.vel_yps.x * coast_s[lane]);
            let gy = y[lane] - (who.pos_yd.y + who.vel_yps.y * coast_s[lane]);
            gap2_yd[lane] = gx * gx + gy * gy;
            drive_s[lane] = t_s[lane] - t_now_s - coast_s[lane];
        }
        (gap2_yd, drive_s)
    }

    #[inline(always)]
    fn short_drive_lanes(&self, now: usize, at: usize, who: State) -> ([f64; LANES], [f64; LANES]) {
        let (mut gap_yd, drive_s) = self.gap2_drive_lanes(now, at, who);
        for gap in &mut gap_yd {
            *gap = gap.sqrt() - self.grid.drag.reach_yd;
        }
        (gap_yd, drive_s)
    }

    /// Earliest meeting at `top_yps`, sub-frame precise. No result when the path ends first.
    pub fn earliest(&self, now: usize, who: State, top_yps: f64) -> Option<Meeting> {
        self.earliest_from(now, who, top_yps, now + 1)
    }

    /// As [`Path::earliest`], when it is known that no point before `from_point` can be reached.
    pub fn earliest_from(&self, now: usize, who: State, top_yps: f64, from_point: usize) -> Option<Meeting> {
        if self.in_contact(now, who) {
            return Some(Meeting { t_s: 0.0, spot_yd: self.spot(now), aim_yd: V2::ZERO });
        }
        let at = self.first_reached(now, who, top_yps, from_point.max(now + 1));
        (at < self.len()).then(|| self.meeting_before(now, who, top_yps, at))
    }

    /// The meeting in the piece that ends at point `at`, which is reached while the one before is not.
    pub(super) fn meeting_before(&self, now: usize, who: State, top_yps: f64, at: usize) -> Meeting {
        let reach_yd = self.grid.drag.reach_yd;
        let (t0_s, t1_s) = (self.grid.t_s[at - 1] - self.grid.t_s[now], self.grid.t_s[at] - self.grid.t_s[now]);
        let short_yd = |share: f64| {
            let (coast_s, drive_s) = self.grid.coast_drive_between_s(now, at - 1, share);
            let aim_yd = self.spot_between(at - 1, share) - (who.pos_yd + who.vel_yps * coast_s);
            (aim_yd.norm() - reach_yd - top_yps * drive_s, aim_yd)
        };
        let share = first_zero(|s| short_yd(s).0);
        Meeting { t_s: t0_s + share * (t1_s - t0_s), spot_yd: self.spot_between(at - 1, share), aim_yd: short_yd(share).1 }
    }

    /// The meeting to run for: the earliest one, or, when there is none, the point that asks for the least speed.
    pub fn aim(&self, now: usize, who: State, top_yps: f64) -> Option<Meeting> {
        self.aim_from(now, who, top_yps, now + 1)
    }

    /// As [`Path::aim`], when it is known that no point before `from_point` can be reached.
    pub fn aim_from(&self, now: usize, who: State, top_yps: f64, from_point: usize) -> Option<Meeting> {
        if let Some(meeting) = self.earliest_from(now, who, top_yps, from_point) {
            return Some(meeting);
        }
        let at = self.easiest(now, who)?;
        let (coast_s, _) = self.grid.coast_drive_s(now, at);
        let spot_yd = self.spot(at);
        Some(Meeting { t_s: self.grid.t_s[at] - self.grid.t_s[now], spot_yd, aim_yd: spot_yd - (who.pos_yd + who.vel_yps * coast_s) })
    }

    #[inline]
    pub(super) fn needed_at(&self, now: usize, at: usize, who: State) -> f64 {
        let (short_yd, drive_s) = self.short_drive(now, at, who);
        short_yd.max(0.0) / drive_s
    }
}
