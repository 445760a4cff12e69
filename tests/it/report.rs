//! Reports: sums that add up on paper, safe text, well-formed pages, sentences for every ending.

#[path = "report/sample.rs"]
mod sample;

use proptest::prelude::*;
use sample::{Scene, carry, chase, player, team};
use std::collections::BTreeSet;
use tailchase::base::V2;
use tailchase::model::{Ending, Field, Settings};
use tailchase::report::account::account;
use tailchase::report::rounding::round_together;
use tailchase::report::text::{fixed, number};
use tailchase::report::*;
use tailchase::store::rows::{FrameRow, PlayerRow, PursuitRow};

const HOSTILE: &str = "O'<xss a=\"1\">&amp;</script><script>alert(1)</script>\u{1b}[31m\u{202e}";

fn drawn_pair(scene: &Scene, id: &str, name: &str) -> (PursuitRow, Vec<FrameRow>) {
    chase(scene, "12", (id, name, "Herons", "FS"))
}

fn provenance() -> Provenance {
    Provenance {
        version: "0.0.0-test".into(),
        inputs: vec![InputFile { path: "games/<xss>.csv".into(), bytes: 12_345, hash: "abc".into() }],
        settings_note: "All settings at their defaults.".into(),
        rows_read: 100,
        rows_used: 97,
        rows_set_aside: 3,
        games: 1,
        plays: 2,
        carries: 2,
        pursuits: 9,
        findings: vec![FindingLine { kind: "exact_repeat".into(), count: 3, first_place: HOSTILE.into(), advice: "one kept".into() }],
        beyond_model_share: None,
    }
}

/// A page with hostile texts, missing values and numbers that are none.
fn hostile_page() -> String {
    let (mut row, mut frames) = drawn_pair(&Scene::LATE_AND_FLAT, "d1", HOSTILE);
    row.game = HOSTILE.into();
    row.carrier_name = Some(HOSTILE.into());
    row.steer_word = Some(HOSTILE.into());
    row.contact_angle_deg = Some(f64::NAN);
    frames[3].carrier_x_yd = f64::NAN;
    frames[4].need_yps = Some(f64::INFINITY);
    frames[5].bearing_deg = None;
    frames[6].bearing_sigma_deg = Some(f64::INFINITY);
    frames[7].time_s = f64::NAN;
    frames[8].defender_x_yd = -1e9;
    frames[9].chance = f64::NAN;
    let bare = PursuitRow {
        defender: "d2".into(),
        ending: HOSTILE.into(),
        met_x_yd: f64::NAN,
        closest_yd: f64::INFINITY,
        ..PursuitRow::default()
    };
    let one = [FrameRow::default()];
    let lone =
        PursuitRow { defender: "d3".into(), ending: "no_chance".into(), chance_lost_s: Some(f64::INFINITY), ..PursuitRow::default() };
    let mut blank = PlayerRow { rank: 3, player: HOSTILE.into(), ..PlayerRow::default() };
    blank.own_yd = Some(f64::NAN);
    let players = [player(1, "d1", HOSTILE, HOSTILE, 1.2, 20), player(2, "d2", "", "Herons", 2.0, 3), blank];
    let drawn =
        [DrawnPursuit { row: &row, frames: &frames }, DrawnPursuit { row: &bare, frames: &[] }, DrawnPursuit { row: &lone, frames: &one }];
    let mut costly = carry("12", 8.0);
    costly.stopped_by = Some(format!("d1;{HOSTILE}"));
    page(&provenance(), &players, &[team(1, HOSTILE, 1.0)], &drawn, &[costly, carry("13", f64::NAN)], &Settings::default())
}

/// Every element closed in order; texts of style and script are not looked into. Returns the opening tags.
fn tags(html: &str) -> Vec<String> {
    let (mut open, mut all, mut rest) = (Vec::<String>::new(), Vec::new(), html);
    while let Some(at) = rest.find('<') {
        let end = at + rest[at..].find('>').unwrap_or_else(|| panic!("a tag without an end: {:.60}", &rest[at..]));
        let tag = rest[at + 1..end].to_string();
        rest = &rest[end + 1..];
        if tag.starts_with('!') {
            continue;
        }
        assert_eq!(tag.matches('"').count() % 2, 0, "quotes of <{tag}>");
        if let Some(name) = tag.strip_prefix('/') {
            assert_eq!(open.pop().as_deref(), Some(name), "closed out of order before: {:.60}", rest);
            continue;
        }
        let name = tag.split_whitespace().next().unwrap_or_default().to_string();
        let is_void = ["meta", "input", "br"].contains(&name.as_str()) || tag.ends_with('/');
        if ["style", "script"].contains(&name.as_str()) {
            let close = rest.find(&format!("</{name}>")).expect("an end of the raw text");
            rest = &rest[close..];
        }
        if !is_void {
            open.push(name);
        }
        all.push(tag);
    }
    assert!(open.is_empty(), "left open: {open:?}");
    all
}

fn attribute<'a>(tag: &'a str, name: &str) -> Option<&'a str> {
    let start = tag.find(&format!(" {name}=\""))? + name.len() + 3;
    tag[start..].split('"').next()
}

#[test]
fn page_is_well_formed_and_safe_whatever_the_data() {
    let html = hostile_page();
    let tags = tags(&html);
    assert!(!tags.iter().any(|t| t.starts_with("xss")), "a name became markup");
    // Two pursuits have frames and so a viewer's data; the page's own script is the third.
    assert_eq!(tags.iter().filter(|t| t.starts_with("script")).count(), 3);
    assert!(!html.contains('\u{1b}') && !html.contains('\u{202e}'), "control characters reached the page");
    for word in html.split(|c: char| !c.is_alphanumeric()) {
        assert!(!["NaN", "inf", "Infinity", "None", "Some", "undefined"].contains(&word), "{word} on the page");
    }
}

#[test]
fn page_loads_nothing() {
    let html = hostile_page();
    for load in ["://", "src=", "url(", "@import", "<link", "<iframe", "fetch(", "XMLHttpRequest"] {
        assert!(!html.contains(load), "{load} on the page");
    }
    let refs: Vec<String> = tags(&html).iter().filter_map(|t| attribute(t, "href").map(String::from)).collect();
    assert!(refs.len() > 5 && refs.iter().all(|r| r.starts_with('#')), "{refs:?}");
}

#[test]
fn page_can_be_used_without_eyes_or_mouse() {
    let tags = tags(&hostile_page());
    let ids: Vec<&str> = tags.iter().filter_map(|t| attribute(t, "id")).collect();
    let unique: BTreeSet<&str> = ids.iter().copied().collect();
    assert_eq!(ids.len(), unique.len(), "an id given twice");
    for tag in &tags {
        let name = tag.split_whitespace().next().unwrap_or_default();
        match name {
            "svg" => assert!(tag.contains("role=\"img\"") && attribute(tag, "aria-label").is_some_and(|l| !l.is_empty()), "{tag}"),
            "th" => assert!(attribute(tag, "scope").is_some(), "{tag}"),
            "input" => assert!(attribute(tag, "aria-label").is_some(), "{tag}"),
            "a" => assert!(attribute(tag, "href").is_some_and(|h| unique.contains(&h[1..])), "{tag} leads nowhere"),
            _ => {}
        }
    }
}

#[test]
fn page_is_the_same_for_any_order_of_drawings_and_stays_small() {
    let made: Vec<_> =
        (0..60).map(|i| chase(&Scene::LATE_AND_FLAT, &i.to_string(), (&format!("d{i}"), "Teo Marrow", "Herons", "LB"))).collect();
    let players: Vec<_> = (0..60).map(|i| player(i + 1, &format!("d{i}"), "Teo Marrow", "Herons", 1.0 + 0.05 * i as f64, 20)).collect();
    let mut drawn: Vec<_> = made.iter().map(|(row, frames)| DrawnPursuit { row, frames }).collect();
    let draw = |drawn: &[DrawnPursuit]| page(&provenance(), &players, &[], drawn, &[], &Settings::default());
    let html = draw(&drawn);
    drawn.reverse();
    assert_eq!(draw(&drawn), html);
    assert!(html.len() < 3_000_000, "{} bytes", html.len());
    tags(&html);
}

#[test]
fn page_says_when_accounts_do_not_balance() {
    let (mut row, frames) = drawn_pair(&Scene::LATE_AND_FLAT, "d1", "Teo Marrow");
    let draw =
        |row: &PursuitRow, prov: &Provenance| page(prov, &[], &[], &[DrawnPursuit { row, frames: &frames }], &[], &Settings::default());
    assert!(!draw(&row, &provenance()).contains("does not balance"));
    assert!(draw(&row, &provenance()).contains("100 read = 97 used + 3 set aside"));
    let short = Provenance { rows_used: 90, ..provenance() };
    assert!(draw(&row, &short).contains("the row account does not balance: used and set aside make 93, read were 100"));
    row.conceded_yd = row.conceded_yd.map(|y| y + 1.0);
    assert!(draw(&row, &provenance()).contains("this account does not balance"));
}

fn printed_tenths(text: &str) -> i64 {
    text.replace('−', "-").replace('.', "").parse().expect("a printed number")
}

#[test]
fn printed_account_adds_up() {
    for scene in [Scene::LATE_AND_FLAT, Scene::SOUND, Scene::BLOCKED] {
        for shift in 0..40 {
            let scene =
                Scene { defender_from_yd: scene.defender_from_yd + V2::new(0.17 * f64::from(shift), -0.11 * f64::from(shift)), ..scene };
            let (row, _) = drawn_pair(&scene, "d1", "Teo Marrow");
            let account = account(&row, row.conceded_yd);
            let sum: i64 = account.lines.iter().map(|l| printed_tenths(&l.yards)).sum();
            assert_eq!(sum, printed_tenths(&account.total), "{account:?}");
            assert_eq!(account.total, fixed((row.conceded_yd.unwrap() * 10.0).round() / 10.0, 1));
        }
    }
}

proptest! {
    #[test]
    fn rounded_parts_make_the_rounded_total(parts in prop::collection::vec(prop::option::of(-60.0..60.0_f64), 1..7), decimals in 0..3_i32) {
        let total: f64 = parts.iter().flatten().sum();
        let r = round_together(&parts, total, decimals).expect("small numbers");
        prop_assert!(r.balanced);
        prop_assert_eq!(r.parts.iter().flatten().sum::<i64>(), r.total);
        let unit = 10f64.powi(decimals);
        prop_assert_eq!(r.total, (total * unit).round() as i64);
        for (exact, shown) in parts.iter().zip(&r.parts) {
            prop_assert_eq!(exact.is_some(), shown.is_some());
            if let (Some(e), Some(s)) = (exact, shown) {
                prop_assert!((e * unit - *s as f64).abs() < 1.0 + 1e-6, "{} became {}", e * unit, s);
            }
        }
    }

    /// The csv crate reads back what was written, and no text cell starts like a formula.
    #[test]
    fn csv_comes_back_and_runs_nothing(name in "\\PC{0,12}|[=+@\t\r\n-]\\PC{0,6}|[\", \r\n=]{0,6}", own in -5.0..5.0_f64) {
        let mut row = player(1, "=1+1", "", "-side", own, 20);
        row.name = Some(name.clone());
        let text = players_table(&[row], Format::Csv);
        let mut reader = csv::Reader::from_reader(text.as_bytes());
        let heads = reader.headers().unwrap().clone();
        let record = reader.records().next().expect("a row").unwrap();
        let get = |column: &str| &record[heads.iter().position(|h| h == column).expect("a column")];
        prop_assert_eq!(get("name"), csv_safe(&name));
        prop_assert_eq!(get("player"), "'=1+1");
        prop_assert_eq!(get("side"), "'-side");
        prop_assert!(!get("name").starts_with(['=', '+', '-', '@', '\t', '\r']));
        prop_assert_eq!(get("own_yd").parse::<f64>().unwrap(), own); // a negative number stays a number
    }
}

#[test]
fn csv_and_json_keep_missing_missing() {
    let row = PlayerRow { rank: 1, player: "d\"1".into(), own_yd: Some(f64::NAN), ..PlayerRow::default() };
    let csv = players_table(std::slice::from_ref(&row), Format::Csv);
    assert!(csv.starts_with("rank,rank_low,rank_high,player,name,") && csv.contains("\n1,0,0,\"d\"\"1\",,,,0,"), "{csv}");
    assert!(!csv.contains("NaN"));
    let json = players_table(&[row], Format::Json);
    let value: serde_json::Value = serde_json::from_str(&json).unwrap();
    assert_eq!(value[0]["player"], "d\"1");
    assert!(value[0]["own_yd"].is_null() && value[0]["name"].is_null());
    assert_eq!(teams_table(&[], Format::Json), "[]\n");
}

#[test]
fn terminal_table_shows_no_escape_codes_and_flags_too_few() {
    let players = [player(1, "d1", "Teo \u{1b}[2JMarrow", "Herons", -0.4, 22), player(2, "d2", "Bex Calloway", "Lanterns", 2.34, 3)];
    insta::assert_snapshot!(players_table(&players, Format::Table), @r#"
    rank  likely  player          side      pos  chances  stops  own yd    low  high  effic.   late   flat   deep   pace  block   move  note
    ----  ------  --------------  --------  ---  -------  -----  ------  -----  ----  ------  -----  -----  -----  -----  -----  -----  -------
       1  1 to 4  Teo �[2JMarrow  Herons    FS        22      7   −0.40  −1.12  0.32    0.93  −0.14  −0.16   0.03  −0.12  −0.05  −0.08
       2  1 to 5  Bex Calloway    Lanterns  LB         3      1    2.34   0.38  4.30    0.85   0.80   0.96  −0.14   0.73   0.28   0.44  too few
    "#);
}

fn clip_rows() -> Vec<PursuitRow> {
    let (mut late, _) = drawn_pair(&Scene::LATE_AND_FLAT, "d1", "Teo Marrow");
    let (mut sound, _) = drawn_pair(&Scene::SOUND, "d2", "-Bex Calloway");
    let (mut out, _) = drawn_pair(&Scene::BLOCKED, "d3", "Juno Pike");
    (late.play, late.film_s) = ("9".into(), Some(312.4));
    sound.play = "10".into();
    (out.play, out.ending, out.charged) = ("11".into(), "out_of_it".into(), false);
    vec![out, sound, late]
}

#[test]
fn clips_have_lead_and_tail_and_a_reason() {
    let rows = clip_rows();
    insta::assert_snapshot!(clips_table(&clips(&rows, &ClipFilter::default()), Format::Csv), @r#"
    game,play,from_s,to_s,clock,who,why,yards
    901,9,310.4,319.1,film,Teo Marrow,"chance lost at 2.1 s, after Corin Ashdown: late break 23.5 yd, flat line 3.7 yd, pace 1.0 yd, carrier's move 0.6 yd",28.001
    901,10,0,4.4,play,'-Bex Calloway,"stop, after Corin Ashdown: late break 1.7 yd",1.519
    "#);
    let plays = |want: ClipFilter| clips(&rows, &want).into_iter().map(|c| c.play).collect::<Vec<_>>();
    assert_eq!(plays(ClipFilter { order: ClipOrder::FilmOrder, ..ClipFilter::default() }), ["9", "10"], "9 runs before 10");
    assert_eq!(plays(ClipFilter { order: ClipOrder::BestFirst, limit: Some(1), ..ClipFilter::default() }), ["10"]);
    assert_eq!(plays(ClipFilter { ending: Some(Ending::OutOfIt), ..ClipFilter::default() }), ["11"], "uncharged ones when asked for");
    assert_eq!(plays(ClipFilter { player: Some("teo marrow".into()), ..ClipFilter::default() }), ["9"]);
    assert_eq!(plays(ClipFilter { heading: Some(Heading::Flat), ..ClipFilter::default() }), ["9"]);
    assert_eq!(plays(ClipFilter { min_yards: Some(1e6), ..ClipFilter::default() }), [""; 0]);
}

/// The row of the sentences: round numbers, so that each word can be checked by eye.
fn plain_row() -> PursuitRow {
    PursuitRow {
        game: "3".into(),
        play: "120".into(),
        carry: 1,
        pursuit: 4,
        carrier: "c7".into(),
        carrier_name: Some("Corin Ashdown".into()),
        defender: "d1".into(),
        defender_name: Some("Teo Marrow".into()),
        position: Some("FS".into()),
        ending: "chance_lost".into(),
        start_range_yd: 12.4,
        closest_yd: 2.6,
        on_course_share: 0.35,
        lean_deg: Some(-12.2),
        ideal_s: Some(2.31),
        ideal_x_yd: Some(69.2),
        ideal_y_yd: Some(30.0),
        met_s: 4.4,
        met_x_yd: 83.0,
        top_speed_yps: 20.6 * 22.0 / 45.0,
        top_speed_sigma_yps: 0.3,
        need_start_yps: Some(7.0),
        chance_start: 1.0,
        chance_lost_s: Some(2.1),
        chance_lost_need_yps: Some(22.1 * 22.0 / 45.0),
        clock_s: Some(0.3),
        break_s: Some(0.7),
        efficiency: Some(0.52),
        conceded_yd: Some(14.2),
        late_yd: Some(3.15),
        flat_yd: Some(9.03),
        deep_yd: Some(-0.2),
        pace_yd: Some(0.33),
        block_yd: Some(0.0),
        move_yd: Some(1.89),
        charged: true,
        ..PursuitRow::default()
    }
}

#[test]
fn sheet_of_a_lost_chance() {
    insta::assert_snapshot!(sheet(&plain_row(), &[], &Field::AMERICAN), @r#"
    Teo Marrow (FS) after Corin Ashdown
    game 3, play 120, carry 1, pursuit 4: chance lost

                       yards
      late break         3.2
      flat line          9.0
      deep line         −0.2  gain
      pace               0.3
      block              0.0
      carrier's move     1.9
                      ------
      conceded          14.2

      gap at the start        12.4 yd
      closest                 2.6 yd
      could have met him      at the defence's 41 after 2.3 s
      it ended                at the defence's 27 after 4.4 s
      needed at the start     14.3 mph
      top speed               20.6 ± 1.2 mph
      chance at the start     100 %
      last chance went        2.1 s
      clock starts, broke     0.3 s, 0.7 s
      lean                    12° flat
      on course               35 %
      tackling angle          –
      after contact           –
      efficiency              0.52
      steers as one who       –

    Had him at the defence's 41; broke 0.4 s late and ran 12° too flat until 2.1 s, when the last chance went: from there he would have needed 22.1 mph and has 20.6; conceded 14.2 yards, most of them to the flat line (9.0); gained 0.2 by the line.
    "#);
}

#[test]
fn sentences_for_every_ending() {
    let say = |change: fn(&mut PursuitRow)| {
        let mut row = plain_row();
        change(&mut row);
        sentence(&row, &[], &Field::AMERICAN)
    };
    let stop: fn(&mut PursuitRow) = |r| (r.ending, r.chance_lost_s, r.contact_angle_deg) = ("stop".into(), None, Some(95.0));
    insta::assert_snapshot!(say(stop), @r#"Had him at the defence's 41; broke 0.4 s late and ran 12° too flat, but made the stop at the defence's 27 after 4.4 s, from the side; conceded 14.2 yards, most of them to the flat line (9.0); gained 0.2 by the line."#);
    let perfect: fn(&mut PursuitRow) = |r| {
        (r.ending, r.chance_lost_s, r.break_s, r.lean_deg, r.conceded_yd) = ("stop".into(), None, Some(0.3), Some(0.4), Some(-2.1));
        (r.late_yd, r.flat_yd, r.deep_yd, r.pace_yd, r.move_yd) = (Some(0.0), Some(0.0), Some(0.0), Some(0.0), Some(-2.1));
    };
    insta::assert_snapshot!(say(perfect), @r#"Had him at the defence's 41; made the stop at the defence's 27 after 4.4 s; a gain of 2.1 yards on what the start promised, all of it by the carrier's own move."#);
    let contact: fn(&mut PursuitRow) =
        |r| (r.ending, r.chance_lost_s, r.after_contact_yd, r.chance_start) = ("contact_lost".into(), None, Some(6.3), 0.71);
    insta::assert_snapshot!(say(contact), @r#"Could have had him at the defence's 41 (chance 71 % at the start); broke 0.4 s late and ran 12° too flat; reached him at the defence's 27 after 4.4 s but lost the contact; 6.3 more yards after it, outside the account; conceded 14.2 yards, most of them to the flat line (9.0); gained 0.2 by the line."#);
    insta::assert_snapshot!(say(|r| (r.ending, r.need_start_yps) = ("no_chance".into(), Some(12.0))), @r#"Never had a chance: from the start he would have needed 24.5 mph and has 20.6; came no nearer than 2.6 yd; listed, not charged."#);
    insta::assert_snapshot!(say(|r| (r.ending, r.need_start_yps) = ("no_chance".into(), None)), @r#"Never had a chance: no speed would have met the carrier from there; came no nearer than 2.6 yd; listed, not charged."#);
    insta::assert_snapshot!(say(|r| (r.ending, r.block_yd) = ("out_of_it".into(), Some(5.0))), @r#"Out of it: held by a blocker for most of the carry; 5.0 yards went to the block; listed, not charged to him."#);
    let gone: fn(&mut PursuitRow) = |r| (r.chance_lost_s, r.break_s, r.ideal_x_yd, r.conceded_yd) = (None, None, None, None);
    insta::assert_snapshot!(say(gone), @r#"Had a chance of 100 % at the start; never broke on the ball, ran 12° too flat and let the chance go, 2.6 yd short of him at best; no account."#);
    insta::assert_snapshot!(say(|r| *r = PursuitRow { ending: "chance_lost".into(), top_speed_yps: f64::NAN, ..PursuitRow::default() }), @r#"Had a chance of 0 % at the start; let the chance go, 0.0 yd short of him at best; no account, as there was nothing to chase."#);
}

#[test]
fn missing_is_a_dash() {
    assert_eq!(number(None, 1), "–");
    assert_eq!(number(Some(f64::INFINITY), 1), "–");
    let empty = sheet(&PursuitRow { met_x_yd: f64::NAN, ..PursuitRow::default() }, &[], &Field::CANADIAN);
    assert!(empty.contains("conceded             –\n") && !empty.contains("NaN"), "{empty}");
}

/// The picture of the ranking: one dot and one pair of whiskers a player, hostile names harmless, nobody with too few.
#[test]
fn ranking_picture_shows_who_had_enough() {
    let player = |rank: i64, name: &str, too_few: bool| PlayerRow {
        rank,
        player: rank.to_string(),
        name: Some(name.to_string()),
        too_few,
        own_low_yd: Some(0.1),
        own_yd: Some(0.5 * rank as f64),
        own_high_yd: Some(rank as f64 + 0.2),
        ..PlayerRow::default()
    };
    let players = [player(1, "O'<b>&", false), player(2, "Brolo Tesk", false), player(3, "Seldom Seen", true)];
    let svg = tailchase::report::ranking_chart(&players).expect("two to show");
    assert_eq!(svg.matches("<circle").count(), 2);
    assert!(svg.contains("Brolo Tesk") && !svg.contains("Seldom Seen") && !svg.contains("<b>"));
    assert!(!svg.contains("NaN") && !svg.contains("inf"));
    assert!(tailchase::report::ranking_chart(&players[2..]).is_none());
}

/// Where pooling leaves nothing between the players the page says so, and only there.
#[test]
fn page_says_when_no_two_players_can_be_told_apart() {
    let player = |rank: i64, own_yd: f64| PlayerRow { rank, player: rank.to_string(), own_yd: Some(own_yd), ..PlayerRow::default() };
    let settings = tailchase::model::Settings::default();
    let of = |players: &[PlayerRow]| tailchase::report::page(&Default::default(), players, &[], &[], &[], &settings);
    let words = "tell no two players apart";
    assert!(of(&[player(1, 1.27), player(2, 1.27)]).contains(words));
    assert!(!of(&[player(1, 1.27), player(2, 1.31)]).contains(words));
    assert!(!of(&[player(1, 1.27)]).contains(words));
}
