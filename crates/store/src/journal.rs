//! The journal: one small file a job, each change written whole, synced and renamed into place.

use std::fs::{self, File};
use std::io::{self, Write};
use std::path::{Path, PathBuf};

use crate::{JobId, JobRecord, StoreError, record};

/// Ending of a record's file name.
pub(crate) const ENDING: &str = "json";
/// Ending of a file that is not yet a record.
pub(crate) const UNFINISHED: &str = "unfinished";

/// The directory of job records.
#[derive(Debug)]
pub(crate) struct Journal {
    dir: PathBuf,
}

/// What a journal holds.
#[derive(Debug, Default)]
pub(crate) struct Contents {
    /// Records in the order of submission.
    pub(crate) records: Vec<JobRecord>,
    /// Files that could not be read, each with the reason.
    pub(crate) unreadable: Vec<(PathBuf, String)>,
}

impl Journal {
    /// Opens or makes the journal and reads it.
    pub(crate) fn open(dir: &Path) -> Result<(Journal, Contents), StoreError> {
        fs::create_dir_all(dir).map_err(StoreError::io(dir))?;
        let mut contents = Contents::default();
        for entry in fs::read_dir(dir).map_err(StoreError::io(dir))? {
            let path = entry.map_err(StoreError::io(dir))?.path();
            match path.extension().and_then(|ending| ending.to_str()) {
                Some(UNFINISHED) => fs::remove_file(&path).map_err(StoreError::io(&path))?,
                Some(ENDING) => match read(&path) {
                    Ok(record) => contents.records.push(record),
                    Err(reason) => contents.unreadable.push((path, reason)),
                },
                _ => {}
            }
        }
        contents.records.sort_by_key(|record| record.id);
        contents.unreadable.sort();
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

    /// Removes a record; when this returns, it stays away after a power cut.
    pub(crate) fn remove(&self, job: JobId) -> Result<(), StoreError> {
        let path = self.path(job);
        fs::remove_file(&path).map_err(StoreError::io(&path))?;
        sync_dir(&self.dir)
    }

    /// Whether there is a file under this id, be it readable or not.
    pub(crate) fn has_file(&self, job: JobId) -> bool {
        self.path(job).try_exists().unwrap_or(true)
    }

    fn path(&self, job: JobId) -> PathBuf {
        self.dir.join(format!("{job}.{ENDING}"))
    }
}

fn read(path: &Path) -> Result<JobRecord, String> {
    let text = fs::read_to_string(path).map_err(|error| error.to_string())?;
    let record = record::read(&text)?;
    match path.file_stem().and_then(|stem| stem.to_str()) {
        Some(name) if name == record.id.to_string() => Ok(record),
        _ => Err(format!("it holds job `{}`; is it a copy?", record.id)),
    }
}

/// Puts `bytes` at `path` so that after a crash either the old or the new file is there, whole.
pub(crate) fn write_durably(path: &Path, bytes: &[u8]) -> Result<(), StoreError> {
    let unfinished = path.with_extension(UNFINISHED);
    let write = || {
        let mut file = File::create(&unfinished)?;
        file.write_all(bytes)?;
        file.sync_all()?;
        fs::rename(&unfinished, path)
    };
    write().map_err(StoreError::io(path))?;
    sync_dir(path.parent().unwrap_or(path))
}

/// Syncs a directory, so that renames and new files in it survive a power cut.
pub(crate) fn sync_dir(dir: &Path) -> Result<(), StoreError> {
    File::open(dir)
        .and_then(|dir| dir.sync_all())
        .map_err(StoreError::io(dir))
}
