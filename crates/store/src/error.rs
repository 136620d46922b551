//! Why the store did not do what it was asked.

use std::path::PathBuf;

use enolattice_grid::BlockId;

use crate::{JobId, JobState, PlanId};

/// Why the store did not do what it was asked.
#[derive(Debug, thiserror::Error)]
pub enum StoreError {
    /// Another process has the store open.
    #[error("the store `{}` is in use by another process; stop it or choose another directory", dir.display())]
    InUse {
        /// Directory of the store.
        dir: PathBuf,
    },
    /// The store was written by a later version.
    #[error(
        "the store `{}` has format {found}, this program reads up to {known}; open it with the version that wrote it or a later one",
        dir.display()
    )]
    TooNew {
        /// Directory of the store.
        dir: PathBuf,
        /// Format found, as written in the version file.
        found: String,
        /// Latest format known here.
        known: u32,
    },
    /// The format of the store cannot be read.
    #[error(
        "the file `{}` says `{found}`, which no version writes; it is damaged: run `enolattice mend`, or write {known} into it",
        path.display()
    )]
    FormatDamaged {
        /// The version file.
        path: PathBuf,
        /// What it says.
        found: String,
        /// The format known here.
        known: u32,
    },
    /// The directory holds a part of a copy.
    #[error(
        "the copy of a store in `{}` was not finished; remove the directory and copy again",
        dir.display()
    )]
    CopyUnfinished {
        /// Directory of the copy.
        dir: PathBuf,
    },
    /// The directory holds no store.
    #[error("there is no store in `{}`; name the directory that jobs were kept in", dir.display())]
    NoStore {
        /// Directory.
        dir: PathBuf,
    },
    /// A copy would go over something else.
    #[error("`{}` is not empty; name a new directory, so that nothing is lost", dir.display())]
    NotEmpty {
        /// Directory.
        dir: PathBuf,
    },
    /// The file system said no.
    #[error("`{}`: {source}; check that the directory exists, is writable and has free space", path.display())]
    Io {
        /// File or directory.
        path: PathBuf,
        /// What the system said.
        source: std::io::Error,
    },
    /// The database cannot be opened for a reason that is no damage.
    #[error("the database `{}` cannot be opened: {reason}; check access and free space", path.display())]
    Database {
        /// Directory of the database.
        path: PathBuf,
        /// What it said.
        reason: String,
    },
    /// A write failed earlier: nothing more is acknowledged.
    #[error(
        "the store stopped at a failed write ({reason}); free space on the disk and start again"
    )]
    Stopped {
        /// The first failure.
        reason: String,
    },
    /// No such job.
    #[error("there is no job `{job}`; list the jobs to see which there are")]
    JobUnknown {
        /// The id given.
        job: String,
    },
    /// No such plan.
    #[error("there is no plan `{plan}`; list the plans to see which there are")]
    PlanUnknown {
        /// The id given.
        plan: String,
    },
    /// A kept plan cannot be read any more.
    #[error("plan `{plan}` cannot be read: {reason}; put back a copy of `{}`, or plan again", path.display())]
    PlanDamaged {
        /// Plan.
        plan: PlanId,
        /// Its file.
        path: PathBuf,
        /// What is wrong with it.
        reason: String,
    },
    /// The request id was used for another request.
    #[error(
        "the request id `{request_id}` belongs to job `{job}`, which was another request; choose a new request id"
    )]
    RequestIdReused {
        /// The request id.
        request_id: String,
        /// The job it made.
        job: JobId,
    },
    /// The request id cannot be kept.
    #[error("the request id has {length} bytes; give at most {limit}")]
    RequestIdTooLong {
        /// Bytes given.
        length: usize,
        /// Bytes allowed.
        limit: usize,
    },
    /// A new job or plan cannot be put into words.
    #[error("it cannot be recorded: {reason}")]
    Unwritable {
        /// Why.
        reason: String,
    },
    /// Only jobs that have ended are deleted.
    #[error("job `{job}` is {state} and cannot be deleted; cancel it first")]
    NotEnded {
        /// Job.
        job: JobId,
        /// Its state.
        state: JobState,
    },
    /// The job's state is not the one the change starts from.
    #[error("job `{job}` is {found}, not {expected}")]
    StateMoved {
        /// Job.
        job: JobId,
        /// State that was expected.
        expected: JobState,
        /// State it is in.
        found: JobState,
    },
    /// The same block came out differently: scoring is not reproducible.
    #[error(
        "block {}/{} of job `{job}` is stored with other scores; scoring was not reproducible, report this",
        block.segment, block.index
    )]
    BlockDiffers {
        /// Job.
        job: JobId,
        /// Block.
        block: BlockId,
    },
    /// A stored block does not match its checksum.
    #[error(
        "block {}/{} of job `{job}` is damaged on disk ({reason}); start again, it will be computed anew",
        block.segment, block.index
    )]
    BlockDamaged {
        /// Job.
        job: JobId,
        /// Block.
        block: BlockId,
        /// What is wrong with it.
        reason: String,
    },
    /// The page belongs to blocks that are no longer there.
    #[error("the job was screened anew since the page before; ask for the first page again")]
    PageOutdated,
}

impl StoreError {
    /// Wraps why a new job or plan cannot be recorded.
    pub(crate) fn unwritable(error: impl std::fmt::Display) -> StoreError {
        StoreError::Unwritable {
            reason: error.to_string(),
        }
    }

    /// Wraps what the file system said about `path`.
    pub(crate) fn io(path: impl Into<PathBuf>) -> impl FnOnce(std::io::Error) -> StoreError {
        let path = path.into();
        move |source| StoreError::Io { path, source }
    }
}
