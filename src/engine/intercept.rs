//! Textbook intercepts of a carrier who holds his speed: the triangle, the Apollonius circle, the equal-time
//! bisector, and the way up the sideline with its tightest and safest line.

use crate::base::V2;
use crate::model::Field;

/// The intercept triangle: sin δ = sin β / κ, β from the line of sight to the carrier's course, δ the lead angle in
/// the same sense, κ = defender's speed over carrier's.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Triangle {
    pub t_s: f64,
    pub spot_yd: V2,
    /// Counter-clockwise positive, from the line of sight.
    pub lead_rad: f64,
    pub closing_yps: f64,
    /// For a defender who is slower: the time at which the window closes again.
    pub window_closes_s: Option<f64>,
}

/// Why a carrier cannot be intercepted on his course.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum CannotIntercept {
    /// κ < |sin β|: no heading keeps the bearing steady.
    TooSlowForAnyLead,
    /// A heading keeps the bearing steady, but the gap grows.
    RunsAway,
}

/// Earliest intercept of a carrier on a straight course by a defender of constant speed.
///
/// Solves |Q + U t − P| = V t for the first t ≥ 0. Speeds in yd/s, places in yd.
///
/// ```
/// use tailchase::{base::V2, engine::intercept::triangle};
/// // A 6-8-10 triangle needs no calculator: 8² = 6² + 28, so t = 10/√28.
/// let t = triangle(V2::ZERO, 8.0, V2::new(10.0, 0.0), V2::new(0.0, 6.0)).unwrap();
/// assert!((t.t_s - 10.0 / 28.0_f64.sqrt()).abs() < 1e-12);
/// ```
pub fn triangle(defender_yd: V2, speed_yps: f64, carrier_yd: V2, carrier_yps: V2) -> Result<Triangle, CannotIntercept> {
    let r = carrier_yd - defender_yd;
    let range_yd = r.norm();
    let along = r.dot(carrier_yps);
    // (|U|² − V²) t² + 2 (r·U) t + |r|² = 0
    let a = carrier_yps.norm2() - speed_yps * speed_yps;
    let c = range_yd * range_yd;
    let refuse = || {
        let sin_beta = if range_yd > 0.0 { r.cross(carrier_yps) / range_yd } else { 0.0 };
        if sin_beta.abs() > speed_yps { CannotIntercept::TooSlowForAnyLead } else { CannotIntercept::RunsAway }
    };
    let (t_s, later_s) = if c == 0.0 {
        (0.0, None)
    } else if a.abs() < 1e-12 * speed_yps.max(1.0).powi(2) {
        if along >= 0.0 {
            return Err(refuse());
        }
        (-c / (2.0 * along), None)
    } else {
        let quarter = along * along - a * c;
        if quarter < 0.0 {
            return Err(refuse());
        }
        // The root of larger size first, so that nothing cancels.
        let q = -(along + quarter.sqrt().copysign(along));
        let (t1, t2) = (q / a, if q == 0.0 { q / a } else { c / q });
        let (low, high) = if t1 < t2 { (t1, t2) } else { (t2, t1) };
        if low >= 0.0 {
            (low, (a > 0.0).then_some(high))
        } else if high >= 0.0 {
            (high, None)
        } else {
            return Err(refuse());
        }
    };
    let spot_yd = carrier_yd + carrier_yps * t_s;
    let way = spot_yd - defender_yd;
    let lead_rad = r.cross(way).atan2(r.dot(way));
    let closing_yps = if range_yd > 0.0 { (speed_yps * lead_rad.cos()) - along / range_yd } else { 0.0 };
    Ok(Triangle { t_s, spot_yd, lead_rad, closing_yps, window_closes_s: later_s })
}

/// Where both arrive at the same time when each runs straight: the Apollonius circle, or for equal speeds the
/// perpendicular bisector.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum EqualTime {
    Circle {
        centre_yd: V2,
        radius_yd: f64,
    },
    /// n·x = offset, n of length one and pointing from defender to carrier.
    Bisector {
        normal: V2,
        offset_yd: f64,
    },
}

/// Equal-time locus for k = carrier's speed over defender's: centre (Q − k²P)/(1 − k²), radius k|Q − P|/|1 − k²|.
/// No result when both stand in one place.
pub fn equal_time(defender_yd: V2, speed_yps: f64, carrier_yd: V2, carrier_speed_yps: f64) -> Option<EqualTime> {
    let gap = carrier_yd - defender_yd;
    let normal = gap.unit()?;
    let k = carrier_speed_yps / speed_yps;
    let one_less_k2 = 1.0 - k * k;
    if one_less_k2.abs() < 1e-12 {
        return Some(EqualTime::Bisector { normal, offset_yd: normal.dot(carrier_yd + defender_yd) / 2.0 });
    }
    Some(EqualTime::Circle { centre_yd: (carrier_yd - defender_yd * (k * k)) / one_less_k2, radius_yd: k * gap.norm() / one_less_k2.abs() })
}

impl EqualTime {
    /// First crossing of a ray with the locus, as a distance along its unit direction. None when it never crosses.
    pub fn crossing_yd(&self, from_yd: V2, way: V2) -> Option<f64> {
        match *self {
            EqualTime::Bisector { normal, offset_yd } => {
                let slope = normal.dot(way);
                let s = (offset_yd - normal.dot(from_yd)) / slope;
                (slope.abs() > 1e-15 && s >= 0.0).then_some(s)
            }
            EqualTime::Circle { centre_yd, radius_yd } => {
                let to = from_yd - centre_yd;
                let half = to.dot(way);
                let rest = half * half - (to.norm2() - radius_yd * radius_yd);
                if rest < 0.0 {
                    return None;
                }
                let root = rest.sqrt();
                [-half - root, -half + root].into_iter().find(|s| *s >= 0.0)
            }
        }
    }
}

/// The carrier's straight course up to the sideline and then along it, as one or two straight pieces.
#[derive(Clone, Debug, PartialEq)]
pub struct SidelineCourse {
    pieces: Vec<Piece>,
    speed_yps: f64,
}

#[derive(Clone, Copy, Debug, PartialEq)]
struct Piece {
    from_yd: V2,
    way: V2,
    starts_s: f64,
    length_yd: f64,
}

/// A meeting on the sideline course: when the carrier is there, where, and how much earlier the defender can be.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CourseMeeting {
    pub t_s: f64,
    pub spot_yd: V2,
    pub margin_s: f64,
}

impl SidelineCourse {
    /// He keeps his line until `margin_yd` from the sideline, then runs up it (towards +x) at the same speed; cut at
    /// the goal line. No result for a carrier who stands.
    pub fn new(carrier_yd: V2, carrier_yps: V2, field: &Field, margin_yd: f64) -> Option<SidelineCourse> {
        let way = carrier_yps.unit()?;
        let speed_yps = carrier_yps.norm();
        let end_x_yd = if field.end_zone_yd > 0.0 { field.goal_x_yd() } else { field.length_yd };
        let line_yd = if way.y > 0.0 { (field.width_yd - margin_yd).max(carrier_yd.y) } else { margin_yd.min(carrier_yd.y) };
        let to_line_yd = if way.y == 0.0 { f64::INFINITY } else { (line_yd - carrier_yd.y) / way.y };
        let to_goal_yd = if way.x > 0.0 { ((end_x_yd - carrier_yd.x) / way.x).max(0.0) } else { f64::INFINITY };
        let first_yd = to_line_yd.min(to_goal_yd).min(4.0 * field.length_yd);
        let mut pieces = vec![Piece { from_yd: carrier_yd, way, starts_s: 0.0, length_yd: first_yd }];
        if to_line_yd <= to_goal_yd {
            let corner_yd = carrier_yd + way * first_yd;
            pieces.push(Piece {
                from_yd: corner_yd,
                way: V2::EAST,
                starts_s: first_yd / speed_yps,
                length_yd: (end_x_yd - corner_yd.x).max(0.0),
            });
        }
        Some(SidelineCourse { pieces, speed_yps })
    }

    fn meeting(&self, piece: &Piece, along_yd: f64, defender_yd: V2, speed_yps: f64) -> CourseMeeting {
        let spot_yd = piece.from_yd + piece.way * along_yd;
        let t_s = piece.starts_s + along_yd / self.speed_yps;
        CourseMeeting { t_s, spot_yd, margin_s: t_s - (spot_yd - defender_yd).norm() / speed_yps }
    }

    /// The tightest line: the earliest meeting, with no margin. No result when the course ends first.
    pub fn tightest(&self, defender_yd: V2, speed_yps: f64) -> Option<CourseMeeting> {
        self.pieces.iter().find_map(|piece| {
            if self.meeting(piece, 0.0, defender_yd, speed_yps).margin_s >= 0.0 {
                return Some(self.meeting(piece, 0.0, defender_yd, speed_yps));
            }
            // The piece is a straight run that would have begun `starts_s` earlier from further back.
            let back_yd = piece.from_yd - piece.way * (piece.starts_s * self.speed_yps);
            let meeting = triangle(defender_yd, speed_yps, back_yd, piece.way * self.speed_yps).ok()?;
            let along_yd = (meeting.t_s - piece.starts_s) * self.speed_yps;
            let met = CourseMeeting { t_s: meeting.t_s, spot_yd: meeting.spot_yd, margin_s: 0.0 };
            (-1e-9..=piece.length_yd).contains(&along_yd).then_some(met)
        })
    }

    /// The safest line: the largest arrival margin. On a straight piece and κ < 1 it lies arcsin κ from the
    /// perpendicular; for κ ≥ 1 the margin grows without end and the piece's far end is taken. No result when no
    /// margin is positive.
    pub fn safest(&self, defender_yd: V2, speed_yps: f64) -> Option<CourseMeeting> {
        let kappa = speed_yps / self.speed_yps;
        let best = |piece: &Piece| {
            let foot_yd = (defender_yd - piece.from_yd).dot(piece.way);
            let aside_yd = (defender_yd - piece.from_yd).cross(piece.way).abs();
            let along_yd = if kappa >= 1.0 { piece.length_yd } else { foot_yd + aside_yd * kappa / (1.0 - kappa * kappa).sqrt() };
            self.meeting(piece, along_yd.clamp(0.0, piece.length_yd), defender_yd, speed_yps)
        };
        self.pieces.iter().map(best).filter(|m| m.margin_s >= 0.0).max_by(|a, b| a.margin_s.total_cmp(&b.margin_s))
    }

    /// Margin against ground: `points` meetings evenly spaced over the course, for the curve between the two lines.
    pub fn curve(&self, defender_yd: V2, speed_yps: f64, points: usize) -> Vec<CourseMeeting> {
        let total_yd: f64 = self.pieces.iter().map(|p| p.length_yd).sum();
        (0..points)
            .filter_map(|i| {
                let mut along_yd = total_yd * i as f64 / (points.max(2) - 1) as f64;
                for piece in &self.pieces {
                    if along_yd <= piece.length_yd + 1e-9 {
                        return Some(self.meeting(piece, along_yd, defender_yd, speed_yps));
                    }
                    along_yd -= piece.length_yd;
                }
                None
            })
            .collect()
    }
}
