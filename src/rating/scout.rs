//! Sides compared: where from a defence is beaten, and at which positions.

use super::packed::Chance;
use super::roster::Placed;
use super::season::Season;
use super::team::{by_side, own_yards, rank_teams};
use super::texts::Code;
use crate::model::Group;
use crate::model::settings::RatingSettings;
use crate::store::rows::TeamRow;
use std::collections::{BTreeMap, BTreeSet};

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
pub fn compare_sides(season: &Season, settings: &RatingSettings) -> SideComparison {
    let mut splits = Vec::new();
    for (name, side) in by_side(season) {
        let mut add = |by, part, takes: &dyn Fn(&Chance) -> bool| {
            let chosen: Vec<Placed<'_>> = side.chances.iter().copied().filter(|p| takes(p.chance)).collect();
            splits.extend(split(name, by, part, &chosen, settings));
        };
        for part in ["ahead", "left", "right", "behind"] {
            add("start", part, &|c| c.start_bearing_deg.get().is_some_and(|deg| start_part(deg) == part));
        }
        let mut of_position: BTreeMap<Code, Option<Group>> = BTreeMap::new();
        for position in side.chances.iter().filter_map(|p| p.chance.position) {
            of_position.entry(position).or_insert_with(|| Group::of(season.text(position)));
        }
        let group = |c: &Chance| c.position.and_then(|code| of_position.get(&code).copied().flatten());
        let groups: BTreeSet<Group> = of_position.values().copied().flatten().collect();
        for wanted in groups {
            add("position", wanted.word(), &|c| group(c) == Some(wanted));
        }
    }
    SideComparison { teams: rank_teams(season, settings), splits, rows_without_side: season.without_side() }
}

/// Quarters around the carrier, 0° straight downfield, left positive; an edge belongs to the part ahead or behind.
fn start_part(bearing_deg: f64) -> &'static str {
    match bearing_deg.abs() {
        away_deg if away_deg <= 45.0 => "ahead",
        away_deg if away_deg >= 135.0 => "behind",
        _ if bearing_deg > 0.0 => "left",
        _ => "right",
    }
}

fn split(side: &str, by: &'static str, part: &'static str, chances: &[Placed<'_>], settings: &RatingSettings) -> Option<SideSplit> {
    let own = own_yards(chances, settings);
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
