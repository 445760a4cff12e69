//! Column names to logical columns: blind to case, separators and camel case; ambiguity is reported, not resolved.

use super::error::name_list;
use super::{IngestError, Logical, Mapping};
use std::collections::BTreeMap;
use std::path::Path;

/// How a column was understood.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum How {
    /// Named in the mapping file.
    Mapped,
    /// The column has the program's own word for it.
    Exact,
    /// A common synonym.
    Synonym,
    /// A guess: worth a look.
    Guessed,
}

impl How {
    pub fn word(self) -> &'static str {
        match self {
            How::Mapped => "mapping",
            How::Exact => "exact",
            How::Synonym => "synonym",
            How::Guessed => "guessed",
        }
    }
}

/// One column as understood.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Matched {
    pub logical: Logical,
    /// Place in the file, from 0.
    pub index: usize,
    /// Name in the file.
    pub column: String,
    pub how: How,
    /// Unit that the name carries: `x_m` says `m`.
    pub unit: Option<&'static str>,
}

/// A file's columns as understood.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Matching {
    by_logical: BTreeMap<Logical, Matched>,
    /// All columns of the file, in order.
    pub columns: Vec<String>,
}

impl Matching {
    pub fn get(&self, logical: Logical) -> Option<&Matched> {
        self.by_logical.get(&logical)
    }
    pub fn index(&self, logical: Logical) -> Option<usize> {
        self.get(logical).map(|m| m.index)
    }
    pub fn has(&self, logical: Logical) -> bool {
        self.by_logical.contains_key(&logical)
    }
    pub fn matched(&self) -> impl Iterator<Item = &Matched> {
        self.by_logical.values()
    }
    pub fn missing(&self) -> Vec<Logical> {
        Logical::ALL.into_iter().filter(|l| !self.has(*l)).collect()
    }
    /// Columns of the file that nobody needs.
    pub fn unused(&self) -> Vec<&str> {
        let used: Vec<usize> = self.matched().map(|m| m.index).collect();
        self.columns.iter().enumerate().filter(|(i, _)| !used.contains(i)).map(|(_, c)| c.as_str()).collect()
    }
}

/// A column that no mapping takes: place, normal form, and name and unit where the name ends in a unit.
type Free = (usize, String, Option<(String, &'static str)>);

/// Lower case, letters and digits only.
pub(crate) fn normal(name: &str) -> String {
    name.chars().filter(|c| c.is_alphanumeric()).flat_map(char::to_lowercase).collect()
}

const UNIT_WORDS: [(&str, &str); 22] = [
    ("yd", "yd"),
    ("yds", "yd"),
    ("yard", "yd"),
    ("yards", "yd"),
    ("m", "m"),
    ("metre", "m"),
    ("metres", "m"),
    ("meter", "m"),
    ("meters", "m"),
    ("ft", "ft"),
    ("feet", "ft"),
    ("yps", "yps"),
    ("mps", "mps"),
    ("fps", "fps"),
    ("mph", "mph"),
    ("kmh", "kmh"),
    ("kph", "kmh"),
    ("kn", "kn"),
    ("s", "s"),
    ("ms", "ms"),
    ("deg", "deg"),
    ("rad", "rad"),
];

/// The name without a trailing unit word, in normal form, and the unit: `X_m` and `xM` give `x`, `m`.
fn without_unit(name: &str) -> Option<(String, &'static str)> {
    let cut = name
        .char_indices()
        .skip(1)
        .filter(|(i, c)| !c.is_alphanumeric() || (c.is_uppercase() && name[..*i].chars().next_back().is_some_and(char::is_lowercase)))
        .last()?
        .0;
    let (head, tail) = (normal(&name[..cut]), normal(&name[cut..]));
    let unit = UNIT_WORDS.iter().find(|(word, _)| *word == tail)?.1;
    (!head.is_empty()).then_some((head, unit))
}

/// Understands a header. Mapped columns first, then each grade of names; two columns of one grade are an error.
pub(crate) fn understand(columns: &[String], mapping: &Mapping, path: &Path) -> Result<Matching, IngestError> {
    let mut out = Matching { columns: columns.to_vec(), ..Matching::default() };
    for (logical, wanted) in mapping.columns.iter().filter(|(_, w)| !w.is_empty()) {
        let index = columns.iter().position(|c| c == wanted).or_else(|| {
            let mut alike = columns.iter().enumerate().filter(|(_, c)| normal(c) == normal(wanted)).map(|(i, _)| i);
            alike.next().filter(|_| alike.next().is_none())
        });
        let Some(index) = index else {
            let line = format!("{} = {wanted:?}", logical.word());
            return Err(IngestError::NoSuchColumn { path: path.into(), column: wanted.clone(), columns: name_list(columns), line });
        };
        put(&mut out, *logical, index, How::Mapped, None);
    }
    let taken: Vec<usize> = out.matched().map(|m| m.index).collect();
    let free: Vec<Free> =
        columns.iter().enumerate().filter(|(i, _)| !taken.contains(i)).map(|(i, c)| (i, normal(c), without_unit(c))).collect();
    for logical in Logical::ALL.into_iter().filter(|l| !mapping.columns.contains_key(l)) {
        for (grade, names) in logical.grades().iter().enumerate() {
            let found: Vec<(usize, Option<&'static str>)> = free
                .iter()
                .filter_map(|(i, whole, bare)| {
                    if names.contains(&whole.as_str()) {
                        return Some((*i, None));
                    }
                    bare.as_ref()
                        .filter(|(head, _)| logical.has_unit() && names.contains(&head.as_str()))
                        .map(|(_, unit)| (*i, Some(*unit)))
                })
                .collect();
            match found.as_slice() {
                [] => continue,
                [(index, unit)] => put(&mut out, logical, *index, if grade == 0 { How::Exact } else { How::Synonym }, *unit),
                [(first, _), ..] => {
                    let names: Vec<String> = found.iter().map(|(i, _)| columns[*i].clone()).collect();
                    let line = format!("{} = {:?}", logical.word(), columns[*first]);
                    return Err(IngestError::Ambiguous {
                        path: path.into(),
                        wanted: logical.meaning(),
                        columns: names.join(" and "),
                        line,
                    });
                }
            }
            break;
        }
    }
    guess(&mut out, &free, mapping);
    Ok(out)
}

fn put(out: &mut Matching, logical: Logical, index: usize, how: How, unit: Option<&'static str>) {
    let column = out.columns[index].clone();
    out.by_logical.insert(logical, Matched { logical, index, column, how, unit });
}

/// The last resort for who a row is about: the only column left whose name ends in "id" or is "tag".
fn guess(out: &mut Matching, free: &[Free], mapping: &Mapping) {
    if out.has(Logical::Mover) || mapping.columns.contains_key(&Logical::Mover) {
        return;
    }
    let used: Vec<usize> = out.matched().map(|m| m.index).collect();
    let mut left = free.iter().filter(|(i, name, _)| !used.contains(i) && (name.ends_with("id") || name == "tag")).map(|(i, _, _)| *i);
    if let (Some(index), None) = (left.next(), left.next()) {
        put(out, Logical::Mover, index, How::Guessed, None);
    }
}

/// Whether the columns suffice for tracks.
pub(crate) fn require(matching: &Matching, path: &Path) -> Result<(), IngestError> {
    let missing = |logical: Logical, wanted: &'static str| IngestError::MissingColumn {
        path: path.into(),
        wanted,
        columns: name_list(&matching.columns),
        line: format!("{} = \"the column's name\"", logical.word()),
    };
    for logical in [Logical::X, Logical::Y] {
        if !matching.has(logical) {
            return Err(missing(
                logical,
                if logical == Logical::X { "x, the place along the field" } else { "y, the place across the field" },
            ));
        }
    }
    if !matching.has(Logical::Frame) && !matching.has(Logical::Time) {
        return Err(missing(Logical::Frame, "the frame number or the time"));
    }
    let by_jersey = matching.has(Logical::Side) && matching.has(Logical::Jersey);
    if !matching.has(Logical::Mover) && !matching.has(Logical::Name) && !by_jersey {
        return Err(missing(Logical::Mover, "the id of the player or ball"));
    }
    if matching.has(Logical::BallX) != matching.has(Logical::BallY) {
        let logical = if matching.has(Logical::BallX) { Logical::BallY } else { Logical::BallX };
        return Err(missing(logical, "the ball's other coordinate"));
    }
    Ok(())
}
