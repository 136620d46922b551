//! Opening a store: lock, version, journal, database, verification.

use std::path::PathBuf;

use enolattice_grid::BlockId;

use crate::JobId;

/// What opening a store found.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct OpenReport {
    /// Where the broken database went, if it was.
    pub set_aside: Option<PathBuf>,
    /// Jobs that had ended and wait again because blocks of theirs were lost.
    pub queued_again: Vec<JobId>,
    /// Blocks that did not match their checksum and were removed.
    pub damaged: Vec<(JobId, BlockId)>,
    /// Journal files that could not be read, each with the reason; left where they are.
    pub unreadable: Vec<(PathBuf, String)>,
}

impl OpenReport {
    /// The report in sentences; none where there is nothing to say.
    pub fn sentences(&self) -> Vec<String> {
        unimplemented!()
    }
}
