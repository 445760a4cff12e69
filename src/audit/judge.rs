//! The judgement: pursuits of every carry with their measures, accounts and endings.

use super::measures::{Look, fill_geometry, fill_textbook, looks, steering};
use super::prepare::Prepared;
use super::smoothing::Smoothed;
use super::turned::{turned_states, turned_vector};
use crate::base::V2;
use crate::carry::{find_pursuits, stoppers};
use crate::engine::bearing::ONE_SIDED;
use crate::engine::capability::group_top_yps;
use crate::engine::chase::Chase;
use crate::engine::ledger::{Chaser, Ledger, contact_spot_yd, keep};
use crate::engine::outcome::{Chance, chance, efficiency, leans_rad, need_peak_yps};
use crate::engine::path::TopSpeed;
use crate::engine::reach::State;
use crate::model::{Attack, Carry, CarryEnd, Ending, MoverTrack, Play, Pursuit, Settings, Track};
use crate::stats::Circular;
use crate::store::{CarryRow, PursuitRow};
use std::collections::BTreeMap;
use std::sync::Arc;

/// One play's audit.
#[derive(Debug, Default)]
pub struct PlayAudit {
    pub carries: Vec<CarryAudit>,
    /// Frames above 3 yd/s, and those of them in which a player out-did his own model.
    pub model_frames: u64,
    pub beyond_model_frames: u64,
}

/// A carry and its pursuits.
#[derive(Debug)]
pub struct CarryAudit {
    pub row: CarryRow,
    pub pursuits: Vec<PursuitAudit>,
    pub chase: Chase,
    /// The carry's first frame index in the play.
    pub start: usize,
}

/// A pursuit's row, and what its frames are written from.
#[derive(Debug)]
pub struct PursuitAudit {
    pub row: PursuitRow,
    pub ledger: Ledger,
    pub looks: Vec<Look>,
    pub states: Vec<State>,
    pub blocked: Vec<bool>,
    /// First state, counted from the carry's start.
    pub first: usize,
}

/// Judges a play. `tops` are the top speeds of the game's players; one who is not in it has his position group's.
pub fn judge(play: &Play, prepared: &Prepared, smoothed: &Smoothed, tops: &BTreeMap<Arc<str>, TopSpeed>, settings: &Settings) -> PlayAudit {
    let mut audit = PlayAudit::default();
    let mut number = 0;
    for carry in &prepared.carries {
        let Some(runner) = smoothed.tracks[carry.carrier].at(carry.start).filter(|t| t.covers(carry.end)) else { continue };
        let field = settings.field();
        let states = turned_states(runner, carry.start, carry.end, carry.attack, &field);
        let carrier_top = top_of(play, carry.carrier, tops, settings);
        let chase = Chase::new(&play.time_s[carry.start..=carry.end], states, carrier_top.yps, settings);
        let pursuits = find_pursuits(play, &smoothed.tracks, carry, &settings.carry);
        let stopped_by = stoppers(&pursuits, carry);
        let scene = Scene { play, carry, chase: &chase, tracks: &smoothed.tracks, pursuits: &pursuits, stopped_by: &stopped_by, settings };
        let mut judged = Vec::with_capacity(pursuits.len());
        for pursuit in &pursuits {
            number += 1;
            let top = top_of(play, pursuit.defender, tops, settings);
            judged.extend(scene.judge(pursuit, number, top, carrier_top, &mut audit));
        }
        let row = scene.carry_row(&judged);
        audit.carries.push(CarryAudit { row, pursuits: judged, chase, start: carry.start });
    }
    audit
}

fn top_of(play: &Play, mover: usize, tops: &BTreeMap<Arc<str>, TopSpeed>, settings: &Settings) -> TopSpeed {
    let mover = &play.movers[mover];
    tops.get(&mover.id).copied().unwrap_or_else(|| {
        let yps = group_top_yps(mover.position.as_deref()) * settings.motion.top_speed_scale;
        TopSpeed { yps, sigma_yps: yps * settings.motion.top_speed_sigma_share }
    })
}

/// What all pursuits of a carry share.
struct Scene<'a> {
    play: &'a Play,
    carry: &'a Carry,
    chase: &'a Chase,
    tracks: &'a [MoverTrack],
    pursuits: &'a [Pursuit],
    stopped_by: &'a [usize],
    settings: &'a Settings,
}

impl Scene<'_> {
    fn judge(&self, pursuit: &Pursuit, number: i64, top: TopSpeed, carrier_top: TopSpeed, audit: &mut PlayAudit) -> Option<PursuitAudit> {
        let Scene { carry, chase, settings, .. } = *self;
        let track = self.tracks[pursuit.defender].at(pursuit.start).filter(|t| t.covers(pursuit.end))?;
        let runner = self.tracks[carry.carrier].at(carry.start)?;
        let states = turned_states(track, pursuit.start, pursuit.end, carry.attack, &settings.field());
        let first = pursuit.start - carry.start;
        let chaser = Chaser { first, states: &states, blocked: &pursuit.blocked, top, ends_in_contact: pursuit.contact.is_some() };
        let ledger = keep(chase, &chaser, &settings.clock);
        let looks = looks(chase, &chaser, runner, track, carry.start, carry.attack);
        count_beyond(&states, track, pursuit.start, top, settings.motion.alpha_per_s, carry.attack, audit);

        let from = ledger.account.map_or(0, |a| a.starts_at);
        let fate = chance(chase, &chaser, &ledger, from, self.forgiven_from(pursuit));
        let mut row = self.identity(pursuit, number);
        if chaser.ends_in_contact {
            let met = contact_spot_yd(chase, &chaser);
            (row.met_x_yd, row.met_y_yd) = (met.x, met.y);
        }
        fill_geometry(&mut row, chase, &chaser, &looks, settings.carry.reach_yd);
        fill_textbook(&mut row, chase, &chaser, from, settings);
        self.fill_intercepts(&mut row, &chaser);
        self.fill_chance(&mut row, &chaser, &ledger, from, fate);
        row.capability_ratio = Some(top.yps / carrier_top.yps);
        let ending = self.ending(pursuit, fate);
        row.ending = ending.word().to_owned();
        row.charged = ledger.account.is_some() && !matches!(fate, Chance::Never) && ending != Ending::OutOfIt;
        row.efficiency = ledger.account.filter(|_| row.charged).and_then(|a| efficiency(chase, &chaser, a.starts_at));
        let leans: Vec<f64> = leans_rad(chase, &chaser, from.max(ledger.break_at.unwrap_or(0)));
        row.lean_deg = Circular::of(&leans).and_then(|c| c.mean_rad).map(f64::to_degrees);
        self.fill_account(&mut row, &ledger);
        self.fill_contact(&mut row, pursuit, ending);
        if let Some(law) = steering(chase, &chaser, &looks, track, carry.start, ledger.break_at.unwrap_or(0)) {
            row.steer_n = Some(law.n);
            row.steer_k_per_s = Some(law.k_per_s);
            row.steer_delay_s = Some(law.delay_s);
            row.steer_word = law.word().map(|w| w.word().to_owned());
        }
        Some(PursuitAudit { row, ledger, looks, states, blocked: pursuit.blocked.clone(), first })
    }

    fn identity(&self, pursuit: &Pursuit, number: i64) -> PursuitRow {
        let Scene { play, carry, .. } = *self;
        let (carrier, defender) = (&play.movers[carry.carrier], &play.movers[pursuit.defender]);
        let met = self.chase.spot_yd(pursuit.end - carry.start);
        PursuitRow {
            game: play.game.to_string(),
            play: play.play.to_string(),
            carry: i64::from(carry.number),
            pursuit: number,
            carrier: carrier.id.to_string(),
            carrier_name: text(&carrier.name),
            defender: defender.id.to_string(),
            defender_name: text(&defender.name),
            defender_side: text(&defender.side),
            position: text(&defender.position),
            play_kind: text(&play.hints.kind),
            start_frame: play.frames[pursuit.start],
            end_frame: play.frames[pursuit.end],
            start_s: play.time_s[pursuit.start],
            end_s: play.time_s[pursuit.end],
            met_s: play.time_s[pursuit.end] - play.time_s[pursuit.start],
            met_x_yd: met.x,
            met_y_yd: met.y,
            film_s: play.hints.film_start_s.map(|s| s + play.time_s[pursuit.start]),
            ..PursuitRow::default()
        }
    }

    /// Hindsight and foresight intercepts at the pursuit's start.
    fn fill_intercepts(&self, row: &mut PursuitRow, chaser: &Chaser) {
        if let Some(ideal) = self.chase.hindsight().earliest(chaser.first, chaser.states[0], chaser.top.yps) {
            row.ideal_s = Some(ideal.t_s);
            row.ideal_x_yd = Some(ideal.spot_yd.x);
            row.ideal_y_yd = Some(ideal.spot_yd.y);
        }
        if let Some(seen) = self.chase.foresight.path(chaser.first).earliest(0, chaser.states[0], chaser.top.yps) {
            row.foresight_s = Some(seen.t_s);
            row.foresight_x_yd = Some(seen.spot_yd.x);
            row.foresight_y_yd = Some(seen.spot_yd.y);
        }
    }

    fn fill_chance(&self, row: &mut PursuitRow, chaser: &Chaser, ledger: &Ledger, from: usize, fate: Chance) {
        let seconds = |i: usize| self.chase.grid.t_s[chaser.first + i] - self.chase.grid.t_s[chaser.first];
        row.top_speed_yps = chaser.top.yps;
        row.top_speed_sigma_yps = chaser.top.sigma_yps;
        row.need_start_yps = ledger.values[from].need_yps;
        row.need_peak_yps = need_peak_yps(ledger, from, fate);
        row.chance_start = ledger.values[from].chance;
        if let Chance::Lost(lost) = fate {
            row.chance_lost_s = Some(seconds(lost.at));
            row.chance_lost_frame = Some(self.play.frames[self.carry.start + chaser.first + lost.at]);
            row.chance_lost_need_yps = lost.need_after_yps;
        }
        row.clock_s = ledger.account.map(|a| seconds(a.starts_at));
        row.break_s = ledger.break_at.map(seconds);
    }

    fn fill_account(&self, row: &mut PursuitRow, ledger: &Ledger) {
        let Some(account) = ledger.account else { return };
        let entries = account.entries;
        row.account_x_yd = Some(ledger.values[account.starts_at].expected_x_yd);
        row.conceded_yd = Some(account.conceded_yd);
        row.late_yd = Some(entries.late_yd);
        row.flat_yd = Some(entries.flat_yd);
        row.deep_yd = Some(entries.deep_yd);
        row.pace_yd = Some(entries.pace_yd);
        row.block_yd = Some(entries.block_yd);
        row.move_yd = Some(entries.move_yd);
    }

    fn fill_contact(&self, row: &mut PursuitRow, pursuit: &Pursuit, ending: Ending) {
        let Some(contact) = &pursuit.contact else { return };
        row.contact_angle_deg = contact.angle_rad.map(f64::to_degrees);
        row.contact_side = contact.side.map(|s| s.word().to_owned());
        row.contact_closing_yps = Some(contact.closing_yps);
        if ending == Ending::ContactLost {
            row.after_contact_yd = Some(self.chase.end_yd().x - row.met_x_yd);
        }
    }

    /// The state (counted from the pursuit's start) from which on a chance that goes is no fault of his: a team-mate has
    /// come to the contact that stopped the carrier, or the carry ends in another way that is no score.
    fn forgiven_from(&self, pursuit: &Pursuit) -> Option<usize> {
        if pursuit.contact.is_some() || matches!(self.carry.end_how, CarryEnd::EventScore | CarryEnd::CrossedGoal) {
            return None;
        }
        let by_mate = self
            .pursuits
            .iter()
            .filter(|p| p.is_stop && p.defender != pursuit.defender && self.stopped_by.contains(&p.defender))
            .filter_map(|p| p.contact.as_ref().map(|c| c.frame))
            .min();
        Some(by_mate.unwrap_or(self.carry.end).saturating_sub(pursuit.start))
    }

    fn ending(&self, pursuit: &Pursuit, fate: Chance) -> Ending {
        let held = pursuit.blocked.iter().filter(|b| **b).count() as f64;
        match (&pursuit.contact, fate) {
            (Some(_), _) if pursuit.is_stop => Ending::Stop,
            (Some(_), _) => Ending::ContactLost,
            _ if held > self.settings.carry.out_of_it_share * pursuit.blocked.len() as f64 => Ending::OutOfIt,
            (None, Chance::Never) => Ending::NoChance,
            (None, Chance::Lost(_)) => Ending::ChanceLost,
            (None, Chance::Kept) => Ending::Covered,
        }
    }

    fn carry_row(&self, judged: &[PursuitAudit]) -> CarryRow {
        let Scene { play, carry, chase, .. } = *self;
        let carrier = &play.movers[carry.carrier];
        let (start_yd, end_yd): (V2, V2) = (chase.spot_yd(0), chase.end_yd());
        // Against the earliest intercept that any defender had when there was something to chase.
        let earliest_x_yd = chase.clock.and_then(|clock| {
            judged
                .iter()
                .filter(|p| p.first <= clock && clock < p.first + p.states.len())
                .filter_map(|p| chase.hindsight().earliest(clock, p.states[clock - p.first], p.row.top_speed_yps))
                .min_by(|a, b| a.t_s.total_cmp(&b.t_s))
                .map(|m| m.spot_yd.x)
        });
        let names: Vec<&str> = self.stopped_by.iter().map(|d| &*play.movers[*d].id).collect();
        CarryRow {
            game: play.game.to_string(),
            play: play.play.to_string(),
            carry: i64::from(carry.number),
            carrier: carrier.id.to_string(),
            carrier_name: text(&carrier.name),
            carrier_side: text(&carrier.side),
            start_frame: play.frames[carry.start],
            end_frame: play.frames[carry.end],
            start_s: play.time_s[carry.start],
            end_s: play.time_s[carry.end],
            start_how: carry.start_how.word().to_owned(),
            end_how: carry.end_how.word().to_owned(),
            confidence: carry.confidence,
            attack: match carry.attack {
                Attack::TowardsPlusX => "plus_x",
                Attack::TowardsMinusX => "minus_x",
            }
            .to_owned(),
            start_x_yd: start_yd.x,
            end_x_yd: end_yd.x,
            gain_yd: end_yd.x - start_yd.x,
            stopped_by: (!names.is_empty()).then(|| names.join(";")),
            conceded_yd: earliest_x_yd.map(|x| end_yd.x - x),
        }
    }
}

fn text(value: &Option<Arc<str>>) -> Option<String> {
    value.as_deref().map(str::to_owned)
}

/// Counts frames at speed, and those in which the push needed for the motion is beyond full by more than its error bar
/// allows (one-sided, 95 %). The instantaneous push is u = (v + a/α)/V, its variance the smoother's by the delta method.
fn count_beyond(states: &[State], track: &Track, first: usize, top: TopSpeed, alpha_per_s: f64, attack: Attack, audit: &mut PlayAudit) {
    const RUNS_YPS: f64 = 3.0;
    for (i, state) in states.iter().enumerate().filter(|(_, s)| s.vel_yps.norm() > RUNS_YPS) {
        let at = first + i - track.first;
        let (Some(acc), Some(cov)) = (track.acc_ypss.get(at), track.cov.get(at)) else { continue };
        let push = (state.vel_yps + turned_vector(*acc, attack) / alpha_per_s).norm() / top.yps;
        let variance = cov.vv + 2.0 * cov.va / alpha_per_s + cov.aa / (alpha_per_s * alpha_per_s);
        audit.model_frames += 1;
        audit.beyond_model_frames += u64::from(push - ONE_SIDED * variance.max(0.0).sqrt() / top.yps > 1.0);
    }
}
