//! One pursuit for a terminal: who, the account as a short table, the numbers around it, one plain sentence.

use super::account::account;
use super::sentence::sentence;
use super::spot::spot_words;
use super::text::{MISSING, ending_words, fixed, name_or_id, number, optional, percent, shown, speed_mph};
use crate::model::Field;
use crate::store::rows::{FrameRow, PursuitRow};

/// The sheet of one pursuit; ends with a line break.
pub fn sheet(row: &PursuitRow, frames: &[FrameRow], field: &Field) -> String {
    let account = account(row, row.conceded_yd);
    let mut out = title(row);
    out += "\n\n                   yards\n";
    for line in &account.lines {
        out += format!("  {:<15}{:>7}  {}", line.name, line.yards, line.note).trim_end();
        out.push('\n');
    }
    out += "                  ------\n";
    out += &format!("  {:<15}{:>7}\n", "conceded", account.total);
    if !account.warning.is_empty() {
        out += &format!("  {}\n", account.warning);
    }
    out.push('\n');
    for (name, value) in facts(row, field) {
        out += &format!("  {name:<24}{value}\n");
    }
    out.push('\n');
    out += &sentence(row, frames, field);
    out.push('\n');
    out
}

/// Who, and where in the files.
fn title(row: &PursuitRow) -> String {
    let labels: Vec<String> =
        [&row.position, &row.defender_side].into_iter().flatten().filter(|t| !t.trim().is_empty()).map(|t| shown(t)).collect();
    let label = if labels.is_empty() { String::new() } else { format!(" ({})", labels.join(", ")) };
    format!(
        "{}{label} after {}\ngame {}, play {}, carry {}, pursuit {}: {}",
        name_or_id(row.defender_name.as_deref(), &row.defender),
        name_or_id(row.carrier_name.as_deref(), &row.carrier),
        shown(&row.game),
        shown(&row.play),
        row.carry,
        row.pursuit,
        ending_words(&row.ending)
    )
}

/// The numbers beside the account, as name and text with its unit; also used on the page.
pub fn facts(row: &PursuitRow, field: &Field) -> Vec<(&'static str, String)> {
    let unit = |text: String, unit: &str| if text == MISSING { text } else { format!("{text} {unit}") };
    let contact = match (row.contact_angle_deg, &row.contact_side) {
        (Some(a), side) => {
            let side = side.as_deref().map(|s| format!(" from the {}", shown(s))).unwrap_or_default();
            let closing = row.contact_closing_yps.map(|c| format!(", closing at {} mph", speed_mph(Some(c)))).unwrap_or_default();
            format!("{}° (0 head on, 180 from behind){side}{closing}", fixed(a, 0))
        }
        _ => MISSING.to_string(),
    };
    let top = match (row.top_speed_yps.is_finite(), row.top_speed_sigma_yps.is_finite()) {
        (true, true) => format!("{} ± {} mph", speed_mph(Some(row.top_speed_yps)), speed_mph(Some(1.96 * row.top_speed_sigma_yps))),
        _ => unit(speed_mph(Some(row.top_speed_yps)), "mph"),
    };
    vec![
        ("gap at the start", unit(fixed(row.start_range_yd, 1), "yd")),
        ("closest", unit(fixed(row.closest_yd, 1), "yd")),
        ("could have met him", met(row.ideal_s, row.ideal_x_yd, field)),
        ("it ended", met(Some(row.met_s), Some(row.met_x_yd), field)),
        ("needed at the start", unit(speed_mph(row.need_start_yps), "mph")),
        ("top speed", top),
        ("chance at the start", percent(Some(row.chance_start))),
        ("last chance went", unit(number(row.chance_lost_s, 1), "s")),
        ("clock starts, broke", format!("{}, {}", unit(number(row.clock_s, 1), "s"), unit(number(row.break_s, 1), "s"))),
        ("lean", lean_words(row.lean_deg)),
        ("on course", percent(Some(row.on_course_share))),
        ("tackling angle", contact),
        ("after contact", unit(number(row.after_contact_yd, 1), "yd")),
        ("efficiency", number(row.efficiency, 2)),
        ("steers as one who", optional(row.steer_word.as_deref())),
    ]
}

/// `12° flat`, `3° deep`, or a dash.
pub fn lean_words(lean_deg: Option<f64>) -> String {
    match lean_deg.filter(|l| l.is_finite()) {
        None => MISSING.to_string(),
        Some(l) if l <= -0.5 => format!("{}° flat", fixed(-l, 0)),
        Some(l) if l >= 0.5 => format!("{}° deep", fixed(l, 0)),
        Some(_) => "0°".to_string(),
    }
}

fn met(after_s: Option<f64>, x_yd: Option<f64>, field: &Field) -> String {
    match (after_s, x_yd) {
        (Some(s), Some(x)) if s.is_finite() && x.is_finite() => format!("at {} after {} s", spot_words(Some(x), field), fixed(s, 1)),
        _ => MISSING.to_string(),
    }
}
