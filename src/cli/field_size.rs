//! `--field`: a ready-made field or a rectangle of any size.

use crate::base::units::YD_PER_M;
use crate::model::Field;

/// Reads `american`, `canadian`, `LENGTHxWIDTH` in yards, or with `m` at the end in metres.
///
/// ```
/// use tailchase::cli::field_size::parse_field;
/// assert_eq!(parse_field("canadian").unwrap().end_zone_yd, 20.0);
/// assert_eq!(parse_field("100x70").unwrap().width_yd, 70.0);
/// assert!((parse_field("105x68m").unwrap().length_yd - 105.0 / 0.9144).abs() < 1e-9);
/// assert!(parse_field("wide").is_err());
/// ```
///
/// # Errors
/// A sentence for the user when the text is none of these.
pub fn parse_field(text: &str) -> Result<Field, String> {
    let plain = text.trim().to_lowercase();
    match plain.as_str() {
        "american" => return Ok(Field::AMERICAN),
        "canadian" => return Ok(Field::CANADIAN),
        _ => {}
    }
    let wrong = || format!("expected american, canadian or LENGTHxWIDTH such as 100x70 (yards) or 105x68m (metres), found {text:?}");
    let (sizes, yd_per_unit) = match plain.strip_suffix('m') {
        Some(sizes) => (sizes, YD_PER_M),
        None => (plain.strip_suffix("yd").unwrap_or(&plain), 1.0),
    };
    let (length, width) = sizes.split_once(['x', '×']).ok_or_else(wrong)?;
    let size_yd = |text: &str| text.trim().parse::<f64>().ok().map(|size| size * yd_per_unit).filter(|yd| (1.0..=1000.0).contains(yd));
    match (size_yd(length), size_yd(width)) {
        (Some(length_yd), Some(width_yd)) => Ok(Field::rectangle(length_yd, width_yd)),
        _ => Err(wrong()),
    }
}
