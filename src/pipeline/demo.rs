//! Writing invented games.

use super::error::PipelineError;
use super::request::{Progress, Unit};
use crate::demo::{DemoOptions, Format, write_games};
use std::path::PathBuf;

pub use crate::demo::Format as DemoFormat;

/// Games to invent.
#[derive(Clone, Debug)]
pub struct DemoRequest {
    pub options: DemoOptions,
    pub format: Format,
    pub out: PathBuf,
}

/// Games invented.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct DemoSummary {
    pub games: usize,
}

/// Writes invented games with their truth.
///
/// # Errors
/// Options that cannot be used, or a folder that cannot be written.
pub fn write_demo(request: &DemoRequest, progress: &dyn Progress) -> Result<DemoSummary, PipelineError> {
    progress.start("inventing", Some(request.options.games as u64), Unit::Games);
    let written = write_games(&request.out, request.format, &request.options, |_| progress.advance(1));
    progress.finish();
    Ok(DemoSummary { games: written?.games })
}
