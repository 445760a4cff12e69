//! View models of the ranking and of the teams: every number already text, every drawing already drawn.

use super::axis::Axis;
use super::heading::Entries;
use super::marks::{common_axis, scale, stack_ends, stacked_bar, whisker};
use super::sheet::lean_words;
use super::tables::{per_chance, rank_range};
use super::text::{name_or_id, number, optional, percent, range};
use crate::store::rows::{PlayerRow, TeamRow};
use serde::Serialize;

/// A value as shown and as sorted; missing sorts last.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Sortable {
    pub text: String,
    pub key: String,
}

fn sortable(text: String, value: Option<f64>) -> Sortable {
    Sortable { text, key: value.filter(|v| v.is_finite()).map(|v| format!("{:.6}", v + 0.0)).unwrap_or_default() }
}

fn whole(n: i64) -> Sortable {
    sortable(n.to_string(), Some(n as f64))
}

/// One line of the ranking.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct PlayerView {
    pub rank: Sortable,
    pub rank_range: String,
    pub name: String,
    pub label: String,
    /// Anchor of his drawn pursuit; empty without one.
    pub anchor: String,
    pub too_few: bool,
    pub own: Sortable,
    pub own_range: String,
    pub whisker_svg: String,
    pub total: Sortable,
    pub bar_svg: String,
    pub chances: Sortable,
    pub stops: Sortable,
    pub chances_lost: Sortable,
    pub efficiency: Sortable,
    pub efficiency_range: String,
    pub lean: Sortable,
    pub on_course: Sortable,
    pub steers: String,
    /// How far his rank moves under other settings; empty where that was not tried.
    pub swing: String,
}

/// The ranking with the scales of its drawn columns.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct PlayersView {
    pub rows: Vec<PlayerView>,
    pub whisker_scale_svg: String,
    pub bar_scale_svg: String,
    pub any_too_few: bool,
    /// All have the same pooled figure: these data tell no two players apart.
    pub all_alike: bool,
}

/// Whether pooling leaves nothing between the players.
fn all_alike(players: &[PlayerRow]) -> bool {
    const SAME_YD: f64 = 1e-6;
    let mut pooled = players.iter().filter_map(|p| p.own_yd);
    let Some(first) = pooled.next() else { return false };
    let mut others = pooled.peekable();
    others.peek().is_some() && others.all(|yd| (yd - first).abs() < SAME_YD)
}

/// The ranking in the order given. `anchor_of` finds the anchor of a player's drawn pursuit.
pub fn players_view(players: &[PlayerRow], anchor_of: impl Fn(&str) -> String) -> PlayersView {
    // Players with too few chances would stretch the scale for all: they count only where there are no others.
    let judged: Vec<&PlayerRow> =
        if players.iter().all(|p| p.too_few) { players.iter().collect() } else { players.iter().filter(|p| !p.too_few).collect() };
    let own = common_axis(judged.iter().flat_map(|p| [p.own_low_yd, p.own_yd, p.own_high_yd]).flatten());
    let bars = common_axis(judged.iter().flat_map(|p| stack_ends(&p.entries_yd())));
    PlayersView {
        rows: players.iter().map(|p| player_view(p, &own, &bars, anchor_of(&p.player))).collect(),
        whisker_scale_svg: scale(&own),
        bar_scale_svg: scale(&bars),
        any_too_few: players.iter().any(|p| p.too_few),
        all_alike: all_alike(players),
    }
}

fn player_view(p: &PlayerRow, own: &Axis, bars: &Axis, anchor: String) -> PlayerView {
    let name = name_or_id(p.name.as_deref(), &p.player);
    let own_range = range(p.own_low_yd, p.own_high_yd, 2);
    let (printed, total) = per_chance(p, p.conceded_yd);
    let labels: Vec<String> =
        [optional(p.side.as_deref()), optional(p.position.as_deref())].into_iter().filter(|l| l != super::text::MISSING).collect();
    PlayerView {
        rank: whole(p.rank),
        rank_range: rank_range(p),
        label: labels.join(", "),
        anchor,
        too_few: p.too_few,
        own: sortable(number(p.own_yd, 2), p.own_yd),
        whisker_svg: whisker(
            p.own_low_yd,
            p.own_yd,
            p.own_high_yd,
            own,
            &format!("{} yd per chance, interval {own_range}", number(p.own_yd, 2)),
        ),
        own_range,
        bar_svg: stacked_bar(&p.entries_yd(), &printed, bars, &format!("{name}: {total} yd per chance under six headings")),
        total: sortable(total, p.conceded_yd),
        chances: whole(p.chances),
        stops: whole(p.stops),
        chances_lost: whole(p.chances_lost),
        efficiency: sortable(number(p.efficiency, 2), p.efficiency),
        efficiency_range: range(p.efficiency_low, p.efficiency_high, 2),
        lean: sortable(lean_words(p.lean_deg), p.lean_deg),
        on_course: sortable(percent(p.on_course_share), p.on_course_share),
        steers: optional(p.steer_word.as_deref()),
        swing: p.rank_swing.map(|s| s.to_string()).unwrap_or_default(),
        name,
    }
}

/// One side's line.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct TeamView {
    pub rank: Sortable,
    pub side: String,
    pub own: Sortable,
    pub own_range: String,
    pub whisker_svg: String,
    pub bar_svg: String,
    /// The six entries, then their sum.
    pub entries: Vec<String>,
    pub total: String,
    pub players: Sortable,
    pub chances: Sortable,
    pub stops: Sortable,
    pub chances_lost: Sortable,
    pub efficiency: Sortable,
}

/// The teams with the scales of their drawn columns.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct TeamsView {
    pub rows: Vec<TeamView>,
    pub whisker_scale_svg: String,
    pub bar_scale_svg: String,
}

/// The teams in the order given.
pub fn teams_view(teams: &[TeamRow]) -> TeamsView {
    let own = common_axis(teams.iter().flat_map(|t| [t.own_low_yd, t.own_yd, t.own_high_yd]).flatten());
    let bars = common_axis(teams.iter().flat_map(|t| stack_ends(&t.entries_yd())));
    let view = |t: &TeamRow| {
        let own_range = range(t.own_low_yd, t.own_high_yd, 2);
        let (entries, total) = per_chance(t, None);
        let side = super::text::shown(&t.side);
        TeamView {
            rank: whole(t.rank),
            own: sortable(number(t.own_yd, 2), t.own_yd),
            whisker_svg: whisker(
                t.own_low_yd,
                t.own_yd,
                t.own_high_yd,
                &own,
                &format!("{} yd per chance, interval {own_range}", number(t.own_yd, 2)),
            ),
            own_range,
            bar_svg: stacked_bar(&t.entries_yd(), &entries, &bars, &format!("{side}: {total} yd per chance under six headings")),
            entries,
            total,
            players: whole(t.players),
            chances: whole(t.chances),
            stops: whole(t.stops),
            chances_lost: whole(t.chances_lost),
            efficiency: sortable(number(t.efficiency, 2), t.efficiency),
            side,
        }
    };
    TeamsView { rows: teams.iter().map(view).collect(), whisker_scale_svg: scale(&own), bar_scale_svg: scale(&bars) }
}
