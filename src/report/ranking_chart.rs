//! The ranking as a picture of its own, for slides: each player's own yards per chance with the interval.

use super::text::name_or_id;
use crate::store::PlayerRow;
use plotters::prelude::*;
use plotters::style::text_anchor::{HPos, Pos, VPos};

const WIDTH_PX: u32 = 900;
const ROW_PX: u32 = 22;
const MARGIN_PX: i32 = 14;
const NAMES_PX: i32 = 230;
/// Players shown at most; the first in the ranking.
const MOST: usize = 40;

const INK: RGBColor = RGBColor(0x1d, 0x2a, 0x2a);
const DOT: RGBColor = RGBColor(0xb4, 0x3f, 0x17);
const GRID: RGBColor = RGBColor(0xd5, 0xdc, 0xd8);

/// A dot and whiskers for each ranked player who had enough chances, the best on top. SVG; no result when nobody had.
pub fn ranking_chart(players: &[PlayerRow]) -> Option<String> {
    let shown: Vec<(&PlayerRow, [f64; 3])> = players
        .iter()
        .filter(|p| !p.too_few)
        .filter_map(|p| Some((p, [p.own_low_yd?, p.own_yd?, p.own_high_yd?])))
        .filter(|(_, values)| values.iter().all(|v| v.is_finite()))
        .take(MOST)
        .collect();
    let low = shown.iter().map(|(_, v)| v[0]).fold(0.0, f64::min);
    let high = shown.iter().map(|(_, v)| v[2]).fold(f64::NEG_INFINITY, f64::max);
    if shown.is_empty() || high <= low {
        return None;
    }
    let mut svg = String::new();
    draw(&mut svg, &shown, low, high).ok()?;
    Some(svg)
}

type Drawn = Result<(), DrawingAreaErrorKind<std::io::Error>>;

fn draw(svg: &mut String, shown: &[(&PlayerRow, [f64; 3])], low: f64, high: f64) -> Drawn {
    let height_px = ROW_PX * shown.len() as u32 + 90;
    let area = SVGBackend::with_string(svg, (WIDTH_PX, height_px)).into_drawing_area();
    area.fill(&WHITE)?;
    let mut chart = ChartBuilder::on(&area)
        .margin(MARGIN_PX)
        .caption("Own yards per chance, adjusted and pooled, with the interval", ("sans-serif", 17).into_font().color(&INK))
        .x_label_area_size(34)
        .y_label_area_size(NAMES_PX)
        .build_cartesian_2d(low..high * 1.04, 0.0..shown.len() as f64)?;
    chart
        .configure_mesh()
        .disable_y_mesh()
        .disable_y_axis()
        .y_labels(0)
        .x_desc("yards per chance, fewer is better")
        .light_line_style(TRANSPARENT)
        .bold_line_style(GRID)
        .axis_style(INK)
        .label_style(("sans-serif", 12).into_font().color(&INK))
        .draw()?;
    let rows = shown.len();
    for (i, (_, [low, value, high])) in shown.iter().enumerate() {
        let y = (rows - i) as f64 - 0.5;
        chart.draw_series([PathElement::new(vec![(*low, y), (*high, y)], INK.stroke_width(2))])?;
        chart.draw_series([Circle::new((*value, y), 4, DOT.filled())])?;
    }
    let style = ("sans-serif", 13).into_font().color(&INK).pos(Pos::new(HPos::Right, VPos::Center));
    for (i, (player, _)) in shown.iter().enumerate() {
        let (x_px, y_px) = chart.backend_coord(&(low, (rows - i) as f64 - 0.5));
        let name = name_or_id(player.name.as_deref(), &player.player);
        area.draw(&Text::new(format!("{name}  {}", player.rank), (x_px - 8, y_px), style.clone()))?;
    }
    area.present()
}
