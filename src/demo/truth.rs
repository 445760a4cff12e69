//! The truth tables and the two optional tables, as CSV text.

use super::game::DemoGame;
use super::league::Athlete;
use super::text::push_decimal;
use crate::model::Attack;
use std::collections::BTreeMap;

/// Rows of the tables of a season, gathered game by game; the order of gathering does not matter.
#[derive(Debug, Default)]
pub struct Tables {
    /// By id.
    players: BTreeMap<String, Athlete>,
    /// By place of the game in the season.
    carries: BTreeMap<usize, Vec<Vec<String>>>,
    plays: BTreeMap<usize, Vec<Vec<String>>>,
}

const TRUTH_CARRIES: [&str; 12] = [
    "game_id",
    "play_id",
    "carry",
    "kind",
    "carrier_id",
    "carrier_name",
    "start_frame",
    "end_frame",
    "start_s",
    "end_s",
    "ended",
    "gain_yd",
];

impl Tables {
    pub fn add(&mut self, index: usize, game: &DemoGame) {
        for play in &game.plays {
            for mover in &play.movers {
                let athlete = &game.athletes[mover.athlete];
                self.players.entry(athlete.id.to_string()).or_insert_with(|| athlete.clone());
            }
        }
        self.carries.insert(index, carry_rows(game));
        self.plays.insert(index, play_rows(game));
    }

    /// `truth_players.csv`: id, name, side, position, character, top speed, push.
    ///
    /// # Errors
    /// Never for memory; the type is the writer's.
    pub fn truth_players(&self) -> Result<Vec<u8>, csv::Error> {
        let header = ["player_id", "name", "side", "position", "character", "top_speed_yps", "push"];
        let rows = self.players.values().map(|a| {
            let mut row = person(a);
            row.extend([a.character.word().to_owned(), decimal(a.top_speed_yps, 3), decimal(a.push, 3)]);
            row
        });
        table(&header, rows)
    }

    /// `players.csv`: id, name, side, position, jersey.
    ///
    /// # Errors
    /// Never for memory; the type is the writer's.
    pub fn players(&self) -> Result<Vec<u8>, csv::Error> {
        let rows = self.players.values().map(|a| {
            let mut row = person(a);
            row.push(a.jersey.to_string());
            row
        });
        table(&["player_id", "name", "side", "position", "jersey"], rows)
    }

    /// `truth_carries.csv`: who carried from which frame to which, inclusive, and how it ended.
    ///
    /// # Errors
    /// Never for memory; the type is the writer's.
    pub fn truth_carries(&self) -> Result<Vec<u8>, csv::Error> {
        table(&TRUTH_CARRIES, self.carries.values().flatten().cloned())
    }

    /// `plays.csv`: kind, side with the ball, and its way where the options ask for it.
    ///
    /// # Errors
    /// Never for memory; the type is the writer's.
    pub fn plays(&self, direction: bool) -> Result<Vec<u8>, csv::Error> {
        let header = ["game_id", "play_id", "kind", "possession_side", "play_direction"];
        let columns = if direction { header.len() } else { header.len() - 1 };
        table(&header[..columns], self.plays.values().flatten().map(|row| row[..columns].to_vec()))
    }
}

fn person(athlete: &Athlete) -> Vec<String> {
    [&athlete.id, &athlete.name, &athlete.side, &athlete.position].map(|t| t.to_string()).to_vec()
}

fn carry_rows(game: &DemoGame) -> Vec<Vec<String>> {
    let mut rows = Vec::new();
    for play in &game.plays {
        for (k, carry) in play.carries.iter().enumerate() {
            let athlete = &game.athletes[play.movers[carry.carrier].athlete];
            rows.push(vec![
                game.id.to_string(),
                play.id.to_string(),
                (k + 1).to_string(),
                play.kind.word().to_owned(),
                athlete.id.to_string(),
                athlete.name.to_string(),
                (carry.start_frame + 1).to_string(),
                (carry.end_frame + 1).to_string(),
                decimal(carry.start_s, 2),
                decimal(carry.end_s, 2),
                carry.stop.word().to_owned(),
                decimal(carry.gain_yd, 2),
            ]);
        }
    }
    rows
}

fn play_rows(game: &DemoGame) -> Vec<Vec<String>> {
    let way = |attack| match attack {
        Attack::TowardsPlusX => "right",
        Attack::TowardsMinusX => "left",
    };
    let row = |p: &super::game::DemoPlay| {
        vec![game.id.to_string(), p.id.to_string(), p.kind.word().to_owned(), p.offence.to_string(), way(p.attack).to_owned()]
    };
    game.plays.iter().map(row).collect()
}

fn decimal(value: f64, places: usize) -> String {
    let mut text = Vec::new();
    push_decimal(&mut text, value, places);
    String::from_utf8_lossy(&text).into_owned()
}

fn table(header: &[&str], rows: impl Iterator<Item = Vec<String>>) -> Result<Vec<u8>, csv::Error> {
    let mut text = Vec::new();
    let mut writer = csv::Writer::from_writer(&mut text);
    writer.write_record(header)?;
    for row in rows {
        writer.write_record(&row)?;
    }
    writer.flush()?;
    drop(writer);
    Ok(text)
}
