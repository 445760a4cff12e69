//! View models of the run itself: row account, inputs, findings, settings, and the carries that cost most.

use super::provenance::Provenance;
use super::spot::spot_words;
use super::text::{MISSING, count, fixed, name_or_id, number, percent, shown};
use crate::model::{Field, Settings};
use crate::store::rows::{CarryRow, PlayerRow};
use serde::Serialize;

/// Carries listed on the page.
const CARRIES_SHOWN: usize = 20;

/// Where the numbers come from.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct RunView {
    pub version: String,
    pub settings_note: String,
    pub rows_read: String,
    pub rows_used: String,
    pub rows_set_aside: String,
    /// Says so when read is not used plus set aside; empty otherwise.
    pub rows_warning: String,
    pub games: String,
    pub plays: String,
    pub carries: String,
    pub pursuits: String,
    pub beyond_model: String,
    pub level: String,
    pub too_few: String,
    pub inputs: Vec<[String; 3]>,
    /// Kind, count, first place, advice.
    pub findings: Vec<[String; 4]>,
    /// Name, value, unit, meaning.
    pub settings: Vec<[String; 4]>,
}

/// The run as text.
pub fn run_view(prov: &Provenance, settings: &Settings) -> RunView {
    let sum = prov.rows_used.saturating_add(prov.rows_set_aside);
    let rows_warning = if sum == prov.rows_read {
        String::new()
    } else {
        format!("the row account does not balance: used and set aside make {}, read were {}", count(sum), count(prov.rows_read))
    };
    RunView {
        version: shown(&prov.version),
        settings_note: shown(&prov.settings_note),
        rows_read: count(prov.rows_read),
        rows_used: count(prov.rows_used),
        rows_set_aside: count(prov.rows_set_aside),
        rows_warning,
        games: counted(prov.games, "game"),
        plays: counted(prov.plays, "play"),
        carries: if prov.carries == 1 { "1 carry".into() } else { format!("{} carries", count(prov.carries)) },
        pursuits: counted(prov.pursuits, "pursuit"),
        beyond_model: match prov.beyond_model_share {
            Some(s) if s.is_finite() => format!("{} %", fixed(100.0 * s, 1)),
            _ => MISSING.to_string(),
        },
        level: percent(Some(settings.rating.level)),
        too_few: settings.rating.too_few.to_string(),
        inputs: prov.inputs.iter().map(|i| [shown(&i.path), count(i.bytes), shown(&i.hash)]).collect(),
        findings: prov
            .findings
            .iter()
            .map(|f| [shown(&f.kind).replace('_', " "), count(f.count), shown(&f.first_place), shown(&f.advice)])
            .collect(),
        settings: settings_rows(settings),
    }
}

fn counted(n: u64, word: &str) -> String {
    format!("{} {word}{}", count(n), if n == 1 { "" } else { "s" })
}

fn settings_rows(settings: &Settings) -> Vec<[String; 4]> {
    // Settings are plain numbers and truths, which always become JSON; an absent value would show as a dash.
    let values = serde_json::to_value(settings).unwrap_or_default();
    let mut out = Vec::new();
    for (group, entries) in Settings::GROUPS {
        for (name, unit, meaning) in *entries {
            let value = match &values[*group][*name] {
                serde_json::Value::Null => MISSING.to_string(),
                serde_json::Value::Bool(yes) => if *yes { "yes" } else { "no" }.to_string(),
                other => other.to_string(),
            };
            out.push([format!("{group}.{name}"), value, (*unit).to_string(), (*meaning).to_string()]);
        }
    }
    out
}

/// One carry of the list.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct CarryView {
    pub place: String,
    pub carrier: String,
    pub from: String,
    pub gain: String,
    pub conceded: String,
    pub ended: String,
    pub stopped_by: String,
}

/// How a carry ended, in words; a text that is not of this program is shown as it stands.
fn end_words(end_how: &str) -> String {
    match end_how {
        "event_down" => "down",
        "event_out" | "left_field" => "out of bounds",
        "event_score" | "crossed_goal" => "score",
        "event_slide" => "slide",
        "event_fumble" => "fumble",
        "event_lateral" => "lateral",
        "speed_collapse" => "stopped, not marked",
        "ball_left" => "gave up the ball",
        "carrier_column" => "no longer named as carrier",
        "track_ended" => "end of the track",
        other => return shown(other),
    }
    .to_string()
}

/// Names of the ids joined by semicolons; an id without a name stands for itself.
fn stoppers(ids: Option<&str>, players: &[PlayerRow]) -> String {
    let Some(ids) = ids.filter(|i| !i.trim().is_empty()) else { return MISSING.to_string() };
    let name = |id: &str| {
        let player = players.iter().find(|p| p.player == id);
        name_or_id(player.and_then(|p| p.name.as_deref()), id)
    };
    ids.split(';').map(name).collect::<Vec<String>>().join(", ")
}

/// The carries that gave most ground beyond the earliest intercept that any defender had; ties by game, play, carry.
pub fn carries_view(carries: &[CarryRow], players: &[PlayerRow], field: &Field) -> Vec<CarryView> {
    let mut order: Vec<(&CarryRow, f64)> = carries.iter().filter_map(|c| Some((c, c.conceded_yd.filter(|y| y.is_finite())?))).collect();
    order.sort_by(|(a, ya), (b, yb)| yb.total_cmp(ya).then_with(|| (&a.game, &a.play, a.carry).cmp(&(&b.game, &b.play, b.carry))));
    order
        .into_iter()
        .take(CARRIES_SHOWN)
        .map(|(c, conceded)| CarryView {
            place: format!("game {}, play {}, carry {}", shown(&c.game), shown(&c.play), c.carry),
            carrier: name_or_id(c.carrier_name.as_deref(), &c.carrier),
            from: spot_words(Some(c.start_x_yd), field),
            gain: number(Some(c.gain_yd), 1),
            conceded: fixed(conceded, 1),
            ended: end_words(&c.end_how),
            stopped_by: stoppers(c.stopped_by.as_deref(), players),
        })
        .collect()
}
