//! What real files do, done to clean rows: for tests that no untidiness may lose a play.

mod added;
mod changed;
mod lost;
mod ranges;

use super::game::DemoGame;
use super::league::shuffle;
use super::row::{BALL_ID, DemoRow};
use crate::base::Stream;
use added::{ball_runs_on, bench, huddle, play_twice, repeat};
use changed::{renumber, two_events, uneven};
use lost::{drop_stretch, drop_unspared, frame_missing};
use ranges::{each, plays, shift};
use std::collections::BTreeSet;

/// A kind of untidiness.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Mess {
    /// One row in fifty given twice.
    ExactRepeats,
    /// One row in two hundred given again at another place, one to three yards off.
    ConflictingRepeats,
    /// One row in three hundred thrown ten to thirty yards away.
    Jumps,
    /// Two to three rows missing here and there.
    ShortGaps,
    /// A second and more missing in the tracks of some who never carry.
    LongGaps,
    /// The first frames of some movers missing.
    RaggedStarts,
    /// The last frames of some movers missing.
    RaggedEnds,
    /// Every fifth play given a second time, at the end of the file.
    PlayTwice,
    /// One frame of every other play absent for everyone.
    FrameMissingForAll,
    /// Steps up to three tenths longer or shorter than they should be, positions moved along.
    UnevenSteps,
    /// The ball runs on for 12 frames.
    BallRunsOn,
    /// Four more men on the bench and in the tunnel.
    BenchRows,
    /// Two players who never carry are missing.
    MissingPlayers,
    /// Ids and jerseys as `82.0`.
    DecimalIds,
    FramesFromZero,
    FramesFromFive,
    /// Event texts on one row in four of the frame only.
    SparseEvents,
    /// The first contact right after the gain of the ball: two events within two frames.
    TwoEventsClose,
    /// Scores without any mark of the end.
    UnmarkedScores,
    /// 20 s of huddle before the snap.
    Huddle,
    /// A free text with commas, quotes and line breaks.
    FreeText,
    /// Rows of each play in any order.
    ShuffledRows,
}

impl Mess {
    /// Every kind, in an order in which they can be done one after the other.
    pub const ALL: [Mess; 22] = [
        Mess::Huddle,
        Mess::UnevenSteps,
        Mess::BallRunsOn,
        Mess::BenchRows,
        Mess::TwoEventsClose,
        Mess::UnmarkedScores,
        Mess::SparseEvents,
        Mess::FreeText,
        Mess::FrameMissingForAll,
        Mess::MissingPlayers,
        Mess::RaggedStarts,
        Mess::RaggedEnds,
        Mess::ShortGaps,
        Mess::LongGaps,
        Mess::Jumps,
        Mess::ConflictingRepeats,
        Mess::ExactRepeats,
        Mess::FramesFromZero,
        Mess::FramesFromFive,
        Mess::DecimalIds,
        Mess::PlayTwice,
        Mess::ShuffledRows,
    ];
}

/// (play, mover) pairs that must not vanish: the carriers, and the ball.
pub type Spared = BTreeSet<(String, String)>;

/// The carriers of a game and the ball, play by play.
pub fn carriers(game: &DemoGame) -> Spared {
    let mut spared = Spared::new();
    for play in &game.plays {
        spared.insert((play.id.to_string(), BALL_ID.to_owned()));
        for carry in &play.carries {
            spared.insert((play.id.to_string(), game.athletes[play.movers[carry.carrier].athlete].id.to_string()));
        }
    }
    spared
}

/// Spoils the rows of one game (plays contiguous, movers contiguous in a play) and gives the number of rows that
/// were added, dropped or changed. Deterministic in the seed.
pub fn spoil(rows: &mut Vec<DemoRow>, mess: Mess, spared: &Spared, seed: u64) -> usize {
    let mut draws = Stream::new(seed, &format!("{mess:?}"));
    let draws = &mut draws;
    match mess {
        Mess::ExactRepeats => repeat(rows, draws, 1.0 / 50.0, |_, _| {}),
        Mess::ConflictingRepeats => repeat(rows, draws, 1.0 / 200.0, |row, draws| shift(row, draws, 1.0, 3.0)),
        Mess::Jumps => each(rows, |row| {
            let hit = draws.chance(1.0 / 300.0);
            if hit {
                shift(row, draws, 10.0, 30.0);
            }
            hit
        }),
        Mess::ShortGaps => {
            drop_stretch(rows, draws, |draws, n| (draws.chance(0.3) && n > 12).then(|| (4 + draws.below(n - 10), 2 + draws.below(2))))
        }
        Mess::LongGaps => drop_unspared(rows, draws, spared, 0.15, |draws, n| (n / 3 + draws.below(n / 6 + 1), 10 + draws.below(6))),
        Mess::RaggedStarts => drop_stretch(rows, draws, |draws, _| draws.chance(0.2).then(|| (0, 1 + draws.below(4)))),
        Mess::RaggedEnds => drop_stretch(rows, draws, |draws, n| draws.chance(0.2).then(|| (n - 2, 2))),
        Mess::PlayTwice => play_twice(rows),
        Mess::FrameMissingForAll => frame_missing(rows, draws),
        Mess::UnevenSteps => uneven(rows, draws),
        Mess::BallRunsOn => ball_runs_on(rows),
        Mess::BenchRows => bench(rows, draws),
        Mess::MissingPlayers => drop_unspared(rows, draws, spared, 0.1, |_, n| (0, n)),
        Mess::DecimalIds => each(rows, |row| {
            for text in [Some(&mut row.mover_id), row.jersey.as_mut(), row.carrier.as_mut()].into_iter().flatten() {
                if text.bytes().all(|b| b.is_ascii_digit()) {
                    text.push_str(".0");
                }
            }
            true
        }),
        Mess::FramesFromZero => renumber(rows, -1),
        Mess::FramesFromFive => renumber(rows, 4),
        Mess::SparseEvents => each(rows, |row| {
            // The ball's row keeps its text, so that every event stays somewhere.
            let loses = row.event.is_some() && row.mover_id != BALL_ID && draws.chance(0.75);
            if loses {
                row.event = None;
            }
            loses
        }),
        Mess::TwoEventsClose => two_events(rows),
        Mess::UnmarkedScores => each(rows, |row| row.event.take_if(|e| e == "touchdown").is_some()),
        Mess::Huddle => huddle(rows, draws),
        Mess::FreeText => each(rows, |row| {
            row.note = Some(format!("Play {}, \"wide\" side,\nno huddle; see sheet, p. {}", row.play_id, row.frame));
            true
        }),
        Mess::ShuffledRows => {
            let n = rows.len();
            for range in plays(rows) {
                shuffle(&mut rows[range], draws);
            }
            n
        }
    }
}
