//! The directory that a copy is made in: complete, or not there.

use std::fs;
use std::path::{Path, PathBuf};

use super::{Copied, bytes_in, listed};
use crate::StoreError;
use crate::journal::sync_dir;
use crate::open::{UNFINISHED_COPY, write_format};
use crate::steps::step;

/// A copy that is being made; what was made of it is removed when it is dropped unfinished.
///
/// While the file `unfinished-copy` is there no store opens the directory. It is built in place, not beside it, so that
/// the directory may be one that another disk is mounted at.
pub(super) struct Target {
    dir: PathBuf,
    /// Whether the directory was there, empty.
    was_there: bool,
    finished: bool,
}

impl Target {
    /// Takes a directory that is new or empty.
    pub(super) fn begin(dir: &Path) -> Result<Target, StoreError> {
        let was_there = dir.is_dir();
        if dir.exists() && (!was_there || !listed(dir)?.is_empty()) {
            return Err(match dir.join(UNFINISHED_COPY).exists() {
                true => StoreError::CopyUnfinished { dir: dir.into() },
                false => StoreError::NotEmpty { dir: dir.into() },
            });
        }
        fs::create_dir_all(dir).map_err(StoreError::io(dir))?;
        let target = Target {
            dir: dir.into(),
            was_there,
            finished: false,
        };
        target.mark().map_err(StoreError::io(dir))?;
        sync_dir(dir)?;
        Ok(target)
    }

    /// The mark is there from the first moment: its bytes say nothing.
    fn mark(&self) -> std::io::Result<()> {
        step("mark an unfinished copy")?;
        fs::File::create(self.part(UNFINISHED_COPY))?.sync_all()
    }

    /// A file or directory of the copy.
    pub(super) fn part(&self, name: &str) -> PathBuf {
        self.dir.join(name)
    }

    /// Makes a store of it.
    pub(super) fn finish(mut self, copied: Copied) -> Result<Copied, StoreError> {
        write_format(&self.dir)?;
        sync_dir(&self.dir)?;
        let bytes = bytes_in(&self.dir).map_err(StoreError::io(&self.dir))?;
        let marker = self.part(UNFINISHED_COPY);
        step("remove the mark of an unfinished copy")
            .and_then(|()| fs::remove_file(&marker))
            .map_err(StoreError::io(&marker))?;
        self.finished = true;
        sync_dir(&self.dir)?;
        if let Some(parent) = self.dir.parent().filter(|parent| *parent != Path::new("")) {
            sync_dir(parent)?;
        }
        Ok(Copied { bytes, ..copied })
    }
}

impl Drop for Target {
    fn drop(&mut self) {
        if self.finished {
            return;
        }
        // What is left of it is marked as unfinished; the first error is the one to tell.
        let _ = self.remove();
    }
}

impl Target {
    fn remove(&self) -> std::io::Result<()> {
        let marker = self.part(UNFINISHED_COPY);
        for entry in fs::read_dir(&self.dir)? {
            let path = entry?.path();
            if path.is_dir() {
                fs::remove_dir_all(&path)?;
            } else if path != marker {
                fs::remove_file(&path)?;
            }
        }
        // Last: until then the directory says what it is.
        if marker.exists() {
            fs::remove_file(&marker)?;
        }
        match self.was_there {
            true => Ok(()),
            false => fs::remove_dir(&self.dir),
        }
    }
}
