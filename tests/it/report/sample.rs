//! Made-up rows for the report's tests: simple simulated chases, invented names, nothing real.
//!
//! A carrier runs a smooth path; a defender follows the drag model towards a point on it with a planted fault.
//! Needed speed and chance come from the reach formula over the carrier's later places, and each step's change of
//! the expected spot goes to one heading, so that the rows are consistent without the engine.

use tailchase::base::{V2, normal, units::mph};
use tailchase::store::rows::{CarryRow, FrameRow, PlayerRow, PursuitRow, TeamRow};

const DT_S: f64 = 0.1;
const ALPHA: f64 = 1.3;
const REACH_YD: f64 = 1.25;

/// What a scene is made of.
#[derive(Clone, Copy)]
pub struct Scene {
    pub carrier_from_yd: V2,
    pub cut_s: f64,
    pub defender_from_yd: V2,
    pub top_yps: f64,
    pub break_s: f64,
    /// Shift of the point aimed at, along the field: negative is flat.
    pub aim_shift_yd: f64,
    pub push: f64,
    pub blocked_until_s: f64,
    pub length_s: f64,
}

impl Scene {
    pub const LATE_AND_FLAT: Scene = Scene {
        carrier_from_yd: V2::new(34.0, 22.0),
        cut_s: 1.6,
        defender_from_yd: V2::new(50.0, 33.0),
        top_yps: 9.4,
        break_s: 1.3,
        aim_shift_yd: -9.0,
        push: 0.95,
        blocked_until_s: 0.0,
        length_s: 5.2,
    };
    pub const SOUND: Scene =
        Scene { break_s: 0.4, aim_shift_yd: 0.0, push: 1.0, defender_from_yd: V2::new(52.0, 28.0), ..Scene::LATE_AND_FLAT };
    pub const BLOCKED: Scene = Scene { blocked_until_s: 2.2, break_s: 0.5, aim_shift_yd: -2.0, ..Scene::LATE_AND_FLAT };
}

fn carrier_at(scene: &Scene, t: f64) -> V2 {
    let ease = 1.0 / (1.0 + (-(t - scene.cut_s) / 0.35).exp());
    let run = (t + ((-1.6 * t).exp() - 1.0) / 1.6).max(0.0);
    scene.carrier_from_yd
        + V2::new(8.4 * run * (0.72 + 0.26 * ease), 4.6 * (t.min(6.0)) * (1.0 - ease) - 6.2 * (t - scene.cut_s).max(0.0) * ease * 0.45)
}

fn drag(t: f64) -> (f64, f64) {
    let k = (1.0 - (-ALPHA * t).exp()) / ALPHA;
    (k, t - k)
}

/// Least needed speed, the time of the first meeting at top speed (else of the least need), the expected spot and
/// the chance from a state, over the carrier's later places.
fn outlook(scene: &Scene, now: f64, p: V2, v: V2) -> (f64, f64, f64, f64) {
    let (mut need, mut when, mut spot, mut chance) = (f64::INFINITY, scene.length_s, 0.0, 0.0);
    let steps = ((scene.length_s - now) / DT_S).round() as i64;
    let sigma = 0.03 * scene.top_yps;
    for i in 0..=steps.max(0) {
        let t = i as f64 * DT_S;
        let q = carrier_at(scene, now + t);
        let (k, room) = drag(t);
        let gap = ((q - p - v * k).norm() - REACH_YD).max(0.0);
        let n = if gap == 0.0 { 0.0 } else { gap / room };
        if n < need {
            when = if need <= scene.top_yps { when } else { now + t };
            need = n;
        }
        let f = normal::cdf((scene.top_yps - need) / sigma);
        spot += q.x * (f - chance);
        chance = f;
    }
    spot += carrier_at(scene, scene.length_s).x * (1.0 - chance);
    (need, when, spot, chance)
}

/// One pursuit and its frames, from the scene; the ending follows from what happened unless the caller changes it.
pub fn chase(scene: &Scene, play: &str, defender: (&str, &str, &str, &str)) -> (PursuitRow, Vec<FrameRow>) {
    let (mut p, mut v) = (scene.defender_from_yd, V2::new(0.6, 0.0));
    let mut frames: Vec<FrameRow> = Vec::new();
    let mut entries = [0.0; 6];
    let start = outlook(scene, 0.0, p, v);
    let (mut t, mut met) = (0.0, false);
    loop {
        let c = carrier_at(scene, t);
        let cv = (carrier_at(scene, t + DT_S) - c) / DT_S;
        let r = c - p;
        let (need, when, spot, chance) = outlook(scene, t, p, v);
        met = met || r.norm() <= REACH_YD;
        let blocked = t < scene.blocked_until_s;
        let broke = t >= scene.break_s - 1e-9;
        let aim = carrier_at(scene, when) + V2::new(scene.aim_shift_yd, 0.0) - p;
        let aim = if aim.norm() < 2.0 { r } else { aim };
        let u = aim.unit().unwrap_or(V2::EAST)
            * if blocked {
                0.1
            } else if broke {
                scene.push
            } else {
                0.12
            };
        let w = cv - v;
        let rate = r.cross(w) / r.norm2();
        let mut frame = FrameRow {
            game: "901".into(),
            play: play.into(),
            carry: 1,
            pursuit: 1,
            defender: defender.0.into(),
            frame: 11 + frames.len() as i64,
            time_s: 1.0 + t,
            carrier_x_yd: c.x,
            carrier_y_yd: c.y,
            defender_x_yd: p.x,
            defender_y_yd: p.y,
            carrier_speed_yps: cv.norm(),
            defender_speed_yps: v.norm(),
            range_yd: r.norm(),
            bearing_deg: Some(r.angle_rad().to_degrees()),
            bearing_sigma_deg: Some((0.14 / r.norm()).atan().to_degrees()),
            line_rate_degps: Some(rate.to_degrees()),
            need_yps: need.is_finite().then_some(need),
            chance,
            expected_x_yd: spot,
            push: Some(u.norm()),
            blocked,
            ..FrameRow::default()
        };
        if met || t >= scene.length_s - 1e-9 {
            frames.push(frame);
            break;
        }
        let (k, room) = drag(DT_S);
        let fade = (-ALPHA * DT_S).exp();
        p = p + v * k + u * (scene.top_yps * room);
        v = v * fade + u * (scene.top_yps * (1.0 - fade));
        t += DT_S;
        let given = outlook(scene, t, p, v).2 - spot;
        let share = if blocked {
            [0.0, 0.0, 0.0, 0.0, 1.0, 0.0]
        } else if !broke {
            [1.0, 0.0, 0.0, 0.0, 0.0, 0.0]
        } else {
            [0.0, 0.72, -0.04, 0.2, 0.0, 0.12]
        };
        let step = share.map(|s| s * given);
        for (sum, s) in entries.iter_mut().zip(step) {
            *sum += s;
        }
        [frame.late_yd, frame.flat_yd, frame.deep_yd, frame.pace_yd, frame.block_yd, frame.move_yd] = step.map(Some);
        frames.push(frame);
    }
    let end = carrier_at(scene, t);
    let ideal = carrier_at(scene, start.1);
    let lost = if met { None } else { frames.iter().rposition(|f| f.need_yps.is_some_and(|n| n <= scene.top_yps)) };
    let row = PursuitRow {
        game: "901".into(),
        play: play.into(),
        carry: 1,
        pursuit: 1,
        carrier: "c7".into(),
        carrier_name: Some("Corin Ashdown".into()),
        defender: defender.0.into(),
        defender_name: Some(defender.1.into()),
        defender_side: Some(defender.2.into()),
        position: Some(defender.3.into()),
        start_frame: 11,
        end_frame: 10 + frames.len() as i64,
        start_s: 1.0,
        end_s: 1.0 + t,
        ending: if met { "stop" } else { "chance_lost" }.into(),
        start_range_yd: frames[0].range_yd,
        closest_yd: frames.iter().map(|f| f.range_yd).fold(f64::INFINITY, f64::min),
        on_course_share: 0.41,
        lean_deg: Some(1.4 * scene.aim_shift_yd),
        ideal_s: Some(start.1),
        ideal_x_yd: Some(ideal.x),
        ideal_y_yd: Some(ideal.y),
        foresight_s: Some(start.1 - 0.2),
        foresight_x_yd: Some(ideal.x - 0.8),
        foresight_y_yd: Some(ideal.y + 3.4),
        met_s: t,
        met_x_yd: end.x,
        met_y_yd: end.y,
        top_speed_yps: scene.top_yps,
        top_speed_sigma_yps: 0.03 * scene.top_yps,
        need_start_yps: Some(start.0),
        chance_start: start.3,
        chance_lost_s: lost.map(|i| frames[i].time_s - 1.0),
        chance_lost_frame: lost.map(|i| frames[i].frame),
        chance_lost_need_yps: lost.and_then(|i| frames.get(i + 1)).and_then(|f| f.need_yps),
        clock_s: Some(0.3),
        break_s: Some(scene.break_s),
        contact_angle_deg: met.then_some(104.0),
        contact_side: met.then(|| "inside".into()),
        contact_closing_yps: met.then_some(4.4),
        efficiency: Some(0.71),
        conceded_yd: Some(entries.iter().sum()),
        late_yd: Some(entries[0]),
        flat_yd: Some(entries[1]),
        deep_yd: Some(entries[2]),
        pace_yd: Some(entries[3]),
        block_yd: Some(entries[4]),
        move_yd: Some(entries[5]),
        steer_word: Some("mixed".into()),
        charged: true,
        ..PursuitRow::default()
    };
    assert!(mph(row.top_speed_yps) > 10.0 && row.closest_yd.is_finite());
    (row, frames)
}

/// A player of the ranking; the six entries are scaled from one number.
pub fn player(rank: i64, id: &str, name: &str, side: &str, own_yd: f64, chances: i64) -> PlayerRow {
    let half = 3.4 / (chances as f64).sqrt();
    let e = [0.34, 0.41, -0.06, 0.31, 0.12, 0.19].map(|s| s * own_yd);
    PlayerRow {
        rank,
        rank_low: (rank - 2).max(1),
        rank_high: rank + 3,
        player: id.into(),
        name: Some(name.into()),
        side: Some(side.into()),
        position: Some(["CB", "FS", "LB", "DE"][rank as usize % 4].into()),
        games: 3,
        pursuits: chances + 9,
        chances,
        stops: chances / 3,
        contacts_lost: chances / 5,
        chances_lost: chances / 4,
        too_few: chances < 8,
        efficiency: Some(0.92 - 0.03 * own_yd),
        efficiency_low: Some(0.85 - 0.03 * own_yd),
        efficiency_high: Some(0.97 - 0.03 * own_yd),
        own_raw_yd: Some(own_yd * 1.1),
        own_yd: Some(own_yd),
        own_low_yd: Some(own_yd - half),
        own_high_yd: Some(own_yd + half),
        conceded_yd: Some(e.iter().sum()),
        late_yd: Some(e[0]),
        flat_yd: Some(e[1]),
        deep_yd: Some(e[2]),
        pace_yd: Some(e[3]),
        block_yd: Some(e[4]),
        move_yd: Some(e[5]),
        on_course_share: Some(0.5 - 0.04 * own_yd),
        lean_deg: Some(3.0 - 3.1 * own_yd),
        steer_word: Some(["leads", "mixed", "runs at the man"][rank as usize % 3].into()),
        ..PlayerRow::default()
    }
}

pub fn team(rank: i64, side: &str, own_yd: f64) -> TeamRow {
    let p = player(rank, "", "", side, own_yd, 60);
    TeamRow {
        rank,
        side: side.into(),
        players: 11,
        chances: 60,
        stops: 24,
        chances_lost: 13,
        efficiency: p.efficiency,
        own_yd: p.own_yd,
        own_low_yd: p.own_low_yd,
        own_high_yd: p.own_high_yd,
        late_yd: p.late_yd,
        flat_yd: p.flat_yd,
        deep_yd: p.deep_yd,
        pace_yd: p.pace_yd,
        block_yd: p.block_yd,
        move_yd: p.move_yd,
    }
}

pub fn carry(play: &str, conceded_yd: f64) -> CarryRow {
    CarryRow {
        game: "901".into(),
        play: play.into(),
        carry: 1,
        carrier: "c7".into(),
        carrier_name: Some("Corin Ashdown".into()),
        end_how: "event_down".into(),
        start_x_yd: 34.0,
        end_x_yd: 46.0 + conceded_yd,
        gain_yd: 12.0 + conceded_yd,
        stopped_by: Some("d3;d9".into()),
        conceded_yd: Some(conceded_yd),
        ..CarryRow::default()
    }
}
