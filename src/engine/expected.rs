//! The expected meeting spot: one pass over a path for a top speed that is known with an error.

use super::path::{Path, TopSpeed};
use super::reach::State;
use crate::base::normal::Table;

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

/// The optimist's and the pessimist's top speed lie this many sigmas out; beyond is a chance of 1e-9.
const BAND_SIGMAS: f64 = 6.0;
/// A piece of path is halved while the needed speed falls by more than this many sigmas in it, counted in the bulk of the
/// distribution only, to this depth.
const PIECE_SIGMAS: f64 = 0.75;
const BULK_SIGMAS: f64 = 3.0;
const PIECE_DEPTH: u32 = 6;

impl Path<'_> {
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
