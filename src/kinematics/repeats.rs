//! Rows of one mover in one frame more than once: exact repeats dropped, conflicting ones judged by where he should be.

use super::clean::{Notes, Spot};
use crate::base::V2;
use crate::model::settings::SmoothingSettings;
use crate::model::{FindingKind, RawTrack, SetAside, SourceRow};

/// One spot a frame, in order of frame. Rows without a place, and rows beyond the play's frames, are set aside.
pub(super) fn resolve(
    raw: &RawTrack,
    time_s: &[f64],
    settings: &SmoothingSettings,
    set_aside: &mut Vec<(SourceRow, SetAside)>,
    notes: &mut Notes,
) -> Vec<Spot> {
    let mut rows: Vec<Spot> = Vec::with_capacity(raw.frame_index.len());
    for (i, frame) in raw.frame_index.iter().enumerate() {
        let at = |v: &[f64]| v.get(i).copied().unwrap_or(f64::NAN);
        let source = raw.source.get(i).copied().unwrap_or_default();
        let spot = Spot { frame: *frame as usize, pos_yd: V2::new(at(&raw.x_yd), at(&raw.y_yd)), source };
        if spot.frame >= time_s.len() {
            set_aside.push((source, SetAside::MissingKey));
            notes.push((FindingKind::MissingKey, spot.frame));
        } else if spot.pos_yd.is_finite() {
            rows.push(spot);
        } else {
            set_aside.push((source, SetAside::MissingCoordinate));
            notes.push((FindingKind::MissingCoordinate, spot.frame));
        }
    }
    rows.sort_by(|a, b| {
        (a.frame.cmp(&b.frame))
            .then(a.pos_yd.x.total_cmp(&b.pos_yd.x))
            .then(a.pos_yd.y.total_cmp(&b.pos_yd.y))
            .then(a.source.cmp(&b.source))
    });
    rows.dedup_by(|later, kept| {
        let is_repeat = later.frame == kept.frame && later.pos_yd == kept.pos_yd;
        if is_repeat {
            set_aside.push((later.source, SetAside::ExactRepeat));
            notes.push((FindingKind::ExactRepeat, later.frame));
        }
        is_repeat
    });
    choose(&rows, time_s, settings, set_aside, notes)
}

/// Keeps of each frame's rows the one nearest the prediction from the frames around it.
fn choose(
    rows: &[Spot],
    time_s: &[f64],
    settings: &SmoothingSettings,
    set_aside: &mut Vec<(SourceRow, SetAside)>,
    notes: &mut Notes,
) -> Vec<Spot> {
    let mut kept: Vec<Spot> = Vec::with_capacity(rows.len());
    let mut i = 0;
    while i < rows.len() {
        let mut end = i + 1;
        while end < rows.len() && rows[end].frame == rows[i].frame {
            end += 1;
        }
        let candidates = &rows[i..end];
        let mut best = candidates[0];
        if candidates.len() > 1 {
            if let Some(guess) = predicted(&kept, &rows[end..], rows[i].frame, time_s, settings) {
                for spot in candidates {
                    if (spot.pos_yd - guess).norm2() < (best.pos_yd - guess).norm2() {
                        best = *spot;
                    }
                }
            }
            for other in candidates.iter().filter(|s| s.source != best.source || s.pos_yd != best.pos_yd) {
                set_aside.push((other.source, SetAside::ConflictingRepeat));
                notes.push((FindingKind::ConflictingRepeat, other.frame));
            }
        }
        kept.push(best);
        i = end;
    }
    kept
}

/// Where he should be at `frame`: between the last kept spot and the next undisputed one where both are near in time, else on
/// from the two spots before or back from the two undisputed ones after.
fn predicted(before: &[Spot], after: &[Spot], frame: usize, time_s: &[f64], settings: &SmoothingSettings) -> Option<V2> {
    let t = time_s[frame];
    let is_alone =
        |j: usize| (j == 0 || after[j - 1].frame != after[j].frame) && after.get(j + 1).is_none_or(|next| next.frame != after[j].frame);
    let is_near = |s: &Spot| (time_s[s.frame] - t).abs() <= 2.0 * settings.bridge_s;
    let mut next = (0..after.len()).take_while(|j| is_near(&after[*j])).filter(|j| is_alone(*j)).map(|j| after[j]);
    let (next1, next2) = (next.next(), next.next());
    let last1 = before.last().copied();
    let last2 = before.len().checked_sub(2).map(|j| before[j]);
    let line = |a: Spot, b: Spot| {
        let share = (t - time_s[a.frame]) / (time_s[b.frame] - time_s[a.frame]);
        a.pos_yd.lerp(b.pos_yd, share)
    };
    match (last2, last1, next1, next2) {
        (_, Some(a), Some(b), _) if is_near(&a) => Some(line(a, b)),
        (Some(a), Some(b), _, _) if is_near(&a) => Some(line(a, b)),
        (_, _, Some(a), Some(b)) => Some(line(a, b)),
        (_, Some(a), _, _) | (_, _, Some(a), _) => Some(a.pos_yd),
        _ => None,
    }
}
