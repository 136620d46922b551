//! Jobs as the store keeps them.

use std::fmt;
use std::sync::Arc;

use enolattice_grid::CampaignSpec;
use enolattice_model::Fingerprint;

use crate::{JobId, PlanId};

/// State of a job. Which changes are allowed is the scheduler's business.
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
    /// All states.
    pub const ALL: [JobState; 7] = [
        JobState::Queued,
        JobState::Running,
        JobState::Paused,
        JobState::Done,
        JobState::DoneWithGaps,
        JobState::Failed,
        JobState::Cancelled,
    ];

    /// The state's name as it is printed and stored.
    pub fn name(self) -> &'static str {
        match self {
            JobState::Queued => "queued",
            JobState::Running => "running",
            JobState::Paused => "paused",
            JobState::Done => "done",
            JobState::DoneWithGaps => "done with gaps",
            JobState::Failed => "failed",
            JobState::Cancelled => "cancelled",
        }
    }

    /// The state with this name.
    pub fn from_name(name: &str) -> Option<JobState> {
        JobState::ALL.into_iter().find(|state| state.name() == name)
    }

    /// Whether the job has ended.
    pub fn is_ended(self) -> bool {
        !matches!(
            self,
            JobState::Queued | JobState::Running | JobState::Paused
        )
    }
}

impl fmt::Display for JobState {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.pad(self.name())
    }
}

/// What a job does.
#[derive(Clone, Debug, Default, PartialEq)]
pub enum JobKind {
    /// Screens its campaign.
    #[default]
    Screening,
    /// Makes a plan of plates from another job's ranking once that has ended; its campaign is empty.
    Planning {
        /// The job whose ranking it plans from.
        of: JobId,
        /// What the plan is asked to be, as JSON.
        request: String,
    },
}

impl JobKind {
    /// The kind's name as it is printed.
    pub fn name(&self) -> &'static str {
        match self {
            JobKind::Screening => "screening",
            JobKind::Planning { .. } => "planning",
        }
    }
}

/// Whose job it is and when it may run.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Terms {
    /// Who asks, as told; jobs of different requesters share the engine. Empty: nobody in particular.
    pub requester: String,
    /// Jobs of higher priority run first.
    pub priority: i32,
    /// Before this time it is not started, milliseconds since 1970-01-01 UTC.
    pub not_before_unix_ms: Option<u64>,
    /// After this time it is given up, milliseconds since 1970-01-01 UTC.
    pub deadline_unix_ms: Option<u64>,
}

/// A job to be made.
#[derive(Clone, Debug)]
pub struct NewJob {
    /// The campaign as read; its title becomes the job's.
    pub spec: CampaignSpec,
    /// Fingerprint of the campaign.
    pub campaign_fingerprint: Fingerprint,
    /// Fingerprint of the model that will score it.
    pub model_fingerprint: Fingerprint,
    /// Cells of the campaign.
    pub cells: u64,
    /// Blocks of the campaign.
    pub blocks: u64,
    /// Client's id of the request; empty: none.
    pub request_id: String,
    /// What the user should know about the campaign.
    pub warnings: Vec<String>,
    /// What it does.
    pub kind: JobKind,
    /// Whose it is and when it may run.
    pub terms: Terms,
}

/// A job.
#[derive(Clone, Debug, PartialEq)]
pub struct JobRecord {
    /// Id.
    pub id: JobId,
    /// Title of the campaign.
    pub title: String,
    /// The campaign as read.
    pub spec: Arc<CampaignSpec>,
    /// Fingerprint of the campaign.
    pub campaign_fingerprint: Fingerprint,
    /// Fingerprint of the model that scores it.
    pub model_fingerprint: Fingerprint,
    /// Cells of the campaign.
    pub cells: u64,
    /// Blocks of the campaign.
    pub blocks: u64,
    /// Client's id of the request; empty: none.
    pub request_id: String,
    /// SHA-256 of the request, to tell a repeated request from another with the same id.
    pub request_digest: Fingerprint,
    /// When it was submitted, milliseconds since 1970-01-01 UTC.
    pub submitted_unix_ms: u64,
    /// When it ended; `None` while it has not.
    pub ended_unix_ms: Option<u64>,
    /// State.
    pub state: JobState,
    /// Blocks that were acknowledged when it ended; fewer now means that some were lost. 0 while it has not.
    pub committed_at_end: u64,
    /// Why it failed or has gaps; empty otherwise.
    pub failure: String,
    /// What the user should know about the campaign.
    pub warnings: Vec<String>,
    /// Raised whenever committed blocks were lost or dropped: pages begun before are outdated.
    pub generation: u32,
    /// What it does.
    pub kind: JobKind,
    /// Whose it is and when it may run.
    pub terms: Terms,
}

impl JobRecord {
    /// The plan that a job makes, under the job's own id; none of a screening.
    pub fn plan_id(&self) -> Option<PlanId> {
        matches!(self.kind, JobKind::Planning { .. }).then(|| PlanId::of_job(self.id))
    }
}

/// What [`crate::Store::create_job`] did.
#[derive(Clone, Debug, PartialEq)]
pub struct Created {
    /// The job.
    pub record: JobRecord,
    /// Whether it was made now; `false` where the same request had made it before.
    pub is_new: bool,
}

/// A change of a job's state.
#[derive(Clone, Debug, PartialEq)]
pub struct StateChange {
    /// State it must be in; else nothing is changed.
    pub from: JobState,
    /// State it will be in.
    pub to: JobState,
    /// When, milliseconds since 1970-01-01 UTC; kept as the time of the end if `to` is an end.
    pub at_unix_ms: u64,
    /// Why it failed or has gaps; empty otherwise.
    pub failure: String,
}
