//! Every field of a player's and a team's row, worked by hand on a few pursuits.

use super::league::{PLAIN, Plan, league};
use super::rules::chance;
use tailchase::model::settings::RatingSettings;
use tailchase::rating::{Group, Season, compare_sides, rank, rank_players, rank_swing, rank_teams, write_rank_swing};
use tailchase::store::{PlayerRow, PursuitRow};

fn near(found: Option<f64>, expected: f64) {
    assert!(found.is_some_and(|f| (f - expected).abs() < 1e-12), "{found:?} against {expected}");
}

/// Three pursuits of one player in two games, one of them without a chance.
fn three() -> Vec<PursuitRow> {
    let first = PursuitRow {
        defender_name: Some("Bram Ostley".to_owned()),
        defender_side: Some("Herons".to_owned()),
        position: Some("FS".to_owned()),
        ending: "stop".to_owned(),
        conceded_yd: Some(10.0),
        late_yd: Some(1.0),
        flat_yd: Some(2.0),
        deep_yd: Some(-0.5),
        pace_yd: Some(1.5),
        block_yd: Some(4.0),
        move_yd: Some(2.0),
        on_course_share: 0.5,
        lean_deg: Some(170.0),
        line_rate_median_degps: -3.0,
        closing_median_yps: 2.0,
        top_speed_yps: 9.0,
        efficiency: Some(0.6),
        ..chance("7", "1", 1, 0.0)
    };
    let second = PursuitRow {
        play: "2".to_owned(),
        ending: "chance_lost".to_owned(),
        conceded_yd: Some(4.0),
        late_yd: Some(3.0),
        flat_yd: Some(0.0),
        deep_yd: Some(0.5),
        pace_yd: Some(0.5),
        block_yd: Some(0.0),
        move_yd: Some(0.0),
        on_course_share: 0.25,
        lean_deg: Some(-170.0),
        line_rate_median_degps: 5.0,
        closing_median_yps: 4.0,
        efficiency: Some(0.8),
        ..first.clone()
    };
    let third = PursuitRow {
        game: "2".to_owned(),
        play: "1".to_owned(),
        defender_name: Some("B. Ostley".to_owned()),
        ending: "no_chance".to_owned(),
        charged: false,
        conceded_yd: None,
        on_course_share: 1.0,
        lean_deg: Some(0.0),
        top_speed_yps: 10.0,
        efficiency: None,
        ..first.clone()
    };
    vec![first, second, third]
}

#[test]
fn player_row_by_hand() {
    let players = rank_players(&three(), &RatingSettings::default());
    let p = &players[0];
    assert_eq!((p.rank, p.rank_low, p.rank_high, p.rank_swing), (1, 1, 1, None));
    assert_eq!(
        (p.player.as_str(), p.name.as_deref(), p.side.as_deref(), p.position.as_deref()),
        ("7", Some("Bram Ostley"), Some("Herons"), Some("FS"))
    );
    assert_eq!((p.games, p.pursuits, p.chances, p.stops, p.contacts_lost, p.chances_lost, p.too_few), (2, 3, 2, 1, 0, 1, true));
    near(p.own_raw_yd, 4.0); // (1 + 2 − 0.5 + 1.5) and (3 + 0 + 0.5 + 0.5)
    near(p.conceded_yd, 7.0);
    near(p.late_yd, 2.0);
    near(p.flat_yd, 1.0);
    near(p.deep_yd, 0.0);
    near(p.pace_yd, 1.0);
    near(p.block_yd, 2.0);
    near(p.move_yd, 1.0);
    near(p.on_course_share, 0.375);
    near(p.line_rate_degps, 4.0);
    near(p.closing_yps, 3.0);
    near(p.top_speed_yps, 9.5); // 9 in game 1, 10 in game 2
    near(p.efficiency_raw, 0.7);
    near(p.lean_deg.map(f64::abs), 180.0); // never near 0
    // Both chances cost 4 yd: the resolution of 0.1 yd is all that is left, over √2.
    near(p.own_se_yd, 0.1 / 2.0_f64.sqrt());
    assert_eq!((p.steer_n, p.steer_k_per_s, p.steer_word.as_deref()), (None, None, None));
}

#[test]
fn position_groups() {
    let table = [
        ("CB", Some(Group::Cornerback)),
        ("nickel back", Some(Group::Cornerback)),
        ("ss", Some(Group::Safety)),
        ("Free Safety", Some(Group::Safety)),
        ("MLB", Some(Group::Linebacker)),
        ("outside linebacker", Some(Group::Linebacker)),
        ("DE", Some(Group::End)),
        ("nose-tackle", Some(Group::Tackle)),
        ("WR", Some(Group::Receiver)),
        ("fullback", Some(Group::Back)),
        ("TE", Some(Group::TightEnd)),
        ("qb", Some(Group::Quarterback)),
        ("C", Some(Group::OffensiveLine)),
        ("P", Some(Group::Kicker)),
        ("DB", None),
        ("", None),
        ("scrum-half", None),
    ];
    for (text, group) in table {
        assert_eq!(Group::of(text), group, "{text}");
    }
}

#[test]
fn position_is_taken_out_where_groups_are_large() {
    // Tackles lose 6 yd more than safeties by their position alone; within a group quality spreads by 1 yd.
    let plan = Plan { players: 40, games: 10, ..PLAIN };
    let (mut before, mut after) = (0.0, 0.0);
    let mut rows = league(plan, 8).rows;
    for row in &mut rows {
        let is_tackle = row.defender.ends_with(['1', '3', '5', '7', '9']);
        row.position = Some(if is_tackle { "DT" } else { "FS" }.to_owned());
        row.late_yd = row.late_yd.map(|v| if is_tackle { v + 6.0 } else { v });
    }
    let ranking = rank(&Season::of(&rows), &RatingSettings { draws: 200, ..RatingSettings::default() });
    assert_eq!(ranking.positions.iter().map(|o| (o.group, o.players)).collect::<Vec<_>>(), [(Group::Safety, 20), (Group::Tackle, 20)]);
    for p in &ranking.players {
        let sign = if p.position.as_deref() == Some("DT") { 1.0 } else { -1.0 };
        before += sign * p.own_shrunk_yd.unwrap() / 20.0;
        after += sign * p.own_yd.unwrap() / 20.0;
    }
    assert!(before > 4.0 && after.abs() < 1.0, "between the groups {before:.2} yd before, {after:.2} after");
    // A group of two stays as it is.
    for row in rows.iter_mut().filter(|r| r.defender != "p01" && r.defender != "p03") {
        row.position = Some("FS".to_owned());
    }
    assert!(rank(&Season::of(&rows), &RatingSettings { draws: 0, ..RatingSettings::default() }).positions.is_empty());
}

#[test]
fn kinds_of_play_are_taken_out_where_they_vary() {
    let mut rows = league(Plan { games: 10, ..PLAIN }, 9).rows;
    for (i, row) in rows.iter_mut().enumerate() {
        let is_return = i % 3 == 0;
        row.play_kind = Some(if is_return { "return" } else { "run" }.to_owned());
        row.late_yd = row.late_yd.map(|v| if is_return { v + 5.0 } else { v });
    }
    let settings = RatingSettings { draws: 0, ..RatingSettings::default() };
    let fit = rank(&Season::of(&rows), &settings).situation.unwrap();
    let term = fit.terms.iter().find(|t| t.name == "play_kind=return").unwrap();
    assert!((term.slope - 5.0).abs() < 3.0 * term.se && term.se < 0.5 && term.kept > 0.9, "{term:?}");
    for row in &mut rows {
        row.play_kind = Some("run".to_owned());
    }
    assert!(rank(&Season::of(&rows), &settings).situation.unwrap().terms.iter().all(|t| !t.name.starts_with("play_kind")));
    // Too few chances for any slope: nothing is fitted, and the adjusted figure is the plain one.
    let few = rank(&Season::of(&rows[..40]), &settings);
    assert!(few.situation.is_none());
    assert!(few.players.iter().all(|p| p.own_yd == p.own_shrunk_yd));
}

#[test]
fn steering_word_needs_its_intervals() {
    let make = |player: &str, n: f64, k: f64, count: usize| -> Vec<PursuitRow> {
        (0..count)
            .map(|i| {
                let off = if i % 2 == 0 { 0.1 } else { -0.1 };
                PursuitRow { steer_n: Some(n + off), steer_k_per_s: Some(k - off), ..chance(player, &format!("{}", i % 3), i, 3.0 + off) }
            })
            .collect()
    };
    let rows =
        [make("chaser", 0.0, 1.5, 12), make("leader", 3.0, 0.0, 12), make("both", 0.8, 1.2, 12), make("unclear", 0.9, 0.0, 12)].concat();
    let players = rank_players(&rows, &RatingSettings::default());
    let word = |id: &str| players.iter().find(|p| p.player == id).unwrap().steer_word.clone();
    assert_eq!(word("chaser").as_deref(), Some("runs at the man"));
    assert_eq!(word("leader").as_deref(), Some("leads"));
    assert_eq!(word("both").as_deref(), Some("mixed"));
    assert_eq!(word("unclear"), None);
    // Players differ far more than their pursuits scatter, so pooling leaves each nearly where he is.
    let gain = |id: &str| players.iter().find(|p| p.player == id).unwrap().steer_n.unwrap();
    assert!((gain("leader") - 3.0).abs() < 0.01 && (gain("both") - 0.8).abs() < 0.01);
}

#[test]
fn team_rows_by_hand() {
    let side = |row: PursuitRow, side: &str| PursuitRow { defender_side: Some(side.to_owned()), ..row };
    let mut rows = three();
    rows.push(side(chance("8", "1", 1, 8.0), "Herons"));
    rows.push(side(chance("21", "1", 4, 2.0), "Otters"));
    rows.push(side(chance("22", "2", 4, 3.0), "Otters"));
    rows.push(chance("99", "2", 5, 1.0));
    let settings = RatingSettings::default();
    let teams = rank_teams(&Season::of(&rows), &settings);
    assert_eq!(
        teams.iter().map(|t| (t.rank, t.side.as_str(), t.players, t.chances, t.stops, t.chances_lost)).collect::<Vec<_>>(),
        [(1, "Otters", 2, 2, 0, 0), (2, "Herons", 2, 3, 1, 1)]
    );
    near(teams[1].own_yd, 16.0 / 3.0);
    near(teams[1].late_yd, 4.0);
    near(teams[1].block_yd, 4.0 / 3.0);
    near(teams[1].efficiency, 0.7);
    // Herons: one game; plays 1 (4 and 8 yd) and 2 (4 yd): residual sums 4/3 and −4/3, so 2 · 2 · (16/9)/9.
    near(teams[1].own_high_yd, 16.0 / 3.0 + 1.959963984540054 * (2.0 * 2.0 * (16.0 / 9.0) / 9.0_f64).sqrt());
    // Otters: two games of one play each: both variances (0.5² + 0.5²) · 2/4 = 0.25.
    near(teams[0].own_low_yd, 2.5 - 1.959963984540054 * 0.5);
    let compared = compare_sides(&Season::of(&rows), &settings);
    assert_eq!((compared.teams.len(), compared.rows_without_side), (2, 1));
    let parts: Vec<_> = compared.splits.iter().map(|s| (s.side.as_str(), s.by, s.part, s.chances)).collect();
    assert_eq!(parts, [("Herons", "start", "ahead", 3), ("Herons", "position", "safety", 2), ("Otters", "start", "ahead", 2)]);
}

#[test]
fn swing_is_the_largest_move() {
    let row = |player: &str, rank| PlayerRow { player: player.to_owned(), rank, ..PlayerRow::default() };
    let mut base = vec![row("a", 1), row("b", 2), row("c", 3), row("d", 4)];
    let variants = [vec![row("b", 1), row("a", 2), row("c", 3)], vec![row("c", 1), row("b", 2), row("a", 3), row("new", 4)]];
    let swing = rank_swing(&base, &variants);
    assert_eq!(swing.into_iter().collect::<Vec<_>>(), [("a".to_owned(), 2), ("b".to_owned(), 1), ("c".to_owned(), 2)]);
    write_rank_swing(&mut base, &variants);
    assert_eq!(base.iter().map(|p| p.rank_swing).collect::<Vec<_>>(), [Some(2), Some(1), Some(2), None]);
    write_rank_swing(&mut base, &[]);
    assert!(base.iter().all(|p| p.rank_swing.is_none()));
}
