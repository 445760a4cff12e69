//! The frames table of a pursuit, from what its judgement kept.

use super::judge::{CarryAudit, PursuitAudit};
use crate::engine::bearing::Drift;
use crate::model::{Play, Settings};
use crate::store::FrameRow;

/// One row for each frame of the pursuit.
pub fn frame_rows(play: &Play, carry: &CarryAudit, pursuit: &PursuitAudit, settings: &Settings) -> Vec<FrameRow> {
    let reach_yd = settings.carry.reach_yd;
    (0..pursuit.states.len())
        .map(|i| {
            let now = pursuit.first + i;
            let (carrier, defender) = (carry.chase.carrier[now], pursuit.states[i]);
            let value = pursuit.ledger.values[i];
            let step = pursuit.ledger.steps.get(i).copied().flatten();
            let sight = pursuit.looks[i].sight;
            FrameRow {
                game: pursuit.row.game.clone(),
                play: pursuit.row.play.clone(),
                carry: pursuit.row.carry,
                pursuit: pursuit.row.pursuit,
                defender: pursuit.row.defender.clone(),
                frame: play.frames[carry.start + now],
                time_s: play.time_s[carry.start + now],
                carrier_x_yd: carrier.pos_yd.x,
                carrier_y_yd: carrier.pos_yd.y,
                defender_x_yd: defender.pos_yd.x,
                defender_y_yd: defender.pos_yd.y,
                carrier_speed_yps: carrier.vel_yps.norm(),
                defender_speed_yps: defender.vel_yps.norm(),
                range_yd: (carrier.pos_yd - defender.pos_yd).norm(),
                bearing_deg: sight.map(|s| s.bearing_rad.to_degrees()),
                bearing_sigma_deg: sight.map(|s| s.bearing_sigma_rad.to_degrees()),
                line_rate_degps: sight.map(|s| s.line_rate_radps.to_degrees()),
                line_rate_sigma_degps: sight.map(|s| s.line_rate_sigma_radps.to_degrees()),
                closing_yps: sight.map(|s| s.closing_yps),
                closing_sigma_yps: sight.map(|s| s.closing_sigma_yps),
                miss_yd: sight.map(|s| s.miss_yd),
                miss_sigma_yd: sight.map(|s| s.miss_sigma_yd),
                cpa_s: sight.map(|s| s.cpa_s),
                steady: sight.is_some_and(|s| s.steady(reach_yd)),
                on_course: sight.is_some_and(|s| s.on_course(reach_yd)),
                drift: sight.and_then(|s| s.drift(reach_yd)).map(|d: Drift| d.word().to_owned()),
                head_turn_degps: pursuit.looks[i].head_turn_radps.map(f64::to_degrees),
                need_yps: value.need_yps,
                t_star_s: value.t_star_s,
                chance: value.chance,
                expected_x_yd: value.expected_x_yd,
                push: value.push.map(|p| p.norm()),
                blocked: pursuit.blocked[i],
                late_yd: step.map(|s| s.late_yd),
                flat_yd: step.map(|s| s.flat_yd),
                deep_yd: step.map(|s| s.deep_yd),
                pace_yd: step.map(|s| s.pace_yd),
                block_yd: step.map(|s| s.block_yd),
                move_yd: step.map(|s| s.move_yd),
            }
        })
        .collect()
}
