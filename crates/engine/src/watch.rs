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
            .or_insert(watch::Sender::new(read_job(store, job)?))
            .subscribe();
        // Read again: what changed between the first look and the entry has told nobody.
        self.tell(store, job);
        if !works {
            self.senders().remove(&job);
        }
        Ok(receiver)
    }

    /// What the scheduler calls: it only passes the job's id on, a task reads and tells.
    pub(crate) fn follow(
        self: Arc<Self>,
        store: Arc<Store>,
    ) -> Arc<dyn Fn(Progress) + Send + Sync> {
        let (changed, mut changes) = mpsc::unbounded_channel::<JobId>();
        // Weak, so that a closed engine lets go of its directory at once.
        let (watchers, store) = (Arc::downgrade(&self), Arc::downgrade(&store));
        tokio::spawn(async move {
            while let Some(job) = changes.recv().await {
                let (Some(watchers), Some(store)) = (watchers.upgrade(), store.upgrade()) else {
                    return;
                };
                let told = tokio::task::spawn_blocking(move || watchers.tell(&store, job)).await;
                if told.is_err() {
                    return;
                }
            }
        });
        Arc::new(move |progress: Progress| {
            // Nobody receives only while the engine is being dropped.
            let _ = changed.send(progress.job);
        })
    }

    /// Ends all watching.
    pub(crate) fn end(&self) {
        self.senders().clear();
    }

    fn tell(&self, store: &Store, job: JobId) {
        if !self.senders().contains_key(&job) {
            return;
        }
        let Ok(present) = read_job(store, job) else {
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
