//! How far a ranking moves when a setting is changed: the ranking again, and the largest step of each player.

use crate::store::rows::PlayerRow;
use std::collections::BTreeMap;

/// Largest move of each player's rank between `base` and any of the `variants`, in ranks.
///
/// A player whom no variant lists has no entry. Players without a chance move as well, when the number before them changes.
///
/// ```
/// use tailchase::{rating::rank_swing, store::PlayerRow};
/// let row = |player: &str, rank| PlayerRow { player: player.into(), rank, ..PlayerRow::default() };
/// let swing = rank_swing(&[row("a", 1), row("b", 2)], &[vec![row("a", 2), row("b", 1)], vec![row("a", 1), row("b", 2)]]);
/// assert_eq!(swing["a"], 1);
/// ```
pub fn rank_swing(base: &[PlayerRow], variants: &[Vec<PlayerRow>]) -> BTreeMap<String, i64> {
    let start: BTreeMap<&str, i64> = base.iter().map(|p| (p.player.as_str(), p.rank)).collect();
    let mut swing: BTreeMap<String, i64> = BTreeMap::new();
    for player in variants.iter().flatten() {
        if let Some(rank) = start.get(player.player.as_str()) {
            let moved = (player.rank - rank).abs();
            swing.entry(player.player.clone()).and_modify(|most| *most = moved.max(*most)).or_insert(moved);
        }
    }
    swing
}

/// Writes the swings into the rows of the base ranking; without variants they stay missing.
pub fn write_rank_swing(base: &mut [PlayerRow], variants: &[Vec<PlayerRow>]) {
    let swing = rank_swing(base, variants);
    for player in base {
        player.rank_swing = swing.get(&player.player).copied();
    }
}
