//! Curves over the time of one pursuit: bearing with its error band, needed speed and chance, ground given.

use super::axis::Axis;
use super::heading::{Entries, Heading};
use super::svg::{Anchor, band, line, open, polyline, rect, text};
use super::text::{fixed, speed_mph};
use crate::base::units::mph;
use crate::store::rows::{FrameRow, PursuitRow};

/// Units of every chart's drawing; all share the time axis, so that one cursor serves them.
pub const WIDTH: f64 = 460.0;
pub const LEFT: f64 = 46.0;
pub const RIGHT: f64 = 450.0;
/// A bearing whose 95 % band is wider than this either way says nothing that a chart should be scaled to.
const FIRM_DEG: f64 = 20.0;
/// Half width of a 95 % band in standard errors.
const Z: f64 = 1.96;
/// The needed speed is drawn up to this multiple of his top speed; beyond it, the curve leaves the paper.
const NEED_TOP: f64 = 1.5;

/// Seconds after the start of the pursuit, drawn from left to right.
pub fn time_axis(row: &PursuitRow, frames: &[&FrameRow]) -> Axis {
    let end_s = frames.iter().map(|f| f.time_s - row.start_s).filter(|t| t.is_finite()).fold(0.5, f64::max);
    Axis { low: 0.0, high: end_s, start: LEFT, end: RIGHT }
}

/// Bearing of the carrier from the defender with its 95 % band. A level curve is a collision course.
pub fn bearing_chart(row: &PursuitRow, frames: &[&FrameRow]) -> String {
    let (top, bottom) = (42.0, 196.0);
    let time = time_axis(row, frames);
    let points = unwrapped_deg(frames);
    let half = |f: &FrameRow| f.bearing_sigma_deg.filter(|s| s.is_finite()).map(|s| Z * s);
    // Near contact a bearing swings without meaning: such frames do not stretch the scale, they leave the paper.
    let ends = |most: f64| {
        let pairs =
            points.iter().zip(frames).filter_map(move |(p, f)| p.map(|b| (b, half(f).unwrap_or(0.0)))).filter(move |(_, h)| *h <= most);
        pairs.flat_map(|(b, h)| [b - h, b + h]).collect::<Vec<f64>>()
    };
    let firm = ends(FIRM_DEG);
    let y = Axis::over(if firm.is_empty() { ends(f64::INFINITY) } else { firm }, 12.0, bottom, top);
    let at = |f: &FrameRow| time.place(f.time_s - row.start_s);

    let mut svg = open("chart", WIDTH, 232.0, "Bearing of the carrier from the defender over time, with its 95 % band");
    svg += &blocked(row, frames, &time, top, bottom);
    svg += &grid(&y, "°");
    svg += &moments(row, &time, top, bottom);
    let ribbon: Vec<Option<(f64, f64, f64)>> =
        points.iter().zip(frames).map(|(p, f)| p.zip(half(f)).map(|(b, h)| (at(f), y.held(b - h), y.held(b + h)))).collect();
    svg += &band("band", &ribbon);
    let curve: Vec<Option<(f64, f64)>> = points.iter().zip(frames).map(|(p, f)| p.map(|b| (at(f), y.place(b)))).collect();
    svg += &polyline("curve", cut_at(&cut_at(&curve, top, |v| v >= top), bottom, |v| v <= bottom));
    svg += &feet(&time, bottom);
    svg + "</svg>"
}

/// Bearings in degrees without the jump between +180 and −180; the first lies between them.
fn unwrapped_deg(frames: &[&FrameRow]) -> Vec<Option<f64>> {
    let mut before: Option<f64> = Some(0.0);
    frames
        .iter()
        .map(|f| {
            let raw = f.bearing_deg.filter(|b| b.is_finite())?;
            let turned = before.map_or(raw, |b| raw - 360.0 * ((raw - b) / 360.0).round());
            before = Some(turned);
            before
        })
        .collect()
}

/// Needed speed against his top speed (above) and the chance that is left (below).
pub fn speed_chart(row: &PursuitRow, frames: &[&FrameRow]) -> String {
    let (top, bottom, chance_top, chance_bottom) = (26.0, 170.0, 206.0, 256.0);
    let time = time_axis(row, frames);
    let at = |f: &FrameRow| time.place(f.time_s - row.start_s);
    let top_mph = mph(if row.top_speed_yps.is_finite() { row.top_speed_yps } else { 0.0 });
    let needs: Vec<Option<f64>> = frames.iter().map(|f| f.need_yps.filter(|n| n.is_finite()).map(mph)).collect();
    let highest = needs.iter().flatten().fold(0.0, |a: f64, b| a.max(*b));
    let ceiling = if top_mph > 0.0 { highest.clamp(1.15 * top_mph, NEED_TOP * top_mph) } else { highest.max(1.0) };
    let y = Axis { low: 0.0, high: ceiling, start: bottom, end: top };

    let mut svg =
        open("chart", WIDTH, 292.0, "Speed needed to meet the carrier against the defender's top speed, and the chance left, over time");
    svg += &blocked(row, frames, &time, top, chance_bottom);
    svg += &grid(&y, "");
    svg += &text("unit", (LEFT - 6.0, top - 12.0), Anchor::End, "mph");
    if top_mph > 0.0 {
        let spread = mph(Z * Some(row.top_speed_sigma_yps).filter(|s| s.is_finite()).unwrap_or(0.0));
        let (low, high) = (y.held(top_mph - spread), y.held(top_mph + spread));
        svg += &rect("band", LEFT, high, RIGHT - LEFT, low - high);
        svg += &line("top-speed", (LEFT, y.place(top_mph)), (RIGHT, y.place(top_mph)));
        let words = format!("top speed {}", speed_mph(Some(row.top_speed_yps)));
        svg += &text("note", (RIGHT - 4.0, high - 5.0), Anchor::End, &words);
    }
    let points: Vec<Option<(f64, f64)>> = needs.iter().zip(frames).map(|(n, f)| n.map(|n| (at(f), y.place(n)))).collect();
    svg += &polyline("curve", cut_at(&points, y.end, |v| v >= y.end));

    let share = Axis { low: 0.0, high: 1.0, start: chance_bottom, end: chance_top };
    for (v, words) in [(0.0, "0 %"), (0.5, "50"), (1.0, "100")] {
        svg += &line("grid", (LEFT, share.place(v)), (RIGHT, share.place(v)));
        svg += &text("tick", (LEFT - 6.0, share.place(v) + 4.0), Anchor::End, words);
    }
    svg += &text("unit", (LEFT, chance_top - 12.0), Anchor::Start, "chance left");
    svg += &moment_lines(row, &time, top, chance_bottom);
    let chances: Vec<Option<(f64, f64)>> =
        frames.iter().map(|f| Some(f.chance).filter(|c| c.is_finite()).map(|c| (at(f), share.held(c)))).collect();
    let filled: Vec<Option<(f64, f64, f64)>> = chances.iter().map(|p| p.map(|(x, y)| (x, chance_bottom, y))).collect();
    svg += &band("chance", &filled);
    svg += &polyline("curve thin", chances);
    svg += &feet(&time, chance_bottom);
    svg + "</svg>"
}

/// Ground given so far under each heading, a running sum of the frames' entries. Empty when no frame has any.
pub fn ground_chart(row: &PursuitRow, frames: &[&FrameRow]) -> String {
    let (top, bottom) = (26.0, 150.0);
    let time = time_axis(row, frames);
    let at = |f: &FrameRow| time.place(f.time_s - row.start_s);
    let runs: Vec<(Heading, Vec<f64>)> = Heading::ALL
        .into_iter()
        .filter_map(|h| {
            let mut sum = 0.0;
            let run: Vec<f64> = frames
                .iter()
                .map(|f| {
                    sum += f.entry_yd(h).filter(|v| v.is_finite()).unwrap_or(0.0);
                    sum
                })
                .collect();
            run.iter().any(|v| v.abs() >= 0.05).then_some((h, run))
        })
        .collect();
    if runs.is_empty() || frames.len() < 2 {
        return String::new();
    }
    let y = Axis::over(runs.iter().flat_map(|(_, r)| r.iter().copied()).chain([0.0]), 1.0, bottom, top);
    let mut svg = open("chart", WIDTH, 186.0, "Ground given so far under each heading, in yards, over time");
    svg += &blocked(row, frames, &time, top, bottom);
    svg += &grid(&y, "");
    svg += &text("unit", (LEFT - 6.0, top - 12.0), Anchor::End, "yd");
    svg += &moment_lines(row, &time, top, bottom);
    for (heading, run) in &runs {
        // A step's entry stands at the frame where the step starts: its ground is given by the next frame.
        let start = std::iter::once(Some((at(frames[0]), y.place(0.0))));
        let rest = run.iter().zip(&frames[1..]).map(|(v, f)| Some((at(f), y.place(*v))));
        svg += &polyline(&format!("run s-{}", heading.key()), start.chain(rest));
    }
    svg += &feet(&time, bottom);
    svg + "</svg>"
}

/// Ends a curve where it leaves the paper at an edge, and takes it up where it comes back.
fn cut_at(points: &[Option<(f64, f64)>], edge: f64, inside: impl Fn(f64) -> bool) -> Vec<Option<(f64, f64)>> {
    let mut out = Vec::with_capacity(points.len() + 4);
    let mut before: Option<(f64, f64)> = None;
    for point in points {
        if let (Some(a), Some(b)) = (before, *point)
            && inside(a.1) != inside(b.1)
        {
            let share = (edge - a.1) / (b.1 - a.1);
            out.push(Some((a.0 + share * (b.0 - a.0), edge)));
        }
        out.push(point.filter(|p| inside(p.1)));
        before = *point;
    }
    out
}

fn grid(y: &Axis, unit: &str) -> String {
    let (ticks, decimals) = y.ticks(4);
    let mut out = String::new();
    for v in ticks {
        let place = y.place(v);
        out += &line(if v == 0.0 { "grid zero" } else { "grid" }, (LEFT, place), (RIGHT, place));
        out += &text("tick", (LEFT - 6.0, place + 4.0), Anchor::End, &format!("{}{unit}", fixed(v, decimals)));
    }
    out
}

/// The time axis below a panel, and the viewer's cursor through it.
fn feet(time: &Axis, bottom: f64) -> String {
    let (ticks, decimals) = time.ticks(6);
    let mut out = line("axis", (LEFT, bottom), (RIGHT, bottom));
    for v in &ticks {
        let x = time.place(*v);
        out += &line("axis", (x, bottom), (x, bottom + 4.0));
        out += &text("tick", (x, bottom + 17.0), Anchor::Middle, &fixed(*v, decimals));
    }
    out += &text("unit", (RIGHT, bottom + 32.0), Anchor::End, "seconds after the start");
    out + &format!("<path class=\"cursor\" d=\"M{LEFT} 4V{bottom}\"/>")
}

/// Clock, break and last chance, in order of time.
fn named_moments(row: &PursuitRow) -> Vec<(f64, &'static str, &'static str)> {
    let mut out: Vec<(f64, &str, &str)> =
        [(row.clock_s, "clock starts", ""), (row.break_s, "breaks", ""), (row.chance_lost_s, "last chance", " lost")]
            .into_iter()
            .filter_map(|(s, words, class)| s.filter(|s| s.is_finite()).map(|s| (s, words, class)))
            .collect();
    out.sort_by(|a, b| a.0.total_cmp(&b.0));
    out
}

fn moment_lines(row: &PursuitRow, time: &Axis, top: f64, bottom: f64) -> String {
    named_moments(row).iter().map(|(s, _, class)| line(&format!("moment{class}"), (time.held(*s), top), (time.held(*s), bottom))).collect()
}

/// Lines with words above them, in as many rows as keep the words apart.
fn moments(row: &PursuitRow, time: &Axis, top: f64, bottom: f64) -> String {
    let mut out = String::new();
    let mut ends = [f64::NEG_INFINITY; 3];
    for (s, words, class) in named_moments(row) {
        let width = 7.2 * words.len() as f64;
        let x = time.held(s);
        let left = (x - width / 2.0).clamp(LEFT - 20.0, (RIGHT - width).max(LEFT));
        let level = ends.iter().position(|end| *end + 6.0 <= left).unwrap_or(2);
        ends[level] = left + width;
        let y = top - 4.0 - 13.0 * level as f64;
        out += &line(&format!("moment{class}"), (x, y + 2.0), (x, bottom));
        out += &text(&format!("note{class}"), (left, y), Anchor::Start, words);
    }
    out
}

/// Shaded where a blocker held him.
fn blocked(row: &PursuitRow, frames: &[&FrameRow], time: &Axis, top: f64, bottom: f64) -> String {
    let mut out = String::new();
    let mut i = 0;
    while i < frames.len() {
        let length = frames[i..].iter().take_while(|f| f.blocked).count();
        if length > 0 {
            let end = frames.get(i + length).or(frames.last()).map_or(0.0, |f| f.time_s);
            let (from, to) = (time.held(frames[i].time_s - row.start_s), time.held(end - row.start_s));
            out += &rect("blocked", from, top, to - from, bottom - top);
        }
        i += length + 1;
    }
    out
}
