//! The ranking again under other settings: a verdict that a setting can turn is no verdict.
//!
//! Each variant is an audit of its own in `OUT/sensitivity/<variant>/`, so that it goes on after a break like any other.

use super::error::PipelineError;
use super::request::{AuditRequest, FramesMode, Progress};
use super::run::run_audit;
use crate::model::Settings;
use crate::store::PlayerRow;

type Change = fn(&mut Settings);

/// What is varied: top speeds by 5 %, the drag rate by 20 %, the doubt about top speeds halved and doubled, the reach.
const VARIANTS: [(&str, Change); 8] = [
    ("top_speed_low", |s| s.motion.top_speed_scale *= 0.95),
    ("top_speed_high", |s| s.motion.top_speed_scale *= 1.05),
    ("drag_low", |s| s.motion.alpha_per_s *= 0.8),
    ("drag_high", |s| s.motion.alpha_per_s *= 1.2),
    ("doubt_halved", |s| s.motion.top_speed_sigma_share *= 0.5),
    ("doubt_doubled", |s| s.motion.top_speed_sigma_share *= 2.0),
    ("reach_short", |s| s.carry.reach_yd = 1.0),
    ("reach_long", |s| s.carry.reach_yd = 1.5),
];

/// The players' rankings under each variant.
///
/// # Errors
/// As the audit itself.
pub fn variants(request: &AuditRequest, progress: &dyn Progress) -> Result<Vec<Vec<PlayerRow>>, PipelineError> {
    VARIANTS
        .iter()
        .map(|(name, change)| {
            let mut settings = request.settings.clone();
            change(&mut settings);
            let out = request.out.join("sensitivity").join(name);
            let variant = AuditRequest { settings, out, frames: FramesMode::None, sensitivity: false, ..request.clone() };
            run_audit(&variant, progress).map(|summary| summary.players)
        })
        .collect()
}
