//! One mover's rows to dense segments: repeats resolved, impossible places set aside, short gaps bridged, long ones split.

use super::{jumps, repeats, spikes};
use crate::base::V2;
use crate::model::settings::SmoothingSettings;
use crate::model::{FindingKind, Findings, RawTrack, SetAside, SourceRow};

/// Seen frames that a segment needs, so that place, speed and acceleration can be told.
const FEWEST_SEEN: usize = 3;
/// Slack when a gap's length is compared with the setting: times are sums of steps.
const ROUNDING_S: f64 = 1e-9;

/// A piece of a mover's way, one entry for each frame index from `first` on, no hole longer than the setting allows.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Segment {
    /// Frame index of the first entry; it is a seen one, and so is the last.
    pub first: usize,
    /// Measured places; in a hole, the straight line across it.
    pub pos_yd: Vec<V2>,
    /// False in a bridged hole.
    pub seen: Vec<bool>,
}

impl Segment {
    /// One past the last frame index.
    pub fn end(&self) -> usize {
        self.first + self.pos_yd.len()
    }
}

/// What became of a mover's rows.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Cleaned {
    /// In order of time.
    pub segments: Vec<Segment>,
    /// In order of source.
    pub set_aside: Vec<(SourceRow, SetAside)>,
}

/// A row that is still in: frame index, place, source.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Spot {
    pub frame: usize,
    pub pos_yd: V2,
    pub source: SourceRow,
}

/// What was done, before it is counted as findings: (kind, frame index).
pub(super) type Notes = Vec<(FindingKind, usize)>;

/// Cleans one mover's track. `time_s` are the play's times, `place` names a frame (by its index) for the findings.
///
/// Never fails: a track of which nothing is left gives no segment, and every row not used is named in `set_aside`.
pub fn clean_track(
    raw: &RawTrack,
    time_s: &[f64],
    settings: &SmoothingSettings,
    findings: &mut Findings,
    place: &dyn Fn(i64) -> String,
) -> Cleaned {
    if let Some(segment) = untouched(raw, time_s, settings) {
        return Cleaned { segments: vec![segment], set_aside: Vec::new() };
    }
    let mut notes = Notes::new();
    let mut out = Cleaned::default();
    let mut spots = repeats::resolve(raw, time_s, settings, &mut out.set_aside, &mut notes);
    let cuts = jumps::set_aside(&mut spots, time_s, settings, &mut out.set_aside, &mut notes);
    spikes::set_aside(&mut spots, time_s, settings, &mut out.set_aside, &mut notes);
    let mut begin = 0;
    for i in 1..=spots.len() {
        let is_last = i == spots.len();
        if !is_last {
            let (a, b) = (spots[i - 1].frame, spots[i].frame);
            let is_cut = cuts.contains(&b);
            if !is_cut && missing_s(time_s, a, b) <= settings.bridge_s + ROUNDING_S {
                if b > a + 1 {
                    notes.push((FindingKind::GapBridged, a + 1));
                }
                continue;
            }
            if !is_cut {
                notes.push((FindingKind::GapSplit, a + 1));
            }
        }
        let part = &spots[begin..i];
        begin = i;
        if part.len() < FEWEST_SEEN {
            out.set_aside.extend(part.iter().map(|s| (s.source, SetAside::TrackTooShort)));
            notes.push((FindingKind::TooShort, part[0].frame));
        } else {
            out.segments.push(dense(part, time_s));
        }
    }
    out.set_aside.sort_unstable();
    let last = time_s.len().saturating_sub(1);
    for (kind, frame) in notes {
        findings.add(kind, 1, || place(frame.min(last) as i64));
    }
    out
}

/// The segment of a track in which nothing needs putting in order; none where anything does.
fn untouched(raw: &RawTrack, time_s: &[f64], settings: &SmoothingSettings) -> Option<Segment> {
    let n = raw.frame_index.len();
    let first = *raw.frame_index.first()? as usize;
    if n < FEWEST_SEEN || raw.x_yd.len() < n || raw.y_yd.len() < n || first + n > time_s.len() {
        return None;
    }
    let frames_follow = raw.frame_index.iter().enumerate().all(|(i, f)| *f as usize == first + i);
    let times = &time_s[first..first + n];
    if !frames_follow || times.windows(2).any(|w| w[1] - w[0] > settings.bridge_s) {
        return None;
    }
    let pos_yd: Vec<V2> = raw.x_yd.iter().zip(&raw.y_yd).map(|(x, y)| V2::new(*x, *y)).collect();
    // A place that is not a number fails every comparison, so that it is found here too.
    let is_possible = |i: usize| jumps::is_reachable(pos_yd[i + 1] - pos_yd[i], times[i + 1] - times[i], settings);
    if !(0..n - 1).all(is_possible) || spikes::may_have_any(&pos_yd, times, settings) {
        return None;
    }
    Some(Segment { first, pos_yd, seen: vec![true; n] })
}

/// Seconds missing between two seen frames: the time from one to the other less one ordinary step.
fn missing_s(time_s: &[f64], a: usize, b: usize) -> f64 {
    let gap_s = time_s[b] - time_s[a];
    let ordinary_s = time_s.windows(2).map(|w| w[1] - w[0]).fold(gap_s, f64::min);
    gap_s - ordinary_s
}

fn dense(spots: &[Spot], time_s: &[f64]) -> Segment {
    let (first, last) = (spots[0].frame, spots[spots.len() - 1].frame);
    let mut segment = Segment { first, pos_yd: Vec::with_capacity(last + 1 - first), seen: Vec::with_capacity(last + 1 - first) };
    for (i, spot) in spots.iter().enumerate() {
        if let Some(before) = i.checked_sub(1).map(|j| &spots[j]) {
            for frame in before.frame + 1..spot.frame {
                let share = (time_s[frame] - time_s[before.frame]) / (time_s[spot.frame] - time_s[before.frame]);
                segment.pos_yd.push(before.pos_yd.lerp(spot.pos_yd, share));
                segment.seen.push(false);
            }
        }
        segment.pos_yd.push(spot.pos_yd);
        segment.seen.push(true);
    }
    segment
}
