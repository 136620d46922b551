//! The engine: a model, and with a data directory a store and a scheduler.

use std::sync::Arc;

use enolattice_model::Model;
use enolattice_scheduler::{Event, Scheduler, transition};
use enolattice_store::{JobId, StateChange, Store};

use crate::grids::Grids;
use crate::models::Models;
use crate::open::now_unix_ms;
use crate::watch::Watchers;
use crate::{EngineError, Job};

/// The engine: answers questions of chemistry and screens campaigns.
///
/// All calls may be made from many tasks at once; what takes time runs on
/// blocking threads or the scheduler's own pool.
#[derive(Debug)]
pub struct Engine {
    pub(crate) models: Arc<Models>,
    /// Compute threads; 0: one for each core.
    pub(crate) threads: usize,
    pub(crate) queue: Option<Queue>,
    pub(crate) notices: Vec<String>,
}

/// What an engine with a data directory has.
#[derive(Debug)]
pub(crate) struct Queue {
    pub(crate) store: Arc<Store>,
    pub(crate) grids: Arc<Grids>,
    pub(crate) watchers: Arc<Watchers>,
    /// Absent where the engine only looks at its jobs.
    pub(crate) scheduler: Option<Scheduler>,
}

impl Engine {
    /// What the user should know about the data directory as it was found (a broken database set
    /// aside, jobs queued again), and where the laboratory's own tables differ from the library.
    /// Empty where all is well.
    pub fn notices(&self) -> &[String] {
        &self.notices
    }

    /// The engine's model; a campaign with a library of its own has another.
    pub(crate) fn model(&self) -> &Arc<Model> {
        self.models.engine()
    }

    /// Fingerprint of the model, hexadecimal.
    pub fn model_fingerprint(&self) -> String {
        self.model().fingerprint().to_string()
    }

    /// All jobs, newest first.
    ///
    /// # Errors
    /// [`EngineError::Store`].
    pub async fn jobs(&self) -> Result<Vec<Job>, EngineError> {
        let store = self.queue()?.store.clone();
        blocking(move || {
            let newest_first = store.jobs().into_iter().rev();
            newest_first
                .map(|record| Ok(Job::of_record(record.clone(), store.progress(record.id)?)))
                .collect()
        })
        .await
    }

    /// One job.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::Store`].
    pub async fn job(&self, job: &str) -> Result<Job, EngineError> {
        let (store, job) = (self.queue()?.store.clone(), job_id(job)?);
        blocking(move || read_job(&store, job)).await
    }

    /// Changes of one job, from now to its end; the first value is its present state.
    /// After the last change the sender is gone.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::Store`].
    pub async fn watch(&self, job: &str) -> Result<tokio::sync::watch::Receiver<Job>, EngineError> {
        let queue = self.queue()?;
        let (store, watchers, job) = (queue.store.clone(), queue.watchers.clone(), job_id(job)?);
        let works = queue.scheduler.is_some();
        blocking(move || watchers.watch(&store, job, works)).await
    }

    /// Cancels a job between two blocks.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::WrongState`] where it has ended, [`EngineError::Store`].
    pub async fn cancel(&self, job: &str) -> Result<Job, EngineError> {
        self.ask(job, Event::Cancel).await
    }

    /// Holds a job between two blocks; what was screened stays and can be ranked.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::WrongState`] where it is paused or has ended, [`EngineError::Store`].
    pub async fn pause(&self, job: &str) -> Result<Job, EngineError> {
        self.ask(job, Event::Pause).await
    }

    /// Lets a paused job wait for its turn again.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::WrongState`] where it is not paused, [`EngineError::Store`].
    pub async fn resume(&self, job: &str) -> Result<Job, EngineError> {
        self.ask(job, Event::Resume).await
    }

    async fn ask(&self, job: &str, event: Event) -> Result<Job, EngineError> {
        let (queue, job) = (self.queue()?, job_id(job)?);
        if let Some(scheduler) = &queue.scheduler {
            match event {
                Event::Pause => scheduler.pause(job).await?,
                Event::Resume => scheduler.resume(job).await?,
                _ => scheduler.cancel(job).await?,
            };
        }
        let (store, works) = (queue.store.clone(), queue.scheduler.is_some());
        blocking(move || {
            if !works {
                change_waiting(&store, job, event)?;
            }
            read_job(&store, job)
        })
        .await
    }

    /// Deletes a job that has ended, with its scores and, where it made one, its plan. Plans that were made from it stay.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::WrongState`] where it has not ended, [`EngineError::Store`].
    pub async fn delete_job(&self, job: &str) -> Result<(), EngineError> {
        let (queue, job) = (self.queue()?, job_id(job)?);
        let (store, grids) = (queue.store.clone(), queue.grids.clone());
        blocking(move || {
            let record = store.delete_job(job)?;
            if let Some(plan) = record.plan_id() {
                store.delete_plan(plan)?;
            }
            grids.forget(job);
            Ok(())
        })
        .await
    }

    /// Stops between two blocks; unfinished jobs go on when the directory is opened again.
    pub async fn shutdown(&self) {
        if let Some(Queue {
            scheduler: Some(scheduler),
            watchers,
            ..
        }) = &self.queue
        {
            scheduler.shutdown().await;
            watchers.end();
        }
    }

    /// Stops as [`Engine::shutdown`] does and closes the store.
    ///
    /// # Errors
    /// [`EngineError::Store`] where the last blocks cannot be written.
    pub async fn close(self) -> Result<(), EngineError> {
        self.shutdown().await;
        match self.queue {
            None => Ok(()),
            Some(queue) => blocking(move || Ok(queue.store.acknowledge()?)).await,
        }
    }

    pub(crate) fn queue(&self) -> Result<&Queue, EngineError> {
        self.queue.as_ref().ok_or_else(EngineError::without_store)
    }
}

/// The id that a text means.
pub(crate) fn job_id(text: &str) -> Result<JobId, EngineError> {
    Ok(text.parse::<JobId>()?)
}

pub(crate) fn read_job(store: &Store, job: JobId) -> Result<Job, EngineError> {
    Ok(Job::of_record(store.job(job)?, store.progress(job)?))
}

fn change_waiting(store: &Store, job: JobId, event: Event) -> Result<(), EngineError> {
    let from = store.job(job)?.state;
    let to = transition(from, event).map_err(|refused| EngineError::refused(job, refused))?;
    let change = StateChange {
        from,
        to,
        at_unix_ms: now_unix_ms(),
        failure: String::new(),
    };
    store.change_state(job, &change)?;
    Ok(())
}

/// Runs what takes time on a blocking thread.
pub(crate) async fn blocking<T: Send + 'static>(
    task: impl FnOnce() -> Result<T, EngineError> + Send + 'static,
) -> Result<T, EngineError> {
    match tokio::task::spawn_blocking(task).await {
        Ok(answer) => answer,
        Err(failure) if failure.is_panic() => std::panic::resume_unwind(failure.into_panic()),
        Err(_) => Err(EngineError::Stopping),
    }
}
