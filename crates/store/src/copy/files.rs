//! The files of a store that no process has open, copied as they are.

use std::fs::{self, File};
use std::io;
use std::path::{Path, PathBuf};

use super::Copied;
use super::target::Target;
use crate::StoreError;
use crate::health::lock_if_there;
use crate::journal::{ENDING, sync_dir};
use crate::steps::step;

/// Directories of files that are written whole and renamed into place.
pub(crate) const PARTS: [&str; 2] = ["journal", "plans"];

/// Copies the files of a store as they are, sound or not.
pub(crate) fn files(from: &Path, to: &Path) -> Result<(), StoreError> {
    let _lock = lock_if_there(from)?;
    let target = Target::begin(to)?;
    for part in PARTS {
        let copy = target.part(part);
        fs::create_dir(&copy).map_err(StoreError::io(&copy))?;
        for path in records(&from.join(part))? {
            copy_file(&path, &copy)?;
        }
        sync_dir(&copy)?;
    }
    if from.join("db").is_dir() {
        copy_tree(&from.join("db"), &target.part("db"))?;
    }
    target.finish(Copied::default()).map(drop)
}

/// The files of a directory that are written whole; none where there is no directory.
pub(super) fn records(dir: &Path) -> Result<Vec<PathBuf>, StoreError> {
    let mut paths = listed(dir)?;
    paths.retain(|path| path.extension().is_some_and(|ending| ending == ENDING));
    Ok(paths)
}

/// What is in a directory, by name; nothing where there is no directory.
pub(crate) fn listed(dir: &Path) -> Result<Vec<PathBuf>, StoreError> {
    let entries = match fs::read_dir(dir) {
        Ok(entries) => entries,
        Err(error) if error.kind() == io::ErrorKind::NotFound => return Ok(Vec::new()),
        Err(error) => return Err(StoreError::io(dir)(error)),
    };
    let paths: io::Result<Vec<PathBuf>> = entries.map(|entry| Ok(entry?.path())).collect();
    let mut paths = paths.map_err(StoreError::io(dir))?;
    paths.sort();
    Ok(paths)
}

fn copy_tree(from: &Path, to: &Path) -> Result<(), StoreError> {
    fs::create_dir(to).map_err(StoreError::io(to))?;
    for path in listed(from)? {
        match path.is_dir() {
            true => copy_tree(&path, &to.join(path.file_name().unwrap_or_default()))?,
            false => copy_file(&path, to)?,
        }
    }
    sync_dir(to)
}

/// Copies the bytes alone: a copy of what may only be read must be one that can be written.
fn copy_file(path: &Path, into: &Path) -> Result<(), StoreError> {
    let to = into.join(path.file_name().unwrap_or_default());
    let mut from = File::open(path).map_err(StoreError::io(path))?;
    let mut write = || {
        step("copy a file")?;
        let mut file = File::create(&to)?;
        io::copy(&mut from, &mut file)?;
        file.sync_all()
    };
    write().map_err(StoreError::io(&to))
}

/// The bytes of a file or of all files in a directory.
pub(crate) fn bytes_in(path: &Path) -> io::Result<u64> {
    if !path.is_dir() {
        return Ok(path.symlink_metadata()?.len());
    }
    fs::read_dir(path)?
        .map(|entry| bytes_in(&entry?.path()))
        .sum()
}
