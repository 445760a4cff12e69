//! What real files do, done to a clean game: no carry and no pursuit may get lost, the measures stay, the finding is named.

use crate::road::{Audited, audit_rows};
use std::collections::{BTreeMap, BTreeSet};
use std::sync::OnceLock;
use tailchase::demo::untidy::{Mess, carriers, spoil};
use tailchase::demo::{DemoGame, DemoOptions, DemoRow, generate_game, rows};
use tailchase::model::SetAside;
use tailchase::pipeline::FramesMode;
use tailchase::store::{CarryRow, PursuitRow};

/// A start or an end may move by the frame that is missing or moved.
const CARRY_FRAMES: i64 = 1;
/// Share of the pairs whose first pursuit starts and ends in the same frames, up to one: the others have lost the rows of a
/// second or more, and are followed from where they are seen again.
const SAME_SPAN: f64 = 0.9;
/// Of these, the share with the same ending: an ending turns on thresholds (a gap within the reach, a chance that just never
/// was), and where a frame is missing or 0.1 yd off some stand on the other side of one.
const SAME_ENDING: f64 = 0.95;
/// The same for everything at once.
const SAME_ENDING_OF_ALL: f64 = 0.92;
/// Yards conceded and range at the start, nine in ten: three sigmas of a smoothed place at 0.05 yd of noise.
const NINE_IN_TEN_YD: f64 = 0.12;
/// The same, 49 in 50: where one step changes its heading of the account, or the account starts a frame later at 8 yd/s.
const NEARLY_ALL_YD: f64 = 0.8;
/// Tackling angle, nine in ten: the bearings of two velocities, each known to 0.1 yd/s or better than 2 % of its size.
const NINE_IN_TEN_DEG: f64 = 6.0;
/// Rows of the two small kinds of damage that are found and named: some hit frames of which too few neighbours are left.
const FOUND_SHARE: f64 = 0.97;

struct Clean {
    game: DemoGame,
    audited: Audited,
}

fn clean() -> &'static Clean {
    static CLEAN: OnceLock<Clean> = OnceLock::new();
    CLEAN.get_or_init(|| {
        let game = generate_game(0, &DemoOptions { seed: 4, plays_per_game: 40, ..DemoOptions::default() });
        let audited = audit_rows(&rows(&game), FramesMode::None);
        assert!(audited.carries.len() > 30 && audited.pursuits.len() > 350);
        Clean { game, audited }
    })
}

struct Spoiled {
    audited: Audited,
    rows: Vec<DemoRow>,
    /// Rows added, dropped or changed, by kind.
    changed: BTreeMap<Mess, usize>,
    /// By how much the file's frame numbers are higher than the clean ones.
    shift: i64,
}

fn spoiled(messes: &[Mess]) -> Spoiled {
    let clean = clean();
    let mut all = rows(&clean.game);
    let spared = carriers(&clean.game);
    let changed: BTreeMap<Mess, usize> = messes.iter().map(|mess| (*mess, spoil(&mut all, *mess, &spared, 7))).collect();
    assert!(changed.values().all(|n| *n > 20), "{changed:?}");
    let by = |mess: Mess, frames: i64| if messes.contains(&mess) { frames } else { 0 };
    // 20 s at 10 Hz.
    let shift = by(Mess::Huddle, 200) + by(Mess::FramesFromZero, -1) + by(Mess::FramesFromFive, 4);
    Spoiled { audited: audit_rows(&all, FramesMode::None), rows: all, changed, shift }
}

fn same_carries(spoiled: &Spoiled) {
    let key = |c: &CarryRow| (c.play.clone(), c.carry, c.carrier.clone(), c.attack.clone());
    let of = |a: &Audited| a.carries.iter().map(|c| (key(c), (c.start_frame, c.end_frame))).collect::<BTreeMap<_, _>>();
    let (before, after) = (of(&clean().audited), of(&spoiled.audited));
    assert_eq!(before.keys().collect::<Vec<_>>(), after.keys().collect::<Vec<_>>());
    for (carry, (start, end)) in &before {
        let (new_start, new_end) = (after[carry].0 - spoiled.shift, after[carry].1 - spoiled.shift);
        let near = (new_start - start).abs() <= CARRY_FRAMES && (new_end - end).abs() <= CARRY_FRAMES;
        assert!(near, "{carry:?}: {start} to {end}, then {new_start} to {new_end}");
    }
}

type Pair = (String, i64, String);

/// The first pursuit of each defender against each carry.
fn firsts(pursuits: &[PursuitRow]) -> BTreeMap<Pair, &PursuitRow> {
    let mut out = BTreeMap::new();
    for p in pursuits {
        out.entry((p.play.clone(), p.carry, p.defender.clone())).or_insert(p);
    }
    out
}

/// Pairs of (clean, spoiled) pursuits; the pairs must be the same but for movers who are gone.
fn pairs(spoiled: &Spoiled) -> Vec<(&PursuitRow, &PursuitRow)> {
    let plain = |id: &str| id.strip_suffix(".0").unwrap_or(id).to_owned();
    let present: BTreeSet<(String, String)> = spoiled.rows.iter().map(|r| (r.play_id.clone(), plain(&r.mover_id))).collect();
    let mut before = firsts(&clean().audited.pursuits);
    before.retain(|(play, _, defender), _| present.contains(&(play.clone(), defender.clone())));
    let after = firsts(&spoiled.audited.pursuits);
    assert_eq!(before.keys().collect::<Vec<_>>(), after.keys().collect::<Vec<_>>());
    before.iter().map(|(pair, a)| (*a, after[pair])).collect()
}

fn same_pursuits(spoiled: &Spoiled, same_ending: f64) {
    let all = pairs(spoiled);
    let share = |n: usize, of: usize| n as f64 / of as f64;
    let near = |a: i64, b: i64| (b - spoiled.shift - a).abs() <= CARRY_FRAMES;
    let spans: Vec<_> = all.iter().filter(|(a, b)| near(a.start_frame, b.start_frame) && near(a.end_frame, b.end_frame)).copied().collect();
    assert!(share(spans.len(), all.len()) >= SAME_SPAN, "{} of {} spans the same", spans.len(), all.len());
    let endings = spans.iter().filter(|(a, b)| a.ending == b.ending).count();
    assert!(share(endings, spans.len()) >= same_ending, "{endings} of {} endings the same", spans.len());
    let within = |what: &str, of: fn(&PursuitRow) -> Option<f64>, at: f64, most: f64| {
        let mut off: Vec<f64> = spans.iter().filter_map(|(a, b)| Some((of(a)? - of(b)?).abs())).collect();
        off.sort_by(f64::total_cmp);
        let found = off[(at * (off.len() - 1) as f64).round() as usize];
        assert!(off.len() > 50 && found <= most, "{what}: {at} of {} within {found:.3}, expected {most}", off.len());
    };
    within("conceded", |p| p.conceded_yd, 0.9, NINE_IN_TEN_YD);
    within("conceded", |p| p.conceded_yd, 0.98, NEARLY_ALL_YD);
    within("flat", |p| p.flat_yd, 0.98, NEARLY_ALL_YD);
    within("late", |p| p.late_yd, 0.98, NEARLY_ALL_YD);
    within("range", |p| Some(p.start_range_yd), 0.9, NINE_IN_TEN_YD);
    within("angle", |p| p.contact_angle_deg, 0.9, NINE_IN_TEN_DEG);
}

/// The very same figures: the untidiness says nothing about where anybody was.
fn equal_pursuits(spoiled: &Spoiled) {
    let said = |p: &PursuitRow, shift: i64| PursuitRow {
        start_frame: p.start_frame - shift,
        end_frame: p.end_frame - shift,
        chance_lost_frame: p.chance_lost_frame.map(|f| f - shift),
        ..p.clone()
    };
    let (before, after) = (&clean().audited.pursuits, &spoiled.audited.pursuits);
    assert_eq!(before.len(), after.len());
    for (a, b) in before.iter().zip(after) {
        assert_eq!(*a, said(b, spoiled.shift));
    }
}

/// Every row is accounted for, and the findings are those of the clean file but for the kinds given.
fn accounted(spoiled: &Spoiled, named: &[&str]) {
    let rows = &spoiled.audited.info.rows;
    assert!(rows.balances() && rows.read == spoiled.rows.len() as u64, "{rows:?} of {} rows", spoiled.rows.len());
    let (before, after) = (clean().audited.findings(), spoiled.audited.findings());
    for kind in named {
        assert!(after.get(kind) > before.get(kind), "{kind} is not named: {after:?}");
    }
    let others = |of: BTreeMap<&str, u64>| -> Vec<(String, u64)> {
        of.into_iter().filter(|(kind, _)| !named.contains(kind)).map(|(kind, n)| (kind.to_owned(), n)).collect()
    };
    assert_eq!(others(before), others(after));
}

/// One test for each kind: what it may change, and the findings that must name it.
macro_rules! kinds {
    ($($name:ident: $mess:ident, $measures:ident, [$($kind:literal),*];)*) => {
        $(#[test]
        fn $name() {
            let spoiled = spoiled(&[Mess::$mess]);
            same_carries(&spoiled);
            $measures(&spoiled);
            accounted(&spoiled, &[$($kind),*]);
        })*

        #[test]
        fn every_kind_has_its_test() {
            let tested = BTreeSet::from([$(Mess::$mess),*]);
            assert_eq!(tested, BTreeSet::from(Mess::ALL));
        }
    };
}

fn near_pursuits(spoiled: &Spoiled) {
    same_pursuits(spoiled, SAME_ENDING);
}

kinds! {
    huddle: Huddle, near_pursuits, [];
    uneven_steps: UnevenSteps, near_pursuits, ["uneven_steps"];
    ball_runs_on: BallRunsOn, equal_pursuits, ["ball_runs_on"];
    bench_and_tunnel: BenchRows, near_pursuits, ["off_field", "name_conflict"];
    two_events_close: TwoEventsClose, equal_pursuits, [];
    unmarked_scores: UnmarkedScores, equal_pursuits, [];
    sparse_events: SparseEvents, equal_pursuits, [];
    free_text: FreeText, equal_pursuits, [];
    frame_missing_for_all: FrameMissingForAll, near_pursuits, ["frame_missing_for_all"];
    missing_players: MissingPlayers, near_pursuits, ["fewer_players"];
    ragged_starts: RaggedStarts, near_pursuits, ["ragged_start"];
    ragged_ends: RaggedEnds, near_pursuits, ["ragged_end"];
    short_gaps: ShortGaps, near_pursuits, ["gap_bridged"];
    long_gaps: LongGaps, near_pursuits, ["gap_split"];
    jumps: Jumps, near_pursuits, ["jump", "gap_bridged", "off_field"];
    conflicting_repeats: ConflictingRepeats, near_pursuits, ["conflicting_repeat"];
    exact_repeats: ExactRepeats, equal_pursuits, ["exact_repeat"];
    frames_from_zero: FramesFromZero, equal_pursuits, [];
    frames_from_five: FramesFromFive, equal_pursuits, [];
    decimal_ids: DecimalIds, equal_pursuits, [];
    play_given_twice: PlayTwice, equal_pursuits, ["play_given_twice", "exact_repeat"];
    shuffled_rows: ShuffledRows, equal_pursuits, [];
}

#[test]
fn everything_at_once() {
    let spoiled = spoiled(&Mess::ALL);
    same_carries(&spoiled);
    same_pursuits(&spoiled, SAME_ENDING_OF_ALL);
    let rows = &spoiled.audited.info.rows;
    assert!(rows.balances() && rows.read == spoiled.rows.len() as u64, "{rows:?}");
    let named = spoiled.audited.findings();
    let expected = [
        "exact_repeat",
        "conflicting_repeat",
        "jump",
        "gap_bridged",
        "gap_split",
        "frame_missing_for_all",
        "play_given_twice",
        "ragged_start",
        "ragged_end",
        "ball_runs_on",
        "fewer_players",
        "off_field",
        "uneven_steps",
    ];
    let absent: Vec<&str> = expected.into_iter().filter(|kind| !named.contains_key(kind)).collect();
    assert!(absent.is_empty(), "{absent:?} of {named:?}");
}

/// Rows that are too many or in the wrong place are set aside, those and hardly any other.
#[test]
fn what_is_damaged_is_set_aside_and_no_more() {
    for (mess, reason) in [
        (Mess::Jumps, SetAside::Jump),
        (Mess::ConflictingRepeats, SetAside::ConflictingRepeat),
        (Mess::ExactRepeats, SetAside::ExactRepeat),
        (Mess::PlayTwice, SetAside::ExactRepeat),
    ] {
        let spoiled = spoiled(&[mess]);
        let done = spoiled.changed[&mess] as f64;
        let set_aside = &spoiled.audited.info.rows.set_aside;
        let found = set_aside.get(reason.word()).copied().unwrap_or(0) as f64;
        let others = spoiled.audited.info.rows.set_aside_total() as f64 - found;
        assert!((FOUND_SHARE * done..=done / FOUND_SHARE).contains(&found), "{mess:?}: {done} rows, {set_aside:?}");
        assert!(others <= (1.0 - FOUND_SHARE) * done, "{mess:?}: {set_aside:?}");
    }
}
