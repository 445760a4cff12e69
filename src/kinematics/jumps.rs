//! Places that no runner reaches in the time: short excursions set aside, lasting ones cut off into a segment of their own.

use super::clean::{Notes, Spot};
use crate::base::V2;
use crate::model::settings::SmoothingSettings;
use crate::model::{FindingKind, SetAside, SourceRow};

/// Allowance for measurement noise in a step: at 60 Hz and 0.1 yd noise an honest step is longer than its runner's by up to this.
const NOISE_ALLOWANCE_YD: f64 = 0.6;
/// How many runs back a chain may link; a track torn into more pieces than that has no chain worth finding.
const LOOK_BACK: usize = 64;

/// Whether a runner can make `way_yd` in `step_s`.
#[inline]
pub(super) fn is_reachable(way_yd: V2, step_s: f64, settings: &SmoothingSettings) -> bool {
    let most_yd = settings.jump_speed_yps * step_s + NOISE_ALLOWANCE_YD;
    way_yd.norm2() <= most_yd * most_yd
}

/// A run of spots between two impossible steps.
struct Run {
    from: usize,
    to: usize,
    /// Most spots on a chain of reachable runs that ends here, and the run before this one on it.
    chained: usize,
    before: Option<usize>,
}

/// Takes the spots out of `spots` that lie off the longest chain of runs that one runner can have made. Runs off the chain are set
/// aside where they are short or lie between two runs of the chain (an excursion, or ids swapped and swapped back); a long one before or
/// after the chain stays, and is cut off. Returns the frame indices before which the track is cut.
pub(super) fn set_aside(
    spots: &mut Vec<Spot>,
    time_s: &[f64],
    settings: &SmoothingSettings,
    set_aside: &mut Vec<(SourceRow, SetAside)>,
    notes: &mut Notes,
) -> Vec<usize> {
    let links = |a: &Spot, b: &Spot| is_reachable(b.pos_yd - a.pos_yd, time_s[b.frame] - time_s[a.frame], settings);
    let mut runs: Vec<Run> = Vec::new();
    for i in 0..spots.len() {
        match runs.last_mut() {
            Some(run) if links(&spots[i - 1], &spots[i]) => run.to = i + 1,
            _ => runs.push(Run { from: i, to: i + 1, chained: 0, before: None }),
        }
    }
    if runs.len() < 2 {
        return Vec::new();
    }
    for i in 0..runs.len() {
        let start = spots[runs[i].from];
        let best = (i.saturating_sub(LOOK_BACK)..i)
            .filter(|j| links(&spots[runs[*j].to - 1], &start))
            .max_by_key(|j| (runs[*j].chained, std::cmp::Reverse(*j)));
        runs[i].before = best;
        runs[i].chained = runs[i].to - runs[i].from + best.map_or(0, |j| runs[j].chained);
    }
    let mut is_on_chain = vec![false; runs.len()];
    let mut at = (0..runs.len()).max_by_key(|i| (runs[*i].chained, std::cmp::Reverse(*i)));
    while let Some(i) = at {
        is_on_chain[i] = true;
        at = runs[i].before;
    }
    let (first_on, last_on) = (is_on_chain.iter().position(|c| *c).unwrap_or(0), is_on_chain.iter().rposition(|c| *c).unwrap_or(0));
    let mut cuts = Vec::new();
    let mut kept = Vec::with_capacity(spots.len());
    let mut is_cut_off = false;
    for (i, run) in runs.iter().enumerate() {
        let part = &spots[run.from..run.to];
        let lasts_s = time_s[part[part.len() - 1].frame] - time_s[part[0].frame];
        let is_inside = i > first_on && i < last_on;
        let stays = is_on_chain[i] || (!is_inside && lasts_s > settings.bridge_s);
        if stays {
            // The first run of the chain after a piece cut off, and every piece cut off, begin anew.
            if !kept.is_empty() && (is_cut_off || !is_on_chain[i]) {
                cuts.push(part[0].frame);
                notes.push((FindingKind::Jump, part[0].frame));
            }
            is_cut_off = !is_on_chain[i];
            kept.extend_from_slice(part);
        } else {
            set_aside.extend(part.iter().map(|s| (s.source, SetAside::Jump)));
            notes.extend(part.iter().map(|s| (FindingKind::Jump, s.frame)));
        }
    }
    *spots = kept;
    cuts
}
