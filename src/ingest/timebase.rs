//! Seconds of a play's frames: from the time stamps where they are fit for it, from the frame numbers otherwise.

/// Stamps further apart than this within a play mean that the clock passed midnight.
const HALF_DAY_US: i64 = 12 * 3600 * 1_000_000;
const DAY_US: i64 = 2 * HALF_DAY_US;
/// Usual frame rates, Hz.
const USUAL_HZ: [f64; 12] = [1.0, 2.0, 5.0, 10.0, 12.5, 15.0, 20.0, 24.0, 25.0, 30.0, 50.0, 60.0];

/// One stamp a frame: the lower median of what the movers' rows say. `stamps` are (frame index, microseconds), any order.
pub(crate) fn median_stamps(stamps: &mut [(u32, i64)], frames: usize) -> Vec<Option<i64>> {
    let earliest = stamps.iter().map(|s| s.1).min().unwrap_or(0);
    let latest = stamps.iter().map(|s| s.1).max().unwrap_or(0);
    if latest - earliest > HALF_DAY_US && latest - earliest < DAY_US {
        for stamp in stamps.iter_mut().filter(|s| s.1 - earliest < HALF_DAY_US) {
            stamp.1 += DAY_US;
        }
    }
    let mut out = vec![None; frames];
    // Nearly always all rows of a frame say the same.
    let mut differ = false;
    for (frame, us) in stamps.iter() {
        match &mut out[*frame as usize] {
            Some(first) => differ |= first != us,
            empty => *empty = Some(*us),
        }
    }
    if differ {
        stamps.sort_unstable();
        for group in stamps.chunk_by(|a, b| a.0 == b.0) {
            out[group[0].0 as usize] = Some(group[(group.len() - 1) / 2].1);
        }
    }
    out
}

/// Seconds from the first frame, by the stamps; `None` when they do not strictly increase (coarse, running back, absent).
/// Frames without a stamp are placed between their neighbours by frame number. A clock that counts down is turned round.
pub(crate) fn by_stamps(frames: &[i64], stamps: &[Option<i64>]) -> Option<Vec<f64>> {
    let known: Vec<(i64, i64)> = frames.iter().zip(stamps).filter_map(|(f, s)| s.map(|s| (*f, s))).collect();
    if frames.len() == 1 {
        return Some(vec![0.0]);
    }
    if known.len() < 2 || known.len() * 2 < frames.len() {
        return None;
    }
    let sign = if known[1].1 < known[0].1 { -1 } else { 1 };
    if known.windows(2).any(|w| (w[1].1 - w[0].1) * sign <= 0) {
        return None;
    }
    let mut at = 0;
    let us: Vec<f64> = frames
        .iter()
        .map(|f| {
            while at + 2 < known.len() && known[at + 1].0 <= *f {
                at += 1;
            }
            let ((f0, s0), (f1, s1)) = (known[at], known[at + 1]);
            match *f {
                f if f == f0 => s0 as f64,
                f if f == f1 => s1 as f64,
                f => s0 as f64 + (s1 - s0) as f64 * ((f - f0) as f64 / (f1 - f0) as f64),
            }
        })
        .collect();
    Some(us.iter().map(|v| (v - us[0]) * sign as f64 / 1e6).collect())
}

/// Seconds from the first frame, by the frame numbers.
pub(crate) fn by_frames(frames: &[i64], rate_hz: f64) -> Vec<f64> {
    frames.iter().map(|f| (f - frames[0]) as f64 / rate_hz).collect()
}

/// Frames and seconds that coarse stamps span, from the first change of stamp to the last.
pub(crate) fn span_of_changes(frames: &[i64], stamps: &[Option<i64>]) -> Option<(f64, f64)> {
    let known: Vec<(i64, i64)> = frames.iter().zip(stamps).filter_map(|(f, s)| s.map(|s| (*f, s))).collect();
    let changes: Vec<(i64, i64)> = known.windows(2).filter(|w| w[1].1 > w[0].1).map(|w| w[1]).collect();
    let (first, last) = (changes.first()?, changes.last()?);
    (last.1 > first.1).then(|| ((last.0 - first.0) as f64, (last.1 - first.1) as f64 / 1e6))
}

/// A usual rate within `tolerance` (share) of the estimate, else the estimate to a tenth.
pub(crate) fn usual_rate_hz(estimate_hz: f64, tolerance: f64) -> Option<f64> {
    if !(estimate_hz > 0.5 && estimate_hz < 500.0) {
        return None;
    }
    let near = USUAL_HZ.into_iter().min_by(|a, b| (a - estimate_hz).abs().total_cmp(&(b - estimate_hz).abs()))?;
    Some(if (near / estimate_hz - 1.0).abs() <= tolerance { near } else { (estimate_hz * 10.0).round() / 10.0 })
}

/// Frame numbers for times without any: whole steps of the usual length, or the rank where steps are too uneven for that.
/// Times within a quarter of a step are one frame. Returns each sorted distinct time with its frame.
pub(crate) fn frames_of_times(sorted_us: &[i64], step_us: i64) -> Vec<(i64, i64)> {
    let mut starts: Vec<i64> = Vec::new();
    let mut cluster = Vec::with_capacity(sorted_us.len());
    for us in sorted_us {
        if starts.last().is_none_or(|start| us - start > step_us / 4) {
            starts.push(*us);
        }
        cluster.push(starts.len() - 1);
    }
    let numbered: Vec<i64> = starts.iter().map(|s| 1 + (2 * (s - starts[0]) + step_us) / (2 * step_us.max(1))).collect();
    let is_even = numbered.windows(2).all(|w| w[1] > w[0]);
    sorted_us.iter().zip(cluster).map(|(us, c)| (*us, if is_even { numbered[c] } else { c as i64 + 1 })).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stamps_and_their_faults() {
        let frames = [3, 4, 6, 7];
        let s = |v: [i64; 4]| v.map(Some);
        assert_eq!(by_stamps(&frames, &s([0, 100_000, 300_000, 400_000])), Some(vec![0.0, 0.1, 0.3, 0.4]));
        assert_eq!(by_stamps(&frames, &s([900_000, 800_000, 600_000, 500_000])), Some(vec![0.0, 0.1, 0.3, 0.4]));
        assert_eq!(by_stamps(&frames, &s([0, 0, 1_000_000, 1_000_000])), None);
        assert_eq!(by_stamps(&frames, &[Some(0), None, Some(300_000), None]), Some(vec![0.0, 0.1, 0.3, 0.4]));
        assert_eq!(by_frames(&frames, 10.0), vec![0.0, 0.1, 0.3, 0.4]);
    }

    #[test]
    fn midnight_is_no_way_back() {
        let mut stamps = vec![(0, DAY_US - 100_000), (1, 0), (2, 100_000)];
        let out = median_stamps(&mut stamps, 3);
        assert_eq!(by_stamps(&[1, 2, 3], &out), Some(vec![0.0, 0.1, 0.2]));
    }

    #[test]
    fn numbers_for_times() {
        let out = frames_of_times(&[0, 10, 100_000, 300_000], 100_000);
        assert_eq!(out, vec![(0, 1), (10, 1), (100_000, 2), (300_000, 4)]);
    }

    #[test]
    fn rates() {
        assert_eq!(usual_rate_hz(9.7, 0.05), Some(10.0));
        assert_eq!(usual_rate_hz(17.04, 0.05), Some(17.0));
        assert_eq!(usual_rate_hz(f64::NAN, 0.05), None);
    }
}
