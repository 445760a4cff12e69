//! The six headings of the account: key, words, what each says, whose it is.

use crate::store::rows::{BriefRow, FrameRow, PlayerRow, PursuitRow, TeamRow};

/// One heading of the account.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Heading {
    Late,
    Flat,
    Deep,
    Pace,
    Block,
    Move,
}

impl Heading {
    /// In the order of printing.
    pub const ALL: [Heading; 6] = [Heading::Late, Heading::Flat, Heading::Deep, Heading::Pace, Heading::Block, Heading::Move];

    /// The key used for colours and for choosing clips.
    pub fn key(self) -> &'static str {
        match self {
            Heading::Late => "late",
            Heading::Flat => "flat",
            Heading::Deep => "deep",
            Heading::Pace => "pace",
            Heading::Block => "block",
            Heading::Move => "move",
        }
    }

    /// The heading with this key.
    pub fn from_key(key: &str) -> Option<Heading> {
        Heading::ALL.into_iter().find(|h| h.key() == key)
    }

    /// The words on a page.
    pub fn name(self) -> &'static str {
        match self {
            Heading::Late => "late break",
            Heading::Flat => "flat line",
            Heading::Deep => "deep line",
            Heading::Pace => "pace",
            Heading::Block => "block",
            Heading::Move => "carrier's move",
        }
    }

    /// The words within a sentence, with an article where one is needed.
    pub fn in_a_sentence(self) -> &'static str {
        match self {
            Heading::Late => "the late break",
            Heading::Flat => "the flat line",
            Heading::Deep => "the deep line",
            Heading::Pace => "pace held back",
            Heading::Block => "the block",
            Heading::Move => "the carrier's own move",
        }
    }

    /// What the heading charges, in one line.
    pub fn meaning(self) -> &'static str {
        match self {
            Heading::Late => "given before he set off towards the ball",
            Heading::Flat => "given by aiming too near the carrier, who runs past the line",
            Heading::Deep => "given by aiming too far downfield and leaving the door open behind",
            Heading::Pace => "given by running at less than he has",
            Heading::Block => "given while a blocker held him; not his",
            Heading::Move => "given to a cut that could not be foreseen; not his",
        }
    }

    /// Whether it counts as the defender's own.
    pub fn is_own(self) -> bool {
        !matches!(self, Heading::Block | Heading::Move)
    }
}

/// A row that holds the six entries and, where it has one, their sum.
pub trait Entries {
    /// Yards under one heading.
    fn entry_yd(&self, heading: Heading) -> Option<f64>;

    /// The six, in order.
    fn entries_yd(&self) -> [Option<f64>; 6] {
        Heading::ALL.map(|h| self.entry_yd(h))
    }

    /// Late, flat, deep and pace together: what the defender answers for. `None` when any is missing.
    fn own_entries_yd(&self) -> Option<f64> {
        Heading::ALL.into_iter().filter(|h| h.is_own()).map(|h| self.entry_yd(h)).sum()
    }
}

macro_rules! entries {
    ($($row:ty),*) => {$(
        impl Entries for $row {
            fn entry_yd(&self, heading: Heading) -> Option<f64> {
                match heading {
                    Heading::Late => self.late_yd,
                    Heading::Flat => self.flat_yd,
                    Heading::Deep => self.deep_yd,
                    Heading::Pace => self.pace_yd,
                    Heading::Block => self.block_yd,
                    Heading::Move => self.move_yd,
                }
            }
        }
    )*};
}
entries!(PursuitRow, BriefRow, FrameRow, PlayerRow, TeamRow);
