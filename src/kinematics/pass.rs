//! The inner loop: both axes of one run of frames through given gains, forward and back.

use super::cuts::{Suspect, Watch};
use super::plan::Plan;
use crate::base::V2;
use crate::model::Track;

/// Filtered state of both axes.
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct State {
    p: V2,
    v: V2,
    a: V2,
}

impl State {
    #[inline]
    fn ahead(self, h: f64) -> State {
        let half = 0.5 * h * h;
        State { p: self.p + self.v * h + self.a * half, v: self.v + self.a * h, a: self.a }
    }
}

/// Where the smoothed track goes: the frames wanted of the run, and the jumps to look out for on the way.
pub(super) struct Sink<'a> {
    pub keep: std::ops::Range<usize>,
    /// Its covariance is left alone.
    pub out: &'a mut Track,
    pub watch: Option<(&'a Watch, &'a mut Vec<Suspect>)>,
}

/// Runs filter and smoother over `pos_yd`; writes the frames wanted.
///
/// `step_s(k)` leads into frame k. Frames beyond the plan's end use its last gains. Unseen frames have gain zero in the plan, so
/// their positions do not count. The first frame is taken as measured.
#[inline]
pub(super) fn run(pos_yd: &[V2], step_s: impl Fn(usize) -> f64, plan: &Plan<3>, states: &mut Vec<State>, sink: Sink) {
    let Sink { keep, out, mut watch } = sink;
    let n = pos_yd.len();
    let gains = plan.gain.as_slice();
    let backs = plan.back.as_slice();
    states.clear();
    let Some(first) = pos_yd.first() else { return };
    let mut x = State { p: *first, ..State::default() };
    states.push(x);
    for (k, z) in pos_yd.iter().enumerate().skip(1) {
        let [kp, kv, ka] = gains[k.min(gains.len() - 1)];
        let guess = x.ahead(step_s(k));
        let e = *z - guess.p;
        x = State { p: guess.p + e * kp, v: guess.v + e * kv, a: guess.a + e * ka };
        states.push(x);
    }
    let kept = keep.len();
    out.pos_yd.resize(kept, V2::ZERO);
    out.vel_yps.resize(kept, V2::ZERO);
    out.acc_ypss.resize(kept, V2::ZERO);
    let mut write = |k: usize, s: &State| {
        if k >= keep.start && k < keep.end {
            let i = k - keep.start;
            out.pos_yd[i] = s.p;
            out.vel_yps[i] = s.v;
            out.acc_ypss[i] = s.a;
        }
    };
    write(n - 1, &x);
    // Jumps are looked for in the whole run, since one just before the frames wanted reaches into them.
    let stop = if watch.is_some() { 0 } else { keep.start };
    for k in (stop..n - 1).rev() {
        let now = states[k];
        let guess = now.ahead(step_s(k + 1));
        let (dp, dv, da) = (x.p - guess.p, x.v - guess.v, x.a - guess.a);
        if let Some((watch, suspects)) = &mut watch {
            watch.look(k + 1, dp, dv, da, suspects);
        }
        let g = &backs[k.min(backs.len() - 1)];
        x = State {
            p: now.p + dp * g[0][0] + dv * g[0][1] + da * g[0][2],
            v: now.v + dp * g[1][0] + dv * g[1][1] + da * g[1][2],
            a: now.a + dp * g[2][0] + dv * g[2][1] + da * g[2][2],
        };
        write(k, &x);
    }
}
