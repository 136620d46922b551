//! The rules of the queue: pure functions, no clock, no disk.

use enolattice_store::{JobId, JobRecord, JobState};

/// What happens to a job.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Event {
    /// Its turn has come.
    Start,
    /// The engine stopped before the job ended.
    Interrupt,
    /// The user gave it up.
    Cancel,
    /// All blocks are committed.
    Finish,
    /// Every block was tried, some failed for good.
    FinishWithGaps,
    /// It cannot go on.
    Fail,
}

/// A job's state does not allow the event.
#[derive(Clone, Copy, Debug, PartialEq, Eq, thiserror::Error)]
#[error("a job that is {state} cannot {event:?}")]
pub struct Refused {
    /// State.
    pub state: JobState,
    /// Event.
    pub event: Event,
}

/// The state after an event.
///
/// # Errors
/// [`Refused`] where the state does not allow the event.
pub fn transition(state: JobState, event: Event) -> Result<JobState, Refused> {
    unimplemented!("{state}{event:?}")
}

/// The job to run next: of those that wait, the one submitted first.
pub fn next_job(jobs: &[JobRecord]) -> Option<JobId> {
    unimplemented!("{jobs:?}")
}
