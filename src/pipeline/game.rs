//! One game's audit, its plays spread over the threads.

use super::request::FramesMode;
use super::told::most_telling;
use crate::audit::{PlayAudit, Prepared, Smoothed, frame_rows, judge, noise_of, prepare, smooth_play};
use crate::engine::capability::SpeedBook;
use crate::kinematics::{OwnCheck, SmoothWork};
use crate::model::{Findings, Noise, Play, SetAside, Settings, SourceRow};
use crate::store::{CarryRow, FrameRow, PursuitRow};
use rayon::prelude::*;
use std::collections::BTreeSet;

/// One game's rows, in order of play.
#[derive(Debug, Default)]
pub struct AuditedGame {
    pub pursuits: Vec<PursuitRow>,
    pub carries: Vec<CarryRow>,
    pub frames: Vec<FrameRow>,
    pub findings: Findings,
    pub set_aside: Vec<(SourceRow, SetAside)>,
    pub model_frames: u64,
    pub beyond_model_frames: u64,
    pub noise: Option<Noise>,
}

/// Audits a game's plays. The same rows give the same result whatever the number of threads.
pub fn audit_game(plays: &[Play], settings: &Settings, mode: FramesMode) -> AuditedGame {
    let mut prepared: Vec<Prepared> = plays.par_iter().map(|play| prepare(play, settings)).collect();
    let mut out = AuditedGame::default();
    for one in &mut prepared {
        out.findings.merge(&one.findings);
        out.set_aside.append(&mut one.set_aside);
    }
    let pairs: Vec<(&Play, &Prepared)> = plays.iter().zip(&prepared).collect();
    let noise = noise_of(&pairs, settings);
    out.noise = Some(noise);

    let mut smoothed: Vec<Smoothed> = pairs
        .par_iter()
        .map_init(SmoothWork::default, |work, (play, prepared)| smooth_play(play, prepared, noise, settings, work))
        .collect();
    let (mut speeds, mut own) = (SpeedBook::default(), OwnCheck::default());
    for one in &mut smoothed {
        speeds.merge(std::mem::take(&mut one.speeds));
        own.merge(&one.own);
    }
    let game = plays.first().map(|p| p.game.clone());
    own.judge(&mut out.findings, &|| game.as_deref().map_or_else(String::new, |g| format!("game {g}")));
    let tops = speeds.top_speeds(&settings.motion);

    let mut audits: Vec<PlayAudit> =
        pairs.par_iter().zip(&smoothed).map(|((play, prepared), smoothed)| judge(play, prepared, smoothed, &tops, settings)).collect();
    out.frames = frames(plays, &audits, settings, mode);
    for audit in &mut audits {
        out.model_frames += audit.model_frames;
        out.beyond_model_frames += audit.beyond_model_frames;
        for carry in audit.carries.drain(..) {
            out.carries.push(carry.row);
            out.pursuits.extend(carry.pursuits.into_iter().map(|p| p.row));
        }
    }
    out
}

fn frames(plays: &[Play], audits: &[PlayAudit], settings: &Settings, mode: FramesMode) -> Vec<FrameRow> {
    let all = || {
        plays.iter().zip(audits).flat_map(|(play, audit)| {
            audit.carries.iter().flat_map(move |carry| carry.pursuits.iter().map(move |pursuit| (play, carry, pursuit)))
        })
    };
    let wanted: BTreeSet<usize> = match mode {
        FramesMode::None => return Vec::new(),
        FramesMode::All => (0..all().count()).collect(),
        FramesMode::Told => most_telling(all().map(|(_, _, pursuit)| &pursuit.row).enumerate()).into_values().collect(),
    };
    all()
        .enumerate()
        .filter(|(index, _)| wanted.contains(index))
        .flat_map(|(_, (play, carry, pursuit))| frame_rows(play, carry, pursuit, settings))
        .collect()
}
