//! What opening a store found, in values and in sentences.

use std::path::PathBuf;

use enolattice_grid::BlockId;

use crate::JobId;

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
    /// Blocks of jobs whose records are not there or cannot be read; kept, out of sight.
    pub blocks_of_no_job: u64,
    /// Files that a crash left unfinished and that were removed. Nobody had been told that they were kept.
    pub leftovers: Vec<PathBuf>,
}

impl OpenReport {
    /// What is wrong in sentences; none where nothing is. Leftovers are usual after a crash and are no fault.
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
