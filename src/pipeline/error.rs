//! Why the whole job failed.

use crate::ingest::IngestError;
use crate::store::StoreError;

#[derive(Debug, thiserror::Error)]
pub enum PipelineError {
    #[error(transparent)]
    Ingest(#[from] IngestError),
    #[error(transparent)]
    Store(#[from] StoreError),
    #[error("cannot start {threads} threads (try fewer with --threads)")]
    Threads { threads: usize, source: rayon::ThreadPoolBuildError },
    #[error(transparent)]
    Demo(#[from] crate::demo::WriteError),
}
