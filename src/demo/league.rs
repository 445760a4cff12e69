//! The invented league: its clubs, their athletes with their characters, and who meets whom.

use super::names::{CLUBS, person};
use crate::base::Stream;
use std::collections::BTreeSet;
use std::sync::Arc;

/// How a player goes after a carrier; one for the whole season.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Character {
    /// Pushes fully towards the earliest meeting point he can foresee.
    Sound,
    /// Pushes towards where the carrier is.
    RunsAtMan,
    /// Pushes 15° more downfield than the best line.
    Deep,
    /// Pushes 15° less downfield than the best line.
    Flat,
    /// Stands or drifts 0.7 to 1.6 s longer before he breaks.
    Late,
    /// The best line at 75 to 85 % push.
    Slow,
}

impl Character {
    pub const ALL: [Character; 6] =
        [Character::Sound, Character::RunsAtMan, Character::Deep, Character::Flat, Character::Late, Character::Slow];

    /// The word used in the truth table.
    pub fn word(self) -> &'static str {
        match self {
            Character::Sound => "sound",
            Character::RunsAtMan => "runs_at_man",
            Character::Deep => "deep",
            Character::Flat => "flat",
            Character::Late => "late",
            Character::Slow => "slow",
        }
    }
}

/// One invented player.
#[derive(Clone, Debug, PartialEq)]
pub struct Athlete {
    /// A number written as text.
    pub id: Arc<str>,
    pub name: Arc<str>,
    /// Index into the league's clubs.
    pub club: usize,
    /// Short label of his club.
    pub side: Arc<str>,
    pub position: Arc<str>,
    pub jersey: Arc<str>,
    pub top_speed_yps: f64,
    pub character: Character,
    /// Size of the push when he pursues: 1, less for the slow.
    pub push: f64,
}

/// A squad by position: how many, first jersey number, mean top speed (yd/s, typical of the position).
const SQUAD: [(&str, usize, u32, f64); 14] = [
    ("QB", 1, 7, 7.7),
    ("RB", 2, 21, 9.3),
    ("WR", 4, 80, 9.6),
    ("TE", 2, 86, 8.6),
    ("C", 1, 60, 6.6),
    ("G", 2, 64, 6.6),
    ("T", 2, 70, 6.6),
    ("K", 1, 2, 7.4),
    ("P", 1, 4, 7.4),
    ("DE", 3, 90, 7.7),
    ("DT", 2, 96, 6.8),
    ("LB", 4, 50, 8.7),
    ("CB", 3, 23, 9.8),
    ("S", 3, 33, 9.5),
];
/// Standard deviation of top speeds within a position, yd/s. Own choice.
const TOP_SPEED_SPREAD_YPS: f64 = 0.25;

/// Every squad of the league, club by club; depends on the seed alone.
#[derive(Clone, Debug)]
pub struct League {
    pub squads: Vec<Vec<Athlete>>,
}

impl League {
    pub fn new(seed: u64) -> League {
        let mut stream = Stream::new(seed, "league");
        let mut used = BTreeSet::new();
        League { squads: (0..CLUBS.len()).map(|club| squad(club, &mut stream, &mut used)).collect() }
    }
}

fn squad(club: usize, stream: &mut Stream, used: &mut BTreeSet<String>) -> Vec<Athlete> {
    let side: Arc<str> = CLUBS[club].0.into();
    let size: usize = SQUAD.iter().map(|s| s.1).sum();
    let mut characters = deck(club, size, stream);
    let mut players = Vec::with_capacity(size);
    for (position, count, jersey, mean_yps) in SQUAD {
        let position: Arc<str> = position.into();
        for k in 0..count {
            let number = players.len();
            let character = characters.pop().unwrap_or(Character::Sound);
            players.push(Athlete {
                id: (40_000 + 97 * club + 3_104 * number).to_string().into(),
                name: person(stream, used).into(),
                club,
                side: side.clone(),
                position: position.clone(),
                jersey: (jersey + k as u32).to_string().into(),
                top_speed_yps: mean_yps + TOP_SPEED_SPREAD_YPS * stream.normal().clamp(-2.0, 2.0),
                character,
                push: if character == Character::Slow { stream.between(0.75, 0.85) } else { 1.0 },
            });
        }
    }
    players
}

/// Characters for a squad, dealt so that every club and both of its units get nearly the same mix; two sevenths are sound.
/// Taken from the back.
fn deck(club: usize, size: usize, stream: &mut Stream) -> Vec<Character> {
    use Character::*;
    const ROUND: [Character; 7] = [Sound, RunsAtMan, Late, Sound, Flat, Slow, Deep];
    let defenders: usize = SQUAD[9..].iter().map(|s| s.1).sum();
    let mut defence: Vec<Character> = (0..defenders).map(|k| ROUND[(k + 3 * club) % 7]).collect();
    let mut others: Vec<Character> = (0..size - defenders).map(|k| ROUND[(k + 5 * club) % 7]).collect();
    shuffle(&mut defence, stream);
    shuffle(&mut others, stream);
    defence.extend(others);
    defence
}

/// Fisher–Yates.
pub fn shuffle<T>(items: &mut [T], stream: &mut Stream) {
    for k in (1..items.len()).rev() {
        items.swap(k, stream.below(k + 1));
    }
}

/// How many clubs a season of `games` games has; the pairings of a game depend on this class only, so that adding a
/// game to a season leaves the others alone unless the league grows.
pub fn club_count(games: usize) -> usize {
    match games {
        0..=1 => 2,
        2..=4 => 4,
        5..=60 => 8,
        61..=130 => 16,
        _ => 32,
    }
}

/// Round and the two clubs of game `index`: everyone meets everyone, round by round (circle method).
pub fn pairing(index: usize, clubs: usize) -> (usize, usize, usize) {
    let per_round = clubs / 2;
    let (round, slot) = (index / per_round, index % per_round);
    let ring = clubs - 1;
    let at = |k: usize| if k == 0 { ring } else { (k - 1 + round) % ring };
    let (a, b) = (at(slot), at(clubs - 1 - slot));
    if round % 2 == 0 { (round, a, b) } else { (round, b, a) }
}
