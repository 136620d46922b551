//! What runs on the compute pool and on blocking threads: making a job's work ready, scoring and committing a block.

use std::any::Any;
use std::panic::{AssertUnwindSafe, catch_unwind};

use enolattice_grid::{BlockId, Columns};
use enolattice_store::{JobRecord, Store};

use crate::{MakeWork, Piece, Task, Work, WorkBlock};

/// Times a block is tried before it is given up.
const TRIES: usize = 2;

/// A job that is ready to be served.
pub(crate) enum Ready {
    /// Work and the blocks that are not committed yet, in order.
    Blocks(Work, Vec<WorkBlock>),
    /// One piece.
    Piece(Piece),
}

/// Makes a job's work ready.
///
/// A job whose blocks were scored by another model is begun anew: one job, one model.
pub(crate) fn ready(make: &MakeWork, store: &Store, record: &JobRecord) -> Result<Ready, String> {
    let broken_off = |panic: String| format!("the work broke off: {panic}");
    let work = match caught(|| make(record)).map_err(broken_off)?? {
        Task::Piece(piece) => return Ok(Ready::Piece(piece)),
        Task::Blocks(work) => work,
    };
    if work.blocks.len() as u64 != record.blocks {
        let (now, then) = (work.blocks.len(), record.blocks);
        return Err(format!(
            "the campaign has {now} blocks now and had {then} when it was submitted; submit it again"
        ));
    }
    let missing = missing_blocks(store, record, &work).map_err(|error| error.to_string())?;
    Ok(Ready::Blocks(work, missing))
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

/// How a block ended.
pub(crate) enum Scored {
    /// It is committed.
    Committed,
    /// It failed for good, with the reason; the job goes on without it.
    Gap(String),
    /// It cannot be kept, with the reason: the job cannot go on.
    Lost(String),
}

/// Scores a block and commits it; what panics is tried once more.
pub(crate) fn score(store: &Store, record: &JobRecord, work: &Work, block: &WorkBlock) -> Scored {
    let attempt = || caught(|| (work.score)(block.id));
    let columns: Result<Columns, String> =
        (1..TRIES).fold(attempt(), |outcome, _| outcome.or_else(|_| attempt()));
    let commit = |columns: &Columns| {
        let kept = store.commit_block(record.id, block.id, block.first_cell, columns);
        kept.map_err(|error| error.to_string())
    };
    match columns {
        Ok(columns) => match caught(|| commit(&columns)).and_then(|kept| kept) {
            Ok(_) => Scored::Committed,
            Err(reason) => Scored::Lost(reason),
        },
        Err(reason) => {
            let BlockId { segment, index } = block.id;
            tracing::warn!(job = %record.id, segment, block = index, reason, "block failed");
            Scored::Gap(reason)
        }
    }
}

/// What work gives, or what its panic said.
pub(crate) fn caught<T>(work: impl FnOnce() -> T) -> Result<T, String> {
    catch_unwind(AssertUnwindSafe(work)).map_err(|panic| panic_text(panic.as_ref()))
}

fn panic_text(panic: &(dyn Any + Send)) -> String {
    let text = panic.downcast_ref::<String>().map(String::as_str);
    text.or_else(|| panic.downcast_ref::<&str>().copied())
        .unwrap_or("no reason given")
        .into()
}
