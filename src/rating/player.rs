//! A player's row: counts, means per chance, and the pooled figures put in their places.

use super::measure::Measured;
use super::roster::{Chance, Defender, grouped, mean};
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
    let per_chance = |value: fn(&Chance<'_>) -> f64| mean(chances.iter().map(|c| Some(value(c))));
    let text = |word: Option<&str>| word.map(str::to_owned);
    let own = figures.own_adjusted.and_then(|m| m.pooled);
    let efficiency = figures.efficiency.and_then(|m| m.pooled);
    let se = |measured: Option<Measured>| measured.and_then(|m| m.variance).map(f64::sqrt);
    PlayerRow {
        rank: whole(figures.rank.0),
        rank_low: whole(figures.rank.1),
        rank_high: whole(figures.rank.2),
        player: defender.id.to_owned(),
        name: text(defender.usual(|r| r.defender_name.as_deref())),
        side: text(defender.usual(|r| r.defender_side.as_deref())),
        position: text(defender.usual(|r| r.position.as_deref())),
        games: whole(defender.games()),
        pursuits: whole(defender.rows.len()),
        chances: whole(chances.len()),
        stops: whole(defender.endings("stop")),
        contacts_lost: whole(defender.endings("contact_lost")),
        chances_lost: whole(defender.endings("chance_lost")),
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
        conceded_yd: per_chance(|c| c.account.conceded_yd),
        late_yd: per_chance(|c| c.account.late_yd),
        flat_yd: per_chance(|c| c.account.flat_yd),
        deep_yd: per_chance(|c| c.account.deep_yd),
        pace_yd: per_chance(|c| c.account.pace_yd),
        block_yd: per_chance(|c| c.account.block_yd),
        move_yd: per_chance(|c| c.account.move_yd),
        on_course_share: per_chance(|c| c.row.on_course_share),
        lean_deg: lean_deg(chances),
        line_rate_degps: per_chance(|c| c.row.line_rate_median_degps.abs()),
        closing_yps: per_chance(|c| c.row.closing_median_yps),
        top_speed_yps: top_speed_yps(defender),
        steer_n: figures.steering.n,
        steer_k_per_s: figures.steering.k_per_s,
        steer_word: text(figures.steering.word),
        rank_swing: None,
    }
}

fn lean_deg(chances: &[Chance<'_>]) -> Option<f64> {
    let leans_rad: Vec<f64> = chances.iter().filter_map(|c| c.row.lean_deg.filter(|v| v.is_finite()).map(f64::to_radians)).collect();
    Circular::of(&leans_rad)?.mean_rad.map(f64::to_degrees)
}

/// Mean over games of the game's mean, so that a game with many pursuits counts no more than another.
fn top_speed_yps(defender: &Defender<'_>) -> Option<f64> {
    let games = grouped(defender.rows.iter().map(|r| (r.game.as_str(), Some(r.top_speed_yps))));
    mean(games.iter().map(|g| mean(g.iter().map(|v| Some(*v)))))
}

fn whole(n: usize) -> i64 {
    i64::try_from(n).unwrap_or(i64::MAX)
}
