//! The packed season: the same digits as the rows, whatever the way in, and not much room.

use super::league::{PLAIN, Plan, league};
use super::rules::{chance, shuffled};
use std::collections::BTreeMap;
use tailchase::model::settings::RatingSettings;
use tailchase::rating::{Season, compare_sides, rank, rank_players, rank_teams};
use tailchase::store::{BriefRow, PursuitRow};

fn rows() -> Vec<PursuitRow> {
    let mut rows = league(Plan { games: 9, range_slope: 0.3, ..PLAIN }, 11).rows;
    for (i, row) in rows.iter_mut().enumerate() {
        row.charged = i % 3 > 0;
        row.ending = ["stop", "contact_lost", "chance_lost", "no_chance"][i % 4].to_owned();
        row.play_kind = Some(["run", "catch", "return"][i % 3].to_owned());
        row.position = Some(["CB", "FS", "OLB"][i % 5 % 3].to_owned());
        row.defender_name = (i % 7 > 0).then(|| format!("name of {}", row.defender));
        row.steer_n = (i % 2 > 0).then_some(1.0 + 0.01 * (i % 13) as f64);
        row.steer_k_per_s = row.steer_n.map(|n| 3.0 - n);
        row.lean_deg = (i % 4 > 0).then_some(i as f64 % 37.0 - 18.0);
        row.defender_side = row.defender_side.take().filter(|_| i % 11 > 0);
    }
    rows
}

/// Everything that is computed from a season, with all digits.
fn all(season: &Season) -> String {
    let settings = RatingSettings { draws: 100, ..RatingSettings::default() };
    format!("{:?}{:?}{:?}", rank(season, &settings), rank_teams(season, &settings), compare_sides(season, &settings))
}

#[test]
fn the_way_in_changes_no_digit() {
    let rows = rows();
    let whole = Season::of(&rows);
    let mut games: BTreeMap<&str, Vec<BriefRow>> = BTreeMap::new();
    shuffled(&rows, 5).iter().for_each(|row| {
        let game = rows.iter().find(|r| r.game == row.game).unwrap().game.as_str();
        games.entry(game).or_default().push(BriefRow::from(row));
    });
    let (mut added, mut merged) = (Season::default(), Season::default());
    // Against the order of text, so that codes are given in another order.
    for game in games.values().rev() {
        added.add(game);
        let mut one = Season::default();
        one.add(game);
        merged.merge(one);
    }
    for season in [&added, &merged] {
        assert_eq!((season.pursuits(), season.without_side()), (rows.len(), whole.without_side()));
        assert!(all(season) == all(&whole));
    }
    let nothing = Season::default();
    merged.merge(nothing.clone());
    assert!(all(&merged) == all(&whole) && nothing.is_empty() && !whole.is_empty());
}

#[test]
fn means_have_the_digits_of_the_rows() {
    let mut rows = rows();
    let players = rank_players(&rows, &RatingSettings { draws: 0, ..RatingSettings::default() });
    rows.sort_by(|a, b| (&a.game, &a.play).cmp(&(&b.game, &b.play)));
    let mean = |values: Vec<f64>| values.iter().fold(0.0, |sum, v| sum + v) / values.len() as f64;
    for p in &players {
        let mine: Vec<&PursuitRow> = rows.iter().filter(|r| r.defender == p.player).collect();
        let chances: Vec<&PursuitRow> = mine.iter().copied().filter(|r| r.charged).collect();
        let of = |value: fn(&PursuitRow) -> f64| (!chances.is_empty()).then(|| mean(chances.iter().map(|r| value(r)).collect()));
        let bits = |v: Option<f64>| v.map(f64::to_bits);
        assert_eq!(bits(p.conceded_yd), bits(of(|r| r.conceded_yd.unwrap())), "{}", p.player);
        assert_eq!(bits(p.pace_yd), bits(of(|r| r.pace_yd.unwrap())), "{}", p.player);
        assert_eq!(bits(p.line_rate_degps), bits(of(|r| r.line_rate_median_degps.abs())), "{}", p.player);
        assert_eq!(bits(p.efficiency_raw), bits(Some(mean(mine.iter().filter_map(|r| r.efficiency).collect()))), "{}", p.player);
        assert_eq!((p.pursuits, p.chances), (mine.len() as i64, chances.len() as i64));
        let stops = mine.iter().filter(|r| r.ending == "stop").count();
        assert_eq!((p.stops, p.name.clone()), (stops as i64, Some(format!("name of {}", p.player))));
    }
}

#[test]
fn pursuits_without_an_account_are_counted_and_named() {
    let mut broken = chance("a", "1", 1, 3.0);
    broken.flat_yd = None;
    let mut listed = chance("a", "1", 2, 3.0);
    (listed.charged, listed.conceded_yd) = (false, None);
    let season = Season::of(&[broken, listed, chance("a", "1", 3, 3.0)]);
    assert_eq!((season.set_aside(), season.without_side(), season.pursuits()), (1, 3, 3));
    let player = &rank(&season, &RatingSettings::default()).players[0];
    assert_eq!((player.chances, player.pursuits), (1, 3));
}
