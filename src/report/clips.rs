//! The clip list: which moments to cut from the film, and why.

use super::account::account;
use super::heading::{Entries, Heading};
use super::text::{ending_words, fixed, name_or_id, shown};
use crate::model::Ending;
use crate::store::rows::{BriefRow, PursuitRow};
use std::cmp::Ordering;

/// Film before the pursuit starts, and after it ends, so that the eye finds the players: own choice.
pub const LEAD_S: f64 = 2.0;
pub const TAIL_S: f64 = 1.5;

/// In which order clips are listed.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum ClipOrder {
    /// Most yards first.
    #[default]
    CostliestFirst,
    /// Fewest yards first: what to show as good work.
    BestFirst,
    /// As the film runs: game, play, pursuit.
    FilmOrder,
}

/// Which pursuits become clips. The default takes every charged pursuit, the costliest first.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct ClipFilter {
    /// Player id, or name whatever the case.
    pub player: Option<String>,
    /// Club or home/away label, whatever the case.
    pub side: Option<String>,
    pub game: Option<String>,
    /// Only pursuits that ended so; with `NoChance` or `OutOfIt` uncharged ones come too.
    pub ending: Option<Ending>,
    /// Yards are read under this heading alone, and only pursuits with ground given under it are taken.
    pub heading: Option<Heading>,
    /// Fewer yards are left out.
    pub min_yards: Option<f64>,
    pub order: ClipOrder,
    pub limit: Option<usize>,
}

/// Which clock the seconds of a clip are on.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ClipClock {
    /// Seconds of the film file.
    Film,
    /// Seconds from the play's first frame: no film table was given.
    Play,
}

impl ClipClock {
    pub fn word(self) -> &'static str {
        match self {
            ClipClock::Film => "film",
            ClipClock::Play => "play",
        }
    }
}

/// One line of the clip list.
#[derive(Clone, Debug, PartialEq)]
pub struct ClipRow {
    pub game: String,
    pub play: String,
    pub from_s: f64,
    pub to_s: f64,
    pub clock: ClipClock,
    pub who: String,
    pub why: String,
    /// His own yards (late, flat, deep, pace), or those of the heading asked for; none without an account.
    pub yards: Option<f64>,
}

/// The clips that the filter wants, of rows that are at hand; see [`ClipPicker`].
pub fn clips(rows: &[PursuitRow], want: &ClipFilter) -> Vec<ClipRow> {
    let mut picker = ClipPicker::new(want);
    picker.see(&rows.iter().map(BriefRow::from).collect::<Vec<_>>());
    picker.clips()
}

/// Picks the clips that a filter wants from pursuits that go by, game by game. Where the filter has a limit, hardly more
/// than twice as many clips are held.
///
/// A clip starts [`LEAD_S`] before the pursuit, not before second 0, and ends [`TAIL_S`] after it. Ties and equal yards are
/// ordered by game, play, carry and pursuit.
#[derive(Clone, Debug)]
pub struct ClipPicker<'a> {
    want: &'a ClipFilter,
    picked: Vec<Picked>,
}

/// A clip and what it is ordered by.
#[derive(Clone, Debug)]
struct Picked {
    /// Before the rounding.
    yards: Option<f64>,
    carry: i64,
    pursuit: i64,
    clip: ClipRow,
}

impl<'a> ClipPicker<'a> {
    pub fn new(want: &'a ClipFilter) -> ClipPicker<'a> {
        ClipPicker { want, picked: Vec::new() }
    }

    /// Takes what the filter wants of these pursuits.
    pub fn see(&mut self, rows: &[BriefRow]) {
        let chosen = rows.iter().filter(|r| wanted(r, self.want)).map(|r| (r, yards(r, self.want))).filter(|(_, y)| enough(*y, self.want));
        self.picked.extend(chosen.map(|(r, yards)| Picked { yards, carry: r.carry, pursuit: r.pursuit, clip: clip(r, yards) }));
        self.cut_where_many();
    }

    /// Takes what another picker of the same filter has picked.
    pub fn merge(&mut self, mut more: ClipPicker<'_>) {
        self.picked.append(&mut more.picked);
        self.cut_where_many();
    }

    /// The clips in order.
    pub fn clips(mut self) -> Vec<ClipRow> {
        self.cut();
        self.picked.into_iter().map(|picked| picked.clip).collect()
    }

    fn cut_where_many(&mut self) {
        if self.want.limit.is_some_and(|limit| self.picked.len() > limit.saturating_mul(2)) {
            self.cut();
        }
    }

    fn cut(&mut self) {
        self.picked.sort_by(|a, b| {
            let by_yards = match self.want.order {
                ClipOrder::CostliestFirst => b.yards.unwrap_or(f64::NEG_INFINITY).total_cmp(&a.yards.unwrap_or(f64::NEG_INFINITY)),
                ClipOrder::BestFirst => a.yards.unwrap_or(f64::INFINITY).total_cmp(&b.yards.unwrap_or(f64::INFINITY)),
                ClipOrder::FilmOrder => Ordering::Equal,
            };
            by_yards.then_with(|| by_place(a, b))
        });
        self.picked.truncate(self.want.limit.unwrap_or(usize::MAX));
    }
}

/// Game and play in the order of their numbers where ids are numbers (9 before 10), else of their text.
fn by_place(a: &Picked, b: &Picked) -> Ordering {
    by_id(&a.clip.game, &b.clip.game)
        .then_with(|| by_id(&a.clip.play, &b.clip.play))
        .then(a.carry.cmp(&b.carry))
        .then(a.pursuit.cmp(&b.pursuit))
}

fn by_id(a: &str, b: &str) -> Ordering {
    let number = |id: &str| id.parse::<f64>().ok().filter(|n| n.is_finite()).unwrap_or(f64::INFINITY);
    number(a).total_cmp(&number(b)).then_with(|| a.cmp(b))
}

fn wanted(row: &BriefRow, want: &ClipFilter) -> bool {
    let same = |a: &str, b: &str| a.trim().to_lowercase() == b.trim().to_lowercase();
    let player = want.player.as_ref().is_none_or(|p| row.defender == *p || row.defender_name.as_ref().is_some_and(|name| same(name, p)));
    let side = want.side.as_ref().is_none_or(|s| row.defender_side.as_ref().is_some_and(|side| same(side, s)));
    let game = want.game.as_ref().is_none_or(|g| row.game == *g);
    let ending = want.ending.is_none_or(|e| row.ending == e.word());
    let uncharged_wanted = matches!(want.ending, Some(Ending::NoChance | Ending::OutOfIt));
    player && side && game && ending && (row.charged || uncharged_wanted)
}

fn yards(row: &BriefRow, want: &ClipFilter) -> Option<f64> {
    match want.heading {
        Some(h) => row.entry_yd(h),
        None => row.own_entries_yd(),
    }
    .filter(|y| y.is_finite())
}

fn enough(yards: Option<f64>, want: &ClipFilter) -> bool {
    let least = want.min_yards.or(want.heading.map(|_| f64::MIN_POSITIVE));
    least.is_none_or(|least| yards.is_some_and(|y| y >= least))
}

fn clip(row: &BriefRow, yards: Option<f64>) -> ClipRow {
    let film = row.film_s.filter(|s| s.is_finite());
    let start_s = film.unwrap_or(row.start_s);
    let end_s = start_s + (row.end_s - row.start_s);
    ClipRow {
        game: row.game.clone(),
        play: row.play.clone(),
        from_s: milliseconds((start_s - LEAD_S).max(0.0)),
        to_s: milliseconds(end_s + TAIL_S),
        clock: if film.is_some() { ClipClock::Film } else { ClipClock::Play },
        who: name_or_id(row.defender_name.as_deref(), &row.defender),
        why: why(row),
        yards: yards.map(|y| milliseconds(y) + 0.0),
    }
}

/// Three decimals are finer than any film; more would only be noise of the arithmetic.
fn milliseconds(value: f64) -> f64 {
    (value * 1000.0).round() / 1000.0
}

/// `chance lost at 2.1 s: flat line 9.0 yd, late break 3.1 yd`: the ending, then what cost half a yard or more.
fn why(row: &BriefRow) -> String {
    let account = account(row, row.conceded_yd);
    let mut parts: Vec<(i64, String)> = account
        .lines
        .iter()
        .filter_map(|l| l.tenths.filter(|t| t.abs() >= 5).map(|t| (t, format!("{} {} yd", l.name, l.yards) + gain_mark(t))))
        .collect();
    parts.sort_by_key(|(tenths, _)| std::cmp::Reverse(*tenths));
    let mut out = ending_words(&row.ending);
    if let Some(s) = row.chance_lost_s.filter(|s| s.is_finite() && row.ending == Ending::ChanceLost.word()) {
        out += &format!(" at {} s", fixed(s, 1));
    }
    out += &format!(", after {}", name_or_id(row.carrier_name.as_deref(), &row.carrier));
    if !parts.is_empty() {
        let words: Vec<String> = parts.into_iter().map(|(_, w)| w).collect();
        out += &format!(": {}", words.join(", "));
    }
    shown(&out)
}

fn gain_mark(tenths: i64) -> &'static str {
    if tenths < 0 { " (a gain)" } else { "" }
}
