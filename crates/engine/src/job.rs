//! Jobs as they are seen from outside.

use enolattice_grid::CampaignSpec;
use enolattice_store::{JobKind, JobRecord, Progress, Terms};

/// State of a job.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum JobState {
    /// Waiting.
    Queued,
    /// Being screened.
    Running,
    /// Held by the user.
    Paused,
    /// All blocks committed.
    Done,
    /// Finished, but some blocks failed for good.
    DoneWithGaps,
    /// Given up.
    Failed,
    /// Cancelled by the user.
    Cancelled,
}

impl JobState {
    /// Whether the job has ended.
    pub fn is_ended(self) -> bool {
        !matches!(
            self,
            JobState::Queued | JobState::Running | JobState::Paused
        )
    }
}

impl From<enolattice_store::JobState> for JobState {
    fn from(state: enolattice_store::JobState) -> JobState {
        use enolattice_store::JobState as Kept;
        match state {
            Kept::Queued => JobState::Queued,
            Kept::Running => JobState::Running,
            Kept::Paused => JobState::Paused,
            Kept::Done => JobState::Done,
            Kept::DoneWithGaps => JobState::DoneWithGaps,
            Kept::Failed => JobState::Failed,
            Kept::Cancelled => JobState::Cancelled,
        }
    }
}

/// A job as seen from outside.
#[derive(Clone, Debug, PartialEq)]
pub struct Job {
    /// Id, apart from the campaign's fingerprint.
    pub job: String,
    /// Title of the campaign.
    pub title: String,
    /// State.
    pub state: JobState,
    /// Cells of the campaign.
    pub cells: u64,
    /// Cells whose block is committed.
    pub cells_done: u64,
    /// Highest expected yield so far.
    pub best_yield: Option<f64>,
    /// Fingerprint of the campaign, hexadecimal.
    pub campaign_fingerprint: String,
    /// Fingerprint of the model that scored it, hexadecimal.
    pub model_fingerprint: String,
    /// When it was submitted, milliseconds since 1970-01-01 UTC.
    pub submitted_unix_ms: u64,
    /// When it ended; `None` while it has not.
    pub ended_unix_ms: Option<u64>,
    /// Why it failed; empty otherwise.
    pub failure: String,
    /// Warnings of the campaign (duplicates merged, not covered, ...).
    pub warnings: Vec<String>,
    /// What it plans, where it makes a plan and screens nothing; it has no cells then.
    pub planning: Option<Planning>,
    /// Whose it is and when it may run.
    pub terms: Terms,
}

/// What a job plans.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Planning {
    /// The job whose ranking it plans from.
    pub job: String,
    /// The plan, once it is made.
    pub plan: Option<String>,
}

impl Job {
    pub(crate) fn of_record(record: JobRecord, progress: Progress) -> Job {
        let planning = match record.kind {
            JobKind::Screening => None,
            JobKind::Planning { of, .. } => {
                let made = record.state == enolattice_store::JobState::Done;
                let plan = record.plan_id().filter(|_| made);
                Some(Planning {
                    job: of.to_string(),
                    plan: plan.map(|plan| plan.to_string()),
                })
            }
        };
        Job {
            planning,
            terms: record.terms,
            job: record.id.to_string(),
            title: record.title,
            state: record.state.into(),
            cells: record.cells,
            cells_done: progress.cells_acknowledged,
            best_yield: progress.best_yield,
            campaign_fingerprint: record.campaign_fingerprint.to_string(),
            model_fingerprint: record.model_fingerprint.to_string(),
            submitted_unix_ms: record.submitted_unix_ms,
            ended_unix_ms: record.ended_unix_ms,
            failure: record.failure,
            warnings: record.warnings,
        }
    }
}

/// A campaign to be screened.
#[derive(Clone, Debug)]
pub struct Submission {
    /// The campaign.
    pub campaign: CampaignSpec,
    /// Client's id of the request; the same id gives the same job. Empty: none.
    pub request_id: String,
    /// Check only; nothing is queued.
    pub validate_only: bool,
    /// Whose the job is and when it may run.
    pub terms: Terms,
}
