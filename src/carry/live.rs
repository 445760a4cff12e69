//! When the ball comes alive, and where the line of scrimmage is.
//!
//! By the snap or kick mark; without one, by the end of the ball's rest: the first time it has lain still with
//! the two sides on either side of it.

use super::scene::Scene;
use crate::base::V2;
use crate::model::EventMark;
use crate::stats::median_in_place;

/// How far a resting ball may seem to move, yd: noise of both ends of the comparison.
const REST_YD: f64 = 0.5;
/// Shortest rest, s.
const REST_S: f64 = 0.4;
/// Time before a mark over which the ball's spot is taken, s.
const LAY_S: f64 = 0.6;
/// Share of the movers that must stand on their own side of the ball.
const LINED_UP_SHARE: f64 = 0.8;

#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Live {
    /// Frame at which the ball is snapped or kicked; none where the data begin in mid-play.
    pub snap: Option<usize>,
    /// Where the ball lay.
    pub spot_yd: Option<V2>,
}

pub(super) fn live(scene: &Scene) -> Live {
    let first_of = |wanted: EventMark| scene.play.events.iter().find(|(_, m)| *m == wanted).map(|(f, _)| *f as usize);
    if let Some(snap) = first_of(EventMark::Snap).or_else(|| first_of(EventMark::Kick)) {
        let spot_yd = lay_at(scene, snap).or_else(|| scene.ball_pos(snap));
        return Live { snap: Some(snap.min(scene.last())), spot_yd };
    }
    by_rest(scene).unwrap_or_default()
}

/// Where the ball lay before a mark: the median of the frames before it, because at the mark it can be under way.
fn lay_at(scene: &Scene, snap: usize) -> Option<V2> {
    let spots = || (scene.before(snap, LAY_S)..snap).filter_map(|f| scene.ball_pos(f));
    let (mut xs, mut ys): (Vec<f64>, Vec<f64>) = (spots().map(|p| p.x).collect(), spots().map(|p| p.y).collect());
    Some(V2::new(median_in_place(&mut xs)?, median_in_place(&mut ys)?))
}

fn by_rest(scene: &Scene) -> Option<Live> {
    let ball = scene.ball?;
    for piece in &ball.pieces {
        let (mut from, mut sum, mut count) = (piece.first, V2::ZERO, 0.0);
        for (k, p) in piece.pos_yd.iter().enumerate() {
            let frame = piece.first + k;
            if count == 0.0 || (*p - sum / count).norm() <= REST_YD {
                sum += *p;
                count += 1.0;
                continue;
            }
            let spot_yd = sum / count;
            if scene.span_s(from, frame - 1) >= REST_S && lined_up(scene, spot_yd, frame - 1) {
                return Some(Live { snap: Some(frame - 1), spot_yd: Some(spot_yd) });
            }
            (from, sum, count) = (frame, *p, 1.0);
        }
    }
    None
}

/// Whether the sides stand on either side of the spot; true where no sides are known.
fn lined_up(scene: &Scene, spot_yd: V2, frame: usize) -> bool {
    let (mut own, mut all, mut first_side) = (0.0_f64, 0.0_f64, None);
    for mover in 0..scene.movers() {
        let (Some(side), Some(p)) = (scene.side(mover), scene.pos(mover, frame)) else { continue };
        if !scene.play.field.contains(p, 0.0) {
            continue;
        }
        let of_first = *first_side.get_or_insert(side) == side;
        all += 1.0;
        if of_first == (p.x < spot_yd.x) {
            own += 1.0;
        }
    }
    all == 0.0 || own.max(all - own) >= LINED_UP_SHARE * all
}
