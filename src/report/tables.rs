//! The tables that the commands print or write: players, teams, clips.

use super::clips::ClipRow;
use super::grid::{Align, Cell, Format, Grid, aligned, csv_text, grid_of, json_text};
use super::heading::{Entries, Heading};
use super::rounding::round_together;
use super::text::{MISSING, fixed, name_or_id, number, optional};
use crate::store::csv::{csv_header, csv_lines};
use crate::store::rows::{PlayerRow, TeamRow};
use Align::{Left, Right};

/// The ranking. CSV and JSON hold every column of the players table in full precision; the terminal table a
/// choice of them, rounded.
pub fn players_table(players: &[PlayerRow], format: Format) -> String {
    match format {
        Format::Csv => csv_text(&grid_of(players)),
        Format::Json => json_text(&grid_of(players)),
        Format::Table => {
            let mut heads = vec![
                ("rank", Right),
                ("likely", Right),
                ("player", Left),
                ("side", Left),
                ("pos", Left),
                ("chances", Right),
                ("stops", Right),
                ("own yd", Right),
                ("low", Right),
                ("high", Right),
                ("effic.", Right),
            ];
            heads.extend(PER_CHANCE);
            heads.push(("note", Left));
            let rows: Vec<Vec<String>> = players.iter().map(player_line).collect();
            aligned(&heads, &rows)
        }
    }
}

/// Short heads of the six headings, yards per chance.
const PER_CHANCE: [(&str, Align); 6] =
    [("late", Right), ("flat", Right), ("deep", Right), ("pace", Right), ("block", Right), ("move", Right)];

fn player_line(p: &PlayerRow) -> Vec<String> {
    let mut line = vec![
        p.rank.to_string(),
        rank_range(p),
        name_or_id(p.name.as_deref(), &p.player),
        optional(p.side.as_deref()),
        optional(p.position.as_deref()),
        p.chances.to_string(),
        p.stops.to_string(),
        number(p.own_yd, 2),
        number(p.own_low_yd, 2),
        number(p.own_high_yd, 2),
        number(p.efficiency, 2),
    ];
    line.extend(per_chance(p, p.conceded_yd).0);
    line.push(if p.too_few { "too few".into() } else { String::new() });
    line
}

/// `3 to 9`: the interval of the rank.
pub fn rank_range(p: &PlayerRow) -> String {
    format!("{} to {}", p.rank_low, p.rank_high)
}

/// The six entries per chance and their total with two decimals, rounded together. Where no total is given it is
/// the entries' own sum.
pub fn per_chance(row: &impl Entries, total_yd: Option<f64>) -> (Vec<String>, String) {
    let entries = row.entries_yd();
    let total = total_yd.or_else(|| entries.iter().copied().sum());
    match total.and_then(|t| round_together(&entries, t, 2)) {
        Some(r) => {
            let text = |hundredths: i64| fixed(hundredths as f64 / 100.0, 2);
            (r.parts.iter().map(|p| p.map_or_else(|| MISSING.to_string(), text)).collect(), text(r.total))
        }
        None => (vec![MISSING.to_string(); Heading::ALL.len()], MISSING.to_string()),
    }
}

/// One side's defence against the others.
pub fn teams_table(teams: &[TeamRow], format: Format) -> String {
    match format {
        Format::Csv => csv_text(&grid_of(teams)),
        Format::Json => json_text(&grid_of(teams)),
        Format::Table => {
            let mut heads = vec![
                ("rank", Right),
                ("side", Left),
                ("players", Right),
                ("chances", Right),
                ("stops", Right),
                ("own yd", Right),
                ("low", Right),
                ("high", Right),
                ("effic.", Right),
            ];
            heads.extend(PER_CHANCE);
            let rows: Vec<Vec<String>> = teams
                .iter()
                .map(|t| {
                    let mut line = vec![
                        t.rank.to_string(),
                        t.side.clone(),
                        t.players.to_string(),
                        t.chances.to_string(),
                        t.stops.to_string(),
                        number(t.own_yd, 2),
                        number(t.own_low_yd, 2),
                        number(t.own_high_yd, 2),
                        number(t.efficiency, 2),
                    ];
                    line.extend(per_chance(t, None).0);
                    line
                })
                .collect();
            aligned(&heads, &rows)
        }
    }
}

/// Columns of the clip list.
const CLIP_NAMES: [&str; 8] = ["game", "play", "from_s", "to_s", "clock", "who", "why", "yards"];

/// Header of the clip list as CSV; with [`clips_csv_lines`] for a list that is written piece by piece.
pub fn clips_csv_header() -> String {
    csv_header(&CLIP_NAMES)
}

/// Clips as CSV lines without the header.
pub fn clips_csv_lines(clips: &[ClipRow]) -> String {
    csv_lines(&clips.iter().map(clip_cells).collect::<Vec<_>>())
}

/// The clip list; its CSV is what a film cutter reads.
pub fn clips_table(clips: &[ClipRow], format: Format) -> String {
    let grid = || Grid { names: CLIP_NAMES.to_vec(), rows: clips.iter().map(clip_cells).collect() };
    match format {
        Format::Csv => clips_csv_header() + &clips_csv_lines(clips),
        Format::Json => json_text(&grid()),
        Format::Table => {
            let heads = [
                ("game", Left),
                ("play", Left),
                ("from s", Right),
                ("to s", Right),
                ("clock", Left),
                ("yards", Right),
                ("who", Left),
                ("why", Left),
            ];
            let rows: Vec<Vec<String>> = clips
                .iter()
                .map(|c| {
                    let yards = number(c.yards, 1);
                    let clock = c.clock.word().to_string();
                    vec![c.game.clone(), c.play.clone(), fixed(c.from_s, 1), fixed(c.to_s, 1), clock, yards, c.who.clone(), c.why.clone()]
                })
                .collect();
            aligned(&heads, &rows)
        }
    }
}

fn clip_cells(c: &ClipRow) -> Vec<Cell> {
    let text = |t: &str| Cell::Text(t.to_string());
    let finite = |v: f64| if v.is_finite() { Cell::Number(v) } else { Cell::Missing };
    vec![
        text(&c.game),
        text(&c.play),
        finite(c.from_s),
        finite(c.to_s),
        text(c.clock.word()),
        text(&c.who),
        text(&c.why),
        c.yards.map_or(Cell::Missing, finite),
    ]
}
