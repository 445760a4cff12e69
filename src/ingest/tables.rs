//! The optional tables: plays (carrier, kind, direction), players (name, side, position), film (where a play is seen).

use super::IngestError;
use super::logical::Logical;
use super::small_table::SmallTable;
use super::who::direction;
use crate::model::Attack;
use std::collections::BTreeMap;
use std::path::Path;
use std::sync::Arc;

/// What a plays table says of a play.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct PlayFacts {
    pub carrier: Option<Arc<str>>,
    pub kind: Option<Arc<str>>,
    pub attack: Option<Attack>,
}

/// What a players table says of a player.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct PlayerFacts {
    pub name: Option<Arc<str>>,
    pub side: Option<Arc<str>>,
    pub position: Option<Arc<str>>,
    pub jersey: Option<Arc<str>>,
}

/// (game, play); an empty text stands for any game, or for the whole game.
type Key = (String, String);

#[derive(Debug, Default)]
pub(crate) struct Tables {
    plays: BTreeMap<Key, PlayFacts>,
    pub players: BTreeMap<String, PlayerFacts>,
    /// Seconds into the film.
    film: BTreeMap<Key, f64>,
}

impl Tables {
    pub fn read(plays: Option<&Path>, players: Option<&Path>, film: Option<&Path>) -> Result<Tables, IngestError> {
        Ok(Tables {
            plays: plays.map(read_plays).transpose()?.unwrap_or_default(),
            players: players.map(read_players).transpose()?.unwrap_or_default(),
            film: film.map(read_film).transpose()?.unwrap_or_default(),
        })
    }

    pub fn play(&self, game: &str, play: &str) -> Option<&PlayFacts> {
        find(&self.plays, game, play)
    }

    /// Where the play's first frame is seen: from the play's own line, or from the game's and the time since its first frame.
    pub fn film_start_s(&self, game: &str, play: &str, since_start_s: Option<f64>) -> Option<f64> {
        let own = find(&self.film, game, play).copied();
        own.or_else(|| Some(find(&self.film, game, "")? + since_start_s?))
    }
}

fn find<'a, T>(map: &'a BTreeMap<Key, T>, game: &str, play: &str) -> Option<&'a T> {
    map.get(&(game.to_string(), play.to_string())).or_else(|| map.get(&(String::new(), play.to_string())))
}

fn shared(text: Option<&str>) -> Option<Arc<str>> {
    text.map(Arc::from)
}

fn read_plays(path: &Path) -> Result<BTreeMap<Key, PlayFacts>, IngestError> {
    let table = SmallTable::read(path)?;
    let game = table.logical(Logical::Game);
    let play = Some(table.required(table.logical(Logical::Play), "the play", "play")?);
    let carrier = table.logical(Logical::Carrier);
    let kind = table.column(&["kind", "playkind", "playtype", "type", "kindofplay", "typeofplay"]);
    let way = table.logical(Logical::PlayDirection);
    let mut out = BTreeMap::new();
    for row in 0..table.rows.len() {
        let Some(id) = table.id(row, play) else { continue };
        let attack = match table.cell(row, way).map_or(0, direction) {
            1 => Some(Attack::TowardsPlusX),
            -1 => Some(Attack::TowardsMinusX),
            _ => None,
        };
        let facts = PlayFacts { carrier: shared(table.id(row, carrier)), kind: shared(table.cell(row, kind)), attack };
        out.insert((table.id(row, game).unwrap_or_default().to_string(), id.to_string()), facts);
    }
    Ok(out)
}

fn read_players(path: &Path) -> Result<BTreeMap<String, PlayerFacts>, IngestError> {
    let table = SmallTable::read(path)?;
    let mover = Some(table.required(table.logical(Logical::Mover), "the player's id", "player_id")?);
    let at = |l| table.logical(l);
    let (name, side, position, jersey) = (at(Logical::Name), at(Logical::Side), at(Logical::Position), at(Logical::Jersey));
    let mut out = BTreeMap::new();
    for row in 0..table.rows.len() {
        let Some(id) = table.id(row, mover) else { continue };
        let facts = PlayerFacts {
            name: shared(table.cell(row, name)),
            side: shared(table.cell(row, side)),
            position: shared(table.cell(row, position)),
            jersey: shared(table.id(row, jersey)),
        };
        out.insert(id.to_string(), facts);
    }
    Ok(out)
}

fn read_film(path: &Path) -> Result<BTreeMap<Key, f64>, IngestError> {
    let table = SmallTable::read(path)?;
    let (game, play) = (table.logical(Logical::Game), table.logical(Logical::Play));
    let seconds =
        table.column(&["filmstarts", "videostarts", "filmstart", "videostart", "starts", "start", "seconds", "offsets", "offset"]);
    let frame = table.column(&["filmframe", "videoframe", "startframe", "framestart"]);
    let fps = table.column(&["fps", "framespersecond", "framerate", "frameratehz", "filmfps"]);
    let by_frame = frame.zip(fps);
    if by_frame.is_none() {
        table.required(seconds, "the second at which the film shows the play (or its film frame and frames per second)", "film_start_s")?;
    }
    let mut out = BTreeMap::new();
    for row in 0..table.rows.len() {
        let key = (table.id(row, game).unwrap_or_default().to_string(), table.id(row, play).unwrap_or_default().to_string());
        let start_s = match table.number(row, seconds)? {
            Some(s) => Some(s),
            None => match (table.number(row, frame)?, table.number(row, fps)?) {
                (Some(frame), Some(fps)) if fps > 0.0 => Some(frame / fps),
                _ => None,
            },
        };
        if let Some(start_s) = start_s {
            out.insert(key, start_s);
        }
    }
    Ok(out)
}
