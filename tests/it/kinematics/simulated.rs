//! Runners with known truth: dv/dt = 1.3 (V u − v), u changing abruptly, seen with Gaussian noise.

use tailchase::base::{Stream, V2};
use tailchase::kinematics::Segment;

const DRAG_PER_S: f64 = 1.3;

pub struct Runner {
    pub truth_pos: Vec<V2>,
    pub truth_vel: Vec<V2>,
    /// Seconds to the nearest start or cut.
    pub since_cut_s: Vec<f64>,
    pub seen: Segment,
    pub time_s: Vec<f64>,
}

/// A defender who stands for `wait_s`, starts suddenly, then cuts, eases off and stops every half to two and a half seconds.
pub fn runner(name: &str, hz: f64, length_s: f64, wait_s: f64, sigma_yd: f64) -> Runner {
    restless_runner(name, hz, length_s, wait_s, sigma_yd, (0.5, 2.5))
}

/// The same with a cut every so many seconds, evenly between two bounds. The same name gives the same run at every rate; only the
/// noise differs.
pub fn restless_runner(name: &str, hz: f64, length_s: f64, wait_s: f64, sigma_yd: f64, every_s: (f64, f64)) -> Runner {
    let mut s = Stream::new(11, name);
    let top = s.between(7.0, 10.0);
    let mut heading = s.between(-3.0, 3.0);
    let mut cuts = vec![(0.0, V2::ZERO)];
    let mut t = wait_s;
    while t < length_s {
        let push = if cuts.len() == 1 || s.chance(0.5) {
            1.0
        } else if s.chance(0.4) {
            0.0
        } else {
            s.between(0.3, 1.0)
        };
        cuts.push((t, V2::polar(heading) * (push * top)));
        heading += s.normal();
        t += s.between(every_s.0, every_s.1);
    }
    let mut noise = Stream::new(12, &format!("{name} {hz}"));
    let n = (length_s * hz).round() as usize + 1;
    let mut r = Runner {
        truth_pos: vec![],
        truth_vel: vec![],
        since_cut_s: vec![],
        seen: Segment { first: 0, pos_yd: vec![], seen: vec![true; n] },
        time_s: (0..n).map(|k| k as f64 / hz).collect(),
    };
    let (mut p, mut v, mut now, mut leg) = (V2::new(20.0, 20.0), V2::ZERO, 0.0, 0);
    for k in 0..n {
        let target = k as f64 / hz;
        while now < target {
            let until = cuts.get(leg + 1).map_or(target, |c| c.0.min(target));
            let (h, goal) = (until - now, cuts[leg].1);
            let kept = (-DRAG_PER_S * h).exp();
            p += goal * h + (v - goal) * ((1.0 - kept) / DRAG_PER_S);
            v = goal + (v - goal) * kept;
            now = until;
            if cuts.get(leg + 1).is_some_and(|c| c.0 <= now) {
                leg += 1;
            }
        }
        r.truth_pos.push(p);
        r.truth_vel.push(v);
        r.since_cut_s.push(cuts[1..].iter().map(|c| (c.0 - target).abs()).fold(f64::INFINITY, f64::min));
        r.seen.pos_yd.push(p + V2::new(noise.normal(), noise.normal()) * sigma_yd);
    }
    r
}

pub fn squad(name: &str, count: usize, hz: f64, wait_s: f64, sigma_yd: f64) -> Vec<Runner> {
    (0..count).map(|i| runner(&format!("{name} {i}"), hz, 8.0 + wait_s, wait_s, sigma_yd)).collect()
}
