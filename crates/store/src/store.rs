//! The store: jobs, blocks, progress.

use std::collections::BTreeSet;
use std::path::Path;

use enolattice_grid::{BlockId, Columns};
use enolattice_model::{Fingerprint, Score};

use crate::{
    Created, JobId, JobRecord, NewJob, OpenReport, RankRequest, Ranking, StateChange, StoreError,
};

/// What [`Store::commit_block`] did.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Commit {
    /// The block was stored now.
    Stored,
    /// The same block with the same scores was there.
    AlreadyThere,
}

/// How far a job is; counted from the blocks themselves.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Progress {
    /// Blocks committed.
    pub blocks: u64,
    /// Cells committed.
    pub cells: u64,
    /// Cells acknowledged: they survive a power cut, and rankings show them.
    pub cells_acknowledged: u64,
    /// Highest expected yield committed.
    pub best_yield: Option<f64>,
}

/// Jobs, blocks and rankings in one directory. Shared between threads behind an `Arc`.
#[derive(Debug)]
pub struct Store {}

impl Store {
    /// Opens the store in `dir`, making it if there is none.
    ///
    /// A broken database is renamed to `db.broken-<now_unix_ms>`, rebuilt empty, and its
    /// jobs wait again; the report says so.
    ///
    /// # Errors
    /// [`StoreError::InUse`], [`StoreError::TooNew`], [`StoreError::Io`], [`StoreError::Database`].
    pub fn open(dir: &Path, now_unix_ms: u64) -> Result<(Store, OpenReport), StoreError> {
        unimplemented!("{dir:?}{now_unix_ms}")
    }

    /// Makes a job. When this returns, the job survives a power cut.
    ///
    /// # Errors
    /// [`StoreError::RequestIdReused`], [`StoreError::RequestIdTooLong`], [`StoreError::Io`].
    pub fn create_job(&self, new: NewJob, now_unix_ms: u64) -> Result<Created, StoreError> {
        unimplemented!("{new:?}{now_unix_ms}")
    }

    /// The job that a request with this id made, if any; to answer a repeated request early.
    pub fn job_of_request(&self, request_id: &str) -> Option<JobRecord> {
        unimplemented!("{request_id}")
    }

    /// One job.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`].
    pub fn job(&self, job: JobId) -> Result<JobRecord, StoreError> {
        unimplemented!("{job}")
    }

    /// All jobs in the order of submission.
    pub fn jobs(&self) -> Vec<JobRecord> {
        unimplemented!()
    }

    /// Changes a job's state. When this returns, the change survives a power cut.
    ///
    /// # Errors
    /// [`StoreError::StateMoved`] where the job is not in the state the change starts from.
    pub fn change_state(&self, job: JobId, change: &StateChange) -> Result<JobRecord, StoreError> {
        unimplemented!("{job}{change:?}")
    }

    /// Forgets the blocks of a job, to be scored anew by another model.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::Stopped`], [`StoreError::Io`].
    pub fn restart(&self, job: JobId, model_fingerprint: Fingerprint) -> Result<JobRecord, StoreError> {
        unimplemented!("{job}{model_fingerprint}")
    }

    /// Stores a block once. Not yet safe from a power cut: see [`Store::acknowledge`].
    ///
    /// # Errors
    /// [`StoreError::BlockDiffers`], [`StoreError::Stopped`], [`StoreError::JobUnknown`].
    pub fn commit_block(
        &self,
        job: JobId,
        block: BlockId,
        first_cell: u64,
        columns: &Columns,
    ) -> Result<Commit, StoreError> {
        unimplemented!("{job}{block:?}{first_cell}{columns:?}")
    }

    /// Flushes and syncs: every block committed before the call survives a power cut.
    ///
    /// # Errors
    /// [`StoreError::Stopped`] from the first failed write on.
    pub fn acknowledge(&self) -> Result<(), StoreError> {
        unimplemented!()
    }

    /// How far a job is.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`].
    pub fn progress(&self, job: JobId) -> Result<Progress, StoreError> {
        unimplemented!("{job}")
    }

    /// The blocks that are committed.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`].
    pub fn committed_blocks(&self, job: JobId) -> Result<BTreeSet<BlockId>, StoreError> {
        unimplemented!("{job}")
    }

    /// A committed block; `None` where it is not.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::BlockDamaged`].
    pub fn block(&self, job: JobId, block: BlockId) -> Result<Option<Columns>, StoreError> {
        unimplemented!("{job}{block:?}")
    }

    /// The stored score of one cell; `None` where its block is not committed.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::BlockDamaged`].
    pub fn score(&self, job: JobId, cell: u64) -> Result<Option<Score>, StoreError> {
        unimplemented!("{job}{cell}")
    }

    /// A page of a job's ranking.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::BlockDamaged`], [`StoreError::PageOutdated`].
    pub fn rank(&self, job: JobId, request: &RankRequest<'_>) -> Result<Ranking, StoreError> {
        unimplemented!("{job}{}", request.limit)
    }
}
