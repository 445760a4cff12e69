//! What a ranking must hold for any input, and at its edges.

use super::league::{PLAIN, Plan, league};
use proptest::prelude::*;
use std::collections::BTreeSet;
use tailchase::base::Stream;
use tailchase::model::settings::RatingSettings;
use tailchase::rating::{Season, compare_sides, rank, rank_players, rank_teams};
use tailchase::store::{Column, PlayerRow, PursuitRow, Row};

fn quick() -> RatingSettings {
    RatingSettings { draws: 150, ..RatingSettings::default() }
}

/// A charged pursuit with all of its own yards under one heading.
pub fn chance(player: &str, game: &str, play: usize, own_yd: f64) -> PursuitRow {
    PursuitRow {
        game: game.to_owned(),
        play: play.to_string(),
        carry: 1,
        pursuit: 1,
        defender: player.to_owned(),
        ending: "contact_lost".to_owned(),
        charged: true,
        conceded_yd: Some(own_yd),
        late_yd: Some(own_yd),
        flat_yd: Some(0.0),
        deep_yd: Some(0.0),
        pace_yd: Some(0.0),
        block_yd: Some(0.0),
        move_yd: Some(0.0),
        ..PursuitRow::default()
    }
}

/// Ranks 1 to n once each, intervals that hold what they are of, no number that is not finite.
fn assert_sound(players: &[PlayerRow]) {
    let ranks: Vec<i64> = players.iter().map(|p| p.rank).collect();
    assert_eq!(ranks, (1..=players.len() as i64).collect::<Vec<_>>());
    for p in players {
        assert!(1 <= p.rank_low && p.rank_low <= p.rank && p.rank <= p.rank_high && p.rank_high <= players.len() as i64, "{p:?}");
        for (low, value, high) in [(p.own_low_yd, p.own_yd, p.own_high_yd), (p.efficiency_low, p.efficiency, p.efficiency_high)] {
            assert!(low.is_some() == value.is_some() && high.is_some() == value.is_some());
            if let (Some(low), Some(value), Some(high)) = (low, value, high) {
                assert!(low <= value && value <= high, "{p:?}");
            }
        }
    }
    for column in PlayerRow::to_columns(players) {
        if let Column::Number(values) = column {
            assert!(values.iter().flatten().all(|v| v.is_finite()));
        }
    }
}

pub fn shuffled(rows: &[PursuitRow], seed: u64) -> Vec<PursuitRow> {
    let mut stream = Stream::new(seed, "shuffle");
    let mut rows = rows.to_vec();
    for i in (1..rows.len()).rev() {
        rows.swap(i, stream.below(i + 1));
    }
    rows
}

#[test]
fn order_of_rows_does_not_matter() {
    let rows = league(Plan { range_slope: 0.3, ..PLAIN }, 3).rows;
    let settings = RatingSettings::default();
    // The text of a row has every digit of its numbers.
    let text = |rows: &[PursuitRow]| {
        let season = Season::of(rows);
        format!("{:?}{:?}{:?}", rank(&season, &settings), rank_teams(&season, &settings), compare_sides(&season, &settings))
    };
    let straight = text(&rows);
    for seed in 0..4 {
        assert!(straight == text(&shuffled(&rows, seed)), "shuffle {seed} changed the ranking");
    }
    assert_ne!(straight, text(&rows[1..]));
}

#[test]
fn the_seed_moves_the_draws_and_nothing_else() {
    let rows = league(PLAIN, 4).rows;
    let a = rank_players(&rows, &quick());
    let b = rank_players(&rows, &RatingSettings { seed: 99, ..quick() });
    assert_ne!(a, b);
    for (a, b) in a.iter().zip(&b) {
        assert_eq!((&a.player, a.rank, a.own_yd, a.own_low_yd), (&b.player, b.rank, b.own_yd, b.own_low_yd));
        assert!((a.rank_low - b.rank_low).abs() <= 8 && (a.rank_high - b.rank_high).abs() <= 8);
    }
}

#[test]
fn edges() {
    assert!(rank_players(&[], &quick()).is_empty());
    assert!(rank_teams(&Season::default(), &quick()).is_empty());

    // One player, one chance: nothing can be said about the scatter, so nothing but the raw figure is given.
    let alone = rank_players(&[chance("a", "1", 1, 3.0)], &quick());
    assert_sound(&alone);
    assert_eq!((alone[0].own_raw_yd, alone[0].own_se_yd, alone[0].own_yd), (Some(3.0), None, None));

    // One player, two chances: his own mean, with an interval. s² = 8, two chances: √(8/2) = 2.
    let twice = rank_players(&[chance("a", "1", 1, 1.0), chance("a", "1", 2, 5.0)], &quick());
    assert_sound(&twice);
    assert_eq!((twice[0].own_yd, twice[0].own_se_yd), (Some(3.0), Some(2.0)));
    assert!((twice[0].own_high_yd.unwrap() - (3.0 + 2.0 * 1.959963984540054)).abs() < 1e-9);

    // One chance each: differences between players and chance cannot be told apart, so all are pooled completely.
    let once: Vec<PursuitRow> = (0..6).map(|i| chance(&format!("p{i}"), "1", i, i as f64)).collect();
    let once = rank_players(&once, &quick());
    assert_sound(&once);
    assert!(once.iter().all(|p| (p.own_yd.unwrap() - 2.5).abs() < 1e-12 && p.rank_low == 1 && p.rank_high == 6));
    // In order of the raw figures nonetheless.
    assert_eq!(once.iter().map(|p| p.player.as_str()).collect::<Vec<_>>(), ["p0", "p1", "p2", "p3", "p4", "p5"]);

    // All equal: no scatter at all.
    let equal: Vec<PursuitRow> = (0..20).map(|i| chance(&format!("p{}", i % 4), &format!("{}", i % 3), i, 2.0)).collect();
    let equal = rank_players(&equal, &quick());
    assert_sound(&equal);
    assert!(
        equal
            .iter()
            .all(|p| (p.own_yd.unwrap() - 2.0).abs() < 1e-12 && p.own_high_yd.unwrap() > 2.0 && (p.rank_low, p.rank_high) == (1, 4))
    );

    // Nobody had a chance.
    let mut listed = chance("b", "1", 1, 9.0);
    listed.charged = false;
    let none = rank_players(&[listed.clone(), PursuitRow { defender: "a".to_owned(), ..listed.clone() }], &quick());
    assert_sound(&none);
    assert_eq!(
        none.iter().map(|p| (p.player.as_str(), p.chances, p.own_raw_yd, p.own_yd)).collect::<Vec<_>>(),
        [("a", 0, None, None), ("b", 0, None, None)]
    );

    // A player without a chance follows those who had one, and could be anywhere.
    let mut rows: Vec<PursuitRow> = (0..20).map(|i| chance(if i % 2 == 0 { "x" } else { "y" }, "1", i, (i % 5) as f64)).collect();
    rows.push(PursuitRow { defender: "c".to_owned(), ..listed });
    let mixed = rank_players(&rows, &quick());
    assert_sound(&mixed);
    assert_eq!((mixed[2].player.as_str(), mixed[2].rank_low, mixed[2].rank_high), ("c", 1, 3));
}

#[test]
fn noisy_leader_drops() {
    // Sixteen players with 12 chances each about 4 yd, and one with two chances of nothing at all: raw he leads by far.
    let mut stream = Stream::new(1, "noisy leader");
    let mut rows = vec![chance("lucky", "1", 900, 0.0), chance("lucky", "2", 901, 0.0)];
    for p in 0..16 {
        let level = 2.5 + 0.2 * p as f64;
        rows.extend((0..12).map(|i| chance(&format!("p{p:02}"), &format!("{}", i % 4), p * 20 + i, level + 3.0 * stream.normal())));
    }
    let players = rank_players(&rows, &quick());
    assert_sound(&players);
    let lucky = players.iter().find(|p| p.player == "lucky").unwrap();
    assert!(players.iter().all(|p| p.player == "lucky" || p.own_raw_yd.unwrap() > 0.5));
    assert!(lucky.rank > 1 && lucky.too_few && lucky.own_yd.unwrap() > 1.0, "{lucky:?}");
    assert!(lucky.own_se_yd.unwrap() > 1.0, "two equal values are no certainty");
}

#[test]
fn broken_settings_and_rows() {
    let rows = league(PLAIN, 5).rows;
    for level in [0.0, 1.0, -3.0, f64::NAN] {
        assert_eq!(rank_players(&rows, &RatingSettings { level, ..quick() }), rank_players(&rows, &quick()));
    }
    // No draws: the rank is not known to any precision.
    let undrawn = rank_players(&rows, &RatingSettings { draws: 0, ..quick() });
    assert!(undrawn.iter().all(|p| (p.rank_low, p.rank_high) == (1, 30)));
    // A heading that is missing or not finite sets the chance aside and counts it.
    let mut broken = rows.clone();
    broken[0].flat_yd = None;
    broken[1].pace_yd = Some(f64::NAN);
    broken[2].start_range_yd = f64::NAN;
    broken[3].efficiency = Some(f64::INFINITY);
    broken[4].on_course_share = f64::NAN;
    let ranking = rank(&Season::of(&broken), &quick());
    assert_eq!(ranking.set_aside, 2);
    assert_sound(&ranking.players);
    let chances = |players: &[PlayerRow]| players.iter().map(|p| p.chances).sum::<i64>();
    assert_eq!(chances(&ranking.players) + 2, chances(&rank_players(&rows, &quick())));
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 120, ..ProptestConfig::default() })]
    #[test]
    fn any_league_is_ranked_soundly(
        made in prop::collection::vec((0..9_usize, 0..3_usize, -20.0..40.0_f64, any::<bool>(), 0.0..30.0_f64, prop::option::of(0.0..1.0_f64)), 0..60),
        positions in prop::collection::vec(prop::sample::select(vec!["CB", "FS", "OLB", "DT", "??"]), 9),
        seed: u64,
    ) {
        let rows: Vec<PursuitRow> = made
            .iter()
            .enumerate()
            .map(|(i, (player, game, own_yd, charged, range_yd, efficiency))| PursuitRow {
                charged: *charged,
                position: Some(positions[*player].to_owned()),
                defender_side: Some(format!("side {}", player % 2)),
                start_range_yd: *range_yd,
                start_bearing_deg: 12.0 * range_yd - 180.0,
                efficiency: *efficiency,
                ..chance(&format!("p{player}"), &format!("g{game}"), i, *own_yd)
            })
            .collect();
        let ranking = rank(&Season::of(&rows), &quick());
        assert_sound(&ranking.players);
        let players: BTreeSet<&str> = rows.iter().map(|r| r.defender.as_str()).collect();
        prop_assert_eq!(ranking.players.len(), players.len());
        if let Some(own) = ranking.own {
            for p in &ranking.players {
                if let (Some(raw), Some(shrunk)) = (p.own_raw_yd, p.own_shrunk_yd) {
                    prop_assert!(shrunk >= raw.min(own.mean) - 1e-9 && shrunk <= raw.max(own.mean) + 1e-9, "{} {} {}", raw, shrunk, own.mean);
                }
            }
        }
        prop_assert_eq!(&ranking, &rank(&Season::of(&shuffled(&rows, seed)), &quick()));
        let teams = rank_teams(&Season::of(&rows), &quick());
        prop_assert!(teams.iter().all(|t| t.own_low_yd.is_none_or(|low| low <= t.own_yd.unwrap())));
    }
}
