//! The road from files to tables, as the program takes it: shared by the tests that compare audits.

use std::collections::BTreeMap;
use std::fs;
use std::num::NonZeroUsize;
use std::path::{Path, PathBuf};
use tailchase::demo::DemoRow;
use tailchase::demo::text::csv_text;
use tailchase::ingest::IngestOptions;
use tailchase::model::Settings;
use tailchase::pipeline::{AuditRequest, FramesMode, Silent, run_audit};
use tailchase::store::{AuditInfo, CarryRow, FrameRow, PursuitRow, read_all};

/// What an audit wrote, read back.
pub struct Audited {
    pub info: AuditInfo,
    pub carries: Vec<CarryRow>,
    pub pursuits: Vec<PursuitRow>,
    pub frames: Vec<FrameRow>,
}

/// Audits files into `out`.
pub fn audit(inputs: &[PathBuf], out: &Path, threads: usize, frames: FramesMode) -> Audited {
    let request = AuditRequest {
        inputs: inputs.to_vec(),
        ingest: IngestOptions::default(),
        settings: Settings::default(),
        out: out.to_path_buf(),
        threads: NonZeroUsize::new(threads),
        frames,
        fresh: true,
        sensitivity: false,
    };
    let summary = run_audit(&request, &Silent).unwrap_or_else(|e| panic!("{e}"));
    Audited {
        info: summary.info,
        carries: read_all(out).unwrap(),
        pursuits: read_all(out).unwrap(),
        frames: if frames == FramesMode::None { Vec::new() } else { read_all(out).unwrap() },
    }
}

/// Writes rows as one file of delimited text and audits it.
pub fn audit_rows(rows: &[DemoRow], frames: FramesMode) -> Audited {
    let dir = tempfile::tempdir().unwrap();
    let file = dir.path().join("tracking.csv");
    fs::write(&file, csv_text(rows).unwrap()).unwrap();
    audit(&[file], &dir.path().join("out"), 2, frames)
}

impl Audited {
    /// How often each kind of finding was met, by its word.
    pub fn findings(&self) -> BTreeMap<&str, u64> {
        self.info.findings.iter().map(|f| (f.kind.as_str(), f.count)).collect()
    }
}
