//! A carrier's path, run or predicted, and the one pass over it that answers everything: the speed needed at
//! every point, the earliest meeting, the chance, the expected meeting spot.

use super::reach::{Drag, State};
use crate::base::V2;
use crate::base::normal::Table;

/// A defender's capability: top speed and its standard error, yd/s.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TopSpeed {
    pub yps: f64,
    pub sigma_yps: f64,
}

/// Times of a path's points with e^{−αt} beside each, so that no exponential stands in an inner loop.
#[derive(Clone, Debug)]
pub struct Grid {
    pub t_s: Vec<f64>,
    decay: Vec<f64>,
    inverse: Vec<f64>,
    /// For a drag too strong for tables (the limit of constant speed): exponentials are taken one by one.
    direct: bool,
    pub drag: Drag,
}

impl Grid {
    pub fn new(t_s: Vec<f64>, drag: Drag) -> Grid {
        let t0_s = t_s.first().copied().unwrap_or(0.0);
        let span_s = t_s.last().map_or(0.0, |last| last - t0_s);
        // Beyond this product e^{αT} leaves the range in which the tables' quotients keep their digits.
        let direct = drag.alpha_per_s * span_s > 600.0;
        let tables = if direct { &[][..] } else { &t_s[..] };
        let decay: Vec<f64> = tables.iter().map(|t| drag.decay(t - t0_s)).collect();
        let inverse = decay.iter().map(|d| 1.0 / d).collect();
        Grid { t_s, decay, inverse, direct, drag }
    }

    /// (a, b) from point `from` to point `to`: seconds of coasting and of driving.
    #[inline(always)]
    fn coast_drive_s(&self, from: usize, to: usize) -> (f64, f64) {
        let dt_s = self.t_s[to] - self.t_s[from];
        let coast_s =
            if self.direct { self.drag.coast_s(dt_s) } else { (1.0 - self.decay[to] * self.inverse[from]) / self.drag.alpha_per_s };
        (coast_s, dt_s - coast_s)
    }
}

impl Grid {
    /// As [`Grid::coast_drive_s`], to a share of the way from point `before` to the next.
    #[inline]
    fn coast_drive_between_s(&self, from: usize, before: usize, share: f64) -> (f64, f64) {
        let step_s = share * (self.t_s[before + 1] - self.t_s[before]);
        let dt_s = self.t_s[before] - self.t_s[from] + step_s;
        let coast_s = if self.direct {
            self.drag.coast_s(dt_s)
        } else {
            (1.0 - self.decay[before] * self.inverse[from] * self.drag.decay(step_s)) / self.drag.alpha_per_s
        };
        (coast_s, dt_s - coast_s)
    }
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

/// The account's value of a state.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Expected {
    /// Expected spot downfield at which the path is met, J.
    pub x_yd: f64,
    /// Chance of meeting it before it ends.
    pub chance: f64,
    /// First point that an optimist's top speed reaches; the path's length when none does.
    pub first_hit: usize,
}

/// Points looked at together, without a branch between them.
const LANES: usize = 4;
/// The optimist's and the pessimist's top speed lie this many sigmas out; beyond is a chance of 1e-9.
const BAND_SIGMAS: f64 = 6.0;
/// A piece of path is halved while the needed speed falls by more than this many sigmas in it, counted in the bulk of the
/// distribution only, to this depth.
const PIECE_SIGMAS: f64 = 1.25;
const BULK_SIGMAS: f64 = 3.0;
const PIECE_DEPTH: u32 = 6;

impl Path<'_> {
    pub fn len(&self) -> usize {
        self.x_yd.len()
    }

    pub fn is_empty(&self) -> bool {
        self.x_yd.is_empty()
    }

    #[inline(always)]
    fn spot(&self, at: usize) -> V2 {
        V2::new(self.x_yd[at], self.y_yd[at])
    }

    #[inline(always)]
    fn short_drive(&self, from: usize, at: usize, who: State) -> (f64, f64) {
        let (coast_s, drive_s) = self.grid.coast_drive_s(from, at);
        let gap_yd = (self.spot(at) - (who.pos_yd + who.vel_yps * coast_s)).norm();
        (gap_yd - self.grid.drag.reach_yd, drive_s)
    }

    /// Spot between two points, on the straight line between them.
    #[inline]
    fn spot_between(&self, before: usize, share: f64) -> V2 {
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
    fn first_reached(&self, now: usize, who: State, top_yps: f64, from_point: usize) -> usize {
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
    fn meeting_before(&self, now: usize, who: State, top_yps: f64, at: usize) -> Meeting {
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

    /// Expected spot J = ∫ x dF + x_end (1 − F_end), with F(t) = 1 − Φ((min n − V̂)/σ), n linear in each piece.
    ///
    /// `from_point`: no point before it is within an optimist's reach (pass `now + 1` when nothing is known).
    pub fn expected(&self, now: usize, who: State, top: TopSpeed, from_point: usize) -> Expected {
        let last = self.len() - 1;
        if self.in_contact(now, who) {
            return Expected { x_yd: self.x_yd[now], chance: 1.0, first_hit: now };
        }
        let optimist_yps = top.yps + BAND_SIGMAS * top.sigma_yps;
        let first_hit = self.first_reached(now, who, optimist_yps, from_point.max(now + 1));
        if first_hit > last {
            return Expected { x_yd: self.x_yd[last], chance: 0.0, first_hit };
        }
        if top.sigma_yps <= 0.0 {
            return Expected { x_yd: self.meeting_before(now, who, top.yps, first_hit).spot_yd.x, chance: 1.0, first_hit };
        }
        let mut mass =
            Mass { top, table: Table::get(), least_yps: f64::INFINITY, least_cdf: 1.0, least_pdf: 0.0, met_x_yd: 0.0, chance: 0.0 };
        let mut before_yps = if first_hit == now + 1 { f64::INFINITY } else { self.needed_at(now, first_hit - 1, who) };
        for at in first_hit..=last {
            let after_yps = self.needed_at(now, at, who);
            if after_yps < mass.least_yps {
                let piece = Piece { share0: 0.0, share1: 1.0, n0_yps: before_yps, n1_yps: after_yps };
                self.add_piece(now, at, who, &mut mass, piece, 0);
                if mass.least_yps <= top.yps - BAND_SIGMAS * top.sigma_yps {
                    break;
                }
            }
            before_yps = after_yps;
        }
        Expected { x_yd: mass.met_x_yd + self.x_yd[last] * (1.0 - mass.chance), chance: mass.chance, first_hit }
    }

    #[inline]
    fn needed_at(&self, now: usize, at: usize, who: State) -> f64 {
        let (short_yd, drive_s) = self.short_drive(now, at, who);
        short_yd.max(0.0) / drive_s
    }

    /// Adds the chance that falls into one piece, halved while the needed speed falls steeply in it.
    fn add_piece(&self, now: usize, at: usize, who: State, mass: &mut Mass, piece: Piece, depth: u32) {
        let Piece { share0, share1, n0_yps, n1_yps } = piece;
        if n1_yps >= mass.least_yps || n1_yps >= mass.top.yps + BAND_SIGMAS * mass.top.sigma_yps {
            return;
        }
        let z = |n_yps: f64| ((n_yps - mass.top.yps) / mass.top.sigma_yps).clamp(-BULK_SIGMAS, BULK_SIGMAS);
        let steep = z(n0_yps.min(mass.least_yps)) - z(n1_yps) > PIECE_SIGMAS;
        if steep && depth < PIECE_DEPTH {
            let share = 0.5 * (share0 + share1);
            let (coast_s, drive_s) = self.grid.coast_drive_between_s(now, at - 1, share);
            let centre_yd = who.pos_yd + who.vel_yps * coast_s;
            let short_yd = (self.spot_between(at - 1, share) - centre_yd).norm() - self.grid.drag.reach_yd;
            let middle_yps = short_yd.max(0.0) / drive_s;
            self.add_piece(now, at, who, mass, Piece { share1: share, n1_yps: middle_yps, ..piece }, depth + 1);
            self.add_piece(now, at, who, mass, Piece { share0: share, n0_yps: middle_yps, ..piece }, depth + 1);
            return;
        }
        let (x_before, x_after) = (self.x_yd[at - 1], self.x_yd[at]);
        let x = |share: f64| x_before + (x_after - x_before) * share;
        mass.add(n0_yps, n1_yps, x(share0), x(share1));
    }
}

/// A stretch between two neighbouring points of a path: shares of the way, and the speeds needed at its ends.
#[derive(Clone, Copy)]
struct Piece {
    share0: f64,
    share1: f64,
    n0_yps: f64,
    n1_yps: f64,
}

/// The chance met so far and its first moment in x.
struct Mass {
    top: TopSpeed,
    table: &'static Table,
    least_yps: f64,
    /// Φ and φ at the least speed so far.
    least_cdf: f64,
    least_pdf: f64,
    met_x_yd: f64,
    chance: f64,
}

impl Mass {
    /// The needed speed falls from `n0` to `n1` while x goes from `x0` to `x1`: adds ∫ x dΦ over the part below the
    /// least so far. With V ~ N(V̂, σ²): E[V; n₁<V<n₀] = V̂ (Φ₀ − Φ₁) − σ (φ₀ − φ₁).
    fn add(&mut self, n0_yps: f64, n1_yps: f64, x0_yd: f64, x1_yd: f64) {
        let TopSpeed { yps, sigma_yps } = self.top;
        let density = |n_yps: f64| self.table.at((n_yps - yps) / sigma_yps);
        let (cdf0, pdf0) = if n0_yps < self.least_yps { density(n0_yps) } else { (self.least_cdf, self.least_pdf) };
        let (cdf1, pdf1) = density(n1_yps);
        let part = cdf0 - cdf1;
        (self.least_cdf, self.least_pdf) = (cdf1, pdf1);
        self.least_yps = n1_yps;
        self.chance += part;
        if n0_yps.is_infinite() || n0_yps - n1_yps < 1e-12 {
            self.met_x_yd += x1_yd * part;
            return;
        }
        let moment_yps = yps * part - sigma_yps * (pdf0 - pdf1);
        // x as a function of the speed needed, linear in the piece.
        let slope = (x1_yd - x0_yd) / (n0_yps - n1_yps);
        self.met_x_yd += x1_yd * part - slope * (moment_yps - n1_yps * part);
    }
}

/// The zero in (0, 1] of a function that is positive at 0 and not at 1: Illinois regula falsi
/// (Dowell & Jarratt 1971), which keeps its bracket.
fn first_zero(f: impl Fn(f64) -> f64) -> f64 {
    let (mut low, mut f_low) = (0.0, f(0.0));
    let (mut high, mut f_high) = (1.0, f(1.0));
    if f_low <= 0.0 {
        return 0.0;
    }
    let mut side = 0;
    for _ in 0..60 {
        let middle = (low * f_high - high * f_low) / (f_high - f_low);
        if !(middle > low && middle < high) {
            break;
        }
        let f_middle = f(middle);
        if f_middle.abs() < 1e-11 {
            return middle;
        }
        if f_middle > 0.0 {
            (low, f_low) = (middle, f_middle);
            if side == 1 {
                f_high *= 0.5;
            }
            side = 1;
        } else {
            (high, f_high) = (middle, f_middle);
            if side == -1 {
                f_low *= 0.5;
            }
            side = -1;
        }
        if high - low < 1e-15 {
            break;
        }
    }
    high
}
