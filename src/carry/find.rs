//! The carries of a play: the best source that speaks, then the same rules for all of them.

use super::attack::{attack_at, downfield_x_yd, sign};
use super::ends::find_end;
use super::live::{Live, live};
use super::possession::{Gain, Possession};
use super::scene::Scene;
use super::{by_ball, holds, marks, named, unseen};
use crate::model::settings::CarrySettings;
use crate::model::{Attack, Carry, CarryEnd, CarryStart, EventMark, MoverTrack, Play};

/// How far past the line of scrimmage a player who took the snap must get to be a carrier, yd.
const PAST_LINE_YD: f64 = 0.5;
/// Speed from which on he runs, yd/s, and the base over which it is taken, s.
const RUN_YPS: f64 = 1.5;
const SPEED_BASE_S: f64 = 0.2;
/// Forward speed of a ball that has been passed, yd/s: a lateral has none.
const FORWARD_YPS: f64 = 6.0;
/// How far the ball must travel with somebody who is a carrier by its word alone, yd.
const TRAVELS_YD: f64 = 0.75;
/// Or how long it must stay within how far of him, s and yd.
const STAYS_S: f64 = 0.8;
const IN_HANDS_YD: f64 = 0.6;

/// The carries of a play in order of time, frames inclusive.
///
/// `tracks` and `ball` are the coarse tracks: cleaned places with plain differences for velocities; one entry
/// of `tracks` for each mover. Rules, whatever the source:
///
/// - A carry starts where possession is gained (hand-off, catch, reception, recovery). The player who took the
///   snap carries only if he crosses the line of scrimmage with the ball, from where his run at it began; a pass,
///   a kick or a sack ends his possession without a carry.
/// - It ends at the first of: the mark of an end, the goal line, a line of the field, the ball's leaving, and,
///   where no mark tells, the frame from which he gets nowhere with an opponent on him.
/// - A catch in the end zone that he attacks, a fair catch, a touchback and an incomplete pass give none.
pub fn find_carries(play: &Play, tracks: &[MoverTrack], ball: Option<&MoverTrack>, settings: &CarrySettings) -> Vec<Carry> {
    let scene = Scene::new(play, tracks, ball, settings);
    if scene.frames() < 2 || scene.movers() == 0 {
        return Vec::new();
    }
    let live = live(&scene);
    let mut carries: Vec<Carry> = Vec::new();
    for mut p in possessions(&scene, live) {
        // A carrier whose first frames are missing is followed from where he is seen.
        let Some(seen_from) = (p.start..=p.end).find(|f| scene.pos(p.mover, *f).is_some()) else { continue };
        p.start = seen_from;
        // Where no snap is known, the sides face each other best when the data begin.
        let snap = live.snap.unwrap_or(0);
        let attack = attack_at(&scene, p.mover, snap, p.start);
        let end = find_end(&scene, attack, &p);
        let carry = carry_of(&scene, live, attack, &p, end.frame, end.how);
        if let Some(carry) = carry {
            carries.push(Carry { number: carries.len() as u32 + 1, ..carry });
        }
        let dead = matches!(end.how, CarryEnd::SpeedCollapse | CarryEnd::LeftField | CarryEnd::CrossedGoal)
            || matches!(end.how, CarryEnd::EventDown | CarryEnd::EventOut | CarryEnd::EventScore | CarryEnd::EventSlide);
        // The ball's way alone would go on to whoever picks the dead ball up.
        if dead && !p.thrown && p.start_how == CarryStart::Ball || dead && end.frame < p.end {
            break;
        }
    }
    carries
}

fn possessions(scene: &Scene, live: Live) -> Vec<Possession> {
    let column = named::by_column(scene);
    if !column.is_empty() {
        return column;
    }
    let name = scene.play.hints.carrier.map(|m| m as usize).filter(|m| *m < scene.movers());
    let holds = holds::holds(scene);
    let mut found = match marks::spans(scene) {
        Some(spans) => by_marks(scene, live, &holds, &spans, name),
        None => by_ball::possessions(scene, live, &holds),
    };
    match name {
        Some(mover) if found.is_empty() && !denied(scene) => found.extend(named::alone(scene, mover)),
        Some(mover) => named::confirm(scene, mover, &mut found),
        None => {}
    }
    found
}

/// Whether a mark says that nobody ran with the ball.
fn denied(scene: &Scene) -> bool {
    scene.play.events.iter().any(|(_, m)| matches!(m, EventMark::Incomplete | EventMark::FairCatch | EventMark::Touchback))
}

fn by_marks(scene: &Scene, live: Live, holds: &[holds::Hold], spans: &[marks::Span], name: Option<usize>) -> Vec<Possession> {
    let mut found: Vec<Possession> = Vec::new();
    let mut before = None;
    for span in spans {
        let by_ball = by_ball::holder(scene, live, holds, span, before);
        let named = name.filter(|_| span.gain != Gain::Snap && spans.iter().filter(|s| s.gain != Gain::Snap).count() == 1);
        let Some(p) = by_ball.or_else(|| unseen::holder(scene, live, span, named)) else { continue };
        // The mark dates what the ball showed a little earlier.
        let same = |last: &mut Possession| last.mover == p.mover && last.start_how == CarryStart::Ball && last.end + 1 >= p.start;
        found.pop_if(|last| same(last));
        if p.thrown {
            found.push(p);
        } else {
            by_ball::split(scene, holds, p, &mut found);
        }
        before = found.last().map(|last| last.mover);
    }
    found
}

/// The carry that a possession is, if it is one.
fn carry_of(scene: &Scene, live: Live, attack: Attack, p: &Possession, end: usize, end_how: CarryEnd) -> Option<Carry> {
    let passes = match p.gain {
        Gain::Snap => true,
        Gain::Held | Gain::HandOff | Gain::Lateral => p.start_how == CarryStart::CarrierColumn || goes_forward(scene, attack, p.end),
        _ => false,
    };
    if p.thrown && passes {
        return None;
    }
    let start = if p.gain == Gain::Snap { run_start(scene, live, attack, p, end)? } else { p.start };
    if end <= start || scene.pos(p.mover, start).is_none() {
        return None;
    }
    if p.start_how == CarryStart::Ball && !has_it(scene, p, start, end) {
        return None;
    }
    Some(Carry {
        number: 0,
        carrier: p.mover,
        start,
        end,
        start_how: p.start_how,
        end_how,
        confidence: p.confidence,
        attack,
        stopped_by: Vec::new(),
    })
}

/// Whether the ball is his and does not lie beside him: it travels, or it stays in his hands.
fn has_it(scene: &Scene, p: &Possession, start: usize, end: usize) -> bool {
    let from = scene.ball_pos(start);
    if (start..=end).any(|f| matches!((from, scene.ball_pos(f)), (Some(a), Some(b)) if (b - a).norm() >= TRAVELS_YD)) {
        return true;
    }
    let until = scene.after(start, STAYS_S).min(p.end);
    let gaps = || (start..=until).filter_map(|f| scene.ball_gap_yd(p.mover, f));
    let mean_yd = gaps().sum::<f64>() / gaps().count().max(1) as f64;
    mean_yd <= IN_HANDS_YD && scene.span_s(start, until) >= STAYS_S - 2.0 * scene.step_s(start)
}

/// Whether the ball flies towards the goal attacked after it left; true without a ball.
fn goes_forward(scene: &Scene, attack: Attack, frame: usize) -> bool {
    let Some(ball) = scene.ball else { return true };
    let flight = (frame..=scene.after(frame, 0.5)).filter_map(|f| scene.velocity_yps(ball, f, 0.1));
    flight.max_by(|a, b| a.norm2().total_cmp(&b.norm2())).is_some_and(|v| v.x * sign(attack) > FORWARD_YPS)
}

/// Where the run of the player who took the snap begins, none if it never gets past the line of scrimmage: the
/// frame after the last one before the line in which he stood (below 1.5 yd/s) or went backwards.
fn run_start(scene: &Scene, live: Live, attack: Attack, p: &Possession, end: usize) -> Option<usize> {
    let line_yd = match live.spot_yd {
        Some(spot) => downfield_x_yd(scene, attack, spot.x),
        None => front_yd(scene, attack, p.mover, live.snap.unwrap_or(0))?,
    };
    let down_yd = |f: usize| scene.pos(p.mover, f).map(|q| downfield_x_yd(scene, attack, q.x));
    let crossed = (p.start..=end).find(|f| down_yd(*f).is_some_and(|x| x > line_yd + PAST_LINE_YD))?;
    let runs = |f: usize| scene.slope_yps(p.mover, f, SPEED_BASE_S).is_some_and(|v| v.x * sign(attack) > 0.0 && v.norm() >= RUN_YPS);
    let mut start = crossed;
    while start > p.start && runs(start - 1) {
        start -= 1;
    }
    Some(start)
}

/// The line of scrimmage without a ball: the foremost mover of the side at the snap.
fn front_yd(scene: &Scene, attack: Attack, mover: usize, snap: usize) -> Option<f64> {
    let own = (0..scene.movers()).filter(|m| scene.mates(mover, *m) || *m == mover).filter_map(|m| scene.pos(m, snap));
    own.filter(|q| scene.play.field.contains(*q, 0.0)).map(|q| downfield_x_yd(scene, attack, q.x)).max_by(f64::total_cmp)
}
