//! Who watches which job.

use std::collections::HashMap;
use std::sync::{Arc, Mutex, MutexGuard, PoisonError};

use enolattice_scheduler::Progress;
use enolattice_store::{JobId, Store};
use tokio::sync::{mpsc, watch};

use crate::engine::read_job;
use crate::{EngineError, Job};

/// Senders of the jobs that are watched.
#[derive(Debug, Default)]
pub(crate) struct Watchers {
    senders: Mutex<HashMap<JobId, watch::Sender<Job>>>,
    /// Why jobs failed whose end could not be journalled: the store takes them for running until the next start.
    unjournalled: Mutex<HashMap<JobId, String>>,
}

impl Watchers {
    /// The changes of a job from now on; none follow where no scheduler works or the job has ended.
    pub(crate) fn watch(
        &self,
        store: &Store,
        job: JobId,
        works: bool,
    ) -> Result<watch::Receiver<Job>, EngineError> {
        let receiver = self
            .senders()
            .entry(job)
            .or_insert(watch::Sender::new(self.present(store, job)?))
            .subscribe();
        // Read again: what changed between the first look and the entry has told nobody.
        self.tell(store, job);
        if !works {
            self.senders().remove(&job);
        }
        Ok(receiver)
    }

    /// What the scheduler calls: it only passes on what it is told, a task reads and tells.
    pub(crate) fn follow(
        self: Arc<Self>,
        store: Arc<Store>,
    ) -> Arc<dyn Fn(Progress) + Send + Sync> {
        let (changed, mut changes) = mpsc::unbounded_channel::<Progress>();
        // Weak, so that a closed engine lets go of its directory at once.
        let (watchers, store) = (Arc::downgrade(&self), Arc::downgrade(&store));
        tokio::spawn(async move {
            while let Some(progress) = changes.recv().await {
                let (Some(watchers), Some(store)) = (watchers.upgrade(), store.upgrade()) else {
                    return;
                };
                let tell = move || {
                    watchers.note(&store, &progress);
                    watchers.tell(&store, progress.job);
                };
                let told = tokio::task::spawn_blocking(tell).await;
                if told.is_err() {
                    return;
                }
            }
        });
        Arc::new(move |progress: Progress| {
            // Nobody receives only while the engine is being dropped.
            let _ = changed.send(progress);
        })
    }

    /// Ends all watching.
    pub(crate) fn end(&self) {
        self.senders().clear();
    }

    /// Remembers a failure that the journal has not taken, until the job goes on.
    fn note(&self, store: &Store, progress: &Progress) {
        let journalled = read_job(store, progress.job).is_ok_and(|job| job.state.is_ended());
        let mut unjournalled = self.unjournalled();
        if progress.state == enolattice_store::JobState::Failed && !journalled {
            unjournalled.insert(progress.job, progress.failure.clone());
        } else {
            unjournalled.remove(&progress.job);
        }
    }

    /// A job as it is, also where the journal could not be told.
    fn present(&self, store: &Store, job: JobId) -> Result<Job, EngineError> {
        let mut present = read_job(store, job)?;
        if let Some(failure) = self.unjournalled().get(&job)
            && !present.state.is_ended()
        {
            present.state = crate::JobState::Failed;
            present.failure.clone_from(failure);
        }
        Ok(present)
    }

    fn unjournalled(&self) -> MutexGuard<'_, HashMap<JobId, String>> {
        self.unjournalled
            .lock()
            .unwrap_or_else(PoisonError::into_inner)
    }

    fn tell(&self, store: &Store, job: JobId) {
        if !self.senders().contains_key(&job) {
            return;
        }
        let Ok(present) = self.present(store, job) else {
            return;
        };
        let ended = present.state.is_ended();
        let mut senders = self.senders();
        if let Some(sender) = senders.get(&job) {
            sender.send_if_modified(|told| {
                let is_new = *told != present;
                *told = present;
                is_new
            });
            if ended || sender.receiver_count() == 0 {
                senders.remove(&job);
            }
        }
    }

    fn senders(&self) -> MutexGuard<'_, HashMap<JobId, watch::Sender<Job>>> {
        self.senders.lock().unwrap_or_else(PoisonError::into_inner)
    }
}
