//! The loop that takes jobs from the journal, runs them and tells who watches.

use std::sync::Arc;

use enolattice_store::{JobId, JobRecord, JobState, Store, StoreError};

use crate::Work;

/// What a scheduler needs.
#[derive(Clone)]
pub struct SchedulerConfig {
    /// Compute threads; 0: one for each core.
    pub threads: usize,
    /// Makes the work of a job; called once a run on a blocking thread. An error fails the job with this text.
    pub work: Arc<dyn Fn(&JobRecord) -> Result<Work, String> + Send + Sync>,
    /// Told about every change of state, and of progress about twice a second; must not block.
    pub notify: Arc<dyn Fn(Progress) + Send + Sync>,
}

/// How far a job is.
#[derive(Clone, Debug, PartialEq)]
pub struct Progress {
    /// Job.
    pub job: JobId,
    /// State.
    pub state: JobState,
    /// Cells whose block is committed and acknowledged.
    pub cells_done: u64,
    /// Highest expected yield so far.
    pub best_yield: Option<f64>,
}

/// Why the scheduler did not do what it was asked.
#[derive(Debug, thiserror::Error)]
pub enum SchedulerError {
    /// The job has ended.
    #[error("job `{job}` is {state} already")]
    Ended {
        /// Job.
        job: JobId,
        /// Its state.
        state: JobState,
    },
    /// The store failed.
    #[error(transparent)]
    Store(#[from] StoreError),
    /// The scheduler was shut down.
    #[error("the scheduler is shut down")]
    ShutDown,
    /// The threads cannot be made.
    #[error("the compute threads cannot be started: {reason}; ask for fewer")]
    Threads {
        /// What the system said.
        reason: String,
    },
}

/// Runs the jobs of a store one after the other.
#[derive(Debug)]
pub struct Scheduler {}

impl Scheduler {
    /// Starts the loop on the current tokio runtime; unfinished jobs of the store are taken up at once.
    ///
    /// # Errors
    /// [`SchedulerError::Threads`].
    ///
    /// # Panics
    /// Outside of a tokio runtime.
    pub fn start(store: Arc<Store>, config: SchedulerConfig) -> Result<Scheduler, SchedulerError> {
        unimplemented!("{store:?}{}", config.threads)
    }

    /// Tells the loop that a job was queued in the store.
    pub fn submit(&self, job: JobId) {
        unimplemented!("{job}")
    }

    /// Cancels a job between two blocks; returns when its blocks have stopped.
    ///
    /// # Errors
    /// [`SchedulerError::Ended`], [`SchedulerError::ShutDown`], [`SchedulerError::Store`].
    pub async fn cancel(&self, job: JobId) -> Result<JobRecord, SchedulerError> {
        unimplemented!("{job}")
    }

    /// Stops between two blocks, acknowledges what is committed and leaves unfinished jobs queued.
    pub async fn shutdown(&self) {
        unimplemented!()
    }
}
