//! The logical columns and the common words by which files call them.

use serde::{Deserialize, Serialize};

/// A column that the program understands, whatever a file calls it.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Logical {
    Game,
    Play,
    Frame,
    Time,
    Mover,
    Name,
    Side,
    Jersey,
    Position,
    X,
    Y,
    Speed,
    Heading,
    Event,
    Carrier,
    PlayDirection,
    BallX,
    BallY,
}

impl Logical {
    pub const ALL: [Logical; 18] = [
        Logical::Game,
        Logical::Play,
        Logical::Frame,
        Logical::Time,
        Logical::Mover,
        Logical::Name,
        Logical::Side,
        Logical::Jersey,
        Logical::Position,
        Logical::X,
        Logical::Y,
        Logical::Speed,
        Logical::Heading,
        Logical::Event,
        Logical::Carrier,
        Logical::PlayDirection,
        Logical::BallX,
        Logical::BallY,
    ];

    /// The key in a mapping file.
    pub fn word(self) -> &'static str {
        match self {
            Logical::Game => "game",
            Logical::Play => "play",
            Logical::Frame => "frame",
            Logical::Time => "time",
            Logical::Mover => "mover",
            Logical::Name => "name",
            Logical::Side => "side",
            Logical::Jersey => "jersey",
            Logical::Position => "position",
            Logical::X => "x",
            Logical::Y => "y",
            Logical::Speed => "speed",
            Logical::Heading => "heading",
            Logical::Event => "event",
            Logical::Carrier => "carrier",
            Logical::PlayDirection => "play_direction",
            Logical::BallX => "ball_x",
            Logical::BallY => "ball_y",
        }
    }

    /// What the column holds, for people.
    pub fn meaning(self) -> &'static str {
        match self {
            Logical::Game => "the game",
            Logical::Play => "the play within the game",
            Logical::Frame => "the frame number",
            Logical::Time => "the time of the frame",
            Logical::Mover => "the id of the player or ball",
            Logical::Name => "his name",
            Logical::Side => "his club, or home/away",
            Logical::Jersey => "his jersey number",
            Logical::Position => "his position",
            Logical::X => "the place along the field",
            Logical::Y => "the place across the field",
            Logical::Speed => "the file's own speed",
            Logical::Heading => "the file's own direction of motion",
            Logical::Event => "event marks",
            Logical::Carrier => "who has the ball",
            Logical::PlayDirection => "left or right, where the side with the ball attacks",
            Logical::BallX => "the ball's place along the field",
            Logical::BallY => "the ball's place across the field",
        }
    }

    /// Whether its name may carry a unit.
    pub(crate) fn has_unit(self) -> bool {
        use Logical::*;
        matches!(self, X | Y | Speed | Heading | Time | BallX | BallY)
    }

    /// Usual names in normal form (lower case, letters and digits only), in grades: a column of an earlier grade
    /// is preferred, two columns of one grade are ambiguous. The first grade counts as exact.
    pub(crate) fn grades(self) -> &'static [&'static [&'static str]] {
        match self {
            Logical::Game => &[&["game", "gameid"], &["match", "matchid", "gamekey", "gamenumber", "fixture", "fixtureid", "contestid"]],
            Logical::Play => &[&["play", "playid"], &["playnumber", "playno", "playnum", "playkey"]],
            Logical::Frame => &[&["frame", "frameid"], &["framenumber", "frameno", "framenum", "frameindex"]],
            Logical::Time => &[
                &["time", "times"],
                &["t", "timestamp", "timeseconds", "seconds", "sec", "ts", "elapsed", "elapsedtime", "datetime", "timeofday", "utctime"],
            ],
            Logical::Mover => &[
                &["mover", "moverid"],
                &["playerid", "athleteid", "entityid", "trackid", "tagid", "objectid", "participantid"],
                &["player", "athlete", "entity"],
            ],
            Logical::Name => &[&["name"], &["playername", "displayname", "fullname", "athletename", "movername"]],
            Logical::Side => {
                &[&["side"], &["team", "club", "teamname", "clubname", "teamabbr", "squad", "homeaway"], &["teamid", "clubid"]]
            }
            Logical::Jersey => {
                &[&["jersey", "jerseynumber"], &["jerseyno", "jerseynum", "shirtnumber", "uniformnumber", "number", "shirt"]]
            }
            Logical::Position => &[&["position"], &["pos", "positionname", "playerposition", "role"]],
            Logical::X => {
                &[&["x"], &["xpos", "posx", "xcoord", "xcoordinate", "coordx", "xposition", "positionx", "xloc", "locx", "xlocation"]]
            }
            Logical::Y => {
                &[&["y"], &["ypos", "posy", "ycoord", "ycoordinate", "coordy", "yposition", "positiony", "yloc", "locy", "ylocation"]]
            }
            Logical::Speed => &[&["speed"], &["s", "v", "vel", "velocity", "spd"]],
            Logical::Heading => &[&["heading"], &["dir", "direction", "directionofmotion", "motiondirection", "course"]],
            Logical::Event => &[&["event"], &["events", "eventtext", "eventname", "eventtype", "eventtag", "playevent"]],
            Logical::Carrier => &[
                &["carrier", "carrierid"],
                &["ballcarrier", "ballcarrierid", "hasball", "isballcarrier", "iscarrier", "inpossession", "possessorid"],
            ],
            Logical::PlayDirection => {
                &[&["playdirection"], &["playdir", "attackdirection", "attackingdirection", "attack", "directionofplay"]]
            }
            Logical::BallX => &[&["ballx"], &["ballxpos", "ballposx", "ballxcoord", "ballpositionx", "xball"]],
            Logical::BallY => &[&["bally"], &["ballypos", "ballposy", "ballycoord", "ballpositiony", "yball"]],
        }
    }
}
