//! The page: one self-contained HTML text with everything drawn, nothing loaded from outside.

use super::heading::Heading;
use super::provenance::Provenance;
use super::view_players::{PlayersView, TeamsView, players_view, teams_view};
use super::view_pursuit::{PursuitView, pursuit_view};
use super::view_run::{CarryView, RunView, carries_view, run_view};
use crate::model::Settings;
use crate::store::rows::{CarryRow, FrameRow, PlayerRow, PursuitRow, TeamRow};
use minijinja::syntax::SyntaxConfig;
use minijinja::{AutoEscape, Environment, UndefinedBehavior, Value};
use serde::Serialize;
use std::collections::BTreeMap;

/// A pursuit with the frames to draw it from; without frames it is listed with its account alone.
#[derive(Clone, Copy, Debug)]
pub struct DrawnPursuit<'a> {
    pub row: &'a PursuitRow,
    pub frames: &'a [FrameRow],
}

#[derive(Serialize)]
struct HeadingView {
    key: &'static str,
    name: &'static str,
    meaning: &'static str,
    own: bool,
}

#[derive(Serialize)]
struct PageView {
    style: &'static str,
    script: &'static str,
    run: RunView,
    headings: Vec<HeadingView>,
    players: PlayersView,
    teams: TeamsView,
    pursuits: Vec<PursuitView>,
    carries: Vec<CarryView>,
}

const TEMPLATES: [(&str, &str); 4] = [
    ("page.html", include_str!("templates/page.html")),
    ("players.html", include_str!("templates/players.html")),
    ("pursuit.html", include_str!("templates/pursuit.html")),
    ("run.html", include_str!("templates/run.html")),
];

/// The page of an audit. Players and teams stand in the order given; drawn pursuits follow their players' order,
/// those of players not in the ranking come last, each by game, play, carry and pursuit.
///
/// # Panics
/// Only when the program's own templates are broken, which no input can bring about: view models hold text alone.
pub fn page(
    prov: &Provenance,
    players: &[PlayerRow],
    teams: &[TeamRow],
    drawn: &[DrawnPursuit],
    carries: &[CarryRow],
    settings: &Settings,
) -> String {
    let field = settings.field();
    let order = drawing_order(drawn, players);
    let anchor_of = |player: &str| order.iter().position(|d| d.row.defender == player).map(anchor).unwrap_or_default();
    let view = PageView {
        style: include_str!("templates/style.css"),
        script: include_str!("templates/page.js"),
        run: run_view(prov, settings),
        headings: Heading::ALL.map(|h| HeadingView { key: h.key(), name: h.name(), meaning: h.meaning(), own: h.is_own() }).into(),
        players: players_view(players, anchor_of),
        teams: teams_view(teams),
        pursuits: order.iter().enumerate().map(|(i, d)| pursuit_view(d, anchor(i), &field)).collect(),
        carries: carries_view(carries, players, &field),
    };
    match render(&view) {
        Ok(html) => html,
        Err(error) => panic!("the page's own templates must render whatever the data: {error}"),
    }
}

/// Anchors are counted, never made from an id of the file.
fn anchor(i: usize) -> String {
    format!("pursuit-{}", i + 1)
}

fn drawing_order<'a>(drawn: &[DrawnPursuit<'a>], players: &[PlayerRow]) -> Vec<DrawnPursuit<'a>> {
    let place = |d: &DrawnPursuit| players.iter().position(|p| p.player == d.row.defender).unwrap_or(usize::MAX);
    let mut out: Vec<(usize, DrawnPursuit<'a>)> = drawn.iter().map(|d| (place(d), *d)).collect();
    let key = |r: &'a PursuitRow| (&r.game, &r.play, r.carry, r.pursuit);
    out.sort_by(|(pa, a), (pb, b)| pa.cmp(pb).then_with(|| key(a.row).cmp(&key(b.row))));
    out.into_iter().map(|(_, d)| d).collect()
}

fn render(view: &PageView) -> Result<String, Box<dyn std::error::Error>> {
    let mut env = Environment::new();
    env.set_auto_escape_callback(|_| AutoEscape::Html);
    env.set_undefined_behavior(UndefinedBehavior::Strict);
    env.set_syntax(SyntaxConfig::builder().trim_blocks(true).lstrip_blocks(true).build()?);
    for (name, source) in TEMPLATES {
        env.add_template(name, source)?;
    }
    let values = template_value(serde_json::to_value(view)?);
    Ok(env.get_template("page.html")?.render(values)?)
}

/// The bridge from serialised view models to the template's values. Numbers become text-like integers only: view
/// models hold no others.
fn template_value(json: serde_json::Value) -> Value {
    use serde_json::Value as Json;
    match json {
        Json::Null => Value::from(()),
        Json::Bool(yes) => Value::from(yes),
        Json::Number(n) => n.as_i64().map_or_else(|| Value::from(n.to_string()), Value::from),
        Json::String(text) => Value::from(text),
        Json::Array(items) => items.into_iter().map(template_value).collect(),
        Json::Object(map) => Value::from_object(map.into_iter().map(|(k, v)| (k, template_value(v))).collect::<BTreeMap<String, Value>>()),
    }
}
