//! The loop over games: while one is audited, the next is read and the one before is written.

use super::error::PipelineError;
use super::finish::finish;
use super::game::{AuditedGame, audit_game};
use super::request::{AuditRequest, AuditSummary, Progress, Unit};
use super::sensitivity::variants;
use crate::ingest::{self, Game, IngestOptions, RawGame, Source};
use crate::model::{SetAside, SourceRow};
use crate::store::{
    GameMark, GameTables, InputEntry, NoiseEntry, OutDir, RowAccount, RunInfo, SetAsideRow, finding_entries, fingerprint, prepare_out,
    prune_games, read_marks, write_game,
};
use std::collections::BTreeSet;
use std::num::NonZeroUsize;
use std::path::PathBuf;

/// Runs an audit from files to report.
///
/// # Errors
/// Input that cannot be understood, an output folder that cannot be used, a failure of reading or writing. The games
/// finished before it stand; nothing is half-written.
pub fn run_audit(request: &AuditRequest, progress: &dyn Progress) -> Result<AuditSummary, PipelineError> {
    let threads = request.threads.map_or_else(rayon::current_num_threads, NonZeroUsize::get);
    let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().map_err(|source| PipelineError::Threads { threads, source })?;
    pool.install(|| {
        let source = ingest::open(&request.inputs, &request.ingest, &request.settings)?;
        let out = prepare_out(&request.out)?;
        let mut run = Run::new(request, source, out, progress)?;
        run.games()?;
        run.close()
    })
}

struct Run<'a> {
    request: &'a AuditRequest,
    source: Source,
    out: OutDir,
    progress: &'a dyn Progress,
    made_with: String,
    marks: std::collections::BTreeMap<String, GameMark>,
    seen: BTreeSet<String>,
    done: BTreeSet<String>,
}

/// A game ready to be written.
struct Finished {
    mark: GameMark,
    audited: AuditedGame,
    set_aside: Vec<SetAsideRow>,
}

impl<'a> Run<'a> {
    fn new(request: &'a AuditRequest, source: Source, out: OutDir, progress: &'a dyn Progress) -> Result<Run<'a>, PipelineError> {
        let marks = if request.fresh { Default::default() } else { read_marks(out.path())? };
        let settings = format!("{:?}", request.settings);
        let options = format!("{:?} {}", request.ingest.mapping, request.frames.word());
        let tables = table_hashes(&request.ingest)?;
        let made_with = fingerprint(&[env!("CARGO_PKG_VERSION"), &settings, &options, &tables]);
        Ok(Run { request, source, out, progress, made_with, marks, seen: BTreeSet::new(), done: BTreeSet::new() })
    }

    fn games(&mut self) -> Result<(), PipelineError> {
        let bytes = self.source.files().iter().map(|f| f.bytes).sum();
        self.progress.start("auditing", Some(bytes), Unit::Bytes);
        let mut told = BTreeSet::new();
        let mut raw = self.source.next_raw()?;
        let mut finished: Option<Finished> = None;
        while raw.is_some() || finished.is_some() {
            let more = raw.is_some();
            let current = match raw.take() {
                Some(game) => self.needed(game)?,
                None => None,
            };
            let (request, made_with, out) = (self.request, self.made_with.as_str(), self.out.path());
            let source = &mut self.source;
            let (next_and_written, audited) = rayon::join(
                || {
                    rayon::join(
                        || if more { source.next_raw() } else { Ok(None) },
                        || finished.as_ref().map(|game| game.write(out)).transpose(),
                    )
                },
                || current.map(|(game, inputs)| audit(game, inputs, made_with, request)).transpose(),
            );
            let (next, written) = next_and_written;
            written?;
            if let Some(game) = finished.take() {
                self.done.insert(game.mark.game.clone());
                self.marks.insert(game.mark.game.clone(), game.mark);
            }
            raw = next?;
            finished = audited?;
            self.tell(&mut told, finished.as_ref());
        }
        self.progress.finish();
        Ok(())
    }

    /// The game with its inputs' hashes, unless an earlier run has done it from the same inputs in the same way.
    fn needed(&mut self, game: RawGame) -> Result<Option<(RawGame, Vec<String>)>, PipelineError> {
        let mut inputs = game
            .files()
            .into_iter()
            .map(|file| self.source.files()[usize::from(file)].content_hash().map(str::to_owned))
            .collect::<Result<Vec<_>, _>>()?;
        inputs.sort();
        self.seen.insert(game.id().to_string());
        let holds = self.marks.get(&**game.id()).is_some_and(|mark| mark.still_holds(&self.made_with, &inputs));
        Ok((!holds || game.replaces()).then_some((game, inputs)))
    }

    fn tell(&self, told: &mut BTreeSet<String>, finished: Option<&Finished>) {
        for hash in finished.iter().flat_map(|f| &f.mark.inputs) {
            if told.insert(hash.clone())
                && let Some(file) = self.source.files().iter().find(|f| f.content_hash().is_ok_and(|h| h == hash))
            {
                self.progress.advance(file.bytes);
            }
        }
    }

    fn close(self) -> Result<AuditSummary, PipelineError> {
        if self.request.fresh {
            prune_games(self.out.path(), &self.seen)?;
        }
        let loose = self.source.gameless();
        let inputs = self
            .source
            .files()
            .iter()
            .enumerate()
            .map(|(index, file)| {
                let mine = loose.set_aside.iter().filter(|(at, _)| usize::from(at.file) == index).count() as u64;
                let mut rows = RowAccount { read: mine, ..RowAccount::default() };
                rows.set_aside(SetAside::MissingKey, mine);
                Ok(InputEntry {
                    path: file.path.display().to_string(),
                    bytes: file.bytes,
                    hash: file.content_hash()?.to_owned(),
                    loose_rows: rows,
                })
            })
            .collect::<Result<Vec<_>, PipelineError>>()?;
        let info = RunInfo {
            version: env!("CARGO_PKG_VERSION").to_owned(),
            made_with: self.made_with.clone(),
            settings: self.request.settings.clone(),
            frames: self.request.frames.word().to_owned(),
            inputs,
            loose_findings: finding_entries(&loose.findings),
        };
        let loose_rows = set_aside_rows(&loose.set_aside, |file| self.source.files()[file].path.display().to_string());
        let kept = self.seen.difference(&self.done).count();
        let variants = if self.request.sensitivity { variants(self.request, self.progress)? } else { Vec::new() };
        finish(self.out.path(), info, &self.marks, &loose_rows, &variants, (self.done.len(), kept))
    }
}

/// Contents of the tables beside the tracks, so that an edited one redoes the games and a moved one does not.
fn table_hashes(ingest: &IngestOptions) -> Result<String, PipelineError> {
    let hash = |table: &Option<PathBuf>| table.as_deref().map_or(Ok(String::new()), ingest::content_hash);
    Ok([hash(&ingest.plays)?, hash(&ingest.players)?, hash(&ingest.film)?].join(" "))
}

fn audit(raw: RawGame, inputs: Vec<String>, made_with: &str, request: &AuditRequest) -> Result<Finished, PipelineError> {
    let paths = raw.paths();
    let game: Game = raw.assemble()?;
    let mut audited = audit_game(&game.plays, &request.settings, request.frames);
    let mut findings = game.findings;
    findings.merge(&audited.findings);
    let mut set_aside = game.set_aside;
    // Rows that the cleaning set aside had been counted as used when the game was put together.
    let mut rows = RowAccount { read: game.account.rows_read, used: game.account.in_plays, ..RowAccount::default() };
    for (reason, count) in game.account.set_aside {
        rows.set_aside(reason, count);
    }
    for (_, reason) in &audited.set_aside {
        rows.used -= 1;
        rows.set_aside(*reason, 1);
    }
    assert!(rows.balances(), "every row read is used or set aside");
    set_aside.append(&mut audited.set_aside);
    set_aside.sort_unstable();
    let mark = GameMark {
        game: game.id.to_string(),
        made_with: made_with.to_owned(),
        inputs,
        rows,
        findings: finding_entries(&findings),
        plays: game.plays.len() as u64,
        carries: audited.carries.len() as u64,
        pursuits: audited.pursuits.len() as u64,
        model_frames: audited.model_frames,
        beyond_model_frames: audited.beyond_model_frames,
        noise: audited.noise.map(|n| NoiseEntry { jerk_density_yd2ps5: n.jerk_density, sigma_yd: n.sigma_yd }),
    };
    let set_aside = set_aside_rows(&set_aside, |file| paths[file].display().to_string());
    Ok(Finished { mark, audited, set_aside })
}

fn set_aside_rows(rows: &[(SourceRow, SetAside)], path: impl Fn(usize) -> String) -> Vec<SetAsideRow> {
    rows.iter()
        .map(|(at, reason)| SetAsideRow { file: path(usize::from(at.file)), row: i64::from(at.row), reason: reason.word().to_owned() })
        .collect()
}

impl Finished {
    fn write(&self, out: &std::path::Path) -> Result<(), PipelineError> {
        let tables = GameTables {
            pursuits: &self.audited.pursuits,
            carries: &self.audited.carries,
            frames: &self.audited.frames,
            set_aside: &self.set_aside,
        };
        Ok(write_game(out, &self.mark, &tables)?)
    }
}
