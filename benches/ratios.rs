//! The whole audit against the bare read of the same files, in one run: `cargo bench --bench ratios -- [GAMES]`.
//!
//! Ratios, since machines differ and are noisy; medians of five. The bare read is polars' own, all columns for CSV and
//! the columns that the audit needs for Parquet, with the same number of threads.

use polars::prelude::*;
use std::num::NonZeroUsize;
use std::path::{Path, PathBuf};
use std::sync::Arc;
use std::time::Instant;
use tailchase::demo::{DemoOptions, Format, write_games};
use tailchase::ingest::IngestOptions;
use tailchase::model::Settings;
use tailchase::pipeline::{AuditRequest, FramesMode, Silent, run_audit};

#[global_allocator]
static ALLOCATOR: mimalloc::MiMalloc = mimalloc::MiMalloc; // as the program has it

const RUNS: usize = 5;
const COLUMNS: [&str; 6] = ["game_id", "play_id", "frame", "mover_id", "x", "y"];

fn main() {
    let games = std::env::args().skip(1).find_map(|a| a.parse().ok()).unwrap_or(10);
    let dir = tempfile::tempdir().expect("a temporary folder");
    let options = DemoOptions { games, plays_per_game: 150, threads: 2, ..DemoOptions::default() };
    println!("{games} invented games of 150 plays, medians of {RUNS}");
    for (format, name) in [(Format::Parquet, "parquet"), (Format::Csv, "csv")] {
        let input = dir.path().join(name);
        let rows = write_games(&input, format, &options, |_| {}).expect("written").rows;
        let files = trackings(&input);
        let out = dir.path().join(format!("out-{name}"));
        let (mut whole, mut one, mut bare) = (Vec::new(), Vec::new(), Vec::new());
        for _ in 0..RUNS {
            bare.push(seconds(|| assert_eq!(files.iter().map(|f| read(f, format)).sum::<u64>(), rows)));
            whole.push(seconds(|| audit(&input, &out, None, rows)));
            one.push(seconds(|| audit(&input, &out, NonZeroUsize::new(1), rows)));
        }
        let [whole, one, bare] = [whole, one, bare].map(median);
        println!(
            "{name}: {:.0} ns a row; audit / bare read {:.2}; one thread / all {:.2}",
            1e9 * whole / rows as f64,
            whole / bare,
            one / whole
        );
    }
}

fn trackings(dir: &Path) -> Vec<PathBuf> {
    let all = std::fs::read_dir(dir).expect("a folder").filter_map(|e| e.ok().map(|e| e.path()));
    let mut files: Vec<PathBuf> = all.filter(|p| p.file_name().is_some_and(|n| n.to_string_lossy().starts_with("tracking"))).collect();
    files.sort();
    files
}

fn read(path: &Path, format: Format) -> u64 {
    let frame = match format {
        Format::Parquet => {
            let columns = COLUMNS.map(String::from).to_vec();
            ParquetReader::new(std::fs::File::open(path).expect("opens")).with_columns(Some(columns)).finish()
        }
        // The ball's id is no number, which polars would only see at the end of the first play.
        Format::Csv => CsvReadOptions::default()
            .with_schema_overwrite(Some(Arc::new(Schema::from_iter([Field::new("mover_id".into(), DataType::String)]))))
            .try_into_reader_with_file_path(Some(path.to_path_buf()))
            .and_then(|r| r.finish()),
    };
    frame.expect("reads").height() as u64
}

fn audit(input: &Path, out: &Path, threads: Option<NonZeroUsize>, rows: u64) {
    let request = AuditRequest {
        inputs: vec![input.to_path_buf()],
        ingest: IngestOptions::default(),
        settings: Settings::default(),
        out: out.to_path_buf(),
        threads,
        frames: FramesMode::Told,
        fresh: true,
        sensitivity: false,
    };
    let summary = run_audit(&request, &Silent).expect("audits");
    assert_eq!(summary.info.rows.read, rows);
    assert!(!summary.players.is_empty());
}

fn seconds(work: impl FnOnce()) -> f64 {
    let start = Instant::now();
    work();
    start.elapsed().as_secs_f64()
}

fn median(mut values: Vec<f64>) -> f64 {
    values.sort_by(f64::total_cmp);
    values[values.len() / 2]
}
