//! One pursuit in one plain sentence, built from the row's own numbers.

use super::account::{Account, account, tenths_text};
use super::heading::Heading;
use super::spot::spot_words;
use super::text::{fixed, joined, percent, speed_mph};
use crate::model::Field;
use crate::store::rows::{FrameRow, PursuitRow};

/// Below this a delay or a lean is not worth a word: half of what is printed would be rounding.
const MIN_DELAY_S: f64 = 0.05;
const MIN_LEAN_DEG: f64 = 2.0;
/// Pace and block are named in the story from half a yard on.
const WORTH_A_WORD_TENTHS: i64 = 5;

/// What happened, what it cost, and by what: in words, with the printed numbers of the account.
///
/// `frames` fill in a needed speed or a smallest gap that the row lacks; they may be empty. Negative entries are
/// called gains. Missing values leave their clause out; nothing is made up.
pub fn sentence(row: &PursuitRow, frames: &[FrameRow], field: &Field) -> String {
    let account = account(row, row.conceded_yd);
    let story = match row.ending.as_str() {
        "no_chance" => no_chance(row, frames),
        "out_of_it" => out_of_it(row, &account),
        ending => chased(row, frames, ending, &account, field),
    };
    let cost = match row.ending.as_str() {
        "no_chance" => "; listed, not charged".to_string(),
        "out_of_it" => "; listed, not charged to him".to_string(),
        _ => cost(row, &account),
    };
    format!("{story}{cost}.")
}

fn no_chance(row: &PursuitRow, frames: &[FrameRow]) -> String {
    let mut out = match row.need_start_yps.filter(|n| n.is_finite()) {
        Some(need) => format!("Never had a chance: from the start {}", needed(need, row)),
        None => "Never had a chance: no speed would have met the carrier from there".to_string(),
    };
    if let Some(gap) = closest_yd(row, frames) {
        out += &format!("; came no nearer than {} yd", fixed(gap, 1));
    }
    out
}

fn out_of_it(row: &PursuitRow, account: &Account) -> String {
    let mut out = "Out of it: held by a blocker for most of the carry".to_string();
    if let Some(block) = account.lines[Heading::Block as usize].tenths {
        out += &match block {
            b if b > 0 => format!("; {} yards went to the block", tenths_text(Some(b))),
            b if b < 0 => format!("; the block cost nothing (a gain of {})", tenths_text(Some(-b))),
            _ => "; the block cost nothing".to_string(),
        };
    } else if row.conceded_yd.is_none() {
        out += "; no account";
    }
    out
}

fn chased(row: &PursuitRow, frames: &[FrameRow], ending: &str, account: &Account, field: &Field) -> String {
    let opening = opening(row, field);
    let faults = faults(row, account);
    let what = match ending {
        "stop" => {
            let stop = format!("made the stop at {} after {} s{}", spot(row.met_x_yd, field), fixed(row.met_s, 1), contact(row));
            with_faults(&faults, ", but ", &stop)
        }
        "contact_lost" => {
            let after = match row.after_contact_yd.filter(|y| y.is_finite()) {
                Some(y) if y >= 0.05 => format!("; {} more yards after it, outside the account", fixed(y, 1)),
                _ => String::new(),
            };
            let lost = format!(
                "reached him at {} after {} s{} but lost the contact{after}",
                spot(row.met_x_yd, field),
                fixed(row.met_s, 1),
                contact(row)
            );
            with_faults(&faults, "; ", &lost)
        }
        "chance_lost" => lost_chance(row, frames, &faults),
        other => with_faults(&faults, "; ", &format!("ended as \"{}\"", super::text::shown(other))),
    };
    format!("{opening}; {what}")
}

/// Where he could have had him, or the chance at the start where no meeting point is known.
fn opening(row: &PursuitRow, field: &Field) -> String {
    let chance = row.chance_start;
    match row.ideal_x_yd.filter(|x| x.is_finite()) {
        Some(x) if chance >= 0.95 => format!("Had him at {}", spot_words(Some(x), field)),
        Some(x) => format!("Could have had him at {} (chance {} at the start)", spot_words(Some(x), field), percent(Some(chance))),
        None => format!("Had a chance of {} at the start", percent(Some(chance))),
    }
}

/// What went wrong, as verbs; empty when nothing is known or nothing stands out. A delay or a lean is named only
/// where its heading cost something, so that a man held by a blocker is not said to have broken late.
fn faults(row: &PursuitRow, account: &Account) -> Vec<String> {
    let tenths = |h: Heading| account.lines[h as usize].tenths;
    let cost = |h: Heading| tenths(h).is_none_or(|t| t > 0);
    let mut out = Vec::new();
    match (row.clock_s, row.break_s) {
        (Some(clock), Some(broke)) if broke - clock >= MIN_DELAY_S && cost(Heading::Late) => {
            out.push(format!("broke {} s late", fixed(broke - clock, 1)));
        }
        (Some(_), None) if cost(Heading::Late) => out.push("never broke on the ball".into()),
        _ => {}
    }
    match row.lean_deg.filter(|l| l.is_finite()) {
        Some(lean) if lean <= -MIN_LEAN_DEG && cost(Heading::Flat) => out.push(format!("ran {}° too flat", fixed(-lean, 0))),
        Some(lean) if lean >= MIN_LEAN_DEG && cost(Heading::Deep) => out.push(format!("ran {}° too deep", fixed(lean, 0))),
        _ => {}
    }
    if tenths(Heading::Pace).is_some_and(|t| t >= WORTH_A_WORD_TENTHS) {
        out.push("held back pace".into());
    }
    if tenths(Heading::Block).is_some_and(|t| t >= WORTH_A_WORD_TENTHS) {
        out.push("was held by a blocker".into());
    }
    out
}

fn with_faults(faults: &[String], link: &str, rest: &str) -> String {
    if faults.is_empty() { rest.to_string() } else { format!("{}{link}{rest}", joined(faults)) }
}

fn lost_chance(row: &PursuitRow, frames: &[FrameRow], faults: &[String]) -> String {
    let did = joined(faults);
    let Some(lost_s) = row.chance_lost_s.filter(|s| s.is_finite()) else {
        let gap = closest_yd(row, frames).map(|g| format!(", {} yd short of him at best", fixed(g, 1))).unwrap_or_default();
        let let_go = format!("let the chance go{gap}");
        return joined(&faults.iter().cloned().chain([let_go]).collect::<Vec<String>>());
    };
    let until = format!("{} s, when the last chance went", fixed(lost_s, 1));
    let need = match need_after_yps(row, frames) {
        Some(need) => format!(": from there {}", needed(need, row)),
        None => String::new(),
    };
    if did.is_empty() { format!("had him until {until}{need}") } else { format!("{did} until {until}{need}") }
}

fn need_after_yps(row: &PursuitRow, frames: &[FrameRow]) -> Option<f64> {
    let from_frames = || {
        let lost = row.chance_lost_frame?;
        frames.iter().filter(|f| f.frame > lost).min_by_key(|f| f.frame)?.need_yps
    };
    row.chance_lost_need_yps.or_else(from_frames).filter(|n| n.is_finite())
}

fn closest_yd(row: &PursuitRow, frames: &[FrameRow]) -> Option<f64> {
    let from_frames = || frames.iter().map(|f| f.range_yd).filter(|r| r.is_finite()).min_by(f64::total_cmp);
    Some(row.closest_yd).filter(|c| c.is_finite()).or_else(from_frames)
}

/// A needed speed beside his top speed; the two often lie within a printed digit where the last chance goes.
fn needed(need_yps: f64, row: &PursuitRow) -> String {
    let (need, top) = (speed_mph(Some(need_yps)), speed_mph(Some(row.top_speed_yps)));
    if !row.top_speed_yps.is_finite() {
        format!("he would have needed {need} mph")
    } else if need == top {
        format!("he would have needed {need} mph, a shade above his top speed")
    } else {
        format!("he would have needed {need} mph and has {top}")
    }
}

fn spot(x_yd: f64, field: &Field) -> String {
    spot_words(Some(x_yd), field)
}

/// From where the contact came: a geometry of paths, in thirds of the half turn.
fn contact(row: &PursuitRow) -> String {
    match row.contact_angle_deg.filter(|a| a.is_finite()) {
        Some(a) if a < 60.0 => ", head on".into(),
        Some(a) if a <= 120.0 => ", from the side".into(),
        Some(_) => ", from behind".into(),
        None => String::new(),
    }
}

/// The total and what most of it went to, with the numbers that the account prints.
fn cost(row: &PursuitRow, account: &Account) -> String {
    let Some(total) = account.total_tenths else {
        return if row.clock_s.is_none() { "; no account, as there was nothing to chase" } else { "; no account" }.into();
    };
    let mut out = match total {
        t if t > 0 => format!("; conceded {} yards", tenths_text(Some(t))),
        t if t < 0 => format!("; a gain of {} yards on what the start promised", tenths_text(Some(-t))),
        _ => "; conceded nothing in all".into(),
    };
    let alone = account.lines.iter().filter(|l| l.tenths.is_some_and(|t| t != 0)).count() == 1;
    let biggest = account.lines.iter().zip(Heading::ALL).max_by_key(|(l, h)| (l.tenths.unwrap_or(0), std::cmp::Reverse(*h as usize)));
    if let Some((line, heading)) = biggest.filter(|(l, _)| total > 0 && l.tenths.unwrap_or(0) > 0) {
        let most = line.tenths.unwrap_or(0);
        let what = heading.in_a_sentence();
        out += &match () {
            () if alone => format!(", all of them to {what}"),
            // Gains elsewhere leave the sum below its largest entry.
            () if most >= total => format!(", with {} to {what}", line.yards),
            () if 2 * most > total => format!(", most of them to {what} ({})", line.yards),
            () => format!(", the largest part to {what} ({})", line.yards),
        };
    }
    let gains: Vec<String> = account
        .lines
        .iter()
        .zip(Heading::ALL)
        .filter_map(|(l, h)| l.tenths.filter(|t| *t < 0).map(|t| format!("{} by {}", tenths_text(Some(-t)), gain_by(h))))
        .collect();
    match gains.as_slice() {
        [] => {}
        [_] if alone && total < 0 => out += &format!(", all of it by {}", biggest_gain(account)),
        several => out += &format!("; gained {}", joined(several)),
    }
    out
}

fn biggest_gain(account: &Account) -> &'static str {
    let lowest = account.lines.iter().zip(Heading::ALL).min_by_key(|(l, _)| l.tenths.unwrap_or(0));
    lowest.map_or("", |(_, heading)| gain_by(heading))
}

/// A negative entry is ground won.
fn gain_by(heading: Heading) -> &'static str {
    match heading {
        Heading::Late => "the start",
        Heading::Flat | Heading::Deep => "the line",
        Heading::Pace => "pace",
        Heading::Block => "the step out of the block",
        Heading::Move => "the carrier's own move",
    }
}
