//! Jerk density q and measurement noise σ of a file, by maximum likelihood over a sample of tracks.
//!
//! A runner's acceleration changes with every push, then dies away as drag catches up with it: dv/dt = α (V u − v). So the
//! likelihood is that of an acceleration which decays at α between white-noise pushes (Singer 1970), not of one that wanders off for
//! ever. The smoother's own law (no decay) differs only at slow frequencies, where the data leave nothing to guess; but fitting that law
//! makes slow frequencies pull q down by a quarter to a third: the bands of simulated defenders then cover one to two points less than
//! they say, and q changes with noise and rate (18 to 23), which it does not this way (27.5 to 28).
//!
//! Only frames in motion count, as far as there are enough: q belongs to running men, and twenty seconds of huddle must not
//! dilute it.

use super::clean::Segment;
use super::state::{Matrix, Step, congruence, decaying};
use crate::base::{Sum, V2};
use crate::model::Noise;
use crate::model::settings::SmoothingSettings;

/// Where a file has too little to estimate from: q of simulated defenders in the drag model, σ of a fair tag system. Own choice.
pub const DEFAULT: Noise = Noise { jerk_density: 28.0, sigma_yd: 0.05 };
/// Decay of an acceleration: the drag rate of the motion model (Clark et al. 2019).
const DECAY_PER_S: f64 = 1.3;
/// Frames looked at, at most: q then has a relative error of about a tenth, which moves a velocity by next to nothing.
const MOST_FRAMES: usize = 6000;
/// Innovations (both axes) below which the default stands.
const FEWEST_INNOVATIONS: usize = 200;
/// A frame is in motion when he covers this much from half a second before to half a second after.
const MOTION_YPS: f64 = 1.5;
const MOTION_HALF_S: f64 = 0.5;
/// Shortest piece of motion looked at.
const SHORTEST_S: f64 = 1.2;
/// Innovations at the start of a piece that only find the state.
const BURN_IN: usize = 3;
/// No file is believed to be better than this: coordinates rounded to 0.01 yd have σ = 0.003.
const LEAST_SIGMA_YD: f64 = 0.002;
const JERK_RANGE: (f64, f64) = (0.5, 5000.0);
/// Range of ln(q/r) searched, 1/s⁵.
const LOG_RATIO_RANGE: (f64, f64) = (0.0, 25.0);
const GRID: usize = 13;
const LOG_RATIO_TOLERANCE: f64 = 2e-3;

/// A piece of a segment without holes.
struct Piece<'a> {
    pos_yd: &'a [V2],
    time_s: &'a [f64],
    /// The step, where it is constant.
    step_s: Option<f64>,
}

/// Sums over all innovations, for r = 1.
#[derive(Clone, Copy, Debug, Default)]
struct Sums {
    count: f64,
    log_spread: f64,
    square: f64,
}

/// Estimates q and σ from `sample`: segments, each with its play's times. A setting above 0 is taken as it is, and the other one is
/// fitted to it.
///
/// Of a large sample evenly spread segments are used, some 6000 frames, so the same sample in the same order gives the same
/// answer; the caller orders it.
pub fn estimate_noise(sample: &[(&Segment, &[f64])], settings: &SmoothingSettings) -> Noise {
    let given_q = Some(settings.jerk_density).filter(|q| *q > 0.0 && q.is_finite());
    let given_sigma = Some(settings.sigma_yd).filter(|s| *s > 0.0 && s.is_finite());
    let fallback = Noise { jerk_density: given_q.unwrap_or(DEFAULT.jerk_density), sigma_yd: given_sigma.unwrap_or(DEFAULT.sigma_yd) };
    if given_q.is_some() && given_sigma.is_some() {
        return fallback;
    }
    let mut pieces = pieces(sample, true);
    if innovations(&pieces) < FEWEST_INNOVATIONS {
        pieces = self::pieces(sample, false);
    }
    if innovations(&pieces) < FEWEST_INNOVATIONS {
        return fallback;
    }
    let least_r = LEAST_SIGMA_YD * LEAST_SIGMA_YD;
    let noise_var = |ratio: f64, s: &Sums| match (given_sigma, given_q) {
        (Some(sigma), _) => sigma * sigma,
        (None, Some(q)) => q / ratio,
        (None, None) => (s.square / s.count).max(least_r),
    };
    let loglik = |log_ratio: f64| {
        let s = sums(&pieces, log_ratio.exp());
        let r = noise_var(log_ratio.exp(), &s);
        -0.5 * (s.count * r.ln() + s.log_spread + s.square / r)
    };
    let ratio = maximum(loglik, LOG_RATIO_RANGE).exp();
    let r = noise_var(ratio, &sums(&pieces, ratio));
    Noise {
        jerk_density: given_q.unwrap_or((ratio * r).clamp(JERK_RANGE.0, JERK_RANGE.1)),
        sigma_yd: given_sigma.unwrap_or(r.sqrt().max(LEAST_SIGMA_YD)),
    }
}

fn innovations(pieces: &[Piece]) -> usize {
    pieces.iter().map(|p| 2 * (p.pos_yd.len() - BURN_IN)).sum()
}

/// Pieces without holes, in motion or not, from evenly spread segments until enough frames are found.
fn pieces<'a>(sample: &[(&'a Segment, &'a [f64])], moving: bool) -> Vec<Piece<'a>> {
    let mut out = Vec::new();
    let mut frames = 0;
    // Every k-th segment, then those one further on, and so on: a spread-out part first, all of them if need be.
    let stride = (sample.iter().map(|(s, _)| s.pos_yd.len()).sum::<usize>() / MOST_FRAMES).max(1);
    for start in 0..stride {
        for (segment, time_s) in sample.iter().skip(start).step_by(stride) {
            if frames >= MOST_FRAMES {
                return out;
            }
            if let Some(times) = time_s.get(segment.first..segment.end()) {
                for (from, to) in usable(segment, times, moving) {
                    let times = &times[from..to];
                    frames += to - from;
                    out.push(Piece { pos_yd: &segment.pos_yd[from..to], time_s: times, step_s: constant_step(times) });
                }
            }
        }
    }
    out
}

/// Stretches (from, to) of a segment that were seen, and in which he moved where `moving` is asked for.
fn usable(segment: &Segment, times: &[f64], moving: bool) -> Vec<(usize, usize)> {
    let n = times.len();
    let mut out = Vec::new();
    let (mut low, mut high) = (0, 0);
    let mut begin: Option<usize> = None;
    for k in 0..n {
        while times[k] - times[low] > MOTION_HALF_S {
            low += 1;
        }
        while high + 1 < n && times[high + 1] - times[k] <= MOTION_HALF_S {
            high += 1;
        }
        let way = (segment.pos_yd[high] - segment.pos_yd[low]).norm();
        let counts = segment.seen[k] && (!moving || way >= MOTION_YPS * (times[high] - times[low]).max(MOTION_HALF_S));
        match (counts, begin) {
            (true, None) => begin = Some(k),
            (false, Some(from)) => {
                out.push((from, k));
                begin = None;
            }
            _ => {}
        }
    }
    out.extend(begin.map(|from| (from, n)));
    let is_long = |(from, to): &(usize, usize)| to - from > 2 * BURN_IN && (!moving || times[to - 1] - times[*from] >= SHORTEST_S);
    out.retain(is_long);
    out
}

fn constant_step(times: &[f64]) -> Option<f64> {
    let mean = (times[times.len() - 1] - times[0]) / (times.len() - 1) as f64;
    times.windows(2).all(|w| (w[1] - w[0] - mean).abs() <= 1e-5 * mean).then(|| (mean * 1e9).round() / 1e9)
}

/// Innovation sums for q = `ratio`, r = 1.
fn sums(pieces: &[Piece], ratio: f64) -> Sums {
    let (mut log_spread, mut square) = (Sum::default(), Sum::default());
    let mut count = 0.0;
    let mut gains = Gains::default();
    for piece in pieces {
        gains.prepare(piece, ratio);
        let (mut p, mut v, mut a) = (piece.pos_yd[0], V2::ZERO, V2::ZERO);
        let (mut piece_log, mut piece_square) = (0.0, 0.0);
        for k in 1..piece.pos_yd.len() {
            let g = &gains.list[k.min(gains.list.len()) - 1];
            let e = piece.pos_yd[k] - (p + v * g.step.f[0][1] + a * g.step.f[0][2]);
            let v_guess = v + a * g.step.f[1][2];
            p = piece.pos_yd[k] - e * (1.0 - g.gain[0]);
            v = v_guess + e * g.gain[1];
            a = a * g.step.f[2][2] + e * g.gain[2];
            if k >= BURN_IN {
                piece_log += g.log_spread;
                piece_square += e.norm2() / g.spread;
                count += 2.0;
            }
        }
        log_spread.add(2.0 * piece_log);
        square.add(piece_square);
    }
    Sums { count, log_spread: log_spread.value(), square: square.value() }
}

#[derive(Clone, Copy, Debug)]
struct Gain {
    step: Step<3>,
    gain: [f64; 3],
    spread: f64,
    log_spread: f64,
}

/// Filter gains of a piece, for r = 1; kept while pieces have the same constant step.
#[derive(Debug, Default)]
struct Gains {
    list: Vec<Gain>,
    cov: Matrix<3>,
    step_s: Option<f64>,
    is_settled: bool,
}

impl Gains {
    fn prepare(&mut self, piece: &Piece, ratio: f64) {
        let steps = piece.time_s.len() - 1;
        if self.list.is_empty() || self.step_s != piece.step_s || piece.step_s.is_none() {
            self.list.clear();
            self.is_settled = false;
            self.step_s = piece.step_s;
            // The first frame is its measurement; velocity and acceleration are as good as unknown, in units of r.
            let h = piece.time_s[1] - piece.time_s[0];
            self.cov = [[1.0, 0.0, 0.0], [0.0, 1e6 / (h * h), 0.0], [0.0, 0.0, 1e6 / (h * h * h * h)]];
        }
        while !self.is_settled && self.list.len() < steps {
            let k = self.list.len();
            let step = match (piece.step_s, self.list.last()) {
                (Some(_), Some(last)) => last.step,
                (Some(h), None) => decaying(h, ratio, DECAY_PER_S),
                (None, _) => decaying(piece.time_s[k + 1] - piece.time_s[k], ratio, DECAY_PER_S),
            };
            let p = congruence(&step.f, &self.cov, &step.q);
            let spread = p[0][0] + 1.0;
            let gain = [p[0][0] / spread, p[1][0] / spread, p[2][0] / spread];
            let updated = |i: usize, j: usize| if i == 0 || j == 0 { p[i][j] / spread } else { p[i][j] - gain[i] * p[j][0] };
            self.cov = std::array::from_fn(|i| std::array::from_fn(|j| updated(i, j)));
            self.is_settled = piece.step_s.is_some()
                && self.list.last().is_some_and(|l: &Gain| (l.spread - spread).abs() <= 1e-12 * spread && k > 2 * BURN_IN);
            self.list.push(Gain { step, gain, spread, log_spread: spread.ln() });
        }
    }
}

/// Place of the maximum of `f`: the best of a grid, refined by golden sections between its neighbours.
fn maximum(f: impl Fn(f64) -> f64, (low, high): (f64, f64)) -> f64 {
    let at = |i: usize| low + (high - low) * i as f64 / (GRID - 1) as f64;
    let values: Vec<f64> = (0..GRID).map(|i| f(at(i))).collect();
    let best = (0..GRID).max_by(|a, b| values[*a].total_cmp(&values[*b]).then(b.cmp(a))).unwrap_or(0);
    let (mut a, mut b) = (at(best.saturating_sub(1)), at((best + 1).min(GRID - 1)));
    let golden = 0.5 * (5.0_f64.sqrt() - 1.0);
    let (mut x1, mut x2) = (b - golden * (b - a), a + golden * (b - a));
    let (mut f1, mut f2) = (f(x1), f(x2));
    while b - a > LOG_RATIO_TOLERANCE {
        if f1 >= f2 {
            (b, x2, f2) = (x2, x1, f1);
            x1 = b - golden * (b - a);
            f1 = f(x1);
        } else {
            (a, x1, f1) = (x1, x2, f2);
            x2 = a + golden * (b - a);
            f2 = f(x2);
        }
    }
    0.5 * (a + b)
}
