//! Opening a store: lock, version, journal, plans, database, verification.

use std::collections::BTreeMap;
use std::fs::{self, File, TryLockError};
use std::path::{Path, PathBuf};

use enolattice_grid::BlockId;

use crate::block;
use crate::database::{Database, Fault, set_aside};
use crate::index::JobIndex;
use crate::journal::{self, Journal};
use crate::plans::Plans;
use crate::{JobId, JobRecord, JobState, StoreError};

/// Format of the store's directory.
const FORMAT: u32 = 1;

/// What opening a store found.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct OpenReport {
    /// Where the broken database went, and what was wrong with it.
    pub set_aside: Option<(PathBuf, String)>,
    /// Jobs that had ended and wait again because blocks of theirs were lost.
    pub queued_again: Vec<JobId>,
    /// Blocks that could not be believed and were removed, each with the reason.
    pub damaged: Vec<(JobId, BlockId, String)>,
    /// Journal files that could not be read, each with the reason; left where they are.
    pub unreadable: Vec<(PathBuf, String)>,
    /// Files of plans that could not be read, each with the reason; left where they are.
    pub unreadable_plans: Vec<(PathBuf, String)>,
}

impl OpenReport {
    /// The report in sentences; none where there is nothing to say.
    pub fn sentences(&self) -> Vec<String> {
        let aside = self.set_aside.iter().map(|(path, reason)| {
            format!(
                "the database of scores was damaged ({reason}); it was set aside as `{}` and is rebuilt by computing",
                path.display()
            )
        });
        let damaged = self.damaged.iter().map(|(job, block, reason)| {
            let BlockId { segment, index } = block;
            format!(
                "block {segment}/{index} of job `{job}` was damaged ({reason}); it is computed anew"
            )
        });
        let again = self.queued_again.iter().map(|job| {
            format!(
                "job `{job}` had ended but blocks of it were lost; it waits to compute them again"
            )
        });
        let unreadable = self.unreadable.iter().map(|(path, reason)| {
            format!(
                "the record `{}` cannot be read: {reason}; put back a copy of it, or remove it and submit the campaign again",
                path.display()
            )
        });
        let plans = self.unreadable_plans.iter().map(|(path, reason)| {
            format!(
                "the plan `{}` cannot be read: {reason}; put back a copy of it, or remove it and plan again",
                path.display()
            )
        });
        aside
            .chain(damaged)
            .chain(again)
            .chain(unreadable)
            .chain(plans)
            .collect()
    }
}

/// The parts of an open store.
pub(crate) struct Opened {
    pub(crate) lock: File,
    pub(crate) journal: Journal,
    pub(crate) plans: Plans,
    pub(crate) database: Database,
    pub(crate) jobs: BTreeMap<JobId, (JobRecord, JobIndex)>,
    pub(crate) report: OpenReport,
}

/// Opens the store in `dir`, making it if there is none.
pub(crate) fn open(dir: &Path, now_unix_ms: u64) -> Result<Opened, StoreError> {
    fs::create_dir_all(dir).map_err(StoreError::io(dir))?;
    let lock = lock(dir)?;
    check_format(dir)?;
    let (journal, contents) = Journal::open(&dir.join("journal"))?;
    let (plans, unreadable_plans) = Plans::open(&dir.join("plans"))?;
    journal::sync_dir(dir)?;
    let mut report = OpenReport {
        unreadable: contents.unreadable,
        unreadable_plans,
        ..OpenReport::default()
    };
    let mut jobs: BTreeMap<JobId, (JobRecord, JobIndex)> = contents
        .records
        .into_iter()
        .map(|record| (record.id, (record, JobIndex::default())))
        .collect();
    let database = open_database(
        &dir.join("db"),
        now_unix_ms,
        &journal,
        &mut jobs,
        &mut report,
    )?;
    for (record, index) in jobs.values_mut() {
        mend(record, index, &journal, &mut report)?;
    }
    journal::sync_dir(dir)?;
    Ok(Opened {
        lock,
        journal,
        plans,
        database,
        jobs,
        report,
    })
}

/// The lock lives as long as the file is open; the system drops it when the process dies.
fn lock(dir: &Path) -> Result<File, StoreError> {
    let path = dir.join("lock");
    let options = File::options()
        .create(true)
        .truncate(false)
        .write(true)
        .open(&path);
    let file = options.map_err(StoreError::io(&path))?;
    match file.try_lock() {
        Ok(()) => Ok(file),
        Err(TryLockError::WouldBlock) => Err(StoreError::InUse { dir: dir.into() }),
        Err(TryLockError::Error(source)) => Err(StoreError::Io { path, source }),
    }
}

fn check_format(dir: &Path) -> Result<(), StoreError> {
    let path = dir.join("format");
    if !path.try_exists().map_err(StoreError::io(&path))? {
        return journal::write_durably(&path, format!("{FORMAT}\n").as_bytes());
    }
    let found = fs::read_to_string(&path).map_err(StoreError::io(&path))?;
    match found.trim() {
        known if known == FORMAT.to_string() => Ok(()),
        other => Err(StoreError::TooNew {
            dir: dir.into(),
            found: other.into(),
            known: FORMAT,
        }),
    }
}

/// Opens the database and reads every block; a broken database is set aside and begun anew.
fn open_database(
    path: &Path,
    now_unix_ms: u64,
    journal: &Journal,
    jobs: &mut BTreeMap<JobId, (JobRecord, JobIndex)>,
    report: &mut OpenReport,
) -> Result<Database, StoreError> {
    let mut damaged = Vec::new();
    let reason =
        match Database::open(path).and_then(|db| verify(db, path, journal, jobs, &mut damaged)) {
            Ok(database) => {
                for (job, block, _) in &damaged {
                    database.remove(&block::key(*job, *block))?;
                }
                report.damaged = damaged;
                return sync(database, jobs);
            }
            Err(Fault::Refused(error)) => return Err(error),
            Err(Fault::Broken(reason)) => reason,
        };
    let aside = set_aside(path, now_unix_ms)?;
    jobs.values_mut()
        .for_each(|(_, index)| *index = JobIndex::default());
    match Database::open(path) {
        Ok(database) => {
            report.set_aside = Some((aside, reason));
            sync(database, jobs)
        }
        Err(fault) => {
            // Perhaps the disk is full rather than the database broken: leave things as they were.
            let _ = fs::remove_dir_all(path);
            fs::rename(&aside, path).map_err(StoreError::io(&aside))?;
            Err(match fault {
                Fault::Refused(error) => error,
                Fault::Broken(reason) => StoreError::Database {
                    path: path.into(),
                    reason,
                },
            })
        }
    }
}

/// Reads and checks every block of the known jobs; removes those of jobs that were deleted in mid-crash.
///
/// After some damage sled opens without a word and a part of its tree is gone or out of reach;
/// nothing it holds is trusted when a job that had ended misses blocks.
fn verify(
    database: Database,
    path: &Path,
    journal: &Journal,
    jobs: &mut BTreeMap<JobId, (JobRecord, JobIndex)>,
    damaged: &mut Vec<(JobId, BlockId, String)>,
) -> Result<Database, Fault> {
    let mut any_block = false;
    let mut ownerless = Vec::new();
    database.scan(path, |key, value| {
        any_block = true;
        let Some((job, block)) = block::parse_key(&key) else {
            return;
        };
        let Some((_, index)) = jobs.get_mut(&job) else {
            // a record that cannot be read keeps its blocks
            if !journal.has_file(job) {
                ownerless.push(key);
            }
            return;
        };
        match block::decode(&key, &value) {
            Ok(stored) => index.add(block, &stored),
            Err(reason) => damaged.push((job, block, reason)),
        }
    })?;
    for key in ownerless {
        database.remove(&key).map_err(Fault::Refused)?;
    }
    let incomplete = |(record, index): &&(JobRecord, JobIndex)| {
        let removed = damaged.iter().filter(|(job, ..)| *job == record.id).count();
        ((index.blocks.len() + removed) as u64) < record.committed_at_end
    };
    match jobs.values().find(incomplete) {
        Some((record, _)) if any_block => Err(Fault::Broken(format!(
            "blocks of job `{}` are missing",
            record.id
        ))),
        _ => Ok(database),
    }
}

/// What a killed process left in the system's cache is not yet on disk: sync it, then believe it.
fn sync(
    database: Database,
    jobs: &mut BTreeMap<JobId, (JobRecord, JobIndex)>,
) -> Result<Database, StoreError> {
    database.sync()?;
    jobs.values_mut()
        .for_each(|(_, index)| index.acknowledge(index.mark()));
    Ok(database)
}

/// Queues a job again that had ended with more blocks than there are; pages begun before are outdated.
fn mend(
    record: &mut JobRecord,
    index: &JobIndex,
    journal: &Journal,
    report: &mut OpenReport,
) -> Result<(), StoreError> {
    let lost = (index.blocks.len() as u64) < record.committed_at_end;
    let removed = report.damaged.iter().any(|(job, ..)| *job == record.id);
    if !(lost || removed || report.set_aside.is_some()) {
        return Ok(());
    }
    record.generation += 1;
    if lost && matches!(record.state, JobState::Done | JobState::DoneWithGaps) {
        record.state = JobState::Queued;
        record.ended_unix_ms = None;
        record.failure = String::new();
        report.queued_again.push(record.id);
    }
    record.committed_at_end = match record.state.is_ended() {
        true => index.blocks.len() as u64,
        false => 0,
    };
    journal.write(record)
}
