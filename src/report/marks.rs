//! Small drawings inside table cells: dot and whisker, stacked bar. One scale serves a whole column.

use super::axis::Axis;
use super::heading::Heading;
use super::svg::{Anchor, circle, coord, escape, line, open, text};
use super::text::fixed;

const WIDTH: f64 = 124.0;
const HEIGHT: f64 = 22.0;
const EDGE: f64 = 9.0;

/// The scale of a column: it holds zero and all values given, with a little room.
pub fn common_axis(values: impl IntoIterator<Item = f64>) -> Axis {
    let mut axis = Axis::over(values.into_iter().chain([0.0]), 1.0, EDGE, WIDTH - EDGE);
    if axis.low > 0.0 {
        axis.low = 0.0;
    }
    axis
}

/// The scale itself, drawn in the column's head.
pub fn scale(axis: &Axis) -> String {
    let mut out = open("mark", WIDTH, HEIGHT, "scale of this column, yards");
    let (ticks, decimals) = axis.ticks(4);
    out += &line("axis", (axis.start, 18.0), (axis.end, 18.0));
    for v in ticks {
        let x = axis.place(v);
        out += &line("axis", (x, 14.0), (x, 18.0));
        out += &text("tick", (x, 11.0), Anchor::Middle, &fixed(v, decimals));
    }
    out + "</svg>"
}

/// An estimate as a dot in its interval. An end beyond the scale is drawn as an arrow at the edge.
pub fn whisker(low: Option<f64>, middle: Option<f64>, high: Option<f64>, axis: &Axis, title: &str) -> String {
    let finite = |v: Option<f64>| v.filter(|v| v.is_finite());
    let Some(middle) = finite(middle) else { return String::new() };
    let y = HEIGHT / 2.0;
    let mut out = open("mark", WIDTH, HEIGHT, title);
    out += &zero(axis);
    if let (Some(low), Some(high)) = (finite(low), finite(high)) {
        let (a, b) = (axis.held(low), axis.held(high));
        out += &line("whisker", (a, y), (b, y));
        out += &end(a, y, if low < axis.low { -1.0 } else { 0.0 });
        out += &end(b, y, if high > axis.high { 1.0 } else { 0.0 });
    }
    if (axis.low..=axis.high).contains(&middle) {
        out += &circle("estimate", (axis.place(middle), y), 4.5);
    }
    out + "</svg>"
}

fn end(x: f64, y: f64, arrow: f64) -> String {
    if arrow == 0.0 {
        return line("whisker", (x, y - 4.0), (x, y + 4.0));
    }
    let (x, y, back) = (coord(x + 4.0 * arrow), coord(y), coord(-5.0 * arrow));
    format!("<path class=\"arrow\" d=\"M{x} {y}l{back} -4v8Z\"/>")
}

fn zero(axis: &Axis) -> String {
    line("zero", (axis.place(0.0), 1.0), (axis.place(0.0), HEIGHT - 1.0))
}

/// Where a stack of entries starts and ends: gains run left of zero, costs right of it.
pub fn stack_ends(entries_yd: &[Option<f64>]) -> [f64; 2] {
    let finite = || entries_yd.iter().flatten().filter(|v| v.is_finite());
    [finite().filter(|v| **v < 0.0).sum(), finite().filter(|v| **v > 0.0).sum()]
}

/// The six headings as one bar; each piece names itself and its yards.
pub fn stacked_bar(entries_yd: &[Option<f64>; 6], printed: &[String], axis: &Axis, title: &str) -> String {
    if entries_yd.iter().all(Option::is_none) {
        return String::new();
    }
    let mut out = open("mark", WIDTH, HEIGHT, title);
    let (mut left, mut right) = (0.0, 0.0);
    for ((heading, entry), text) in Heading::ALL.into_iter().zip(entries_yd).zip(printed) {
        let Some(v) = entry.filter(|v| v.is_finite()) else { continue };
        let (from, to) = if v < 0.0 { (left + v, left) } else { (right, right + v) };
        if v < 0.0 {
            left += v
        } else {
            right += v
        }
        let (a, b) = (axis.held(from), axis.held(to));
        if b - a < 0.3 {
            continue;
        }
        let gap = if b - a > 2.0 { 0.8 } else { 0.0 };
        out += &format!(
            "<rect class=\"h-{}\" x=\"{}\" y=\"4\" width=\"{}\" height=\"14\"><title>{} {} yd</title></rect>",
            heading.key(),
            coord(a),
            coord((b - a - gap).max(0.3)),
            escape(heading.name()),
            escape(text)
        );
    }
    out += &zero(axis);
    out + "</svg>"
}
