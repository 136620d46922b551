//! Opening a store: lock, version, journal, plans, database, verification.

use std::collections::BTreeMap;
use std::fs::{self, File, TryLockError};
use std::path::Path;

use enolattice_grid::BlockId;
use sled::IVec;

use crate::block;
use crate::database::{Database, Fault, free_name, set_aside};
use crate::index::JobIndex;
use crate::journal::{self, Journal};
use crate::plans::Plans;
use crate::{JobId, JobRecord, JobState, OpenReport, StoreError};

/// Format of the store's directory.
const FORMAT: u32 = 1;
/// File that holds the format.
pub(crate) const FORMAT_FILE: &str = "format";
/// File that says, while it is there, that the store is a copy that is not finished.
pub(crate) const UNFINISHED_COPY: &str = "unfinished-copy";

/// The parts of an open store.
pub(crate) struct Opened {
    pub(crate) lock: File,
    pub(crate) journal: Journal,
    pub(crate) plans: Plans,
    pub(crate) database: Database,
    pub(crate) jobs: BTreeMap<JobId, (JobRecord, JobIndex)>,
    /// The last id of a job that anything in the store bears; later ones come after it.
    pub(crate) last_job: Option<JobId>,
    pub(crate) report: OpenReport,
}

/// Opens the store in `dir`, making it if there is none.
pub(crate) fn open(dir: &Path, now_unix_ms: u64) -> Result<Opened, StoreError> {
    fs::create_dir_all(dir).map_err(StoreError::io(dir))?;
    let lock = lock(dir)?;
    check_format(dir)?;
    let (journal, contents) = Journal::open(&dir.join("journal"))?;
    let (plans, plans_found) = Plans::open(&dir.join("plans"))?;
    journal::sync_dir(dir)?;
    let mut report = OpenReport {
        unreadable: contents.unreadable,
        unreadable_plans: plans_found.unreadable,
        leftovers: [contents.leftovers, plans_found.leftovers].concat(),
        ..OpenReport::default()
    };
    let of_plans = plans.records().into_iter().map(|plan| plan.job);
    let mut opening = Opening {
        path: &dir.join("db"),
        journal: &journal,
        jobs: contents
            .records
            .into_iter()
            .map(|record| (record.id, (record, JobIndex::default())))
            .collect(),
        deleted: contents.deleted,
        last_job: contents.last_named.max(of_plans.max()),
        report: &mut report,
    };
    let database = opening.database(now_unix_ms)?;
    let Opening { jobs, last_job, .. } = opening;
    journal::sync_dir(dir)?;
    Ok(Opened {
        lock,
        journal,
        plans,
        database,
        jobs,
        last_job,
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
    hold(&file, dir, &path)?;
    Ok(file)
}

/// Locks an open lock file.
pub(crate) fn hold(file: &File, dir: &Path, path: &Path) -> Result<(), StoreError> {
    match file.try_lock() {
        Ok(()) => Ok(()),
        Err(TryLockError::WouldBlock) => Err(StoreError::InUse { dir: dir.into() }),
        Err(TryLockError::Error(source)) => Err(StoreError::io(path)(source)),
    }
}

/// Whether the directory holds a store of a format that is known; a new one is given the format.
fn check_format(dir: &Path) -> Result<(), StoreError> {
    match found_format(dir)? {
        None => write_format(dir),
        Some(_) => Ok(()),
    }
}

/// The format of the store in a directory, if there is one.
pub(crate) fn found_format(dir: &Path) -> Result<Option<u32>, StoreError> {
    if dir.join(UNFINISHED_COPY).exists() {
        return Err(StoreError::CopyUnfinished { dir: dir.into() });
    }
    let path = dir.join(FORMAT_FILE);
    if !path.try_exists().map_err(StoreError::io(&path))? {
        return Ok(None);
    }
    let bytes = fs::read(&path).map_err(StoreError::io(&path))?;
    let found = String::from_utf8_lossy(&bytes).trim().to_owned();
    match found.parse() {
        Ok(FORMAT) => Ok(Some(FORMAT)),
        Ok(later) if later > FORMAT => Err(StoreError::TooNew {
            dir: dir.into(),
            found,
            known: FORMAT,
        }),
        _ => Err(StoreError::FormatDamaged {
            path,
            found: found.chars().take(20).collect(),
            known: FORMAT,
        }),
    }
}

/// Says in the directory which format its store has.
pub(crate) fn write_format(dir: &Path) -> Result<(), StoreError> {
    journal::write_durably(&dir.join(FORMAT_FILE), format!("{FORMAT}\n").as_bytes())
}

/// What opening the database works on.
struct Opening<'a> {
    path: &'a Path,
    journal: &'a Journal,
    jobs: BTreeMap<JobId, (JobRecord, JobIndex)>,
    /// Jobs that were deleted and may have blocks left.
    deleted: Vec<JobId>,
    last_job: Option<JobId>,
    report: &'a mut OpenReport,
}

impl Opening<'_> {
    /// Opens the database and reads every block; a broken database is set aside and begun anew.
    ///
    /// Whatever is taken from the database is written into the records first: a crash between the two
    /// then leaves nothing that the next opening would not put right.
    fn database(&mut self, now_unix_ms: u64) -> Result<Database, StoreError> {
        let mut read = Read {
            was_there: self.path.join("db").exists(),
            ..Read::default()
        };
        let opened = Database::open(self.path).and_then(|db| self.verify(db, &mut read));
        match opened {
            Ok(database) => {
                self.report.damaged = read.damaged;
                self.report.blocks_of_no_job = read.blocks_of_no_job;
                self.mend(read.was_there)?;
                for (job, block, _) in &self.report.damaged {
                    database.remove(&block::key(*job, *block))?;
                }
                for key in &read.of_deleted {
                    database.remove(key)?;
                }
                self.sync(database)
            }
            Err(Fault::Refused(error)) => Err(error),
            Err(Fault::Broken(reason)) => self.begin_anew(reason, now_unix_ms),
        }
    }

    /// Reads and checks every block of the known jobs.
    ///
    /// After some damage sled opens without a word and a part of its tree is gone or out of reach;
    /// nothing it holds is trusted when a job that had ended misses blocks. Where there was no database, none is damaged.
    fn verify(&mut self, database: Database, read: &mut Read) -> Result<Database, Fault> {
        database.scan(self.path, |key, value| {
            let Some((job, block)) = block::parse_key(&key) else {
                return;
            };
            self.last_job = self.last_job.max(Some(job));
            let Some((_, index)) = self.jobs.get_mut(&job) else {
                match self.deleted.contains(&job) {
                    true => read.of_deleted.push(key),
                    false => read.blocks_of_no_job += 1,
                }
                return;
            };
            match block::decode(&key, &value) {
                Ok(stored) => index.add(block, &stored),
                Err(reason) => read.damaged.push((job, block, reason)),
            }
        })?;
        let incomplete = |(record, index): &&(JobRecord, JobIndex)| {
            let of_job = |(job, ..): &&(JobId, BlockId, String)| *job == record.id;
            let removed = read.damaged.iter().filter(of_job).count();
            ((index.blocks.len() + removed) as u64) < record.committed_at_end
        };
        match self.jobs.values().find(incomplete) {
            Some((record, _)) if read.was_there => Err(Fault::Broken(format!(
                "blocks of job `{}` are missing",
                record.id
            ))),
            _ => Ok(database),
        }
    }

    /// Sets a broken database aside and makes an empty one.
    fn begin_anew(&mut self, reason: String, now_unix_ms: u64) -> Result<Database, StoreError> {
        for (_, index) in self.jobs.values_mut() {
            *index = JobIndex::default();
        }
        let aside = free_name(self.path, now_unix_ms);
        set_aside(self.path, &aside)?;
        match Database::open(self.path) {
            Ok(database) => {
                self.report.set_aside = Some((aside, reason));
                self.mend(false)?;
                self.sync(database)
            }
            Err(fault) => {
                // Perhaps the disk is full rather than the database broken: leave things as they were.
                let _ = fs::remove_dir_all(self.path);
                fs::rename(&aside, self.path).map_err(StoreError::io(&aside))?;
                Err(match fault {
                    Fault::Refused(error) => error,
                    Fault::Broken(reason) => StoreError::Database {
                        path: self.path.into(),
                        reason,
                    },
                })
            }
        }
    }

    /// Queues jobs again that had ended with more blocks than there are.
    ///
    /// In an empty database commit numbers begin again: pages begun before are outdated, also those of jobs of which
    /// nobody knows how many blocks they had.
    fn mend(&mut self, was_there: bool) -> Result<(), StoreError> {
        let empty = self.jobs.values().all(|(_, index)| index.blocks.is_empty());
        for (record, index) in self.jobs.values_mut() {
            let blocks = index.blocks.len() as u64;
            let lost = blocks < record.committed_at_end;
            let removed = self
                .report
                .damaged
                .iter()
                .any(|(job, ..)| *job == record.id);
            let may_have_had = record.state == JobState::Running || !was_there;
            let begins_again = empty && may_have_had && !record.state.is_ended();
            if lost || removed || begins_again {
                let ended = record.state.is_ended();
                *record = left_with(record, blocks);
                self.journal.write(record)?;
                if ended && !record.state.is_ended() {
                    self.report.queued_again.push(record.id);
                }
            }
        }
        Ok(())
    }

    /// What a killed process left in the system's cache is not yet on disk: sync it, then believe it.
    fn sync(&mut self, database: Database) -> Result<Database, StoreError> {
        database.sync()?;
        for (_, index) in self.jobs.values_mut() {
            index.acknowledge(index.mark());
        }
        for job in &self.deleted {
            self.journal.forget(*job)?;
        }
        Ok(database)
    }
}

/// What reading the database found beside the blocks of the known jobs.
#[derive(Default)]
struct Read {
    /// Whether there was a database.
    was_there: bool,
    damaged: Vec<(JobId, BlockId, String)>,
    /// Keys of blocks of deleted jobs.
    of_deleted: Vec<IVec>,
    blocks_of_no_job: u64,
}

/// The record of a job of which only so many blocks are left.
///
/// It waits again where it had been screened to its end; pages begun before are outdated.
pub(crate) fn left_with(record: &JobRecord, blocks: u64) -> JobRecord {
    let mut left = JobRecord {
        generation: record.generation + 1,
        ..record.clone()
    };
    let lost = blocks < record.committed_at_end;
    if lost && matches!(record.state, JobState::Done | JobState::DoneWithGaps) {
        left.state = JobState::Queued;
        left.ended_unix_ms = None;
        left.failure = String::new();
    }
    left.committed_at_end = match left.state.is_ended() {
        true => blocks,
        false => 0,
    };
    left
}
