//! The store: jobs, their blocks and plans in one directory.

use std::collections::BTreeMap;
use std::fmt;
use std::fs::{self, File};
use std::path::{Path, PathBuf};
use std::sync::{Arc, Mutex, MutexGuard, PoisonError, RwLock};

use enolattice_grid::Columns;
use rayon::prelude::*;

use crate::block;
use crate::database::Database;
use crate::index::{JobIndex, Summary};
use crate::journal::Journal;
use crate::plans::Plans;
use crate::rank::{self, View};
use crate::rank_order::RankOrder;
use crate::scan::{Scan, read_block};
use crate::{
    Created, JobId, JobRecord, JobState, NewJob, OpenReport, PlanId, PlanRecord, RankRequest,
    Ranking, StateChange, StoreError, open, record,
};

/// Longest id of a request, in bytes.
const REQUEST_ID_BYTES: usize = 128;

/// Blocks that one sum of a pass takes at least: what is summed may be large.
const BLOCKS_OF_A_SUM: usize = 16;

/// A job in memory. Where both locks are taken, the record's comes first.
#[derive(Debug)]
pub(crate) struct Entry {
    pub(crate) record: Mutex<JobRecord>,
    pub(crate) index: Mutex<JobIndex>,
    /// The rows in their default order, once they were written.
    pub(crate) ordered: Mutex<Option<Arc<RankOrder>>>,
}

impl Entry {
    fn new(record: JobRecord, index: JobIndex) -> Entry {
        Entry {
            record: Mutex::new(record),
            index: Mutex::new(index),
            ordered: Mutex::default(),
        }
    }
}

/// Jobs, blocks and rankings in one directory. Shared between threads behind an `Arc`.
pub struct Store {
    pub(crate) journal: Journal,
    plans: Plans,
    pub(crate) database: Database,
    jobs: RwLock<BTreeMap<JobId, Arc<Entry>>>,
    /// Held while a job is made, so that a request id makes one job only.
    creating: Mutex<()>,
    /// Directory of the files of rows.
    pub(crate) orders: PathBuf,
    /// The last id of a job that was given or that anything in the store bears.
    last_job: Mutex<Option<JobId>>,
    /// Keeps other processes out; dropped last.
    _lock: File,
}

impl Store {
    /// Opens the store in `dir`, making it if there is none.
    ///
    /// Every block is read and checked. A broken database is renamed to
    /// `db.broken-<now_unix_ms>` (with a number where that is taken), begun anew, and its jobs wait again; the report says so.
    ///
    /// # Errors
    /// [`StoreError::InUse`], [`StoreError::TooNew`], [`StoreError::FormatDamaged`],
    /// [`StoreError::CopyUnfinished`], [`StoreError::Io`], [`StoreError::Database`].
    pub fn open(dir: &Path, now_unix_ms: u64) -> Result<(Store, OpenReport), StoreError> {
        let opened = open::open(dir, now_unix_ms)?;
        let entry = |(id, (record, index))| (id, Arc::new(Entry::new(record, index)));
        let store = Store {
            journal: opened.journal,
            plans: opened.plans,
            database: opened.database,
            jobs: RwLock::new(opened.jobs.into_iter().map(entry).collect()),
            creating: Mutex::new(()),
            orders: dir.join("orders"),
            last_job: Mutex::new(opened.last_job),
            _lock: opened.lock,
        };
        store.open_orders()?;
        Ok((store, opened.report))
    }

    /// Makes a job. When this returns, the job survives a power cut.
    ///
    /// # Errors
    /// [`StoreError::RequestIdReused`], [`StoreError::RequestIdTooLong`], [`StoreError::Io`].
    pub fn create_job(&self, new: NewJob, now_unix_ms: u64) -> Result<Created, StoreError> {
        if new.request_id.len() > REQUEST_ID_BYTES {
            let length = new.request_id.len();
            return Err(StoreError::RequestIdTooLong {
                length,
                limit: REQUEST_ID_BYTES,
            });
        }
        let request_digest =
            record::request_digest(&new.spec, &new.kind).map_err(StoreError::unwritable)?;
        let _creating = lock(&self.creating);
        if let Some(record) = self.job_of_request(&new.request_id) {
            if record.request_digest == request_digest {
                return Ok(Created {
                    record,
                    is_new: false,
                });
            }
            let NewJob { request_id, .. } = new;
            return Err(StoreError::RequestIdReused {
                request_id,
                job: record.id,
            });
        }
        let record = JobRecord {
            id: self.new_id(now_unix_ms)?,
            title: new.spec.title.clone(),
            spec: Arc::new(new.spec),
            campaign_fingerprint: new.campaign_fingerprint,
            model_fingerprint: new.model_fingerprint,
            cells: new.cells,
            blocks: new.blocks,
            request_id: new.request_id,
            request_digest,
            submitted_unix_ms: now_unix_ms,
            ended_unix_ms: None,
            state: JobState::Queued,
            committed_at_end: 0,
            failure: String::new(),
            warnings: new.warnings,
            generation: 1,
            kind: new.kind,
            terms: new.terms,
        };
        self.journal.write(&record)?;
        let entry = Entry::new(record.clone(), JobIndex::default());
        self.jobs
            .write()
            .unwrap_or_else(PoisonError::into_inner)
            .insert(record.id, Arc::new(entry));
        Ok(Created {
            record,
            is_new: true,
        })
    }

    /// The job that a request with this id made, if any; an empty id makes none.
    pub fn job_of_request(&self, request_id: &str) -> Option<JobRecord> {
        let same = |record: &JobRecord| !request_id.is_empty() && record.request_id == request_id;
        self.jobs().into_iter().find(same)
    }

    /// One job.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`].
    pub fn job(&self, job: JobId) -> Result<JobRecord, StoreError> {
        Ok(lock(&self.entry(job)?.record).clone())
    }

    /// All jobs in the order of submission.
    pub fn jobs(&self) -> Vec<JobRecord> {
        self.entries()
            .iter()
            .map(|(_, entry)| lock(&entry.record).clone())
            .collect()
    }

    /// Changes a job's state. When this returns, the change survives a power cut.
    ///
    /// # Errors
    /// [`StoreError::StateMoved`] where the job is not in the state the change starts from.
    pub fn change_state(&self, job: JobId, change: &StateChange) -> Result<JobRecord, StoreError> {
        let entry = self.entry(job)?;
        let mut record = lock(&entry.record);
        if record.state != change.from {
            return Err(StoreError::StateMoved {
                job,
                expected: change.from,
                found: record.state,
            });
        }
        let ends = change.to.is_ended();
        let changed = JobRecord {
            state: change.to,
            ended_unix_ms: ends.then_some(change.at_unix_ms),
            // Others may be lost with the disk that failed: at the next start they must not be missed.
            committed_at_end: if ends {
                lock(&entry.index).blocks_acknowledged()
            } else {
                0
            },
            failure: change.failure.clone(),
            ..record.clone()
        };
        self.journal.write(&changed)?;
        *record = changed.clone();
        Ok(changed)
    }

    /// Removes a job that has ended, with its blocks. When this returns, the job stays away after a power cut too; what the
    /// blocks took on disk is free for blocks to come.
    ///
    /// The record goes first, by a mark that says whose blocks are to go: a crash in between leaves the rest to opening.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::NotEnded`], [`StoreError::Io`], [`StoreError::Stopped`].
    pub fn delete_job(&self, job: JobId) -> Result<JobRecord, StoreError> {
        let entry = self.entry(job)?;
        let record = lock(&entry.record).clone();
        if !record.state.is_ended() {
            let state = record.state;
            return Err(StoreError::NotEnded { job, state });
        }
        self.journal.bury(job)?;
        lock(&entry.ordered).take();
        // Opening removes what stays.
        let _ = fs::remove_file(self.order_path(job));
        self.jobs
            .write()
            .unwrap_or_else(PoisonError::into_inner)
            .remove(&job);
        let index = std::mem::take(&mut *lock(&entry.index));
        for block in index.blocks.keys() {
            self.database.remove(&block::key(job, *block))?;
        }
        self.database.sync()?;
        self.journal.forget(job)?;
        Ok(record)
    }

    /// Removes a kept plan; gives whether there was one.
    ///
    /// # Errors
    /// [`StoreError::Io`].
    pub fn delete_plan(&self, plan: PlanId) -> Result<bool, StoreError> {
        self.plans.remove(plan)
    }

    /// A new id for a plan; it is not given again while the store is open.
    ///
    /// # Errors
    /// [`StoreError::Unwritable`] where the system has no random numbers.
    pub fn new_plan_id(&self, now_unix_ms: u64) -> Result<PlanId, StoreError> {
        self.plans.new_id(now_unix_ms)
    }

    /// Keeps a plan, whose document is JSON. When this returns, the plan survives a power cut.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::Unwritable`] where the document is no JSON, [`StoreError::Io`].
    pub fn keep_plan(&self, record: PlanRecord, document: String) -> Result<(), StoreError> {
        self.entry(record.job)?;
        self.plans.keep(record, document)
    }

    /// A kept plan and its document, as it was kept.
    ///
    /// # Errors
    /// [`StoreError::PlanUnknown`], [`StoreError::PlanDamaged`].
    pub fn plan(&self, plan: PlanId) -> Result<(PlanRecord, String), StoreError> {
        self.plans.plan(plan)
    }

    /// All kept plans in the order in which they were made.
    pub fn plans(&self) -> Vec<PlanRecord> {
        self.plans.records()
    }

    /// A page of a job's ranking.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::BlockDamaged`], [`StoreError::PageOutdated`].
    pub fn rank(&self, job: JobId, request: &RankRequest<'_>) -> Result<Ranking, StoreError> {
        let view = self.view(job, request)?;
        let scan = Scan {
            database: &self.database,
            job,
            blocks: &view.blocks,
            order: request.order,
            filter: request.filter,
        };
        rank::page(&scan, &view, request)
    }

    /// One pass over all acknowledged cells of a job; the answer and the number of these cells.
    ///
    /// `take` gets each block's first cell and its scores. Blocks are read in parallel and in any
    /// order: neither `take` nor `merge` may depend on it.
    ///
    /// # Errors
    /// [`StoreError::JobUnknown`], [`StoreError::BlockDamaged`].
    pub fn fold<T: Send>(
        &self,
        job: JobId,
        empty: impl Fn() -> T + Sync,
        take: impl Fn(&mut T, u64, &Columns) + Sync,
        merge: impl Fn(T, T) -> T + Sync,
    ) -> Result<(T, u64), StoreError> {
        let seen = {
            let entry = self.entry(job)?;
            let index = lock(&entry.index);
            index.seen_by(index.acknowledged)
        };
        let of_block = |mut sum: T, block: &Summary| {
            let columns = read_block(&self.database, job, block)?;
            take(&mut sum, block.first_cell, &columns);
            Ok(sum)
        };
        let sum = seen
            .par_iter()
            .with_min_len(BLOCKS_OF_A_SUM)
            .try_fold(&empty, of_block)
            .try_reduce(&empty, |a, b| Ok(merge(a, b)))?;
        Ok((sum, seen.iter().map(|block| u64::from(block.cells)).sum()))
    }

    /// The blocks that a page may show.
    fn view(&self, job: JobId, request: &RankRequest<'_>) -> Result<View, StoreError> {
        let entry = self.entry(job)?;
        let record = lock(&entry.record);
        let index = lock(&entry.index);
        let generation = record.generation;
        if request
            .after
            .is_some_and(|after| after.generation != generation)
        {
            return Err(StoreError::PageOutdated);
        }
        let snapshot = request
            .after
            .map_or(index.acknowledged, |after| after.snapshot);
        let ordered = lock(&entry.ordered).clone().filter(|ordered| {
            let stamp = ordered.stamp;
            request.is_plain() && stamp.generation == generation && stamp.commit == snapshot
        });
        let blocks = match &ordered {
            Some(ordered) => ordered.blocks.clone(),
            None => Arc::new(index.seen_by(snapshot)),
        };
        Ok(View {
            blocks,
            snapshot,
            generation,
            ordered,
        })
    }

    pub(crate) fn entry(&self, job: JobId) -> Result<Arc<Entry>, StoreError> {
        let jobs = self.jobs.read().unwrap_or_else(PoisonError::into_inner);
        jobs.get(&job)
            .cloned()
            .ok_or_else(|| StoreError::JobUnknown {
                job: job.to_string(),
            })
    }

    pub(crate) fn entries(&self) -> Vec<(JobId, Arc<Entry>)> {
        let jobs = self.jobs.read().unwrap_or_else(PoisonError::into_inner);
        jobs.iter()
            .map(|(id, entry)| (*id, entry.clone()))
            .collect()
    }

    fn new_id(&self, now_unix_ms: u64) -> Result<JobId, StoreError> {
        let random = getrandom::u64().map_err(StoreError::unwritable)?;
        let mut last = lock(&self.last_job);
        let id = JobId::after(*last, now_unix_ms, random);
        *last = Some(id);
        Ok(id)
    }
}

impl fmt::Debug for Store {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.debug_struct("Store")
            .field("journal", &self.journal)
            .finish_non_exhaustive()
    }
}

/// A panic elsewhere leaves nothing half done under these locks: they are taken all the same.
pub(crate) fn lock<T>(mutex: &Mutex<T>) -> MutexGuard<'_, T> {
    mutex.lock().unwrap_or_else(PoisonError::into_inner)
}
