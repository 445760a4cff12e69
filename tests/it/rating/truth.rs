//! The ranking against a known truth: adjustment, coverage of the intervals, honesty about nothing.

use super::league::{League, PLAIN, Plan, league};
use tailchase::model::settings::RatingSettings;
use tailchase::rating::{Ranking, Season, rank};
use tailchase::store::PlayerRow;

fn quick() -> RatingSettings {
    RatingSettings { draws: 200, too_few: 1, ..RatingSettings::default() }
}

fn correlation(pairs: &[(f64, f64)]) -> f64 {
    let n = pairs.len() as f64;
    let (a, b) = (pairs.iter().map(|p| p.0).sum::<f64>() / n, pairs.iter().map(|p| p.1).sum::<f64>() / n);
    let cross: f64 = pairs.iter().map(|p| (p.0 - a) * (p.1 - b)).sum();
    let (va, vb): (f64, f64) = pairs.iter().fold((0.0, 0.0), |s, p| (s.0 + (p.0 - a).powi(2), s.1 + (p.1 - b).powi(2)));
    cross / (va * vb).sqrt()
}

fn against_truth(league: &League, ranking: &Ranking, value: fn(&PlayerRow) -> Option<f64>) -> f64 {
    let pairs: Vec<(f64, f64)> = ranking.players.iter().map(|p| (value(p).unwrap(), league.truth_yd[&p.player])).collect();
    let found = correlation(&pairs);
    // All pooled into one value: no order, no correlation.
    if found.is_finite() { found } else { 0.0 }
}

/// Over many leagues: share of players whose truth lies in the interval, share whose true rank does, and mean correlations
/// of the raw and of the adjusted, pooled figures with the truth.
struct Report {
    covered: f64,
    rank_covered: f64,
    raw: f64,
    adjusted: f64,
}

fn over_leagues(plan: Plan, leagues: u64) -> Report {
    let mut report = Report { covered: 0.0, rank_covered: 0.0, raw: 0.0, adjusted: 0.0 };
    let all = (plan.players as u64 * leagues) as f64;
    for seed in 0..leagues {
        let league = league(plan, seed);
        let ranking = rank(&Season::of(&league.rows), &quick());
        for p in &ranking.players {
            let truth_yd = league.truth_yd[&p.player];
            let true_rank = 1 + league.truth_yd.values().filter(|t| **t < truth_yd).count() as i64;
            let is_inside = p.own_low_yd.unwrap() <= truth_yd && truth_yd <= p.own_high_yd.unwrap();
            report.covered += f64::from(u8::from(is_inside)) / all;
            report.rank_covered += f64::from(u8::from(p.rank_low <= true_rank && true_rank <= p.rank_high)) / all;
        }
        report.raw += against_truth(&league, &ranking, |p| p.own_raw_yd) / leagues as f64;
        report.adjusted += against_truth(&league, &ranking, |p| p.own_yd) / leagues as f64;
    }
    report
}

/// Good players are sent out to the far starts: 3 yd further for each spread of quality, 0.4 yd lost for each yard.
const CONFOUNDED: Plan = Plan { range_slope: 0.4, capability_slope: -6.0, range_by_quality: -3.0, ..PLAIN };

#[test]
fn adjustment_undoes_unequal_starts() {
    let season = over_leagues(Plan { games: 17, players: 40, ..CONFOUNDED }, 30);
    assert!(season.raw < 0.1 && season.adjusted > 0.8, "raw {:.3}, adjusted {:.3}", season.raw, season.adjusted);
    let six_games = over_leagues(CONFOUNDED, 60);
    assert!(six_games.adjusted > six_games.raw + 0.5, "raw {:.3}, adjusted {:.3}", six_games.raw, six_games.adjusted);
}

#[test]
fn badness_is_not_explained_away() {
    // Poor players start far away: a regression over all chances would take much of their own fault for the range's. True slope 0.4.
    let plan = Plan { range_by_quality: 3.0, games: 17, players: 40, range_spread_yd: 0.5, ..CONFOUNDED };
    let (mut slope, mut kept, leagues) = (0.0, 0.0, 30);
    for seed in 0..leagues {
        let league = league(plan, seed);
        let ranking = rank(&Season::of(&league.rows), &quick());
        let fit = ranking.situation.as_ref().unwrap();
        slope += fit.terms.iter().find(|t| t.name == "start_range_yd").unwrap().slope / leagues as f64;
        // Regression of the adjusted figure on the truth, the shrinkage undone by the size of the season.
        let pairs: Vec<(f64, f64)> = ranking.players.iter().map(|p| (league.truth_yd[&p.player], p.own_yd.unwrap())).collect();
        let (mt, my) = (pairs.iter().map(|p| p.0).sum::<f64>() / 40.0, pairs.iter().map(|p| p.1).sum::<f64>() / 40.0);
        let cross: f64 = pairs.iter().map(|p| (p.0 - mt) * (p.1 - my)).sum();
        kept += cross / pairs.iter().map(|p| (p.0 - mt).powi(2)).sum::<f64>() / leagues as f64;
    }
    println!("slope {slope:.3}, kept {kept:.3}");
    assert!((slope - 0.4).abs() < 0.02, "slope {slope}");
    // 40 players with 17 games of about two chances: v is a quarter to a half of τ², so 0.7 to 0.8 of the truth is to be kept; where
    // badness is taken for situation it is less than half.
    assert!((0.68..0.95).contains(&kept), "kept {kept}");
}

#[test]
fn intervals_cover_the_truth() {
    for (name, plan) in [
        ("plain", PLAIN),
        ("little between players", Plan { spread_yd: 0.3, ..PLAIN }),
        ("one game", Plan { games: 1, most_chances: 8, ..PLAIN }),
        ("confounded", CONFOUNDED),
        ("few players", Plan { players: 8, ..PLAIN }),
    ] {
        let report = over_leagues(plan, 200);
        println!("{name}: covered {:.3}, ranks {:.3}", report.covered, report.rank_covered);
        assert!((0.90..=0.99).contains(&report.covered), "{name}: intervals cover {:.3}", report.covered);
        assert!((0.93..=0.999).contains(&report.rank_covered), "{name}: rank intervals cover {:.3}", report.rank_covered);
    }
}

#[test]
fn nothing_between_players_is_said_so() {
    // All alike: the usual rank interval runs over most of the league, and nobody's interval leaves out the common truth often.
    let (mut width, mut covered, leagues) = (0.0, 0.0, 60);
    for seed in 0..leagues {
        let league = league(Plan { spread_yd: 0.0, ..PLAIN }, seed);
        for p in &rank(&Season::of(&league.rows), &quick()).players {
            width += (p.rank_high - p.rank_low + 1) as f64 / (30.0 * 30.0 * leagues as f64);
            covered += f64::from(u8::from((p.own_low_yd.unwrap()..=p.own_high_yd.unwrap()).contains(&4.0))) / (30.0 * leagues as f64);
        }
    }
    assert!(width > 0.8, "rank intervals span {width:.2} of the league");
    assert!(covered > 0.98, "covered {covered}");
}

#[test]
fn shrunken_is_nearer_than_raw() {
    let (mut raw, mut shrunk) = (0.0, 0.0);
    for seed in 0..60 {
        let league = league(Plan { games: 3, ..PLAIN }, seed);
        for p in &rank(&Season::of(&league.rows), &quick()).players {
            raw += (p.own_raw_yd.unwrap() - league.truth_yd[&p.player]).powi(2);
            shrunk += (p.own_shrunk_yd.unwrap() - league.truth_yd[&p.player]).powi(2);
        }
    }
    assert!(shrunk < 0.65 * raw, "squared error {shrunk:.1} against {raw:.1}");
}
