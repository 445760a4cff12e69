//! Settings as TOML: read from a file and checked, printed with unit, default and source.

use super::CliError;
use crate::model::Settings;
use std::path::Path;

/// Lowest and highest value of every number among the settings, both allowed: (group, setting, low, high).
/// Wide on purpose: it keeps out what would make a result meaningless, not what is unusual.
pub const RANGES: &[(&str, &str, f64, f64)] = &[
    ("field", "length_yd", 10.0, 1000.0),
    ("field", "width_yd", 5.0, 1000.0),
    ("field", "end_zone_yd", 0.0, 100.0),
    ("smoothing", "jump_speed_yps", 1.0, 1000.0),
    ("smoothing", "gate_sigmas", 1.0, 1000.0),
    ("smoothing", "bridge_s", 0.0, 10.0),
    ("smoothing", "jerk_density", 0.0, 1e9),
    ("smoothing", "sigma_yd", 0.0, 10.0),
    ("smoothing", "contact_boost", 1.0, 1e6),
    ("carry", "reach_yd", 0.0, 10.0),
    ("carry", "stop_within_s", 0.0, 10.0),
    ("carry", "hold_ball_yd", 0.1, 10.0),
    ("carry", "hold_time_s", 0.0, 10.0),
    ("carry", "down_speed_yps", 0.0, 10.0),
    ("carry", "block_range_yd", 0.0, 10.0),
    ("carry", "block_sector_deg", 0.0, 180.0),
    ("carry", "block_time_s", 0.0, 10.0),
    ("carry", "block_relative_speed_yps", 0.0, 30.0),
    ("carry", "out_of_it_share", 0.0, 1.0),
    ("motion", "alpha_per_s", 0.1, 1000.0),
    ("motion", "top_speed_sigma_share", 0.0, 1.0),
    ("motion", "top_speed_quantile", 0.5, 1.0),
    ("motion", "top_speed_scale", 0.5, 2.0),
    ("motion", "top_speed_prior_s", 0.0, 1000.0),
    ("motion", "foresight_pull", 0.0, 10.0),
    ("motion", "foresight_pace", 0.0, 2.0),
    ("motion", "sideline_margin_yd", 0.0, 20.0),
    ("motion", "foresight_s", 0.5, 60.0),
    ("clock", "downfield_yps", 0.0, 20.0),
    ("clock", "sustained_s", 0.0, 10.0),
    ("clock", "reaction_s", 0.0, 10.0),
    ("clock", "break_window_s", 0.0, 10.0),
    ("clock", "break_push_share", 0.0, 1.0),
    ("clock", "break_sector_deg", 0.0, 180.0),
    ("rating", "too_few", 0.0, 1e6),
    ("rating", "draws", 100.0, 1e6),
    ("rating", "seed", 0.0, 9_007_199_254_740_992.0),
    ("rating", "level", 0.5, 0.9999),
];

/// Reads a settings file; what it leaves out keeps its default.
///
/// # Errors
/// When the file cannot be read, is not TOML, names an unknown setting, or a value is out of its range.
pub fn read_settings(path: &Path) -> Result<Settings, CliError> {
    let text = std::fs::read_to_string(path).map_err(|source| CliError::Unreadable {
        path: path.to_path_buf(),
        what: "a settings file",
        source,
    })?;
    let settings: Settings = toml::from_str(&text).map_err(|error| CliError::BadSettings {
        path: path.to_path_buf(),
        line: error.span().and_then(|span| text.get(..span.start)).map_or(1, |before| before.matches('\n').count() + 1),
        found: error.message().to_string(),
    })?;
    check_settings(&settings, &path.display().to_string())?;
    Ok(settings)
}

/// Checks every number against [`RANGES`]; `place` says in the message where the settings come from.
///
/// # Errors
/// For the first setting out of its range.
pub fn check_settings(settings: &Settings, place: &str) -> Result<(), CliError> {
    let values = values(settings)?;
    for (group, name, low, high) in RANGES {
        let Some(value) = number(&values, group, name) else { continue };
        if !(*low..=*high).contains(&value) {
            let (setting, expected) = (format!("{group}.{name}"), format!("a number from {low} to {high}"));
            return Err(CliError::SettingRange { place: place.to_string(), setting, expected, found: value });
        }
    }
    if settings.field.end_zone_yd * 2.0 >= settings.field.length_yd {
        let (setting, expected) = ("field.end_zone_yd".to_string(), "less than half of field.length_yd".to_string());
        return Err(CliError::SettingRange { place: place.to_string(), setting, expected, found: settings.field.end_zone_yd });
    }
    Ok(())
}

fn values(settings: &Settings) -> Result<toml::Table, CliError> {
    toml::Table::try_from(settings).map_err(|source| CliError::SettingsOut { source: Box::new(source) })
}

fn number(values: &toml::Table, group: &str, name: &str) -> Option<f64> {
    match values.get(group)?.as_table()?.get(name)? {
        toml::Value::Float(value) => Some(*value),
        toml::Value::Integer(value) => Some(*value as f64),
        _ => None,
    }
}

/// All settings as TOML that can be read back, each under a comment with its meaning and source, unit and default.
///
/// # Errors
/// Never for settings that passed [`check_settings`]; a number that TOML cannot hold otherwise.
pub fn settings_toml(settings: &Settings) -> Result<String, CliError> {
    let (values, defaults) = (values(settings)?, values(&Settings::default())?);
    let shown = |table: &toml::Table, group: &str, name: &str| {
        table.get(group).and_then(|g| g.get(name)).map_or_else(String::new, ToString::to_string)
    };
    let mut text =
        String::from("# Settings of tailchase. Give an edited copy with --settings FILE; a setting that is left out keeps its default.\n");
    for (group, settings) in Settings::GROUPS {
        text.push_str(&format!("\n[{group}]\n"));
        for (name, unit, meaning) in *settings {
            text.push_str(&format!("# {meaning}\n# unit: {unit}; default: {}\n", shown(&defaults, group, name)));
            text.push_str(&format!("{name} = {}\n", shown(&values, group, name)));
        }
    }
    Ok(text)
}
