//! One pursuit drawn on the field: paths, lines of sight, meeting points, where the last chance went.

use super::field_frame::{FOOT, FieldFrame, WIDTH};
use super::spot::line_number;
use super::svg::{Anchor, circle, coord, line, open, polyline, rect, text};
use crate::model::Field;
use crate::store::rows::{FrameRow, PursuitRow};

/// Seconds between drawn lines of sight.
const SIGHT_EVERY_S: f64 = 0.5;

/// A mark that occurs in a drawing, for its legend.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Mark {
    Carrier,
    Defender,
    Sight,
    Hindsight,
    Foresight,
    Ended,
    ChanceLost,
}

impl Mark {
    pub fn key(self) -> &'static str {
        match self {
            Mark::Carrier => "carrier",
            Mark::Defender => "defender",
            Mark::Sight => "sight",
            Mark::Hindsight => "hindsight",
            Mark::Foresight => "foresight",
            Mark::Ended => "ended",
            Mark::ChanceLost => "lost",
        }
    }

    pub fn words(self) -> &'static str {
        match self {
            Mark::Carrier => "carrier's path",
            Mark::Defender => "defender's path",
            Mark::Sight => "line of sight, every half second",
            Mark::Hindsight => "ideal meeting point, knowing the carrier's path",
            Mark::Foresight => "meeting point that could be foreseen at the start",
            Mark::Ended => "where it ended",
            Mark::ChanceLost => "where the last chance went",
        }
    }

    /// The mark's own shape around a place.
    pub fn shape(self, (x, y): (f64, f64)) -> String {
        let diamond = |class: &str| {
            let r = 8.0;
            let (n, e, s, w) = ((x, y - r), (x + r, y), (x, y + r), (x - r, y));
            let p = |q: (f64, f64)| format!("{} {}", coord(q.0), coord(q.1));
            format!("<path class=\"{class}\" d=\"M{}L{}L{}L{}Z\"/>", p(n), p(e), p(s), p(w))
        };
        match self {
            Mark::Carrier => line("path-carrier", (x - 12.0, y), (x + 12.0, y)),
            Mark::Defender => line("path-defender", (x - 12.0, y), (x + 12.0, y)),
            Mark::Sight => line("sight", (x - 12.0, y + 4.0), (x + 12.0, y - 4.0)),
            Mark::Hindsight => diamond("mark-hindsight"),
            Mark::Foresight => diamond("mark-foresight"),
            Mark::Ended => {
                line("mark-ended", (x - 6.0, y - 6.0), (x + 6.0, y + 6.0)) + &line("mark-ended", (x - 6.0, y + 6.0), (x + 6.0, y - 6.0))
            }
            Mark::ChanceLost => {
                let c = coord;
                format!("<path class=\"mark-lost\" d=\"M{} {}v-20l14 6l-14 6\"/>", c(x), c(y)) + &circle("mark-lost-foot", (x, y), 3.0)
            }
        }
    }
}

/// A drawing, its frame, and the marks that occur in it.
#[derive(Clone, Debug, PartialEq)]
pub struct FieldPlan {
    pub svg: String,
    pub frame: FieldFrame,
    pub marks: Vec<Mark>,
}

/// Draws a pursuit; `frames` in order of time. The two moving dots of the viewer are part of the drawing, at the start.
pub fn field_plan(row: &PursuitRow, frames: &[&FrameRow], field: &Field, title: &str) -> FieldPlan {
    let spot = |x: Option<f64>, y: Option<f64>| Some((x?, y?)).filter(|(a, b)| a.is_finite() && b.is_finite());
    let ideal = spot(row.ideal_x_yd, row.ideal_y_yd);
    let foreseen = spot(row.foresight_x_yd, row.foresight_y_yd);
    let ended = spot(Some(row.met_x_yd), Some(row.met_y_yd));
    let tracks = frames.iter().flat_map(|f| [(f.carrier_x_yd, f.carrier_y_yd), (f.defender_x_yd, f.defender_y_yd)]);
    let frame = FieldFrame::around(tracks.chain([ideal, foreseen, ended].into_iter().flatten()), field);
    let lost = lost_frame(row, frames);

    let mut svg = open("field", WIDTH, frame.turf_height() + FOOT, title);
    svg += &turf(&frame, field);
    let mut marks = Vec::new();
    let sights = sights(frames, &frame);
    if !sights.is_empty() {
        marks.push(Mark::Sight);
        svg += &sights;
    }
    if let Some((from, to)) = lost.and_then(|f| Some((defender(f, &frame)?, carrier(f, &frame)?))) {
        svg += &line("sight-lost", from, to);
    }
    let carrier_path = polyline("path-carrier", frames.iter().map(|f| carrier(f, &frame)));
    let defender_path = polyline("path-defender", frames.iter().map(|f| defender(f, &frame)));
    for (path, mark) in [(carrier_path, Mark::Carrier), (defender_path, Mark::Defender)] {
        if !path.is_empty() {
            marks.push(mark);
            svg += &path;
        }
    }
    for (place, mark) in [(foreseen, Mark::Foresight), (ideal, Mark::Hindsight), (ended, Mark::Ended)] {
        if let Some((x, y)) = place {
            marks.push(mark);
            svg += &mark.shape(frame.place(x, y));
        }
    }
    if let Some(at) = lost.and_then(|f| defender(f, &frame)) {
        marks.push(Mark::ChanceLost);
        svg += &Mark::ChanceLost.shape(at);
    }
    svg += &dots(frames, &frame);
    svg += "</svg>";
    marks.sort_by_key(|m| *m as usize);
    FieldPlan { svg, frame, marks }
}

fn carrier(f: &FrameRow, frame: &FieldFrame) -> Option<(f64, f64)> {
    frame.spot(f.carrier_x_yd, f.carrier_y_yd)
}

fn defender(f: &FrameRow, frame: &FieldFrame) -> Option<(f64, f64)> {
    frame.spot(f.defender_x_yd, f.defender_y_yd)
}

/// The frame at which the last chance went: by its number, else by its time.
fn lost_frame<'a>(row: &PursuitRow, frames: &[&'a FrameRow]) -> Option<&'a FrameRow> {
    if let Some(n) = row.chance_lost_frame
        && let Some(f) = frames.iter().find(|f| f.frame == n)
    {
        return Some(f);
    }
    let at_s = row.start_s + row.chance_lost_s?;
    frames.iter().copied().min_by(|a, b| (a.time_s - at_s).abs().total_cmp(&(b.time_s - at_s).abs()))
}

/// Yard lines every five yards, numbers every ten, end zones, sidelines.
fn turf(frame: &FieldFrame, field: &Field) -> String {
    let (x_low, x_high) = (frame.x_low_yd.max(0.0), frame.x_high_yd.min(field.length_yd));
    let (y_low, y_high) = (frame.y_low_yd.max(0.0), frame.y_high_yd.min(field.width_yd));
    let zone = |class: &str, from: f64, to: f64| {
        let (from, to) = (from.clamp(x_low, x_high.max(x_low)), to.clamp(x_low, x_high.max(x_low)));
        let (x, y) = frame.place(from, y_high);
        if to > from { rect(class, x, y, (to - from) * frame.units_per_yd, (y_high - y_low) * frame.units_per_yd) } else { String::new() }
    };
    let mut out = zone("turf", x_low, x_high);
    if field.end_zone_yd > 0.0 {
        out += &zone("end-zone", 0.0, field.end_zone_yd);
        out += &zone("end-zone", field.goal_x_yd(), field.length_yd);
    }
    let first = ((x_low - field.end_zone_yd) / 5.0).ceil() as i64;
    for i in first..first + 60 {
        let x = field.end_zone_yd + 5.0 * i as f64;
        if x > x_high + 1e-9 {
            break;
        }
        if field.end_zone_yd > 0.0 && (x < field.end_zone_yd - 1e-9 || x > field.goal_x_yd() + 1e-9) {
            continue;
        }
        let is_goal = field.end_zone_yd > 0.0 && ((x - field.end_zone_yd).abs() < 1e-9 || (x - field.goal_x_yd()).abs() < 1e-9);
        let class = if is_goal {
            "goal-line"
        } else if i % 2 == 0 {
            "yard-line"
        } else {
            "yard-line half"
        };
        out += &line(class, frame.place(x, y_high), frame.place(x, y_low));
        let (px, _) = frame.place(x, 0.0);
        if i % 2 == 0 && px > 8.0 && px < WIDTH - 8.0 {
            out += &text("yard-number", (px, frame.turf_height() + FOOT - 8.0), Anchor::Middle, &line_number(x, field));
        }
    }
    for y in [0.0, field.width_yd] {
        if y >= frame.y_low_yd && y <= frame.y_high_yd {
            out += &line("sideline", frame.place(x_low, y), frame.place(x_high, y));
        }
    }
    out
}

fn sights(frames: &[&FrameRow], frame: &FieldFrame) -> String {
    let mut out = String::new();
    let Some(first) = frames.first() else { return out };
    let mut next_s = first.time_s;
    for f in frames {
        if f.time_s >= next_s - 1e-6 {
            if let (Some(from), Some(to)) = (defender(f, frame), carrier(f, frame)) {
                out += &line("sight", from, to);
            }
            next_s += SIGHT_EVERY_S;
        }
    }
    out
}

/// The viewer's two dots, with a word at each start.
fn dots(frames: &[&FrameRow], frame: &FieldFrame) -> String {
    let Some(first) = frames.first() else { return String::new() };
    let mut out = String::new();
    for (at, other, name) in
        [(carrier(first, frame), defender(first, frame), "carrier"), (defender(first, frame), carrier(first, frame), "defender")]
    {
        let Some((x, y)) = at else { continue };
        let above = other.is_none_or(|(_, oy)| y <= oy);
        let label_y = if (above && y > 24.0) || y > frame.turf_height() - 16.0 { y - 13.0 } else { y + 23.0 };
        let label_x = x.clamp(34.0, WIDTH - 34.0);
        out += &text("label", (label_x, label_y), Anchor::Middle, name);
        out += &circle(&format!("dot dot-{name}"), (x, y), 6.5);
    }
    out
}
