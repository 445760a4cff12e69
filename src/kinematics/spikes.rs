//! Places that a runner could reach, but not from where he came and on to where he went: one to three frames beside the way.
//!
//! A spike lies off the chord between the frames around it, off the line on which he came, and off the line on which he went on. A
//! start, a cut or a blow bends the way, but then one of the two lines still fits, so none of them is taken for a spike.

use super::clean::{Notes, Spot};
use crate::base::V2;
use crate::model::settings::SmoothingSettings;
use crate::model::{FindingKind, SetAside, SourceRow};

/// Hardest acceleration allowed for, yd/s²: a cut from full speed into its opposite in the drag model makes 1.3 · 2 · 10 = 26.
const HARDEST_YPSS: f64 = 30.0;
/// Scatter about the chord below which no track is believed, yd: files are rounded to 0.01 yd at best.
const LEAST_SCATTER_YD: f64 = 0.02;
/// Median of a Rayleigh distribution of unit scale.
const RAYLEIGH_MEDIAN: f64 = 1.177_410_022_515_474_7;
const LONGEST: usize = 3;
/// Places to either side over which the scatter near a spike is taken: so many that the longest spike cannot move their median.
const AROUND: usize = 12;

/// Whether any place lies off its neighbours' chord by more than noise and the hardest cut can explain.
pub(super) fn may_have_any(pos_yd: &[V2], times: &[f64], settings: &SmoothingSettings) -> bool {
    let n = pos_yd.len();
    if n < 5 {
        return false;
    }
    let off2 = |k: usize| {
        let share = (times[k] - times[k - 1]) / (times[k + 1] - times[k - 1]);
        (pos_yd[k] - pos_yd[k - 1].lerp(pos_yd[k + 1], share)).norm2()
    };
    let bend = |k: usize| 0.5 * HARDEST_YPSS * (times[k] - times[k - 1]) * (times[k + 1] - times[k]);
    // A spike of two or three frames shows at its edges, with at least half its height.
    let suspect = |k: usize, scatter: f64| {
        let least = 0.5 * (settings.gate_sigmas * scatter + bend(k));
        off2(k) > least * least
    };
    if (1..n - 1).all(|k| !suspect(k, LEAST_SCATTER_YD)) {
        return false;
    }
    let scatter = scatter_yd((1..n - 1).map(off2).collect());
    (1..n - 1).any(|k| suspect(k, scatter))
}

/// Takes spikes out of `spots`.
pub(super) fn set_aside(
    spots: &mut Vec<Spot>,
    time_s: &[f64],
    settings: &SmoothingSettings,
    set_aside: &mut Vec<(SourceRow, SetAside)>,
    notes: &mut Notes,
) {
    if spots.len() < 5 {
        return;
    }
    let chord = |a: &Spot, b: &Spot, s: &Spot| {
        let share = (time_s[s.frame] - time_s[a.frame]) / (time_s[b.frame] - time_s[a.frame]);
        s.pos_yd - a.pos_yd.lerp(b.pos_yd, share)
    };
    let off2: Vec<f64> = spots.windows(3).map(|w| chord(&w[0], &w[2], &w[1]).norm2()).collect();
    let whole = scatter_yd(off2.clone());
    // A track that mostly stands still scatters less than the runner: where he runs, what is usual there counts.
    let scatter_at = |k: usize| {
        let around = k.saturating_sub(AROUND + 1)..(k + AROUND).min(off2.len());
        whole.max(scatter_yd(off2[around].to_vec()))
    };
    let is_spike = |k: usize, m: usize| {
        let [a2, a1] = [&spots[k - 2], &spots[k - 1]];
        let [b1, b2] = [&spots[k + m], &spots[k + m + 1]];
        let whole_s = time_s[b2.frame] - time_s[a2.frame];
        if whole_s > 2.0 * settings.bridge_s {
            return false;
        }
        let is_beside = |s: &Spot, scatter: f64| {
            let bend = 0.5 * HARDEST_YPSS * (time_s[s.frame] - time_s[a1.frame]) * (time_s[b1.frame] - time_s[s.frame]);
            let most = settings.gate_sigmas * scatter + bend;
            let beside = chord(a1, b1, s);
            let is_off = |off: V2| off.norm2() > most * most && off.dot(beside) > 0.0;
            is_off(beside) && is_off(chord(a2, a1, s)) && is_off(chord(b1, b2, s))
        };
        let spike = &spots[k..k + m];
        spike.iter().all(|s| is_beside(s, whole)) && spike.iter().all(|s| is_beside(s, scatter_at(k)))
    };
    let mut is_out = vec![false; spots.len()];
    let mut k = 2;
    while k + 3 <= spots.len() {
        // The longest spike first: part of a long one can look like a short one.
        let found = (1..=LONGEST).rev().find(|m| k + m + 2 <= spots.len() && is_spike(k, *m));
        for out in &mut is_out[k..k + found.unwrap_or(0)] {
            *out = true;
        }
        k += found.unwrap_or(1);
    }
    let mut i = 0;
    spots.retain(|s| {
        let out = is_out[i];
        i += 1;
        if out {
            set_aside.push((s.source, SetAside::Jump));
            notes.push((FindingKind::Jump, s.frame));
        }
        !out
    });
}

/// Scale of the distance from the chord per axis, from its median, which a few spikes do not move.
fn scatter_yd(mut off2: Vec<f64>) -> f64 {
    let middle = off2.len() / 2;
    let (_, median2, _) = off2.select_nth_unstable_by(middle, f64::total_cmp);
    (median2.sqrt() / RAYLEIGH_MEDIAN).max(LEAST_SCATTER_YD)
}
