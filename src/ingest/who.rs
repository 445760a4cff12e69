//! Who a row is about, and which way an attack goes, from what the columns say.

use super::row::ColumnCoder;
use super::texts::{Attribute, NONE, Texts};
use super::{Logical, Matching};

/// What identifies a mover in a file.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Who {
    /// The id column at this place.
    Id(usize),
    /// No id column: the name stands for it.
    Name,
    /// Neither: side and jersey number together.
    SideAndJersey,
}

impl Who {
    pub fn of(matching: &Matching) -> Who {
        match matching.index(Logical::Mover) {
            Some(index) => Who::Id(index),
            None if matching.has(Logical::Name) => Who::Name,
            None => Who::SideAndJersey,
        }
    }

    /// Code of the id made of side and jersey; the side alone where there is no number (the ball), none without a side.
    pub fn side_and_jersey([_, side, _, jersey]: Attribute, texts: &mut Texts, coder: &mut ColumnCoder) -> u32 {
        if side == NONE {
            return NONE;
        }
        let pair = (i64::from(side) << 32) | i64::from(jersey);
        let code: Result<u32, ()> = coder.whole.code(
            &pair,
            |p| *p,
            |_| {
                let (side, jersey) = (texts.all()[side as usize].clone(), texts.all()[jersey as usize].clone());
                Ok(texts.code(format!("{side} {jersey}").trim_end()))
            },
        );
        code.unwrap_or(NONE)
    }
}

/// 1 for an attack to the right (+x), −1 to the left, 0 for a text that says neither.
pub(crate) fn direction(text: &str) -> i8 {
    match super::naming::normal(text).as_str() {
        "right" | "r" | "plusx" | "east" | "1" | "lefttoright" => 1,
        "left" | "l" | "minusx" | "west" | "righttoleft" => -1,
        _ => 0,
    }
}

/// Whether an id, name, side or position means the ball; `more` are further texts for it, lower case.
pub(crate) fn means_ball(text: &str, more: &[String]) -> bool {
    let is_usual = ["ball", "football", "the ball"].iter().any(|word| text.eq_ignore_ascii_case(word));
    is_usual || (!more.is_empty() && more.contains(&text.to_lowercase()))
}

/// A carrier mark that is a yes or a no rather than an id.
pub(crate) fn truth(text: &str) -> Option<bool> {
    match text.to_lowercase().as_str() {
        "1" | "true" | "yes" | "y" | "t" => Some(true),
        "0" | "false" | "no" | "n" | "f" => Some(false),
        _ => None,
    }
}
