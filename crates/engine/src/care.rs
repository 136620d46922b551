//! Looking after a data directory that no engine works at: what is wrong with it, copies and their way back.
//!
//! These calls wait for the disk; nothing else may wait for them.

use std::path::Path;

use enolattice_store::{Copied, Health, OpenReport, StoreError};

use crate::open::now_unix_ms;

/// What a copy holds, and what opening the directory found before.
#[derive(Clone, Debug, PartialEq)]
pub struct BackedUp {
    /// What the copy holds.
    pub copied: Copied,
    /// What was found and mended in the directory itself.
    pub found: OpenReport,
}

/// Mends what can be mended in a data directory; see [`enolattice_store::mend`].
///
/// # Errors
/// Those of [`enolattice_store::mend`].
pub fn mend(dir: &Path) -> Result<Health, StoreError> {
    enolattice_store::mend(dir, now_unix_ms())
}

/// What [`mend`] would find and do; nothing is changed. It works on a copy among the system's temporary files.
///
/// # Errors
/// Those of [`enolattice_store::look`].
pub fn look(dir: &Path) -> Result<Health, StoreError> {
    enolattice_store::look(dir, &std::env::temp_dir(), now_unix_ms())
}

/// Copies jobs, plans and scores into a new directory.
///
/// # Errors
/// Those of [`enolattice_store::copy_store`]; [`StoreError::InUse`] where an engine works at the directory.
pub fn back_up(dir: &Path, to: &Path) -> Result<BackedUp, StoreError> {
    let (copied, found) = enolattice_store::copy_store(dir, to, now_unix_ms())?;
    Ok(BackedUp { copied, found })
}

/// Copies jobs and plans into a new directory, also while an engine works at them.
///
/// # Errors
/// Those of [`enolattice_store::copy_jobs`].
pub fn back_up_jobs(dir: &Path, to: &Path) -> Result<BackedUp, StoreError> {
    let copied = enolattice_store::copy_jobs(dir, to)?;
    Ok(BackedUp {
        copied,
        found: OpenReport::default(),
    })
}

/// Makes a data directory of a copy, and mends it.
///
/// # Errors
/// Those of [`enolattice_store::restore`] and [`enolattice_store::mend`].
pub fn restore(from: &Path, dir: &Path) -> Result<Health, StoreError> {
    enolattice_store::restore(from, dir)?;
    mend(dir)
}
