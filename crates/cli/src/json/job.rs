//! A job.

use enolattice_engine::{Job, JobState};
use serde::Serialize;

/// A job as `jobs`, `submit`, `watch` and `cancel` print it.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct JobRecord {
    job: String,
    title: String,
    state: &'static str,
    cells: u64,
    cells_done: u64,
    best_yield: Option<f64>,
    campaign_fingerprint: String,
    model_fingerprint: String,
    submitted_unix_ms: u64,
    ended_unix_ms: Option<u64>,
    failure: Option<String>,
    warnings: Vec<String>,
    /// The job that it plans from; of a job that makes a plan.
    plans_from: Option<String>,
    /// The plan that it made.
    plan: Option<String>,
    requester: Option<String>,
    priority: i32,
    not_before_unix_ms: Option<u64>,
    deadline_unix_ms: Option<u64>,
}

impl From<Job> for JobRecord {
    fn from(job: Job) -> JobRecord {
        JobRecord {
            job: job.job,
            title: job.title,
            state: state_name(job.state),
            cells: job.cells,
            cells_done: job.cells_done,
            best_yield: job.best_yield,
            campaign_fingerprint: job.campaign_fingerprint,
            model_fingerprint: job.model_fingerprint,
            submitted_unix_ms: job.submitted_unix_ms,
            ended_unix_ms: job.ended_unix_ms,
            failure: Some(job.failure).filter(|failure| !failure.is_empty()),
            warnings: job.warnings,
            plans_from: job.planning.as_ref().map(|planning| planning.job.clone()),
            plan: job.planning.and_then(|planning| planning.plan),
            requester: Some(job.terms.requester).filter(|name| !name.is_empty()),
            priority: job.terms.priority,
            not_before_unix_ms: job.terms.not_before_unix_ms,
            deadline_unix_ms: job.terms.deadline_unix_ms,
        }
    }
}

/// The word for a state.
pub(crate) fn state_name(state: JobState) -> &'static str {
    match state {
        JobState::Queued => "queued",
        JobState::Running => "running",
        JobState::Paused => "paused",
        JobState::Done => "done",
        JobState::DoneWithGaps => "done with gaps",
        JobState::Failed => "failed",
        JobState::Cancelled => "cancelled",
    }
}
