//! Runs the blocks of one job on the compute pool and commits each as it is finished.

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::sync::atomic::{AtomicBool, AtomicUsize, Ordering};
use std::sync::{Mutex, PoisonError};

use enolattice_grid::{BlockId, Columns};
use enolattice_store::{JobId, JobRecord, Store};

use crate::{Work, WorkBlock};

/// Times a block is tried before it is given up.
const TRIES: usize = 2;

/// How a run ended.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) enum Outcome {
    /// All blocks are committed.
    Finished,
    /// Every block was tried, some failed for good; with the reason.
    Gaps(String),
    /// It was stopped between two blocks.
    Stopped,
    /// It cannot go on, with the reason.
    Failed(String),
}

/// Scores and commits the blocks of a job that are not committed yet.
///
/// A job whose blocks were scored by another model is begun anew: one job, one model.
pub(crate) fn run(
    pool: &rayon::ThreadPool,
    store: &Store,
    record: &JobRecord,
    work: &Work,
    stop: &AtomicBool,
) -> Outcome {
    if work.blocks.len() as u64 != record.blocks {
        let (now, then) = (work.blocks.len(), record.blocks);
        return Outcome::Failed(format!(
            "the campaign has {now} blocks now and had {then} when it was submitted; submit it again"
        ));
    }
    let missing = match missing_blocks(store, record, work) {
        Ok(missing) => missing,
        Err(error) => return Outcome::Failed(error.to_string()),
    };
    let shift = Shift {
        store,
        job: record.id,
        work,
        missing: &missing,
        next: AtomicUsize::new(0),
        stop,
        gaps: Mutex::default(),
        failure: Mutex::default(),
    };
    pool.scope(|scope| {
        for _ in 0..pool.current_num_threads() {
            scope.spawn(|_| shift.work());
        }
    });
    shift.outcome()
}

fn missing_blocks(
    store: &Store,
    record: &JobRecord,
    work: &Work,
) -> Result<Vec<WorkBlock>, enolattice_store::StoreError> {
    if work.model_fingerprint != record.model_fingerprint {
        store.restart(record.id, work.model_fingerprint)?;
    }
    let committed = store.committed_blocks(record.id)?;
    Ok(work
        .blocks
        .iter()
        .filter(|block| !committed.contains(&block.id))
        .copied()
        .collect())
}

/// What the threads share while they work on a job.
struct Shift<'a> {
    store: &'a Store,
    job: JobId,
    work: &'a Work,
    missing: &'a [WorkBlock],
    next: AtomicUsize,
    stop: &'a AtomicBool,
    /// Blocks that failed for good, with the reason.
    gaps: Mutex<Vec<(BlockId, String)>>,
    /// Why the whole job cannot go on.
    failure: Mutex<Option<String>>,
}

impl Shift<'_> {
    /// Takes block after block, in order, until there are none or the job is stopped.
    fn work(&self) {
        while !self.stop.load(Ordering::Relaxed) && self.failed().is_none() {
            let Some(block) = self.missing.get(self.next.fetch_add(1, Ordering::Relaxed)) else {
                return;
            };
            match self.score(block.id) {
                Ok(columns) => self.commit(block, &columns),
                Err(reason) => {
                    tracing::warn!(job = %self.job, segment = block.id.segment, block = block.id.index, reason, "block failed");
                    self.gaps
                        .lock()
                        .unwrap_or_else(PoisonError::into_inner)
                        .push((block.id, reason));
                }
            }
        }
    }

    /// Scores a block; what panics is tried once more.
    fn score(&self, block: BlockId) -> Result<Columns, String> {
        let attempt = || {
            catch_unwind(AssertUnwindSafe(|| (self.work.score)(block)))
                .map_err(|panic| panic_text(panic.as_ref()))
        };
        (1..TRIES).fold(attempt(), |outcome, _| outcome.or_else(|_| attempt()))
    }

    fn commit(&self, block: &WorkBlock, columns: &Columns) {
        if let Err(error) = self
            .store
            .commit_block(self.job, block.id, block.first_cell, columns)
        {
            self.failure
                .lock()
                .unwrap_or_else(PoisonError::into_inner)
                .get_or_insert_with(|| error.to_string());
        }
    }

    fn failed(&self) -> Option<String> {
        self.failure
            .lock()
            .unwrap_or_else(PoisonError::into_inner)
            .clone()
    }

    fn outcome(self) -> Outcome {
        if let Some(reason) = self.failed() {
            return Outcome::Failed(reason);
        }
        if self.next.into_inner() < self.missing.len() {
            return Outcome::Stopped;
        }
        let mut gaps = self
            .gaps
            .into_inner()
            .unwrap_or_else(PoisonError::into_inner);
        gaps.sort();
        match gaps.first() {
            None => Outcome::Finished,
            Some((block, reason)) => Outcome::Gaps(format!(
                "{} of {} blocks failed twice; the first, {}/{}: {reason}",
                gaps.len(),
                self.work.blocks.len(),
                block.segment,
                block.index,
            )),
        }
    }
}

/// What a panic said.
pub(crate) fn panic_text(panic: &(dyn std::any::Any + Send)) -> String {
    let text = panic.downcast_ref::<String>().map(String::as_str);
    text.or_else(|| panic.downcast_ref::<&str>().copied())
        .unwrap_or("no reason given")
        .into()
}
