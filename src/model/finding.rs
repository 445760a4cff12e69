//! Findings: what was odd in the data, how often, where first, and what to do about it.

use std::collections::BTreeMap;

/// Kinds of oddity, each with the words that a report shows.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum FindingKind {
    MissingCoordinate,
    MissingKey,
    ExactRepeat,
    ConflictingRepeat,
    Jump,
    GapBridged,
    GapSplit,
    FrameMissingForAll,
    PlayGivenTwice,
    RaggedStart,
    RaggedEnd,
    BallRunsOn,
    FewerPlayers,
    OffField,
    UnevenSteps,
    UnknownEvent,
    SpeedDisagrees,
    HeadingDisagrees,
    NoCarry,
    NoSides,
    NoBall,
    NameConflict,
    ScatteredGame,
    TooShort,
}

impl FindingKind {
    /// The name used in `findings.csv`.
    pub fn word(self) -> &'static str {
        use FindingKind::*;
        match self {
            MissingCoordinate => "missing_coordinate",
            MissingKey => "missing_key",
            ExactRepeat => "exact_repeat",
            ConflictingRepeat => "conflicting_repeat",
            Jump => "jump",
            GapBridged => "gap_bridged",
            GapSplit => "gap_split",
            FrameMissingForAll => "frame_missing_for_all",
            PlayGivenTwice => "play_given_twice",
            RaggedStart => "ragged_start",
            RaggedEnd => "ragged_end",
            BallRunsOn => "ball_runs_on",
            FewerPlayers => "fewer_players",
            OffField => "off_field",
            UnevenSteps => "uneven_steps",
            UnknownEvent => "unknown_event",
            SpeedDisagrees => "speed_disagrees",
            HeadingDisagrees => "heading_disagrees",
            NoCarry => "no_carry",
            NoSides => "no_sides",
            NoBall => "no_ball",
            NameConflict => "name_conflict",
            ScatteredGame => "scattered_game",
            TooShort => "too_short",
        }
    }

    /// What was seen, its likely cause, and what to do.
    pub fn advice(self) -> &'static str {
        use FindingKind::*;
        match self {
            MissingCoordinate => "rows without x or y; set aside, the gap is bridged where it is short",
            MissingKey => "rows without game, play, frame or mover; set aside",
            ExactRepeat => "the same row given again; one kept, the others set aside",
            ConflictingRepeat => {
                "one mover twice in a frame at different places; the one nearest the prediction kept, the others set aside"
            }
            Jump => "a place no runner reaches in the time; set aside, check for swapped ids",
            GapBridged => "frames missing for a mover, bridged by the smoother",
            GapSplit => "a gap too long to bridge; the track is split there",
            FrameMissingForAll => "a frame absent for everyone; bridged",
            PlayGivenTwice => "a whole play given more than once; one copy kept",
            RaggedStart => "movers whose first frames are missing",
            RaggedEnd => "movers whose last frames are missing",
            BallRunsOn => "the ball's track runs on after the players'",
            FewerPlayers => "plays with fewer than 22 players; opponents may be missing from the audit",
            OffField => "movers beyond the lines (bench, tunnel); kept, they pursue nobody",
            UnevenSteps => "steps of unequal length; the smoother takes them as they are",
            UnknownEvent => "event texts without a meaning here; map them under [events] in the mapping file if they mark possession",
            SpeedDisagrees => "the file's own speed differs from the one derived from positions; the derived one is used",
            HeadingDisagrees => {
                "the file's own heading differs from the one derived from positions; check the mapping's heading convention"
            }
            NoCarry => "plays in which nobody was found to carry the ball; check the event and ball mapping",
            NoSides => "movers without a side; opponents cannot be told",
            NoBall => "plays without a ball track; carries come from marks alone",
            NameConflict => "one id with two names, sides or positions; the first in order of text is shown",
            ScatteredGame => "a game's rows lie scattered over the input; read by the slower road",
            TooShort => "tracks of too few frames to smooth; set aside",
        }
    }
}

/// One kind's count with the first place at which it was seen (first in order of game, play, mover, frame).
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Finding {
    pub kind: FindingKind,
    pub count: u64,
    pub first_place: String,
}

/// Counts by kind; merging is order-free.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Findings {
    by_kind: BTreeMap<FindingKind, (u64, String)>,
}

impl Findings {
    /// Counts `count` more of `kind`, seen first at `place`. Of two places the one first in order of text is
    /// kept, so that the order of work cannot change it.
    pub fn add(&mut self, kind: FindingKind, count: u64, place: impl FnOnce() -> String) {
        if count == 0 {
            return;
        }
        let place = place();
        self.by_kind
            .entry(kind)
            .and_modify(|(n, first)| {
                *n += count;
                if place < *first {
                    first.clone_from(&place);
                }
            })
            .or_insert((count, place));
    }

    pub fn merge(&mut self, other: &Findings) {
        for (kind, (count, place)) in &other.by_kind {
            self.add(*kind, *count, || place.clone());
        }
    }

    pub fn list(&self) -> Vec<Finding> {
        self.by_kind.iter().map(|(kind, (count, place))| Finding { kind: *kind, count: *count, first_place: place.clone() }).collect()
    }

    pub fn count(&self, kind: FindingKind) -> u64 {
        self.by_kind.get(&kind).map_or(0, |(n, _)| *n)
    }
}
