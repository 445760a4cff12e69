//! View model of one drawn pursuit: drawings, account, facts, sentence, and the data of the play viewer.

use super::account::{Account, account};
use super::charts::{LEFT, RIGHT, bearing_chart, ground_chart, speed_chart, time_axis};
use super::field_plan::{FieldPlan, Mark, field_plan};
use super::page::DrawnPursuit;
use super::sentence::sentence;
use super::sheet::facts;
use super::svg::open;
use super::text::{ending_words, name_or_id, optional, shown};
use crate::base::units::mph;
use crate::model::Field;
use crate::store::rows::FrameRow;
use serde::Serialize;

/// One drawn pursuit.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct PursuitView {
    pub anchor: String,
    pub who: String,
    pub position: String,
    pub whom: String,
    pub place: String,
    pub ending: String,
    pub ending_key: &'static str,
    pub sentence: String,
    pub account: Account,
    pub facts: Vec<Fact>,
    pub legend: Vec<LegendEntry>,
    /// Empty when no frames were kept for this pursuit.
    pub field_svg: String,
    pub bearing_svg: String,
    pub speed_svg: String,
    pub ground_svg: String,
    pub has_blocked: bool,
    pub last_step: usize,
    /// Safe inside a script element.
    pub viewer_json: String,
}

/// Name and value of a number beside the account.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Fact {
    pub name: &'static str,
    pub value: String,
}

/// A mark and what it stands for.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct LegendEntry {
    pub svg: String,
    pub words: &'static str,
}

/// The view of one pursuit; frames may come in any order.
pub fn pursuit_view(drawn: &DrawnPursuit, anchor: String, field: &Field) -> PursuitView {
    let row = drawn.row;
    let mut frames: Vec<&FrameRow> = drawn.frames.iter().collect();
    frames.sort_by(|a, b| a.time_s.total_cmp(&b.time_s).then(a.frame.cmp(&b.frame)));
    let who = name_or_id(row.defender_name.as_deref(), &row.defender);
    let whom = name_or_id(row.carrier_name.as_deref(), &row.carrier);
    let has_frames = !frames.is_empty();
    let plan = has_frames
        .then(|| field_plan(row, &frames, field, &format!("{who} after {whom}, seen from above; the carrier attacks to the right")));
    let drawn_if = |svg: String| if has_frames { svg } else { String::new() };
    PursuitView {
        anchor,
        position: optional(row.position.as_deref()),
        place: format!("game {}, play {}, carry {}, pursuit {}", shown(&row.game), shown(&row.play), row.carry, row.pursuit),
        ending: ending_words(&row.ending),
        ending_key: ending_key(&row.ending),
        sentence: sentence(row, drawn.frames, field),
        account: account(row, row.conceded_yd),
        facts: facts(row, field).into_iter().map(|(name, value)| Fact { name, value }).collect(),
        legend: plan.as_ref().map(legend).unwrap_or_default(),
        bearing_svg: drawn_if(bearing_chart(row, &frames)),
        speed_svg: drawn_if(speed_chart(row, &frames)),
        ground_svg: drawn_if(ground_chart(row, &frames)),
        has_blocked: frames.iter().any(|f| f.blocked),
        last_step: frames.len().saturating_sub(1),
        viewer_json: plan.as_ref().map(|p| viewer_json(drawn, &frames, p)).unwrap_or_default(),
        field_svg: plan.map(|p| p.svg).unwrap_or_default(),
        who,
        whom,
    }
}

/// A class name for the ending; never the file's own text.
fn ending_key(ending: &str) -> &'static str {
    match ending {
        "stop" => "stop",
        "contact_lost" => "contact-lost",
        "chance_lost" => "chance-lost",
        "no_chance" => "no-chance",
        _ => "other",
    }
}

fn legend(plan: &FieldPlan) -> Vec<LegendEntry> {
    let entry = |m: &Mark| {
        let place = if *m == Mark::ChanceLost { (10.0, 22.0) } else { (15.0, 13.0) };
        LegendEntry { svg: open("key", 30.0, 26.0, m.words()) + &m.shape(place) + "</svg>", words: m.words() }
    };
    plan.marks.iter().map(entry).collect()
}

/// Places in the units of the drawings, so that the viewer only moves things. Missing is null.
fn viewer_json(drawn: &DrawnPursuit, frames: &[&FrameRow], plan: &FieldPlan) -> String {
    let row = drawn.row;
    let axis = time_axis(row, frames);
    let spots = |xy: fn(&FrameRow) -> (f64, f64)| -> Vec<[Option<f64>; 2]> {
        frames
            .iter()
            .map(|f| {
                let (x, y) = xy(f);
                plan.frame.spot(x, y).map_or([None, None], |(a, b)| [rounded(Some(a), 1), rounded(Some(b), 1)])
            })
            .collect()
    };
    let series = |decimals: i32, value: fn(&FrameRow) -> Option<f64>| -> Vec<Option<f64>> {
        frames.iter().map(|f| rounded(value(f), decimals)).collect()
    };
    let seconds: Vec<Option<f64>> = frames.iter().map(|f| rounded(Some(f.time_s - row.start_s), 2)).collect();
    let data = serde_json::json!({
        "t": seconds,
        "c": spots(|f| (f.carrier_x_yd, f.carrier_y_yd)),
        "d": spots(|f| (f.defender_x_yd, f.defender_y_yd)),
        "gap": series(1, |f| Some(f.range_yd)),
        "need": series(1, |f| f.need_yps.map(mph)),
        "runs": series(1, |f| Some(mph(f.defender_speed_yps))),
        "chance": series(0, |f| Some(100.0 * f.chance)),
        "axis": [LEFT, RIGHT, rounded(Some(axis.high), 3)],
    });
    script_safe(&data.to_string())
}

fn rounded(value: Option<f64>, decimals: i32) -> Option<f64> {
    let unit = 10f64.powi(decimals);
    value.filter(|v| v.is_finite()).map(|v| (v * unit).round() / unit + 0.0)
}

/// JSON that cannot end the script element around it, whatever its texts hold.
///
/// ```
/// use tailchase::report::view_pursuit::script_safe;
/// assert_eq!(script_safe("\"</script>\""), "\"\\u003c/script\\u003e\"");
/// ```
pub fn script_safe(json: &str) -> String {
    let mut out = String::with_capacity(json.len());
    for c in json.chars() {
        match c {
            '<' | '>' | '&' | '\u{2028}' | '\u{2029}' => out += &format!("\\u{:04x}", c as u32),
            c => out.push(c),
        }
    }
    out
}
