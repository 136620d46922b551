//! The scheduler as others see it.

use std::fmt;
use std::sync::{Arc, Mutex, PoisonError};

use enolattice_store::{JobId, JobRecord, JobState, Store, StoreError};
use tokio::sync::{mpsc, oneshot};
use tokio::task::JoinHandle;

use crate::desk::{Command, Desk};
use crate::{Event, Refused, Task};

/// Makes the work of a job; an error fails the job with this text.
pub type MakeWork = Arc<dyn Fn(&JobRecord) -> Result<Task, String> + Send + Sync>;

/// Takes word of a job; must not block.
pub type Notify = Arc<dyn Fn(Progress) + Send + Sync>;

/// What a scheduler needs.
#[derive(Clone)]
pub struct SchedulerConfig {
    /// Compute threads; 0: one for each core.
    pub threads: usize,
    /// Makes the work of a job, on a blocking thread, once a run.
    pub work: MakeWork,
    /// Told about every change of state, and of progress about twice a second.
    pub notify: Notify,
}

impl fmt::Debug for SchedulerConfig {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.debug_struct("SchedulerConfig")
            .field("threads", &self.threads)
            .finish_non_exhaustive()
    }
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
    /// Why it failed or has gaps; empty otherwise.
    pub failure: String,
}

/// Why the scheduler did not do what it was asked.
#[derive(Debug, thiserror::Error)]
pub enum SchedulerError {
    /// The job's state does not allow what was asked.
    #[error("job `{job}`: {refused}")]
    Refused {
        /// Job.
        job: JobId,
        /// What was refused.
        refused: Refused,
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

impl SchedulerError {
    pub(crate) fn refused(job: JobId, state: JobState, event: Event) -> SchedulerError {
        SchedulerError::Refused {
            job,
            refused: Refused { state, event },
        }
    }
}

/// Serves the jobs of a store. Dropping it stops the loop after the blocks in hand.
#[derive(Debug)]
pub struct Scheduler {
    commands: mpsc::UnboundedSender<Command>,
    task: Mutex<Option<JoinHandle<()>>>,
}

impl Scheduler {
    /// Starts the loop on the current tokio runtime; unfinished jobs of the store are taken up at once.
    ///
    /// # Errors
    /// [`SchedulerError::Threads`].
    ///
    /// # Panics
    /// Outside of a tokio runtime.
    pub fn start(store: Arc<Store>, config: SchedulerConfig) -> Result<Scheduler, SchedulerError> {
        let pool = rayon::ThreadPoolBuilder::new()
            .num_threads(config.threads)
            .thread_name(|i| format!("compute-{i}"))
            .build()
            .map_err(|error| SchedulerError::Threads {
                reason: error.to_string(),
            })?;
        let (commands, receiver) = mpsc::unbounded_channel();
        let task = tokio::spawn(Desk::new(store, config, pool).work(receiver));
        Ok(Scheduler {
            commands,
            task: Mutex::new(Some(task)),
        })
    }

    /// Tells the loop that a job was queued in the store.
    pub fn submit(&self, job: JobId) {
        tracing::debug!(%job, "submitted");
        // After a shutdown the job waits in the journal for the next start.
        let _ = self.commands.send(Command::Look);
    }

    /// Cancels a job between two blocks; returns when its blocks have stopped.
    ///
    /// # Errors
    /// [`SchedulerError::Refused`] where it has ended, [`SchedulerError::ShutDown`], [`SchedulerError::Store`].
    pub async fn cancel(&self, job: JobId) -> Result<JobRecord, SchedulerError> {
        self.ask(job, Event::Cancel).await
    }

    /// Holds a job between two blocks; returns when its blocks have stopped. A piece of work that is begun goes on or is
    /// begun anew later.
    ///
    /// # Errors
    /// As [`Scheduler::cancel`].
    pub async fn pause(&self, job: JobId) -> Result<JobRecord, SchedulerError> {
        self.ask(job, Event::Pause).await
    }

    /// Lets a paused job wait for its turn again.
    ///
    /// # Errors
    /// [`SchedulerError::Refused`] where it is not paused, [`SchedulerError::ShutDown`], [`SchedulerError::Store`].
    pub async fn resume(&self, job: JobId) -> Result<JobRecord, SchedulerError> {
        self.ask(job, Event::Resume).await
    }

    async fn ask(&self, job: JobId, event: Event) -> Result<JobRecord, SchedulerError> {
        let (reply, answer) = oneshot::channel();
        let sent = self.commands.send(Command::Ask(job, event, reply));
        sent.map_err(|_| SchedulerError::ShutDown)?;
        answer.await.unwrap_or(Err(SchedulerError::ShutDown))
    }

    /// Stops between two blocks, acknowledges what is committed and leaves unfinished jobs queued.
    pub async fn shutdown(&self) {
        let _ = self.commands.send(Command::Shutdown);
        let task = self
            .task
            .lock()
            .unwrap_or_else(PoisonError::into_inner)
            .take();
        if let Some(task) = task
            && let Err(error) = task.await
        {
            tracing::error!(%error, "the scheduler's loop failed");
        }
    }
}
