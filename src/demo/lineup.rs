//! Who is on the field and where he stands before the play; the side that starts attacks +x.
//!
//! Actors 0 to 10 are the side that starts with the ball (or kicks), 11 to 21 the other one.

use super::league::{Athlete, shuffle};
use super::stage::Actor;
use crate::base::{Stream, V2};

pub const QB: usize = 0;
pub const RB: usize = 1;
/// Wide left, wide right, slot.
pub const WR: [usize; 3] = [2, 3, 4];
pub const TE: usize = 5;
/// Left tackle, left guard, centre, right guard, right tackle.
pub const OL: [usize; 5] = [6, 7, 8, 9, 10];
pub const DE: [usize; 2] = [11, 12];
pub const DT: [usize; 2] = [13, 14];
/// Left of the offence, middle, right.
pub const LB: [usize; 3] = [15, 16, 17];
pub const CB: [usize; 2] = [18, 19];
pub const SAFETY: [usize; 2] = [20, 21];
/// On kicks: the one who snaps to the punter, and the one who receives.
pub const SNAPPER: usize = 1;
pub const RETURNER: usize = 11;

/// The two squads of a game; `attack` has the ball (or kicks).
#[derive(Clone, Copy)]
pub struct Teams<'a> {
    pub attack: &'a [Athlete],
    pub defend: &'a [Athlete],
    pub attack_home: bool,
}

/// A formation with the ball on its spot.
pub struct Lineup<'a> {
    pub actors: Vec<Actor<'a>>,
    pub ball_yd: V2,
}

fn pick<'a>(squad: &'a [Athlete], wanted: &[(&str, usize)], draws: &mut Stream) -> Vec<&'a Athlete> {
    let mut picked = Vec::with_capacity(11);
    for (position, count) in wanted {
        let mut all: Vec<&Athlete> = squad.iter().filter(|a| &*a.position == *position).collect();
        shuffle(&mut all, draws);
        picked.extend(all.into_iter().take(*count));
    }
    picked
}

fn placed<'a>(athletes: Vec<&'a Athlete>, home: bool, spots: &[(f64, f64)], draws: &mut Stream) -> Vec<Actor<'a>> {
    let mut place = |spot: &(f64, f64)| V2::new(spot.0 + draws.between(-0.25, 0.25), spot.1 + draws.between(-0.25, 0.25));
    athletes.into_iter().zip(spots).map(|(athlete, spot)| Actor::new(athlete, home, place(spot))).collect()
}

/// Both sides at a line of scrimmage at `line_yd`.
pub fn scrimmage<'a>(teams: Teams<'a>, line_yd: f64, draws: &mut Stream) -> Lineup<'a> {
    let mid_yd = draws.between(22.0, 31.0);
    let wide = (mid_yd + draws.between(15.0, 19.0), mid_yd - draws.between(15.0, 19.0));
    let flank = if draws.chance(0.5) { 1.0 } else { -1.0 };
    let slot_yd = mid_yd - flank * draws.between(7.5, 10.0);
    let x = line_yd;
    let attack_spots = [
        (x - 4.6, mid_yd),
        (x - 5.2, mid_yd + flank * 1.6),
        (x - 0.8, wide.0),
        (x - 0.8, wide.1),
        (x - 1.2, slot_yd),
        (x - 0.9, mid_yd + flank * 4.6),
        (x - 1.1, mid_yd + 3.0),
        (x - 0.9, mid_yd + 1.5),
        (x - 0.7, mid_yd),
        (x - 0.9, mid_yd - 1.5),
        (x - 1.1, mid_yd - 3.0),
    ];
    let cushion_yd = draws.between(3.5, 7.5);
    let depth_yd = draws.between(9.0, 14.0);
    let defend_spots = [
        (x + 0.9, mid_yd + 4.2),
        (x + 0.9, mid_yd - 4.2),
        (x + 0.8, mid_yd + 1.4),
        (x + 0.8, mid_yd - 1.4),
        (x + 4.6, mid_yd + 4.5),
        (x + 4.8, mid_yd),
        (x + 4.6, mid_yd - 4.5),
        (x + cushion_yd, wide.0 - 0.8),
        (x + cushion_yd, wide.1 + 0.8),
        (x + depth_yd, mid_yd + 8.0),
        (x + depth_yd + 1.0, mid_yd - 8.0),
    ];
    let attack = pick(teams.attack, &[("QB", 1), ("RB", 1), ("WR", 3), ("TE", 1), ("T", 2), ("G", 2), ("C", 1)], draws);
    let attack = in_line(attack);
    let defend = pick(teams.defend, &[("DE", 2), ("DT", 2), ("LB", 3), ("CB", 2), ("S", 2)], draws);
    let mut actors = placed(attack, teams.attack_home, &attack_spots, draws);
    actors.extend(placed(defend, !teams.attack_home, &defend_spots, draws));
    Lineup { actors, ball_yd: V2::new(x - 0.3, mid_yd) }
}

/// Two tackles, two guards and a centre, as drawn, put in the order in which they stand.
fn in_line(mut drawn: Vec<&Athlete>) -> Vec<&Athlete> {
    if drawn.len() == 11 {
        let line = [drawn[6], drawn[8], drawn[10], drawn[9], drawn[7]];
        drawn.splice(6.., line);
    }
    drawn
}

/// A kick-off from the kicking side's 25-yard mark of the field (x = 35).
pub fn kickoff<'a>(teams: Teams<'a>, draws: &mut Stream) -> Lineup<'a> {
    let kick_spots: Vec<(f64, f64)> = std::iter::once((28.0, 26.0)).chain((0..10).map(|k| (34.0, 4.0 + 5.0 * k as f64))).collect();
    let mut receive_spots: Vec<(f64, f64)> = vec![(103.0, draws.between(20.0, 33.0))];
    receive_spots.extend((0..6).map(|k| (49.0 + (k % 2) as f64 * 3.0, 8.0 + 7.4 * k as f64)));
    receive_spots.extend((0..4).map(|k| (72.0 + (k % 2) as f64 * 8.0, 12.0 + 9.5 * k as f64)));
    kicks(teams, &kick_spots, &receive_spots, V2::new(35.0, 26.6), "K", draws)
}

/// A punt from a line of scrimmage at `line_yd`.
pub fn punt<'a>(teams: Teams<'a>, line_yd: f64, draws: &mut Stream) -> Lineup<'a> {
    let mid_yd = draws.between(23.0, 30.0);
    let x = line_yd;
    let mut kick_spots = vec![(x - 14.0, mid_yd), (x - 0.7, mid_yd), (x - 0.8, 4.5), (x - 0.8, 48.8)];
    kick_spots.extend([-6.0, -4.5, -3.0, -1.5, 1.5, 3.0, 4.5].map(|dy| (x - 1.0, mid_yd + dy)));
    let mut receive_spots = vec![((x + 44.0).min(108.0), mid_yd + draws.between(-6.0, 6.0))];
    receive_spots.extend([(x + 1.0, 5.5), (x + 1.0, 47.8), (x + 2.5, 7.0)]);
    receive_spots.extend([-6.0, -4.0, -2.0, 0.0, 2.0, 4.0, 6.0].map(|dy| (x + 1.0, mid_yd + dy)));
    kicks(teams, &kick_spots, &receive_spots, V2::new(x - 0.3, mid_yd), "P", draws)
}

fn kicks<'a>(
    teams: Teams<'a>,
    kick_spots: &[(f64, f64)],
    receive_spots: &[(f64, f64)],
    ball_yd: V2,
    kicker: &str,
    draws: &mut Stream,
) -> Lineup<'a> {
    let cover = pick(teams.attack, &[(kicker, 1), ("LB", 4), ("CB", 3), ("S", 3)], draws);
    let receive = pick(teams.defend, &[("WR", 1), ("RB", 2), ("TE", 2), ("LB", 3), ("S", 3)], draws);
    let mut actors = placed(cover, teams.attack_home, kick_spots, draws);
    actors.extend(placed(receive, !teams.attack_home, receive_spots, draws));
    Lineup { actors, ball_yd }
}
