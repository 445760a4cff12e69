//! Numbers and names as a reader sees them: rounded once, missing as a dash, nothing that is not a number.

use crate::base::units::mph;

/// What stands where a value is missing.
pub const MISSING: &str = "–";

/// A number with a fixed count of decimals, a true minus sign, and no minus before a rounded zero.
///
/// ```
/// use tailchase::report::text::fixed;
/// assert_eq!(fixed(-1.25, 1), "−1.2"); // ties go to even, as the standard library prints them
/// assert_eq!(fixed(-0.01, 1), "0.0");
/// assert_eq!(fixed(f64::NAN, 1), "–");
/// ```
pub fn fixed(value: f64, decimals: usize) -> String {
    if !value.is_finite() {
        return MISSING.to_string();
    }
    let magnitude = format!("{:.decimals$}", value.abs());
    let is_zero = magnitude.bytes().all(|b| matches!(b, b'0' | b'.'));
    if value < 0.0 && !is_zero { format!("−{magnitude}") } else { magnitude }
}

/// [`fixed`], or a dash.
pub fn number(value: Option<f64>, decimals: usize) -> String {
    value.map_or_else(|| MISSING.to_string(), |v| fixed(v, decimals))
}

/// A share 0..1 in per cent, without decimals, or a dash.
pub fn percent(share: Option<f64>) -> String {
    match share {
        Some(v) if v.is_finite() => format!("{} %", fixed(100.0 * v, 0)),
        _ => MISSING.to_string(),
    }
}

/// A speed in yd/s as miles an hour, one decimal, without the unit.
pub fn speed_mph(speed_yps: Option<f64>) -> String {
    number(speed_yps.map(mph), 1)
}

/// `low to high`, or a dash when an end is missing.
pub fn range(low: Option<f64>, high: Option<f64>, decimals: usize) -> String {
    match (low, high) {
        (Some(a), Some(b)) if a.is_finite() && b.is_finite() => format!("{} to {}", fixed(a, decimals), fixed(b, decimals)),
        _ => MISSING.to_string(),
    }
}

/// A count with a narrow space between thousands.
///
/// ```
/// assert_eq!(tailchase::report::text::count(1234567), "1\u{202f}234\u{202f}567");
/// ```
pub fn count(n: u64) -> String {
    let digits = n.to_string();
    let mut out = String::with_capacity(digits.len() + 6);
    for (i, c) in digits.chars().enumerate() {
        if i > 0 && (digits.len() - i).is_multiple_of(3) {
            out.push('\u{202f}');
        }
        out.push(c);
    }
    out
}

/// A text of the file, fit to be shown: control characters and marks that turn the direction of writing could
/// scramble a terminal or a page, so a replacement character stands for each.
pub fn shown(text: &str) -> String {
    text.chars().map(|c| if c.is_control() || is_direction_mark(c) { '\u{fffd}' } else { c }).collect()
}

fn is_direction_mark(c: char) -> bool {
    matches!(c, '\u{200e}' | '\u{200f}' | '\u{061c}' | '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}' | '\u{2028}' | '\u{2029}')
}

/// The name where there is one, else the id.
pub fn name_or_id(name: Option<&str>, id: &str) -> String {
    match name {
        Some(n) if !n.trim().is_empty() => shown(n),
        _ => shown(id),
    }
}

/// A text that may be missing.
pub fn optional(text: Option<&str>) -> String {
    match text {
        Some(t) if !t.trim().is_empty() => shown(t),
        _ => MISSING.to_string(),
    }
}

/// `a`, `a and b`, `a, b and c`.
pub fn joined(parts: &[String]) -> String {
    match parts {
        [] => String::new(),
        [one] => one.clone(),
        [head @ .., last] => format!("{} and {last}", head.join(", ")),
    }
}

/// How a pursuit ended, in words.
pub fn ending_words(ending: &str) -> String {
    match ending {
        "stop" => "stop".into(),
        "contact_lost" => "contact lost".into(),
        "chance_lost" => "chance lost".into(),
        "no_chance" => "no chance".into(),
        "out_of_it" => "out of it".into(),
        other => shown(other),
    }
}
