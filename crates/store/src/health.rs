//! Looking after a store that no process has open: what is wrong with it, with and without mending it.

use std::fs::{self, File};
use std::path::{Path, PathBuf};

use crate::database::ASIDE;
use crate::open::{FORMAT_FILE, found_format, hold, write_format};
use crate::{OpenReport, Store, StoreError, copy};

/// A database that was set aside; it is never removed by the store.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct SetAside {
    /// Where it is.
    pub path: PathBuf,
    /// Bytes that it takes.
    pub bytes: u64,
}

/// How a store is.
#[derive(Clone, Debug, PartialEq)]
pub struct Health {
    /// What opening it found and did, or would do.
    pub report: OpenReport,
    /// What the damaged file of the format said, which was or would be written anew.
    pub format_damaged: Option<String>,
    /// Jobs.
    pub jobs: u64,
    /// Jobs that wait or are worked at: not every cell of theirs is screened.
    pub jobs_unfinished: u64,
    /// Plans.
    pub plans: u64,
    /// Blocks of the jobs.
    pub blocks: u64,
    /// Cells of these blocks.
    pub cells: u64,
    /// Databases that were set aside, now or before.
    pub set_aside: Vec<SetAside>,
}

impl Health {
    /// Whether nothing was wrong.
    pub fn is_sound(&self) -> bool {
        self.format_damaged.is_none() && self.report.sentences().is_empty()
    }

    /// Whether something is left that only a person can put right: files that cannot be read.
    pub fn needs_somebody(&self) -> bool {
        !self.report.unreadable.is_empty() || !self.report.unreadable_plans.is_empty()
    }
}

/// Opens the store in `dir`, mends what can be mended, and closes it.
///
/// What is taken out of use is set aside, never removed; only files that a crash left unfinished are.
///
/// # Errors
/// [`StoreError::NoStore`], and those of [`Store::open`].
pub fn mend(dir: &Path, now_unix_ms: u64) -> Result<Health, StoreError> {
    must_be_store(dir)?;
    let damaged = damaged_format(dir)?;
    if damaged.is_some() {
        let _lock = lock_if_there(dir)?;
        write_format(dir)?;
    }
    examine(dir, now_unix_ms, damaged)
}

/// What [`mend`] would find and do. The store is left as it is: the work is done on a copy.
///
/// The copy is made in a new directory below `scratch` and removed afterwards.
///
/// # Errors
/// Those of [`mend`].
pub fn look(dir: &Path, scratch: &Path, now_unix_ms: u64) -> Result<Health, StoreError> {
    must_be_store(dir)?;
    let damaged = damaged_format(dir)?;
    let leftovers = leftovers(dir)?;
    let copy = tempfile::Builder::new()
        .prefix("enolattice-look-")
        .tempdir_in(scratch)
        .map_err(StoreError::io(scratch))?;
    copy::files(dir, copy.path())?;
    let mut health = examine(copy.path(), now_unix_ms, damaged)?;
    health.set_aside = set_aside_databases(dir)?;
    let report = &mut health.report;
    report.leftovers = leftovers;
    let told = report.unreadable.iter_mut();
    let told = told
        .chain(&mut report.unreadable_plans)
        .chain(&mut report.set_aside);
    for (path, _) in told {
        if let Ok(inside) = path.strip_prefix(copy.path()) {
            *path = dir.join(inside);
        }
    }
    Ok(health)
}

/// The databases in the directory of a store that were set aside, oldest name first.
///
/// # Errors
/// [`StoreError::Io`].
pub fn set_aside_databases(dir: &Path) -> Result<Vec<SetAside>, StoreError> {
    let mut found = Vec::new();
    for entry in fs::read_dir(dir).map_err(StoreError::io(dir))? {
        let path = entry.map_err(StoreError::io(dir))?.path();
        let name = path.file_name().unwrap_or_default().to_string_lossy();
        if name.starts_with(ASIDE) {
            let bytes = copy::bytes_in(&path).map_err(StoreError::io(&path))?;
            found.push(SetAside { path, bytes });
        }
    }
    found.sort_by(|a, b| a.path.cmp(&b.path));
    Ok(found)
}

/// Whether a directory holds a store: jobs, if nothing else.
pub(crate) fn must_be_store(dir: &Path) -> Result<(), StoreError> {
    let there = |name: &str| {
        let path = dir.join(name);
        path.try_exists().map_err(StoreError::io(path))
    };
    match there(FORMAT_FILE)? || there("journal")? {
        true => Ok(()),
        false => Err(StoreError::NoStore { dir: dir.into() }),
    }
}

/// The lock of a store that is to be read; nothing is written for it.
pub(crate) fn lock_if_there(dir: &Path) -> Result<Option<File>, StoreError> {
    let path = dir.join("lock");
    match File::open(&path) {
        Ok(file) => {
            hold(&file, dir, &path)?;
            Ok(Some(file))
        }
        Err(error) if error.kind() == std::io::ErrorKind::NotFound => Ok(None),
        Err(error) => Err(StoreError::io(path)(error)),
    }
}

fn damaged_format(dir: &Path) -> Result<Option<String>, StoreError> {
    match found_format(dir) {
        Ok(_) => Ok(None),
        Err(StoreError::FormatDamaged { found, .. }) => Ok(Some(found)),
        Err(error) => Err(error),
    }
}

fn examine(
    dir: &Path,
    now_unix_ms: u64,
    format_damaged: Option<String>,
) -> Result<Health, StoreError> {
    let (store, report) = Store::open(dir, now_unix_ms)?;
    let jobs = store.jobs();
    let (mut blocks, mut cells) = (0, 0);
    for job in &jobs {
        let progress = store.progress(job.id)?;
        blocks += progress.blocks;
        cells += progress.cells;
    }
    Ok(Health {
        report,
        format_damaged,
        jobs: jobs.len() as u64,
        jobs_unfinished: jobs.iter().filter(|job| !job.state.is_ended()).count() as u64,
        plans: store.plans().len() as u64,
        blocks,
        cells,
        set_aside: set_aside_databases(dir)?,
    })
}

/// Files that a crash left unfinished.
fn leftovers(dir: &Path) -> Result<Vec<PathBuf>, StoreError> {
    let mut found = Vec::new();
    for part in copy::PARTS {
        let part = dir.join(part);
        found.extend(copy::listed(&part)?.into_iter().filter(|path| {
            path.extension()
                .is_some_and(|ending| ending == crate::journal::UNFINISHED)
        }));
    }
    Ok(found)
}
