//! Invented leagues in which every defender's true own yards per chance are known.

use std::collections::BTreeMap;
use tailchase::base::Stream;
use tailchase::store::PursuitRow;

/// How a league is made. Yards throughout; spreads are standard deviations.
#[derive(Clone, Copy, Debug)]
pub struct Plan {
    pub players: usize,
    pub games: usize,
    /// Chances in a game at most; each player has a usual number of his own below it.
    pub most_chances: usize,
    /// Between players.
    pub spread_yd: f64,
    /// Between the games of a player.
    pub game_yd: f64,
    /// Between the chances of a game; half of it normal, half exponential (long runs cost much).
    pub noise_yd: f64,
    /// Yards for each yard of starting range and each unit of capability ratio.
    pub range_slope: f64,
    pub capability_slope: f64,
    /// Correlation-like pull of a player's usual starting range on his quality: positive starts poor players far away,
    /// negative the good ones.
    pub range_by_quality: f64,
    /// Spread of the players' usual starting range.
    pub range_spread_yd: f64,
}

pub const PLAIN: Plan = Plan {
    players: 30,
    games: 6,
    most_chances: 4,
    spread_yd: 1.0,
    game_yd: 0.5,
    noise_yd: 2.5,
    range_slope: 0.0,
    capability_slope: 0.0,
    range_by_quality: 0.0,
    range_spread_yd: 2.0,
};

pub struct League {
    pub rows: Vec<PursuitRow>,
    /// Own yards per chance from the league's average situation.
    pub truth_yd: BTreeMap<String, f64>,
}

pub fn league(plan: Plan, seed: u64) -> League {
    let mut stream = Stream::new(seed, "league");
    let mut rows = Vec::new();
    let mut truth_yd = BTreeMap::new();
    for p in 0..plan.players {
        let id = format!("p{p:02}");
        let quality = stream.normal();
        let usual_range_yd = 12.0 + plan.range_by_quality * quality + plan.range_spread_yd * stream.normal();
        let top_speed_yps = stream.between(7.0, 10.0);
        let usual_chances = 1 + stream.below(plan.most_chances);
        truth_yd.insert(id.clone(), 4.0 + plan.spread_yd * quality);
        for g in 0..plan.games {
            let day_yd = plan.game_yd * stream.normal();
            for c in 0..1 + stream.below(usual_chances) {
                let carrier_speed_yps = stream.between(6.0, 9.0);
                let noise = std::f64::consts::FRAC_1_SQRT_2 * (stream.normal() - (1.0 - stream.uniform()).ln() - 1.0);
                let own_yd = truth_yd[&id] + day_yd + plan.noise_yd * noise;
                rows.push(PursuitRow {
                    game: format!("g{g}"),
                    play: format!("{p}-{c}"),
                    carry: 1,
                    pursuit: 1,
                    defender: id.clone(),
                    defender_side: Some(if p % 2 == 0 { "Herons" } else { "Otters" }.to_owned()),
                    ending: "contact_lost".to_owned(),
                    start_range_yd: (usual_range_yd + 4.0 * stream.normal()).max(1.0),
                    start_bearing_deg: stream.between(-180.0, 180.0),
                    capability_ratio: Some(top_speed_yps / stream.between(8.0, 10.0)),
                    carrier_speed_yps,
                    top_speed_yps,
                    charged: true,
                    late_yd: Some(own_yd),
                    ..PursuitRow::default()
                });
            }
        }
    }
    let n = rows.len() as f64;
    let mean_range_yd = rows.iter().map(|r| r.start_range_yd).sum::<f64>() / n;
    let mean_ratio = rows.iter().filter_map(|r| r.capability_ratio).sum::<f64>() / n;
    for row in &mut rows {
        let situation_yd = plan.range_slope * (row.start_range_yd - mean_range_yd)
            + plan.capability_slope * (row.capability_ratio.unwrap_or(mean_ratio) - mean_ratio);
        let own_yd = row.late_yd.unwrap_or(0.0) + situation_yd;
        let (block_yd, move_yd) = (stream.between(0.0, 1.0), stream.between(-1.0, 1.0));
        row.late_yd = Some(0.4 * own_yd);
        row.flat_yd = Some(0.3 * own_yd);
        row.deep_yd = Some(0.1 * own_yd);
        row.pace_yd = Some(0.2 * own_yd);
        row.block_yd = Some(block_yd);
        row.move_yd = Some(move_yd);
        row.conceded_yd = Some(own_yd + block_yd + move_yd);
        row.efficiency = Some((1.0 - 0.03 * own_yd).clamp(0.0, 1.0));
    }
    League { rows, truth_yd }
}
