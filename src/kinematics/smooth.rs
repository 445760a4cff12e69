//! The smoother as used: positions, velocities and accelerations of a segment with their covariance.
//!
//! State (position, velocity, acceleration) per axis, white-noise jerk of density q, measurement noise r = σ²; both axes share
//! gains and covariance. Where steps are constant and nothing is missing or boosted, gains come from a table that is computed once
//! for a (step, noise) pair; elsewhere a general plan is made, and kept as long as steps, holes and densities stay the same, since the
//! movers of a play mostly share them. Where a first pass finds sudden changes of push, a second one makes room for them.

use super::clean::Segment;
use super::cuts::{Suspect, Watch, make_room};
use super::pass::{self, Sink, State};
use super::plan::Plan;
use super::table::{Table, first_covariance, packed};
use crate::base::V2;
use crate::model::{Noise, Track};
use std::ops::Range;

/// Steps that differ by less than this share count as constant: far below what a clock or a runner can tell.
const SAME_STEP_SHARE: f64 = 1e-5;
/// How far beyond an asked range the smoother looks on either side: what lies further moves a velocity by less than a tenth of its
/// standard deviation.
const LOOK_AROUND_S: f64 = 1.5;
/// A blow comes within this time of the frame at which two men are first in reach of each other.
const BLOW_SPREAD_S: f64 = 0.1;
/// Slack when times are compared: they are sums of steps.
const ROUNDING_S: f64 = 1e-9;
/// Tables kept at a time; files mix a few rates at most.
const TABLES: usize = 4;

/// Room for a blow at `frame` (frame index), so that it is not smeared backwards: the jerk density of the steps within 0.1 s of it is
/// raised, to `factor` times its value where they fill 0.2 s. Where the rate makes them fill more or less, the factor is scaled so that
/// the room, density times time, stays the same: a blow is as hard at 50 frames a second as at 5. Where two boosts touch a step, the
/// larger one counts.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Boost {
    pub frame: usize,
    pub factor: f64,
}

/// Buffers and tables kept from track to track; what is in them never changes a result.
#[derive(Debug, Default)]
pub struct SmoothWork {
    states: Vec<State>,
    tables: Vec<Table>,
    general: General,
    suspects: Vec<Suspect>,
    steps_s: Vec<f64>,
    density: Vec<f64>,
}

/// The last general plan and what it was made for.
#[derive(Debug, Default)]
struct General {
    plan: Plan<3>,
    watch: Option<Watch>,
    spare_watch: Option<Watch>,
    steps_s: Vec<f64>,
    seen: Vec<bool>,
    density: Vec<f64>,
    sigma_yd: f64,
}

/// The frames that one call works on.
struct Work<'a> {
    pos_yd: &'a [V2],
    seen: &'a [bool],
    times: &'a [f64],
    keep: Range<usize>,
}

/// Whether sudden changes of push are looked for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Cuts {
    Found,
    Ignored,
}

/// Smooths a whole segment. `time_s` are the play's times, one for each frame index.
pub fn smooth(segment: &Segment, time_s: &[f64], noise: Noise, boosts: &[Boost], work: &mut SmoothWork) -> Track {
    smooth_range(segment, segment.first..segment.end(), time_s, noise, boosts, work)
}

/// The plain smoother: one jerk density but for the boosts, no cuts looked for. The yardstick that [`smooth`] is held against.
pub fn smooth_evenly(segment: &Segment, time_s: &[f64], noise: Noise, boosts: &[Boost], work: &mut SmoothWork) -> Track {
    run(segment, segment.first..segment.end(), time_s, noise, boosts, (Cuts::Ignored, work))
}

/// Smooths the frames `range` (frame indices, clipped to the segment), looking a little beyond it on either side, so that its ends
/// are as good as its middle. An empty range gives an empty track.
pub fn smooth_range(
    segment: &Segment,
    range: Range<usize>,
    time_s: &[f64],
    noise: Noise,
    boosts: &[Boost],
    work: &mut SmoothWork,
) -> Track {
    run(segment, range, time_s, noise, boosts, (Cuts::Found, work))
}

fn run(
    segment: &Segment,
    range: Range<usize>,
    time_s: &[f64],
    noise: Noise,
    boosts: &[Boost],
    (cuts, work): (Cuts, &mut SmoothWork),
) -> Track {
    let end = segment.end().min(time_s.len());
    let (from, to) = (range.start.max(segment.first), range.end.min(end));
    if from >= to {
        return Track { first: range.start, ..Track::default() };
    }
    let (low, high) = looked_at(segment, from..to, end, time_s);
    let at = low - segment.first;
    let seen = &segment.seen[at..at + (high - low)];
    let w = Work { pos_yd: &segment.pos_yd[at..at + (high - low)], seen, times: &time_s[low..high], keep: from - low..to - low };
    let mut out = Track { first: from, ..Track::default() };
    work.suspects.clear();
    let is_plain = seen.iter().all(|s| *s) && !boosts.iter().any(|b| b.frame + 1 > low && b.frame < high);
    match constant_step(w.times).filter(|_| is_plain) {
        Some(step_s) => work.by_table(step_s, noise, &w, cuts, &mut out),
        None => {
            work.set_densities(w.times, low, noise, boosts);
            work.by_plan(noise, &w, cuts, &mut out);
        }
    }
    if !work.suspects.is_empty() {
        work.set_densities(w.times, low, noise, boosts);
        if make_room(&work.suspects, w.times, &mut work.density) {
            work.by_plan(noise, &w, Cuts::Ignored, &mut out);
        }
    }
    out
}

/// The frames that the smoother looks at for `kept`; the first of them is a seen one.
fn looked_at(segment: &Segment, kept: Range<usize>, end: usize, time_s: &[f64]) -> (usize, usize) {
    let mut low = kept.start;
    while low > segment.first && (time_s[kept.start] - time_s[low] < LOOK_AROUND_S || !segment.seen[low - segment.first]) {
        low -= 1;
    }
    let last = kept.end - 1;
    let mut high = kept.end;
    while high < end && time_s[high - 1] - time_s[last] < LOOK_AROUND_S {
        high += 1;
    }
    (low, high)
}

/// The frames from and to which the steps within [`BLOW_SPREAD_S`] of `frame` reach, the steps next to it at least.
fn steps_around(times: &[f64], frame: usize) -> (usize, usize) {
    let (mut from, mut to) = (frame.saturating_sub(1), (frame + 1).min(times.len() - 1));
    while from > 0 && times[frame] - times[from - 1] <= BLOW_SPREAD_S + ROUNDING_S {
        from -= 1;
    }
    while to + 1 < times.len() && times[to + 1] - times[frame] <= BLOW_SPREAD_S + ROUNDING_S {
        to += 1;
    }
    (from, to)
}

/// The common step of `times` where they have one.
fn constant_step(times: &[f64]) -> Option<f64> {
    let [first, .., last] = times else { return None };
    let mean = (last - first) / (times.len() - 1) as f64;
    let allowed = SAME_STEP_SHARE * mean;
    // Rounded to a picosecond, so that plays of any length share one table.
    times.windows(2).all(|w| ((w[1] - w[0]) - mean).abs() <= allowed).then(|| (mean * 1e12).round() / 1e12)
}

impl SmoothWork {
    /// Constant steps, nothing missing or boosted.
    fn by_table(&mut self, step_s: f64, noise: Noise, w: &Work, cuts: Cuts, out: &mut Track) {
        let table = self.table(step_s, noise);
        let (cov, watch, plan) = self.tables[table].of(w.times.len());
        out.cov.extend_from_slice(&cov[w.keep.clone()]);
        let watch = (cuts == Cuts::Found).then_some((watch, &mut self.suspects));
        pass::run(w.pos_yd, |_| step_s, plan, &mut self.states, Sink { keep: w.keep.clone(), out, watch });
    }

    /// Index of the table for (step, noise), made where there is none; the oldest gives way.
    fn table(&mut self, step_s: f64, noise: Noise) -> usize {
        if let Some(found) = self.tables.iter().position(|t| t.step_s == step_s && t.noise == noise) {
            return found;
        }
        if self.tables.len() == TABLES {
            self.tables.remove(0);
        }
        self.tables.push(Table::new(step_s, noise));
        self.tables.len() - 1
    }

    /// Sets the jerk density of the step into each frame of `times`; `low` is the frame index of the first.
    fn set_densities(&mut self, times: &[f64], low: usize, noise: Noise, boosts: &[Boost]) {
        let frames = times.len();
        self.density.clear();
        self.density.resize(frames, 1.0);
        for boost in boosts.iter().filter(|b| b.frame + 1 > low && b.frame < low + frames) {
            let blow = boost.frame - low;
            let (from, to) = steps_around(times, blow);
            // Where the run begins or ends at the blow, one side stands for the other.
            let lasts_s = 2.0 * (times[blow] - times[from]).max(times[to] - times[blow]);
            if lasts_s > 0.0 {
                let factor = 1.0 + (boost.factor - 1.0) * 2.0 * BLOW_SPREAD_S / lasts_s;
                self.density[from + 1..=to].iter_mut().for_each(|d| *d = d.max(factor));
            }
        }
        for density in &mut self.density {
            *density *= noise.jerk_density;
        }
    }

    /// Any steps, holes and densities (as set).
    fn by_plan(&mut self, noise: Noise, w: &Work, cuts: Cuts, out: &mut Track) {
        self.steps_s.clear();
        self.steps_s.push(0.0);
        self.steps_s.extend(w.times.windows(2).map(|t| t[1] - t[0]));
        let g = &mut self.general;
        let is_known = g.sigma_yd == noise.sigma_yd && g.seen == w.seen && g.steps_s == self.steps_s && g.density == self.density;
        if !is_known {
            g.make(noise.sigma_yd, w.seen, &self.steps_s, &self.density);
        }
        if cuts == Cuts::Found && g.watch.is_none() {
            let mut watch = g.spare_watch.take().unwrap_or_default();
            watch.prepare(&g.plan, g.plan.smoothed.iter().copied());
            g.watch = Some(watch);
        }
        out.cov.clear();
        out.cov.extend(g.plan.smoothed[w.keep.clone()].iter().map(packed));
        let watch = g.watch.as_ref().filter(|_| cuts == Cuts::Found).map(|watch| (watch, &mut self.suspects));
        pass::run(w.pos_yd, |k| g.steps_s[k], &g.plan, &mut self.states, Sink { keep: w.keep.clone(), out, watch });
    }
}

impl General {
    fn make(&mut self, sigma_yd: f64, seen: &[bool], steps_s: &[f64], density: &[f64]) {
        self.sigma_yd = sigma_yd;
        self.seen.clear();
        self.seen.extend_from_slice(seen);
        self.steps_s.clear();
        self.steps_s.extend_from_slice(steps_s);
        self.density.clear();
        self.density.extend_from_slice(density);
        self.spare_watch = self.watch.take().or(self.spare_watch.take());
        let r = sigma_yd * sigma_yd;
        self.plan.start_filtered(first_covariance(r));
        for k in 1..seen.len() {
            self.plan.push_white_jerk(steps_s[k], density[k], seen[k], r);
        }
        self.plan.backward();
    }
}
