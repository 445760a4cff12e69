//! The line he ran: bearings over the pursuit, their medians, the textbook intercepts, the steering law.

use super::turned::turned_vector;
use crate::base::V2;
use crate::engine::bearing::{Sight, Spread, heading_rate_radps};
use crate::engine::chase::Chase;
use crate::engine::intercept::{SidelineCourse, triangle};
use crate::engine::ledger::Chaser;
use crate::engine::steering::{Instant, Steering, fit};
use crate::model::{Attack, Cov, Settings, Track};
use crate::stats::median_in_place;
use crate::store::PursuitRow;

/// Below this speed a heading means nothing, yd/s.
const SLOW_YPS: f64 = 2.0;

/// A frame's bearing and the rate of the carrier's bearing relative to the defender's heading.
#[derive(Clone, Copy, Debug)]
pub struct Look {
    pub sight: Option<Sight>,
    pub head_turn_radps: Option<f64>,
}

/// One look for each of the chaser's states. `carrier` and `defender` are the tracks, `start` the carry's first frame.
pub fn looks(chase: &Chase, chaser: &Chaser, carrier: &Track, defender: &Track, start: usize, attack: Attack) -> Vec<Look> {
    (0..chaser.states.len())
        .map(|i| {
            let frame = start + chaser.first + i;
            let spread = Spread::of(&cov(carrier, frame), &cov(defender, frame));
            let sight = Sight::new(chase.carrier[chaser.first + i], chaser.states[i], spread);
            let acc = defender.acc_ypss.get(frame - defender.first).map(|a| turned_vector(*a, attack));
            let heading_rate = acc.and_then(|a| heading_rate_radps(chaser.states[i].vel_yps, a, SLOW_YPS));
            Look { sight, head_turn_radps: sight.zip(heading_rate).map(|(s, rate)| s.head_turn_radps(rate)) }
        })
        .collect()
}

fn cov(track: &Track, frame: usize) -> Cov {
    track.cov.get(frame - track.first).copied().unwrap_or_default()
}

/// Fills the row's geometry as run.
pub fn fill_geometry(row: &mut PursuitRow, chase: &Chase, chaser: &Chaser, looks: &[Look], reach_yd: f64) {
    let sights: Vec<&Sight> = looks.iter().filter_map(|l| l.sight.as_ref()).collect();
    let carrier = &chase.carrier[chaser.first..chaser.first + chaser.states.len()];
    let gap = |i: usize| carrier[i].pos_yd - chaser.states[i].pos_yd;
    row.start_range_yd = gap(0).norm();
    row.start_bearing_deg = if gap(0).norm() > 0.0 { (-gap(0)).angle_rad().to_degrees() } else { 0.0 };
    row.closest_yd = (0..carrier.len()).map(|i| gap(i).norm()).fold(f64::INFINITY, f64::min);
    row.carrier_speed_yps = median(carrier.iter().map(|s| s.vel_yps.norm())).unwrap_or(0.0);
    row.speed_ratio =
        median(carrier.iter().zip(chaser.states).filter(|(c, _)| c.vel_yps.norm() > 1.0).map(|(c, d)| d.vel_yps.norm() / c.vel_yps.norm()));
    row.closing_median_yps = median(sights.iter().map(|s| s.closing_yps)).unwrap_or(0.0);
    row.line_rate_median_degps = median(sights.iter().map(|s| s.line_rate_radps.to_degrees())).unwrap_or(0.0);
    row.line_rate_sigma_degps = median(sights.iter().map(|s| s.line_rate_sigma_radps.to_degrees()));
    row.head_turn_median_degps = median(looks.iter().filter_map(|l| l.head_turn_radps).map(f64::to_degrees));
    row.miss_median_yd = median(sights.iter().map(|s| s.miss_yd.abs())).unwrap_or(row.start_range_yd);
    row.on_course_share = share(&sights, |s| s.on_course(reach_yd)).unwrap_or(0.0);
    row.steady_share = share(&sights, Sight::rate_is_zero);
}

fn share(sights: &[&Sight], test: impl Fn(&Sight) -> bool) -> Option<f64> {
    let count = sights.iter().filter(|s| test(s)).count();
    (!sights.is_empty()).then(|| count as f64 / sights.len() as f64)
}

fn median(values: impl Iterator<Item = f64>) -> Option<f64> {
    median_in_place(&mut values.collect::<Vec<_>>())
}

/// Fills the textbook intercepts at state `at`: the triangle at his present speed, the sideline at his top speed.
pub fn fill_textbook(row: &mut PursuitRow, chase: &Chase, chaser: &Chaser, at: usize, settings: &Settings) {
    let carrier = chase.carrier[chaser.first + at];
    let defender = chaser.states[at];
    if let Ok(found) = triangle(defender.pos_yd, defender.vel_yps.norm(), carrier.pos_yd, carrier.vel_yps) {
        row.triangle_s = Some(found.t_s);
        row.triangle_lead_deg = Some(found.lead_rad.to_degrees());
    }
    let Some(course) = SidelineCourse::new(carrier.pos_yd, carrier.vel_yps, &chase.field, settings.motion.sideline_margin_yd) else {
        return;
    };
    if let Some(tight) = course.tightest(defender.pos_yd, chaser.top.yps) {
        row.sideline_s = Some(tight.t_s);
        row.sideline_x_yd = Some(tight.spot_yd.x);
        row.sideline_y_yd = Some(tight.spot_yd.y);
    }
    if let Some(safe) = course.safest(defender.pos_yd, chaser.top.yps) {
        row.safest_x_yd = Some(safe.spot_yd.x);
        row.safest_y_yd = Some(safe.spot_yd.y);
        row.safest_margin_s = Some(safe.margin_s);
    }
}

/// Longest delay that the steering fit looks at.
const LONGEST_DELAY_S: f64 = 0.6;

/// The steering law over the states from `from` on at which he runs free and is not yet upon the carrier: the longest
/// unbroken stretch of them.
pub fn steering(chase: &Chase, chaser: &Chaser, looks: &[Look], defender: &Track, start: usize, from: usize) -> Option<Steering> {
    let near_yd = 2.0 * chase.grid.drag.reach_yd;
    let instant = |i: usize| -> Option<Instant> {
        let sight = looks[i].sight.as_ref()?;
        let vel: V2 = chaser.states[i].vel_yps;
        let line_rate_radps = sight.line_rate_radps;
        let heading_rate_radps = line_rate_radps - looks[i].head_turn_radps?;
        let speed2 = vel.norm2();
        let acc_var = cov(defender, start + chaser.first + i).aa;
        (!chaser.blocked[i] && sight.range_yd > near_yd).then(|| Instant {
            t_s: chase.grid.t_s[chaser.first + i],
            heading_rate_radps,
            line_rate_radps,
            deviation_rad: crate::base::wrap_rad(vel.angle_rad() - sight.bearing_rad),
            // Delta method: the heading rate's variance is the acceleration's across the way over the speed squared.
            weight: if acc_var > 0.0 { speed2 / acc_var } else { speed2 },
        })
    };
    let mut best: Vec<Instant> = Vec::new();
    let mut run: Vec<Instant> = Vec::new();
    for i in from..chaser.states.len() {
        match instant(i) {
            Some(one) => run.push(one),
            None => run.clear(),
        }
        if run.len() > best.len() {
            best.clone_from(&run);
        }
    }
    fit(&best, LONGEST_DELAY_S)
}
