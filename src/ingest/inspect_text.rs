//! An inspection as text for a terminal, and as a mapping file ready to edit.

use super::events::word_of_mark;
use super::inspect::{Inspection, Sample};
use super::mapping::{DistanceUnit, HeadingForm, Origin, SpeedUnit, TimeForm};
use super::{Logical, Mapping, Matching};
use crate::model::Field;
use std::fmt::Write;

impl Inspection {
    /// The inspection as plain text. Files with the same columns are told together.
    pub fn to_text(&self) -> String {
        let mut out = String::new();
        let mut told: Vec<&[super::Matched]> = Vec::new();
        for file in &self.files {
            let rows = file.rows.map_or(String::new(), |r| format!(", {r} rows"));
            line(&mut out, format_args!("{} ({} bytes{rows})", file.path.display(), file.bytes));
            if told.contains(&file.matched.as_slice()) {
                line(&mut out, format_args!("  columns as above"));
                continue;
            }
            told.push(&file.matched);
            for m in &file.matched {
                let unit = m.unit.map_or(String::new(), |u| format!(", in {u}"));
                line(&mut out, format_args!("  {:<14} column {} ({}{unit})", m.logical.word(), m.column, m.how.word()));
            }
            let missing: Vec<&str> = file.missing.iter().map(|l| l.word()).collect();
            line(&mut out, format_args!("  not found      {}", if missing.is_empty() { "nothing".into() } else { missing.join(", ") }));
            if !file.unused.is_empty() {
                line(&mut out, format_args!("  not needed     {}", file.unused.join(", ")));
            }
        }
        for path in &self.skipped {
            line(&mut out, format_args!("left out by name: {}", path.display()));
        }
        let s = &self.sample;
        if s.rows > 0 {
            let rate = s.frame_rate_hz.map_or("unknown".into(), |r| format!("{r} Hz"));
            let ball = if s.has_ball { "found" } else { "not found" };
            let counts =
                format!("{} games, {} plays, {} movers, {} rows ({} set aside)", s.games, s.plays, s.movers, s.rows, s.rows_set_aside);
            line(&mut out, format_args!("sample: {counts}; frame rate {rate}; ball {ball}"));
        }
        for event in &s.events {
            let read = event.mark.map_or("no meaning here", word_of_mark);
            line(&mut out, format_args!("  event {:?} on {} rows: {read}", event.text, event.rows));
        }
        self.notes.iter().for_each(|note| line(&mut out, format_args!("note: {note}")));
        self.problems.iter().for_each(|problem| line(&mut out, format_args!("problem: {problem}")));
        out
    }
}

fn line(out: &mut String, text: std::fmt::Arguments) {
    // Writing to a String cannot fail.
    let _ = writeln!(out, "{text}");
}

/// A text as a TOML string.
fn quoted(text: &str) -> String {
    toml::Value::String(text.to_string()).to_string()
}

/// A mapping file that says what was understood; what is not known stands in comments.
pub(crate) fn mapping_toml(mapping: &Mapping, matching: Option<&Matching>, sample: &Sample, field: &Field) -> String {
    let mut out = String::new();
    let mut set = |name: &str, value: Option<String>, default: &str, choices: &str| match value {
        Some(value) => line(&mut out, format_args!("{name} = {value}  # {choices}")),
        None => line(&mut out, format_args!("# {name} = {default}  # {choices}")),
    };
    let units = mapping.units.map(|u| match u {
        DistanceUnit::Yards => "\"yd\"",
        DistanceUnit::Metres => "\"m\"",
        DistanceUnit::Feet => "\"ft\"",
    });
    let origin = mapping.origin.map(|o| if o == Origin::Centre { "\"centre\"" } else { "\"corner\"" });
    let heading = mapping.heading.map(|h| match h {
        HeadingForm::DegCwFromY => "\"deg_cw_from_y\"",
        HeadingForm::DegCcwFromX => "\"deg_ccw_from_x\"",
        HeadingForm::RadCcwFromX => "\"rad_ccw_from_x\"",
    });
    let speed = mapping.speed.map(|s| match s {
        SpeedUnit::Yps => "\"yps\"",
        SpeedUnit::Mps => "\"mps\"",
        SpeedUnit::Fps => "\"fps\"",
        SpeedUnit::Mph => "\"mph\"",
        SpeedUnit::Kmh => "\"kmh\"",
        SpeedUnit::Kn => "\"kn\"",
    });
    let time = mapping.time.map(|t| match t {
        TimeForm::Seconds => "\"seconds\"",
        TimeForm::Milliseconds => "\"milliseconds\"",
        TimeForm::Clock => "\"clock\"",
    });
    let own = |v: Option<&str>| v.map(String::from);
    set("units", own(units), "\"yd\"", "yd, m or ft");
    set("origin", own(origin), "\"corner\"", "corner or centre");
    set("heading", own(heading), "\"deg_cw_from_y\"", "deg_cw_from_y, deg_ccw_from_x or rad_ccw_from_x");
    set("speed", own(speed), "\"yps\"", "yps, mps, fps, mph, kmh or kn");
    set("time", own(time), "\"seconds\"", "seconds, milliseconds or clock");
    let rate = sample.frame_rate_hz.map_or("10".into(), |r| r.to_string());
    set("frame_rate_hz", mapping.frame_rate_hz.map(|r| r.to_string()), &rate, "only needed where times do not tell");
    let ball: Vec<String> = mapping.ball.iter().map(|b| quoted(b)).collect();
    set("ball", (!ball.is_empty()).then(|| format!("[{}]", ball.join(", "))), "[\"ball\"]", "ids or names that mean the ball");

    line(&mut out, format_args!("\n[columns]"));
    for logical in Logical::ALL {
        match (matching.and_then(|m| m.get(logical)), mapping.columns.get(&logical)) {
            (Some(m), _) => line(&mut out, format_args!("{} = {}  # {}", logical.word(), quoted(&m.column), m.how.word())),
            (None, Some(told)) => line(&mut out, format_args!("{} = {}", logical.word(), quoted(told))),
            (None, None) => line(&mut out, format_args!("# {} = \"\"  # {}: not found", logical.word(), logical.meaning())),
        }
    }
    line(&mut out, format_args!("\n[events]"));
    for (text, word) in &mapping.events {
        line(&mut out, format_args!("{} = {}", quoted(text), quoted(word)));
    }
    for event in sample.events.iter().filter(|e| !mapping.events.contains_key(&e.text)) {
        let read = event.mark.map_or("other", word_of_mark);
        line(
            &mut out,
            format_args!("# {} = {}{}", quoted(&event.text), quoted(read), if event.mark.is_none() { "  # no meaning here" } else { "" }),
        );
    }
    line(&mut out, format_args!("\n[field]"));
    let own = mapping.field;
    for (name, told, taken) in [
        ("length_yd", own.length_yd, field.length_yd),
        ("width_yd", own.width_yd, field.width_yd),
        ("end_zone_yd", own.end_zone_yd, field.end_zone_yd),
    ] {
        line(&mut out, format_args!("{}{name} = {taken:?}", if told.is_some() { "" } else { "# " }));
    }
    out
}
