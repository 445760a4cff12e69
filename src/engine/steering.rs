//! The steering law: γ̇(t) = N λ̇(t−τ) − K δ(t−τ), mixed guidance, fitted by weighted least squares.
//!
//! γ heading, λ bearing, δ = heading less bearing. N alone is proportional navigation (the larger N, the steadier the
//! bearing); K alone pure pursuit. The delay τ is searched on the file's own frames.

use super::bearing::TWO_SIDED;

/// One instant of a pursuit, in order of time. Radians, seconds; `weight` is the inverse variance of the heading rate.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Instant {
    pub t_s: f64,
    pub heading_rate_radps: f64,
    pub line_rate_radps: f64,
    pub deviation_rad: f64,
    pub weight: f64,
}

/// A fitted law with standard errors.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Steering {
    pub n: f64,
    pub n_se: f64,
    pub k_per_s: f64,
    pub k_se: f64,
    pub delay_s: f64,
    /// Share of the weighted variance explained, about zero.
    pub explained: f64,
    pub frames: usize,
}

/// The law in a word.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SteeringWord {
    RunsAtTheMan,
    Mixed,
    Leads,
}

impl SteeringWord {
    pub fn word(self) -> &'static str {
        match self {
            SteeringWord::RunsAtTheMan => "runs at the man",
            SteeringWord::Mixed => "mixed",
            SteeringWord::Leads => "leads",
        }
    }
}

/// Fewer instants than this tell nothing about three numbers.
const FEWEST: usize = 12;

/// Least-squares fit over the delays that are whole frames up to `longest_delay_s`; the one that explains most is taken,
/// and of two alike the shorter. No result with too few instants or when the two regressors cannot be told apart.
pub fn fit(instants: &[Instant], longest_delay_s: f64) -> Option<Steering> {
    let step_s = (instants.last()?.t_s - instants.first()?.t_s) / (instants.len().max(2) - 1) as f64;
    let longest = if step_s > 0.0 { (longest_delay_s / step_s + 1e-9) as usize } else { 0 };
    // All delays are judged on the same frames.
    let usable = instants.len().checked_sub(longest.min(instants.len() / 3))?;
    let longest = instants.len() - usable;
    if usable < FEWEST {
        return None;
    }
    let mut best: Option<Steering> = None;
    for lag in 0..=longest {
        if let Some(law) = fit_at(instants, lag, longest, lag as f64 * step_s)
            && best.is_none_or(|b| law.explained > b.explained + 1e-9)
        {
            best = Some(law);
        }
    }
    best
}

fn fit_at(instants: &[Instant], lag: usize, skip: usize, delay_s: f64) -> Option<Steering> {
    let (mut aa, mut ab, mut bb, mut ay, mut by, mut yy) = (0.0, 0.0, 0.0, 0.0, 0.0, 0.0);
    let frames = instants.len() - skip;
    for i in skip..instants.len() {
        let w = instants[i].weight;
        let (a, b, y) = (instants[i - lag].line_rate_radps, -instants[i - lag].deviation_rad, instants[i].heading_rate_radps);
        aa += w * a * a;
        ab += w * a * b;
        bb += w * b * b;
        ay += w * a * y;
        by += w * b * y;
        yy += w * y * y;
    }
    let det = aa * bb - ab * ab;
    if !(det > 1e-9 * aa * bb && yy > 0.0) {
        return None;
    }
    let n = (ay * bb - by * ab) / det;
    let k_per_s = (by * aa - ay * ab) / det;
    let rest = (yy - n * ay - k_per_s * by).max(0.0);
    let variance = rest / (frames as f64 - 2.0);
    Some(Steering {
        n,
        n_se: (variance * bb / det).sqrt(),
        k_per_s,
        k_se: (variance * aa / det).sqrt(),
        delay_s,
        explained: 1.0 - rest / yy,
        frames,
    })
}

impl Steering {
    /// The law in a word, where the 95 % intervals allow one: `leads` when N lies above 1 (he turns faster than the
    /// bearing does, which steadies it) and K does not lie above 0; `runs at the man` when K lies above 0 and N not
    /// above 0; `mixed` when both do. Otherwise it cannot be told.
    pub fn word(&self) -> Option<SteeringWord> {
        let n_low = self.n - TWO_SIDED * self.n_se;
        let n_above = n_low > 0.0;
        let k_above = self.k_per_s - TWO_SIDED * self.k_se > 0.0;
        match (n_above, k_above) {
            (true, false) if n_low > 1.0 => Some(SteeringWord::Leads),
            (true, true) => Some(SteeringWord::Mixed),
            (false, true) => Some(SteeringWord::RunsAtTheMan),
            _ => None,
        }
    }
}
