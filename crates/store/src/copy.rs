//! Copies of a store, each a store of its own: taken while jobs run, or of files that no process uses.

mod files;
mod target;

use std::path::Path;

use crate::block;
use crate::database::{Database, Fault};
use crate::health::must_be_store;
use crate::index::Summary;
use crate::journal::{self, Journal};
use crate::open::{found_format, left_with};
use crate::plans::{self, Plans};
use crate::store::lock;
use crate::{JobId, JobRecord, OpenReport, Store, StoreError};
use files::records;
use target::Target;

pub(crate) use files::{PARTS, bytes_in, files, listed};

/// Whether a copy has scores.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Scores {
    /// The acknowledged blocks of every job.
    Included,
    /// None; jobs that had ended wait in the copy to be screened again.
    LeftOut,
}

/// What a copy holds.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Copied {
    /// Jobs.
    pub jobs: u64,
    /// Plans.
    pub plans: u64,
    /// Blocks of scores.
    pub blocks: u64,
    /// Cells of these blocks.
    pub cells: u64,
    /// Bytes that the copy takes.
    pub bytes: u64,
    /// What could not be read and is not in the copy, in sentences.
    pub left_out: Vec<String>,
}

impl Store {
    /// Copies the store into `to`, a directory that is new or empty, while other threads go on with it.
    ///
    /// Every job, plan and acknowledged block that was there when the call began is in the copy; of what is
    /// acknowledged meanwhile, some may be. The copy is complete or not there.
    ///
    /// # Errors
    /// [`StoreError::NotEmpty`], [`StoreError::Io`], [`StoreError::Database`], [`StoreError::Stopped`].
    pub fn copy_to(&self, to: &Path, scores: Scores) -> Result<Copied, StoreError> {
        let target = Target::begin(to)?;
        let mut copied = Copied::default();
        // Plans first: the job of each is then among the jobs.
        let (plans, _) = Plans::open(&target.part("plans"))?;
        for record in self.plans() {
            match self.plan(record.id) {
                Ok((record, document)) => {
                    plans.keep(record, document)?;
                    copied.plans += 1;
                }
                Err(error) => copied.left_out.push(error.to_string()),
            }
        }
        let (journal, _) = Journal::open(&target.part("journal"))?;
        let database = match scores {
            Scores::Included => Some(new_database(&target.part("db"))?),
            Scores::LeftOut => None,
        };
        for (job, _) in self.entries() {
            if let Some(record) = self.copy_job(job, database.as_ref(), &mut copied)? {
                journal.write(&record)?;
                copied.jobs += 1;
            }
        }
        if let Some(database) = database {
            database.sync()?;
        }
        target.finish(copied)
    }

    /// Copies the acknowledged blocks of a job; gives its record as the copy is to have it, nothing where the job is gone.
    fn copy_job(
        &self,
        job: JobId,
        database: Option<&Database>,
        copied: &mut Copied,
    ) -> Result<Option<JobRecord>, StoreError> {
        loop {
            let Ok(entry) = self.entry(job) else {
                return Ok(None);
            };
            let (record, blocks) = {
                let record = lock(&entry.record);
                let index = lock(&entry.index);
                (record.clone(), index.seen_by(index.acknowledged))
            };
            let Some(database) = database else {
                return Ok(Some(left_with(&record, 0)));
            };
            let mut part = Copied::default();
            for summary in &blocks {
                self.copy_block(job, summary, database, &mut part)?;
            }
            // Blocks that were dropped meanwhile belong to another model, or to no job any more.
            let generation_now = self.job(job).map(|record| record.generation);
            if generation_now.is_ok_and(|now| now == record.generation) {
                copied.blocks += part.blocks;
                copied.cells += part.cells;
                copied.left_out.append(&mut part.left_out);
                let whole = record.state.is_ended() && part.blocks == record.committed_at_end;
                return Ok(Some(match whole {
                    true => record,
                    false => left_with(&record, part.blocks),
                }));
            }
            for summary in &blocks {
                database.remove(&block::key(job, summary.block))?;
            }
        }
    }

    fn copy_block(
        &self,
        job: JobId,
        summary: &Summary,
        database: &Database,
        part: &mut Copied,
    ) -> Result<(), StoreError> {
        let key = block::key(job, summary.block);
        let sound = self.database.get(&key).and_then(|value| {
            let value = value.ok_or("it is gone")?;
            block::decode(&key, &value).map(|_| value)
        });
        match sound {
            Ok(value) => {
                database.put_once(&key, &value)?;
                part.blocks += 1;
                part.cells += u64::from(summary.cells);
            }
            Err(reason) => part.left_out.push(
                StoreError::BlockDamaged {
                    job,
                    block: summary.block,
                    reason,
                }
                .to_string(),
            ),
        }
        Ok(())
    }
}

/// Opens the store in `dir`, copies it into `to`, a directory that is new or empty, and closes it.
///
/// # Errors
/// [`StoreError::NoStore`], and those of [`Store::open`] and [`Store::copy_to`].
pub fn copy_store(
    dir: &Path,
    to: &Path,
    now_unix_ms: u64,
) -> Result<(Copied, OpenReport), StoreError> {
    must_be_store(dir)?;
    let (store, report) = Store::open(dir, now_unix_ms)?;
    Ok((store.copy_to(to, Scores::Included)?, report))
}

/// Copies the jobs and plans of the store in `dir`, which a process may have open, into `to`, a directory that is new
/// or empty.
///
/// Their files are renamed into place, so that each is read whole. Scores are left out: jobs that had ended wait in the
/// copy to be screened again.
///
/// # Errors
/// [`StoreError::NoStore`], [`StoreError::NotEmpty`], [`StoreError::TooNew`], [`StoreError::Io`].
pub fn copy_jobs(dir: &Path, to: &Path) -> Result<Copied, StoreError> {
    must_be_store(dir)?;
    found_format(dir)?;
    let target = Target::begin(to)?;
    let mut copied = Copied::default();
    let left_out = |path: &Path, reason: String| format!("`{}`: {reason}", path.display());
    let (copy_plans, _) = Plans::open(&target.part("plans"))?;
    for path in records(&dir.join("plans"))? {
        match plans::read_file(&path) {
            Ok((record, document)) => {
                copy_plans.keep(record, document)?;
                copied.plans += 1;
            }
            Err(reason) => copied.left_out.push(left_out(&path, reason)),
        }
    }
    let (journal, _) = Journal::open(&target.part("journal"))?;
    for path in records(&dir.join("journal"))? {
        match journal::read(&path) {
            Ok(record) => {
                journal.write(&left_with(&record, 0))?;
                copied.jobs += 1;
            }
            // It was removed since the directory was read.
            Err(_) if !path.exists() => {}
            Err(reason) => copied.left_out.push(left_out(&path, reason)),
        }
    }
    target.finish(copied)
}

/// Copies the store in `from`, which no process may have open, into `to`, a directory that is new or empty.
///
/// Nothing in `from` is changed. Open the store in `to` to see whether all of it can be read.
///
/// # Errors
/// [`StoreError::NoStore`], [`StoreError::CopyUnfinished`], [`StoreError::TooNew`], [`StoreError::FormatDamaged`],
/// [`StoreError::InUse`], [`StoreError::NotEmpty`], [`StoreError::Io`].
pub fn restore(from: &Path, to: &Path) -> Result<(), StoreError> {
    must_be_store(from)?;
    found_format(from)?;
    files(from, to)
}

fn new_database(path: &Path) -> Result<Database, StoreError> {
    Database::open(path).map_err(|fault| match fault {
        Fault::Refused(error) => error,
        Fault::Broken(reason) => StoreError::Database {
            path: path.into(),
            reason,
        },
    })
}
