//! A player's row: counts, means per chance, and the pooled figures put in their places.

use super::measure::Measured;
use super::packed::Chance;
use super::roster::{Defender, Placed, mean};
use super::steering::Steering;
use crate::model::settings::RatingSettings;
use crate::stats::Circular;
use crate::store::rows::PlayerRow;

/// What pooling has found about a player.
#[derive(Clone, Copy, Debug)]
pub struct Figures {
    pub own: Option<Measured>,
    pub own_adjusted: Option<Measured>,
    pub efficiency: Option<Measured>,
    pub steering: Steering,
    /// Rank, lower and upper end of its interval.
    pub rank: (usize, usize, usize),
}

/// Fills a player's row. Shares, lean, line rate and closing speed are over his chances, counts over all his pursuits.
pub fn player_row(defender: &Defender<'_>, figures: &Figures, settings: &RatingSettings) -> PlayerRow {
    let chances = &defender.chances;
    let per_chance = |value: fn(&Chance) -> Option<f64>| mean(chances.iter().map(|c| value(c.chance)));
    let text = |word: Option<&str>| word.map(str::to_owned);
    let own = figures.own_adjusted.and_then(|m| m.pooled);
    let efficiency = figures.efficiency.and_then(|m| m.pooled);
    let se = |measured: Option<Measured>| measured.and_then(|m| m.variance).map(f64::sqrt);
    PlayerRow {
        rank: whole(figures.rank.0),
        rank_low: whole(figures.rank.1),
        rank_high: whole(figures.rank.2),
        player: defender.id.to_owned(),
        name: text(defender.name),
        side: text(defender.side),
        position: text(defender.position),
        games: whole(defender.games),
        pursuits: i64::from(defender.tally.pursuits),
        chances: whole(chances.len()),
        stops: i64::from(defender.tally.stops),
        contacts_lost: i64::from(defender.tally.contacts_lost),
        chances_lost: i64::from(defender.tally.chances_lost),
        too_few: chances.len() < settings.too_few as usize,
        efficiency_raw: figures.efficiency.map(|m| m.raw),
        efficiency_se: se(figures.efficiency),
        efficiency: efficiency.map(|p| p.value),
        efficiency_low: efficiency.map(|p| p.low.clamp(0.0, p.value.max(0.0))),
        efficiency_high: efficiency.map(|p| p.high.clamp(p.value.min(1.0), 1.0)),
        own_raw_yd: figures.own.map(|m| m.raw),
        own_se_yd: se(figures.own),
        own_shrunk_yd: figures.own.and_then(|m| m.pooled).map(|p| p.value),
        own_yd: own.map(|p| p.value),
        own_low_yd: own.map(|p| p.low),
        own_high_yd: own.map(|p| p.high),
        conceded_yd: per_chance(|c| Some(c.account.conceded_yd)),
        late_yd: per_chance(|c| Some(c.account.late_yd)),
        flat_yd: per_chance(|c| Some(c.account.flat_yd)),
        deep_yd: per_chance(|c| Some(c.account.deep_yd)),
        pace_yd: per_chance(|c| Some(c.account.pace_yd)),
        block_yd: per_chance(|c| Some(c.account.block_yd)),
        move_yd: per_chance(|c| Some(c.account.move_yd)),
        on_course_share: per_chance(|c| c.on_course_share.get()),
        lean_deg: lean_deg(chances),
        line_rate_degps: per_chance(|c| c.line_rate_median_degps.get().map(f64::abs)),
        closing_yps: per_chance(|c| c.closing_median_yps.get()),
        top_speed_yps: defender.top_speed_yps,
        steer_n: figures.steering.n,
        steer_k_per_s: figures.steering.k_per_s,
        steer_word: text(figures.steering.word),
        rank_swing: None,
    }
}

fn lean_deg(chances: &[Placed<'_>]) -> Option<f64> {
    let leans_rad: Vec<f64> = chances.iter().filter_map(|c| c.chance.lean_deg.get().map(f64::to_radians)).collect();
    Circular::of(&leans_rad)?.mean_rad.map(f64::to_degrees)
}

fn whole(n: usize) -> i64 {
    i64::try_from(n).unwrap_or(i64::MAX)
}
