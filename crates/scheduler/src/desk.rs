//! The loop that takes jobs from the journal, runs them and tells who watches.

use std::collections::BTreeSet;
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};
use std::time::{Duration, SystemTime, UNIX_EPOCH};

use enolattice_store::{JobId, JobRecord, JobState, StateChange, Store, StoreError};
use tokio::sync::{mpsc, oneshot};
use tokio::task::{JoinError, JoinHandle, spawn_blocking};
use tokio::time::{MissedTickBehavior, interval};

use crate::compute::{self, Outcome, panic_text};
use crate::{Event, Progress, SchedulerConfig, SchedulerError, next_job, transition};

/// Time between two acknowledgements, each followed by word of the progress.
const ACKNOWLEDGE_EVERY: Duration = Duration::from_millis(500);

type CancelReply = oneshot::Sender<Result<JobRecord, SchedulerError>>;

/// What the loop is told.
#[derive(Debug)]
pub(crate) enum Command {
    /// A job was queued.
    Look,
    /// The user gave a job up.
    Cancel(JobId, CancelReply),
    /// Stop between two blocks.
    Shutdown,
}

/// The loop's own things.
pub(crate) struct Desk {
    store: Arc<Store>,
    config: SchedulerConfig,
    pool: Arc<rayon::ThreadPool>,
    /// Jobs whose change of state could not be journalled: left alone until the next start.
    stuck: BTreeSet<JobId>,
    closing: bool,
}

impl Desk {
    /// A desk that has not looked at its jobs yet.
    pub(crate) fn new(store: Arc<Store>, config: SchedulerConfig, pool: rayon::ThreadPool) -> Desk {
        Desk {
            store,
            config,
            pool: Arc::new(pool),
            stuck: BTreeSet::new(),
            closing: false,
        }
    }

    /// Runs jobs until it is told to stop or nobody is left to tell it anything.
    pub(crate) async fn work(mut self, mut commands: mpsc::UnboundedReceiver<Command>) {
        self.take_up_interrupted().await;
        while !self.closing {
            let jobs = self.store.jobs();
            match next_job(jobs.iter().filter(|job| !self.stuck.contains(&job.id))) {
                Some(job) => self.run(job, &mut commands).await,
                None => match commands.recv().await {
                    Some(Command::Look) => {}
                    Some(Command::Cancel(job, reply)) => self.cancel_waiting(job, reply).await,
                    Some(Command::Shutdown) | None => self.closing = true,
                },
            }
        }
    }

    /// A job found running was cut off by a crash: it waits again, in its old place.
    async fn take_up_interrupted(&mut self) {
        for record in self.store.jobs() {
            if record.state == JobState::Running {
                self.change(record.id, Event::Interrupt, String::new())
                    .await;
            }
        }
    }

    /// Runs one job to its end, or until it is cancelled or the scheduler is shut down.
    async fn run(&mut self, job: JobId, commands: &mut mpsc::UnboundedReceiver<Command>) {
        let Some(record) = self.change(job, Event::Start, String::new()).await else {
            return;
        };
        let stop = Arc::new(AtomicBool::new(false));
        let mut blocks = self.hand_out(record, stop.clone());
        let mut cancels = Vec::new();
        let mut trouble = None;
        let mut ticks = interval(ACKNOWLEDGE_EVERY);
        ticks.set_missed_tick_behavior(MissedTickBehavior::Delay);
        let outcome = loop {
            tokio::select! {
                outcome = &mut blocks => break outcome.unwrap_or_else(broken_off),
                _ = ticks.tick(), if trouble.is_none() => match self.acknowledge().await {
                    Ok(()) => self.tell(job, None),
                    Err(error) => {
                        stop.store(true, Ordering::Relaxed);
                        trouble = Some(error.to_string());
                    }
                },
                command = commands.recv(), if !self.closing => match command {
                    Some(Command::Look) => {}
                    Some(Command::Cancel(this, reply)) if this == job => {
                        stop.store(true, Ordering::Relaxed);
                        cancels.push(reply);
                    }
                    Some(Command::Cancel(other, reply)) => self.cancel_waiting(other, reply).await,
                    Some(Command::Shutdown) | None => {
                        stop.store(true, Ordering::Relaxed);
                        self.closing = true;
                    }
                },
            }
        };
        // Nothing is reported done before it is on disk.
        let trouble = match trouble {
            None => self
                .acknowledge()
                .await
                .err()
                .map(|error| error.to_string()),
            some => some,
        };
        let (event, failure) = self.verdict(job, outcome, trouble, !cancels.is_empty());
        self.change(job, event, failure).await;
        for reply in cancels {
            let answer = match self.store.job(job) {
                Ok(record) if record.state == JobState::Cancelled => Ok(record),
                Ok(record) => Err(SchedulerError::Ended {
                    job,
                    state: record.state,
                }),
                Err(error) => Err(error.into()),
            };
            // Whoever asked may have left.
            let _ = reply.send(answer);
        }
    }

    /// Starts the blocks of a job on a blocking thread; the pool does the work.
    fn hand_out(&self, record: JobRecord, stop: Arc<AtomicBool>) -> JoinHandle<Outcome> {
        let (store, pool, work) = (
            self.store.clone(),
            self.pool.clone(),
            self.config.work.clone(),
        );
        spawn_blocking(move || match work(&record) {
            Ok(work) => compute::run(&pool, &store, &record, &work, &stop),
            Err(reason) => Outcome::Failed(reason),
        })
    }

    /// What a run's outcome means for the job.
    fn verdict(
        &self,
        job: JobId,
        outcome: Outcome,
        trouble: Option<String>,
        cancelled: bool,
    ) -> (Event, String) {
        let none_committed = self
            .store
            .progress(job)
            .is_ok_and(|progress| progress.blocks == 0);
        match (trouble, outcome) {
            (Some(reason), _) | (None, Outcome::Failed(reason)) => (Event::Fail, reason),
            (None, Outcome::Finished) => (Event::Finish, String::new()),
            (None, Outcome::Gaps(reason)) if none_committed => (Event::Fail, reason),
            (None, Outcome::Gaps(reason)) => (Event::FinishWithGaps, reason),
            (None, Outcome::Stopped) if cancelled => (Event::Cancel, String::new()),
            (None, Outcome::Stopped) => (Event::Interrupt, String::new()),
        }
    }

    async fn cancel_waiting(&self, job: JobId, reply: CancelReply) {
        // Whoever asked may have left.
        let _ = reply.send(self.apply(job, Event::Cancel, String::new()).await);
    }

    async fn acknowledge(&self) -> Result<(), SchedulerError> {
        let store = self.store.clone();
        blocking(move || Ok(store.acknowledge()?)).await
    }

    /// Does to a job what an event asks; if that cannot be journalled, leaves the job alone and tells that it failed.
    async fn change(&mut self, job: JobId, event: Event, failure: String) -> Option<JobRecord> {
        match self.apply(job, event, failure).await {
            Ok(record) => Some(record),
            Err(error) => {
                tracing::error!(%job, %error, "the job's state could not be journalled");
                self.stuck.insert(job);
                self.tell(job, Some(error.to_string()));
                None
            }
        }
    }

    /// Journals what an event does to a job and tells of it.
    async fn apply(
        &self,
        job: JobId,
        event: Event,
        failure: String,
    ) -> Result<JobRecord, SchedulerError> {
        let store = self.store.clone();
        let at_unix_ms = now_unix_ms();
        let record = blocking(move || {
            let from = store.job(job)?.state;
            let ended = |refused: crate::Refused| SchedulerError::Ended {
                job,
                state: refused.state,
            };
            let to = transition(from, event).map_err(ended)?;
            Ok(store.change_state(
                job,
                &StateChange {
                    from,
                    to,
                    at_unix_ms,
                    failure,
                },
            )?)
        })
        .await?;
        tracing::info!(%job, state = %record.state, failure = record.failure, "job changed");
        self.tell(job, None);
        Ok(record)
    }

    /// Tells who watches how far a job is; `failure` where it failed without the journal knowing.
    fn tell(&self, job: JobId, failure: Option<String>) {
        let (Ok(record), Ok(progress)) = (self.store.job(job), self.store.progress(job)) else {
            return;
        };
        (self.config.notify)(Progress {
            job,
            state: if failure.is_some() {
                JobState::Failed
            } else {
                record.state
            },
            cells_done: progress.cells_acknowledged,
            best_yield: progress.best_yield,
            failure: failure.unwrap_or(record.failure),
        });
    }
}

/// Runs what waits for the disk where waiting is allowed.
async fn blocking<T: Send + 'static>(
    work: impl FnOnce() -> Result<T, SchedulerError> + Send + 'static,
) -> Result<T, SchedulerError> {
    match spawn_blocking(work).await {
        Ok(outcome) => outcome,
        Err(error) => Err(StoreError::Stopped {
            reason: error.to_string(),
        }
        .into()),
    }
}

/// The outcome of a run that panicked outside of its blocks.
fn broken_off(error: JoinError) -> Outcome {
    Outcome::Failed(match error.try_into_panic() {
        Ok(panic) => format!("the work broke off: {}", panic_text(panic.as_ref())),
        Err(error) => format!("the work broke off: {error}"),
    })
}

/// The one clock of the queue.
fn now_unix_ms() -> u64 {
    let since = SystemTime::now()
        .duration_since(UNIX_EPOCH)
        .unwrap_or_default();
    u64::try_from(since.as_millis()).unwrap_or(u64::MAX)
}
