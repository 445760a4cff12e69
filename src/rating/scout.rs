//! Sides compared: where from a defence is beaten, and at which positions.

use super::position::Group;
use super::team::{by_side, own_yards, rank_teams};
use crate::model::settings::RatingSettings;
use crate::store::rows::{PursuitRow, TeamRow};

/// A part of a side's chances.
#[derive(Clone, Debug, PartialEq)]
pub struct SideSplit {
    pub side: String,
    /// What the split goes by: `start` or `position`.
    pub by: &'static str,
    /// Which part: where the defender started as the carrier sees it (`ahead`, `left`, `right`, `behind`), or his position group.
    pub part: &'static str,
    pub chances: usize,
    pub own_yd: Option<f64>,
    pub own_low_yd: Option<f64>,
    pub own_high_yd: Option<f64>,
}

/// Sides in order of rank, their splits in order of side and part.
#[derive(Clone, Debug, PartialEq)]
pub struct SideComparison {
    pub teams: Vec<TeamRow>,
    pub splits: Vec<SideSplit>,
    /// Pursuits of defenders without a side: left out of both.
    pub rows_without_side: usize,
}

/// Compares the sides that defend in these pursuits. Parts without a chance are not listed.
pub fn compare_sides(rows: &[PursuitRow], settings: &RatingSettings) -> SideComparison {
    let mut splits = Vec::new();
    for (side, rows) in by_side(rows) {
        for part in ["ahead", "left", "right", "behind"] {
            let chosen: Vec<&PursuitRow> = rows.iter().copied().filter(|r| start_part(r.start_bearing_deg) == Some(part)).collect();
            splits.extend(split(side, "start", part, &chosen, settings));
        }
        let group = |r: &PursuitRow| r.position.as_deref().and_then(Group::of);
        let mut groups: Vec<Group> = rows.iter().filter_map(|r| group(r)).collect();
        groups.sort_unstable();
        groups.dedup();
        for wanted in groups {
            let chosen: Vec<&PursuitRow> = rows.iter().copied().filter(|r| group(r) == Some(wanted)).collect();
            splits.extend(split(side, "position", wanted.word(), &chosen, settings));
        }
    }
    let rows_without_side = rows.iter().filter(|r| r.defender_side.is_none()).count();
    SideComparison { teams: rank_teams(rows, settings), splits, rows_without_side }
}

/// Quarters around the carrier, 0° straight downfield, left positive; an edge belongs to the part ahead or behind.
fn start_part(bearing_deg: f64) -> Option<&'static str> {
    let away_deg = bearing_deg.abs();
    if !away_deg.is_finite() {
        return None;
    }
    Some(match away_deg {
        a if a <= 45.0 => "ahead",
        a if a >= 135.0 => "behind",
        _ if bearing_deg > 0.0 => "left",
        _ => "right",
    })
}

fn split(side: &str, by: &'static str, part: &'static str, rows: &[&PursuitRow], settings: &RatingSettings) -> Option<SideSplit> {
    let own = own_yards(rows, settings);
    (own.chances > 0).then(|| SideSplit {
        side: side.to_owned(),
        by,
        part,
        chances: own.chances,
        own_yd: own.mean_yd,
        own_low_yd: own.low_yd,
        own_high_yd: own.high_yd,
    })
}
