//! The journal: one small file a job, each change written whole, synced and renamed into place.

use std::fs::{self, File};
use std::io::{self, Write};
use std::path::{Path, PathBuf};

use crate::steps::step;
use crate::{JobId, JobRecord, StoreError, record};

/// Ending of a record's file name.
pub(crate) const ENDING: &str = "json";
/// Ending of a file that is not yet a record.
pub(crate) const UNFINISHED: &str = "unfinished";
/// Ending of the record of a job that was deleted while its blocks are not all removed.
const DELETED: &str = "deleted";

/// The directory of job records.
#[derive(Debug)]
pub(crate) struct Journal {
    dir: PathBuf,
}

/// Ending of the file's name decides: what is not yet a file of ours is removed, what is one is read.
pub(crate) struct Found {
    /// Files to read.
    pub(crate) whole: Vec<PathBuf>,
    /// Files that a crash left unfinished; they are gone.
    pub(crate) leftovers: Vec<PathBuf>,
}

/// What a journal holds.
#[derive(Debug, Default)]
pub(crate) struct Contents {
    /// Records in the order of submission.
    pub(crate) records: Vec<JobRecord>,
    /// Files that could not be read, each with the reason.
    pub(crate) unreadable: Vec<(PathBuf, String)>,
    /// Files that a crash left unfinished; they are gone.
    pub(crate) leftovers: Vec<PathBuf>,
    /// Jobs that were deleted and may have blocks left.
    pub(crate) deleted: Vec<JobId>,
    /// The last job that a file is named after, readable or not: a record that cannot be read keeps its id to itself.
    pub(crate) last_named: Option<JobId>,
}

impl Journal {
    /// Opens or makes the journal and reads it.
    pub(crate) fn open(dir: &Path) -> Result<(Journal, Contents), StoreError> {
        let Found { whole, leftovers } = files(dir)?;
        let mut contents = Contents {
            leftovers,
            ..Contents::default()
        };
        for path in whole {
            contents.last_named = contents.last_named.max(named(&path));
            match read(&path) {
                Ok(record) => contents.records.push(record),
                Err(reason) => contents.unreadable.push((path, reason)),
            }
        }
        contents.records.sort_by_key(|record| record.id);
        for entry in fs::read_dir(dir).map_err(StoreError::io(dir))? {
            let path = entry.map_err(StoreError::io(dir))?.path();
            if path.extension().is_some_and(|ending| ending == DELETED) {
                contents.deleted.extend(named(&path));
            }
        }
        contents.last_named = contents
            .last_named
            .max(contents.deleted.iter().max().copied());
        Ok((Journal { dir: dir.into() }, contents))
    }

    /// Writes a record; when this returns, it survives a power cut.
    pub(crate) fn write(&self, record: &JobRecord) -> Result<(), StoreError> {
        let path = self.path(record.id);
        let text = record::write(record)
            .map_err(io::Error::from)
            .map_err(StoreError::io(&path))?;
        write_durably(&path, text.as_bytes())
    }

    /// Marks a record as deleted; when this returns, the job is gone also after a power cut. The mark stays until
    /// [`Journal::forget`], so that opening knows whose blocks are to go.
    pub(crate) fn bury(&self, job: JobId) -> Result<(), StoreError> {
        let path = self.path(job);
        step("mark a record as deleted")
            .and_then(|()| fs::rename(&path, path.with_extension(DELETED)))
            .map_err(StoreError::io(&path))?;
        sync_dir(&self.dir)
    }

    /// Removes the mark of a deleted job, of which no block is left.
    pub(crate) fn forget(&self, job: JobId) -> Result<(), StoreError> {
        let path = self.path(job).with_extension(DELETED);
        step("forget a deleted job")
            .and_then(|()| fs::remove_file(&path))
            .map_err(StoreError::io(&path))?;
        sync_dir(&self.dir)
    }

    fn path(&self, job: JobId) -> PathBuf {
        self.dir.join(format!("{job}.{ENDING}"))
    }
}

/// The job that a file is named after.
fn named(path: &Path) -> Option<JobId> {
    let stem = path.file_stem().and_then(|stem| stem.to_str());
    stem.and_then(|stem| stem.parse().ok())
}

/// The files of the directory, which is made where it is missing, by name; leftovers are removed.
pub(crate) fn files(dir: &Path) -> Result<Found, StoreError> {
    fs::create_dir_all(dir).map_err(StoreError::io(dir))?;
    let mut found = Found {
        whole: Vec::new(),
        leftovers: Vec::new(),
    };
    for entry in fs::read_dir(dir).map_err(StoreError::io(dir))? {
        let path = entry.map_err(StoreError::io(dir))?.path();
        match path.extension().and_then(|ending| ending.to_str()) {
            Some(UNFINISHED) => {
                remove_leftover(&path)?;
                found.leftovers.push(path);
            }
            Some(ENDING) => found.whole.push(path),
            _ => {}
        }
    }
    found.whole.sort();
    found.leftovers.sort();
    Ok(found)
}

/// Removes a file that a crash left unfinished.
pub(crate) fn remove_leftover(path: &Path) -> Result<(), StoreError> {
    step("remove a leftover")
        .and_then(|()| fs::remove_file(path))
        .map_err(StoreError::io(path))
}

/// Reads the record in a file.
///
/// # Errors
/// A sentence that says what is wrong with it.
pub(crate) fn read(path: &Path) -> Result<JobRecord, String> {
    let text = fs::read_to_string(path).map_err(|error| error.to_string())?;
    let record = record::read(&text)?;
    match path.file_stem().and_then(|stem| stem.to_str()) {
        Some(name) if name == record.id.to_string() => Ok(record),
        _ => Err(format!("it holds job `{}`; is it a copy?", record.id)),
    }
}

/// Puts `bytes` at `path` so that after a crash either the old or the new file is there, whole.
///
/// Where it fails the old file stays; only where the last sync fails may the new one be there already.
pub(crate) fn write_durably(path: &Path, bytes: &[u8]) -> Result<(), StoreError> {
    let unfinished = path.with_extension(UNFINISHED);
    let write = || {
        step("make a file")?;
        let mut file = File::create(&unfinished)?;
        step("write a file")?;
        file.write_all(bytes)?;
        step("sync a file")?;
        file.sync_all()?;
        step("rename a file")?;
        fs::rename(&unfinished, path)
    };
    write().map_err(|error| {
        // A full disk needs the space; the first error is the one to tell.
        let _ = fs::remove_file(&unfinished);
        StoreError::io(path)(error)
    })?;
    sync_dir(path.parent().unwrap_or(path))
}

/// Syncs a directory, so that renames and new files in it survive a power cut.
pub(crate) fn sync_dir(dir: &Path) -> Result<(), StoreError> {
    step("sync a directory")
        .and_then(|()| File::open(dir)?.sync_all())
        .map_err(StoreError::io(dir))
}
