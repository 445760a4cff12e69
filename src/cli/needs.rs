//! From what was typed to what the library needs: files read and checked once, before any work.

use super::audit::{AuditArgs, FramesWord};
use super::settings_file::check_settings;
use super::typed::InputArgs;
use super::{CliError, read_settings};
use crate::ingest::mapping::FieldOverride;
use crate::ingest::{IngestOptions, Mapping};
use crate::model::Settings;
use crate::pipeline::{AuditRequest, FramesMode};

/// What the shared input options say.
#[derive(Debug)]
pub struct Understanding {
    /// The field in them is the one in force.
    pub settings: Settings,
    pub ingest: IngestOptions,
}

/// Reads the settings and mapping files. The field is the one of `--field`; without it the mapping's, then the settings'.
///
/// # Errors
/// When a file cannot be read or understood, or a value is out of its range.
pub fn understanding(input: &InputArgs) -> Result<Understanding, CliError> {
    let mut settings = input.settings.as_deref().map(read_settings).transpose()?.unwrap_or_default();
    let mut mapping = input.mapping.as_deref().map(Mapping::read).transpose()?;
    if let (Some(_), Some(mapping)) = (input.field, &mut mapping) {
        mapping.field = FieldOverride::default();
    }
    let mapped = mapping.as_ref().map(|mapping| mapping.field(settings.field()));
    if let Some(field) = input.field.or(mapped) {
        settings.field.length_yd = field.length_yd;
        settings.field.width_yd = field.width_yd;
        settings.field.end_zone_yd = field.end_zone_yd;
        check_settings(&settings, "field")?;
    }
    let (plays, players, film) = (input.plays.clone(), input.players.clone(), input.film.clone());
    Ok(Understanding { settings, ingest: IngestOptions { mapping, plays, players, film } })
}

/// Everything that an audit needs.
///
/// # Errors
/// When the settings or the mapping cannot be used.
pub fn audit_request(typed: &AuditArgs) -> Result<AuditRequest, CliError> {
    let Understanding { settings, ingest } = understanding(&typed.input)?;
    Ok(AuditRequest {
        inputs: typed.input.files.clone(),
        ingest,
        settings,
        out: typed.out.clone(),
        threads: typed.threads,
        frames: match typed.frames {
            FramesWord::None => FramesMode::None,
            FramesWord::Told => FramesMode::Told,
            FramesWord::All => FramesMode::All,
        },
        fresh: typed.fresh,
        sensitivity: typed.sensitivity,
    })
}
