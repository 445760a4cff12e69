//! Invented games: the same from the same seed, true to their own truth, and plausible.

use std::collections::{BTreeMap, BTreeSet};
use tailchase::base::{Stream, V2};
use tailchase::demo::body::{ALPHA_PER_S, Body, Law};
use tailchase::demo::chase::{expectation, tilted};
use tailchase::demo::planted::{CONTACT_YD, Fault, PathKind, PlantedEnd, planted_play};
use tailchase::demo::text::{csv_text, push_decimal};
use tailchase::demo::truth::Tables;
use tailchase::demo::untidy::{Mess, carriers, spoil};
use tailchase::demo::{CarryStop, Character, DemoGame, DemoOptions, PlayKind, generate_game, rows};
use tailchase::engine::foresight::Foresight;
use tailchase::engine::reach::State;
use tailchase::model::{EventMark, Field};

fn season(games: usize, plays_per_game: usize) -> Vec<DemoGame> {
    let options = DemoOptions { games, plays_per_game, seed: 11, ..DemoOptions::default() };
    (0..games).map(|g| generate_game(g, &options)).collect()
}

#[test]
fn same_seed_same_rows_in_any_order_of_games() {
    let options = DemoOptions { games: 6, plays_per_game: 8, seed: 5, ..DemoOptions::default() };
    let forward: Vec<_> = (0..6).map(|g| rows(&generate_game(g, &options))).collect();
    let backward: Vec<_> = (0..6).rev().map(|g| rows(&generate_game(g, &options))).collect();
    assert!(forward.iter().eq(backward.iter().rev()));
    let threaded = std::thread::spawn({
        let options = DemoOptions { threads: 2, ..options.clone() };
        move || rows(&generate_game(3, &options))
    });
    assert_eq!(threaded.join().ok().as_ref(), Some(&forward[3]));
    let other = rows(&generate_game(0, &DemoOptions { seed: 6, ..options }));
    assert_ne!(other, forward[0]);
}

#[test]
fn a_longer_season_keeps_its_games_unless_the_league_grows() {
    let base = DemoOptions { games: 8, plays_per_game: 3, ..DemoOptions::default() };
    let longer = DemoOptions { games: 12, ..base.clone() };
    assert_eq!(generate_game(7, &base), generate_game(7, &longer));
}

#[test]
fn the_rate_changes_the_samples_and_not_the_play() {
    let at = |rate_hz| generate_game(0, &DemoOptions { rate_hz, noise_yd: 0.0, plays_per_game: 6, ..DemoOptions::default() });
    let slow = at(10.0);
    for (rate_hz, every) in [(50.0, 5), (20.0, 2), (60.0, 6)] {
        let fast = at(rate_hz);
        for (a, b) in slow.plays.iter().zip(&fast.plays) {
            assert_eq!(a.kind, b.kind);
            for (m, n) in a.movers.iter().zip(&b.movers) {
                for f in 0..a.player_frames.min(b.player_frames / every) {
                    let gap = (m.track.pos_yd[f] - n.track.pos_yd[f * every]).norm();
                    // Rounding only: the motion law is exact between steps.
                    assert!(gap < 1e-9, "{rate_hz} Hz, frame {f}: {gap}");
                }
            }
            for (c, d) in a.carries.iter().zip(&b.carries) {
                assert_eq!((c.start_s, c.end_s), (d.start_s, d.end_s));
            }
        }
    }
}

#[test]
fn every_play_has_22_players_and_a_ball() {
    for game in season(3, 40) {
        for play in &game.plays {
            assert_eq!(play.movers.len(), 22);
            let sides: BTreeMap<&str, usize> = play.movers.iter().fold(BTreeMap::new(), |mut n, m| {
                *n.entry(&*game.athletes[m.athlete].side).or_default() += 1;
                n
            });
            assert_eq!(sides.values().copied().collect::<Vec<_>>(), [11, 11]);
            let ids: Vec<_> = play.movers.iter().map(|m| &game.athletes[m.athlete].id).collect();
            assert!(ids.windows(2).all(|w| w[0] < w[1]), "sorted by id and distinct");
            assert!(play.movers.iter().all(|m| m.track.seen_yd.len() == play.player_frames));
            assert!(play.ball.seen_yd.len() >= play.player_frames);
        }
    }
}

#[test]
fn names_and_ids_are_unique_and_some_are_awkward() {
    let options = DemoOptions { games: 272, plays_per_game: 1, ..DemoOptions::default() };
    let (mut by_id, mut games) = (BTreeMap::new(), BTreeSet::new());
    for g in 0..272 {
        let game = generate_game(g, &options);
        assert!(games.insert(game.id.clone()), "game id twice");
        assert!(game.id.bytes().all(|b| b.is_ascii_digit()));
        for athlete in &game.athletes {
            assert!(athlete.id.bytes().all(|b| b.is_ascii_digit()));
            let known = by_id.entry(athlete.id.clone()).or_insert_with(|| athlete.clone());
            assert_eq!(known, athlete, "one player, one set of facts");
        }
    }
    let names: BTreeSet<_> = by_id.values().map(|a| a.name.clone()).collect();
    assert_eq!(names.len(), by_id.len());
    assert_eq!(by_id.values().map(|a| a.club).collect::<BTreeSet<_>>().len(), 32);
    for odd in ["'", "-", ".", "é"] {
        assert!(names.iter().any(|n| n.contains(odd)), "no name with {odd}");
    }
}

#[test]
fn the_carrier_has_the_ball_and_nobody_outruns_the_law() {
    for game in season(3, 60) {
        for play in &game.plays {
            for carry in &play.carries {
                assert!(carry.start_frame < carry.end_frame, "{:?} {carry:?}", play.kind);
                let track = &play.movers[carry.carrier].track;
                // The first frame is at or after the gain, the last at or after the loss: inside it is his.
                for f in carry.start_frame..carry.end_frame {
                    let gap = (track.pos_yd[f] - play.ball.pos_yd[f]).norm();
                    assert!(gap < 1.0, "{:?}: ball {gap} yd off at frame {f} of {carry:?}", play.kind);
                }
            }
            for mover in &play.movers {
                let top = game.athletes[mover.athlete].top_speed_yps;
                let keep = (-ALPHA_PER_S * 0.1_f64).exp();
                for pair in mover.track.vel_yps.windows(2) {
                    // Mean push over the frame; a mean of pushes within the unit disc stays in it.
                    let push = (pair[1] - pair[0] * keep) / (top * (1.0 - keep));
                    assert!(push.norm() <= 1.0 + 1e-9, "push {} of {}", push.norm(), game.athletes[mover.athlete].position);
                }
            }
        }
    }
}

#[test]
fn noise_is_as_asked_and_values_have_two_decimals() {
    let game = &season(1, 30)[0];
    let (mut sum2, mut n) = (0.0_f64, 0.0_f64);
    for play in &game.plays {
        for mover in &play.movers {
            for (seen, exact) in mover.track.seen_yd.iter().zip(&mover.track.pos_yd) {
                sum2 += (*seen - *exact).norm2();
                n += 2.0;
                assert_eq!(seen.x, (seen.x * 100.0).round() / 100.0);
            }
        }
    }
    // 0.05 yd of noise and the variance 0.01²/12 of rounding; some 100,000 draws.
    let expected: f64 = (0.05_f64.powi(2) + 0.01_f64.powi(2) / 12.0).sqrt();
    assert!(((sum2 / n).sqrt() / expected - 1.0).abs() < 0.01, "{}", (sum2 / n).sqrt());
}

#[test]
fn kinds_gains_and_starts_are_plausible() {
    let games = season(12, 150);
    let plays: Vec<_> = games.iter().flat_map(|g| &g.plays).collect();
    for (kind, share) in PlayKind::SHARES {
        let found = plays.iter().filter(|p| p.kind == kind).count() as f64 / plays.len() as f64;
        // Four standard errors of a share among 1,800.
        assert!((found - share).abs() < 4.0 * (share * (1.0 - share) / plays.len() as f64).sqrt(), "{kind:?}: {found}");
    }
    let mut gains: Vec<f64> = plays.iter().flat_map(|p| &p.carries).map(|c| c.gain_yd).collect();
    gains.sort_by(f64::total_cmp);
    let at = |q: f64| gains[(q * (gains.len() - 1) as f64) as usize];
    assert!(at(0.5) > 3.0 && at(0.5) < 12.0, "median gain {}", at(0.5));
    assert!(at(0.95) > 20.0 && at(0.95) < 60.0, "95 % of gains {}", at(0.95));
    let stops: BTreeSet<CarryStop> = plays.iter().flat_map(|p| &p.carries).map(|c| c.stop).collect();
    assert_eq!(stops.len(), 5, "every way to end a carry occurs: {stops:?}");
    let mut ranges: Vec<f64> = Vec::new();
    for (game, play) in games.iter().flat_map(|g| g.plays.iter().map(move |p| (g, p))) {
        for carry in &play.carries {
            let side = &game.athletes[play.movers[carry.carrier].athlete].side;
            let spot = play.movers[carry.carrier].track.pos_yd[carry.start_frame];
            let foes = play.movers.iter().filter(|m| game.athletes[m.athlete].side != *side);
            ranges.extend(foes.map(|m| (m.track.pos_yd[carry.start_frame] - spot).norm()));
        }
    }
    ranges.sort_by(f64::total_cmp);
    let range_at = |q: f64| ranges[(q * (ranges.len() - 1) as f64) as usize];
    assert!(range_at(0.1) < 8.0 && range_at(0.9) > 20.0, "ranges from {} to {}", range_at(0.1), range_at(0.9));
    assert!(plays.iter().any(|p| p.time_s.len() > p.player_frames), "the ball runs on in some plays");
    assert!(plays.iter().any(|p| p.carries.len() == 2), "some plays have two carries");
}

#[test]
fn events_tell_the_carries() {
    for game in season(3, 60) {
        for (play, read) in game.plays.iter().zip(game.to_plays()) {
            assert!(play.events.windows(2).all(|w| w[0].0 < w[1].0), "one a frame, in order");
            for carry in &play.carries {
                let gain = |m: &EventMark| {
                    use EventMark::*;
                    matches!(m, HandOff | Catch | KickReceived | Interception | Recovery)
                };
                let near = |frame: usize, is: &dyn Fn(&EventMark) -> bool| {
                    read.events.iter().any(|(f, m)| is(m) && (*f as usize).abs_diff(frame) <= 2)
                };
                // A quarterback who goes himself is told by no mark: the snap was before.
                let told = play.kind == PlayKind::Scramble || near(carry.start_frame, &gain);
                assert!(told, "{:?} {carry:?} {:?}", play.kind, play.events);
                let end = match carry.stop {
                    CarryStop::Down => EventMark::Down,
                    CarryStop::Out => EventMark::OutOfBounds,
                    CarryStop::Score => EventMark::Score,
                    CarryStop::Fumble => EventMark::Fumble,
                    CarryStop::Lateral => EventMark::Lateral,
                };
                assert!(near(carry.end_frame, &|m| *m == end), "{:?} {carry:?} {:?}", play.kind, play.events);
            }
        }
    }
}

#[test]
fn options_decide_what_the_file_says() {
    let silent = DemoOptions { events: false, plays_per_game: 4, ..DemoOptions::default() };
    let game = generate_game(0, &silent);
    assert!(rows(&game).iter().all(|r| r.event.is_none() && r.carrier.is_none()));
    assert!(game.to_plays().iter().all(|p| p.events.is_empty() && p.hints.carrier_marks.is_empty() && p.hints.attack.is_none()));
    let telling = generate_game(0, &DemoOptions { carrier_column: true, direction_column: true, ..silent.clone() });
    for (play, read) in telling.plays.iter().zip(telling.to_plays()) {
        for carry in &play.carries {
            let middle = (carry.start_frame + carry.end_frame) as u32 / 2;
            assert!(read.hints.carrier_marks.contains(&(middle, carry.carrier as u32)));
        }
        assert_eq!(read.hints.attack, Some(play.attack));
    }
    assert!(DemoOptions { rate_hz: f64::NAN, ..silent.clone() }.check().is_err());
    let refusal = DemoOptions { games: 0, ..silent }.check();
    assert_eq!(refusal.map_err(|e| e.to_string()), Err("games: expected 1 or more, found 0 (ask for at least one)".to_owned()));
}

/// Mean seconds from the start of a carry to the first contact, over pursuits from the same starts: the planted plays.
#[test]
fn sound_defenders_get_there_first() {
    let mut met: BTreeMap<Fault, (usize, f64)> = BTreeMap::new();
    for path in PathKind::ALL {
        for fault in Fault::ALL {
            for seed in 0..60 {
                let (play, truth) = planted_play(fault, path, seed, 10.0, 0.0);
                let entry = met.entry(fault).or_default();
                entry.0 += usize::from(truth.end == PlantedEnd::Contact);
                entry.1 += play.time_s[truth.end_frame] - play.time_s[truth.start_frame];
            }
        }
    }
    let (sound, sound_s) = met[&Fault::None];
    assert!(sound >= 174, "the best push meets {sound} of 180");
    for fault in [Fault::AtTheMan, Fault::Late, Fault::Slow, Fault::Flat] {
        let (n, seconds) = met[&fault];
        assert!(n < sound && seconds > sound_s + 60.0, "{fault:?}: {n} met, {seconds} s against {sound} and {sound_s} s");
    }
    // Leading too much is the cheap side: common practice, no source.
    assert!(met[&Fault::Deep].0 >= 174);
}

#[test]
fn characters_show_in_games() {
    // Mean gap to the carrier 1.5 s after the start, among free defenders that start 8 to 20 yd off.
    let mut gaps: BTreeMap<Character, (f64, f64)> = BTreeMap::new();
    for game in season(16, 150) {
        for play in &game.plays {
            for carry in play.carries.iter().filter(|c| c.end_frame >= c.start_frame + 15) {
                let runner = &play.movers[carry.carrier];
                for mover in &play.movers {
                    let athlete = &game.athletes[mover.athlete];
                    let gap = |f: usize| (mover.track.pos_yd[f] - runner.track.pos_yd[f]).norm();
                    let near = (8.0..20.0).contains(&gap(carry.start_frame));
                    let fast = ["CB", "S", "LB"].contains(&&*athlete.position);
                    if athlete.side != game.athletes[runner.athlete].side && near && fast {
                        let entry = gaps.entry(athlete.character).or_default();
                        entry.0 += gap(carry.start_frame) - gap(carry.start_frame + 15);
                        entry.1 += 1.0;
                    }
                }
            }
        }
    }
    let closed = |c: Character| gaps[&c].0 / gaps[&c].1;
    assert_eq!(gaps.len(), Character::ALL.len());
    assert!(closed(Character::Sound) > closed(Character::Late) + 1.0, "{gaps:?}");
    assert!(closed(Character::Sound) > closed(Character::Slow), "{gaps:?}");
}

#[test]
fn planted_play_is_what_was_planted() {
    for path in PathKind::ALL {
        let starts: Vec<_> = Fault::ALL.iter().map(|f| planted_play(*f, path, 7, 10.0, 0.0).1).collect();
        for truth in &starts {
            assert_eq!(truth.start_range_yd, starts[0].start_range_yd);
            assert_eq!(truth.ideal_s, starts[0].ideal_s);
            assert!((8.0..=20.0).contains(&truth.start_range_yd));
        }
        for fault in Fault::ALL {
            let (play, truth) = planted_play(fault, path, 7, 10.0, 0.0);
            let [carrier, defender] = &truth.tracks;
            if truth.end == PlantedEnd::Contact {
                assert!((carrier.pos_yd[truth.end_frame] - defender.pos_yd[truth.end_frame]).norm() <= CONTACT_YD);
                assert!((carrier.pos_yd[truth.end_frame - 2] - defender.pos_yd[truth.end_frame - 2]).norm() > CONTACT_YD);
            }
            let top = truth.top_speeds_yps[truth.defender];
            let keep = (-ALPHA_PER_S * 0.1_f64).exp();
            let late = truth.start_frame + (truth.stands_s * 10.0) as usize;
            for f in truth.start_frame..truth.end_frame - 1 {
                let push = (defender.vel_yps[f + 1] - defender.vel_yps[f] * keep) / (top * (1.0 - keep));
                let most = if fault == Fault::Slow { 0.85 } else { 1.0 };
                assert!(push.norm() <= most + 1e-9);
                if fault == Fault::Late && f < late {
                    assert_eq!(defender.pos_yd[f], defender.pos_yd[truth.start_frame]);
                }
            }
            assert_eq!(play.tracks[truth.carrier].x_yd.len(), play.time_s.len());
        }
        assert_eq!(planted_play(Fault::Flat, path, 3, 25.0, 0.1), planted_play(Fault::Flat, path, 3, 25.0, 0.1));
    }
}

#[test]
fn tilts_turn_towards_downfield_and_away() {
    let across = V2::new(0.0, -1.0);
    assert!(tilted(across, 0.2).x > 0.0);
    assert!(tilted(across, -0.2).x < 0.0);
    assert!((tilted(V2::polar(0.1), 0.2) - V2::EAST).norm() < 1e-15, "nothing is deeper than straight downfield");
    assert!((tilted(V2::polar(-2.0), 0.25).angle_rad() + 1.75).abs() < 1e-12);
}

/// One second of full push from rest along a line: V (1 − (1 − e^{−α})/α), the sprint law of Furusawa, Hill & Parkinson
/// (1927); with V = 9, α = 1.3 the distance is 9 (1 − 0.7274682070/1.3) = 3.9636816441 (printed by Python: 9*(1-(1-exp(-1.3))/1.3)).
#[test]
fn bodies_follow_the_sprint_law() {
    let mut body = Body::standing(V2::ZERO, 9.0);
    body.jolt(V2::EAST);
    let law = Law::new(0.02);
    for _ in 0..50 {
        body.follow(&law);
        body.advance(&law);
    }
    assert!((body.pos_yd.x - 3.9636816441).abs() < 1e-9, "{}", body.pos_yd.x);
    assert!((body.vel_yps.x - 9.0 * 0.7274682070).abs() < 1e-8);
}

#[test]
fn sound_push_aims_at_the_foreseen_meeting() {
    let forecast = expectation(Field::AMERICAN, CONTACT_YD);
    let mut runner = Body::standing(V2::new(40.0, 26.0), 9.0);
    runner.vel_yps = V2::new(7.0, 3.0);
    let chaser = Body::standing(V2::new(55.0, 40.0), 9.2);
    let way = tailchase::demo::chase::Quarry::seen(&runner, &forecast).best_direction(&chaser);
    let state = |b: &Body| State { pos_yd: b.pos_yd, vel_yps: b.vel_yps };
    let path = Foresight::new(std::iter::once(state(&runner)), 9.0, &forecast);
    let meeting = path.path(0).earliest(0, state(&chaser), 9.2);
    // Full push that way for that long leads into the circle of reach around the spot.
    let mut after = chaser;
    after.push = way;
    let met = meeting.map(|m| (after.after(m.t_s).0 - m.spot_yd).norm());
    assert!(met.is_some_and(|gap| (gap - CONTACT_YD).abs() < 1e-6), "{met:?}");
}

#[test]
fn decimals_are_written_short_and_exact() {
    let text = |value, places| {
        let mut out = Vec::new();
        push_decimal(&mut out, value, places);
        String::from_utf8_lossy(&out).into_owned()
    };
    for (value, places, expected) in [
        (12.34, 2, "12.34"),
        (12.3, 2, "12.3"),
        (-0.05, 2, "-0.05"),
        (-0.001, 2, "0"),
        (100.0, 2, "100"),
        (0.0167, 4, "0.0167"),
        (7.0, 0, "7"),
        (-28.5, 2, "-28.5"),
    ] {
        assert_eq!(text(value, places), expected);
    }
    let mut draws = Stream::new(3, "decimals");
    for _ in 0..2000 {
        let cents = (draws.between(-20_000.0, 20_000.0)).round();
        assert_eq!(text(cents / 100.0, 2).parse::<f64>(), Ok(cents / 100.0));
    }
}

#[test]
fn csv_reads_back_to_the_same_rows() {
    let game = &season(1, 3)[0];
    let mut all = rows(game);
    spoil(&mut all, Mess::FreeText, &carriers(game), 1);
    let text = csv_text(&all).unwrap();
    let mut reader = csv::Reader::from_reader(&text[..]);
    let header: Vec<String> = reader.headers().unwrap().iter().map(str::to_owned).collect();
    assert_eq!(
        header,
        [
            "game_id", "play_id", "frame", "time_s", "mover_id", "name", "side", "position", "jersey", "x", "y", "speed", "heading",
            "event", "note"
        ]
    );
    let read: Vec<csv::StringRecord> = reader.records().map(Result::unwrap).collect();
    assert_eq!(read.len(), all.len());
    for (record, row) in read.iter().zip(&all) {
        assert_eq!(&record[4], row.mover_id);
        assert_eq!(&record[5], row.name);
        assert_eq!(record[9].parse::<f64>().ok(), row.x);
        assert_eq!(record[12].parse::<f64>().ok(), row.heading);
        assert_eq!(Some(&record[14]), row.note.as_deref());
    }
}

#[test]
fn truth_tables_name_every_player_and_carry() {
    let games = season(2, 20);
    let (mut forward, mut backward) = (Tables::default(), Tables::default());
    for (k, game) in games.iter().enumerate() {
        forward.add(k, game);
    }
    for (k, game) in games.iter().enumerate().rev() {
        backward.add(k, game);
    }
    assert_eq!(forward.truth_carries().unwrap(), backward.truth_carries().unwrap());
    assert_eq!(forward.truth_players().unwrap(), backward.truth_players().unwrap());
    let text = String::from_utf8(forward.truth_carries().unwrap()).unwrap();
    let carries: usize = games.iter().flat_map(|g| &g.plays).map(|p| p.carries.len()).sum();
    assert_eq!(text.lines().count(), carries + 1);
    let players = String::from_utf8(forward.truth_players().unwrap()).unwrap();
    assert!(Character::ALL.iter().all(|c| players.contains(c.word())));
    let plays = String::from_utf8(forward.plays(false).unwrap()).unwrap();
    assert_eq!(plays.lines().next(), Some("game_id,play_id,kind,possession_side"));
}

#[test]
fn every_mess_spoils_something_and_spares_the_carriers() {
    let game = &season(1, 24)[0];
    let clean = rows(game);
    let spared = carriers(game);
    for mess in Mess::ALL {
        let mut spoiled = clean.clone();
        let touched = spoil(&mut spoiled, mess, &spared, 9);
        assert!(touched > 0, "{mess:?} did nothing");
        assert_ne!(spoiled, clean, "{mess:?}");
        let mut again = clean.clone();
        spoil(&mut again, mess, &spared, 9);
        assert_eq!(spoiled, again, "{mess:?} is not the same twice");
        let left: BTreeSet<(String, String)> =
            spoiled.iter().map(|r| (r.play_id.clone(), r.mover_id.trim_end_matches(".0").to_owned())).collect();
        assert!(spared.iter().all(|s| left.contains(s)), "{mess:?} lost a carrier");
    }
    let mut all = clean.clone();
    for mess in Mess::ALL {
        spoil(&mut all, mess, &spared, 9);
    }
    assert_eq!(all.iter().map(|r| r.play_id.clone()).collect::<BTreeSet<_>>().len(), 24, "no play vanishes");
    assert!(all.iter().all(|r| r.time_s >= -0.02 && r.time_s.is_finite()));
}
