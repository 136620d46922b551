//! The engine.

use std::path::PathBuf;

use enolattice_grid::{CampaignSpec, InputError};
use enolattice_model::Explanation;

use crate::{ExplainTarget, RankPage, RankQuery, ReagentRow, SiteReport};

/// How an engine is opened.
#[derive(Clone, Debug)]
pub struct EngineConfig {
    /// Directory of its data.
    pub data_dir: PathBuf,
    /// Compute threads; 0: one for each core.
    pub threads: usize,
}

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
}

/// Why an engine did not do what it was asked.
#[derive(Debug, thiserror::Error)]
pub enum EngineError {
    /// Faults of the input, all of them.
    #[error("{} fault(s) in the input; the first: {}", .0.len(), .0.first().map(ToString::to_string).unwrap_or_default())]
    Input(Vec<InputError>),
    /// No such job.
    #[error("there is no job `{job}`; `jobs` lists them")]
    JobUnknown {
        /// The id given.
        job: String,
    },
    /// No such cell.
    #[error("job `{job}` has no cell {cell}; its cells are 0 to {last}")]
    CellUnknown {
        /// Job.
        job: String,
        /// Cell given.
        cell: u64,
        /// Last cell.
        last: u64,
    },
    /// The job's state does not allow it.
    #[error("job `{job}` is {state}; {remedy}")]
    WrongState {
        /// Job.
        job: String,
        /// Its state.
        state: &'static str,
        /// What to do.
        remedy: &'static str,
    },
    /// The page token belongs to other arguments or is damaged.
    #[error("the page token does not fit: {reason}; ask for the first page again")]
    PageToken {
        /// Why.
        reason: String,
    },
    /// The store failed.
    #[error("the store failed: {reason}")]
    Store {
        /// Why.
        reason: String,
    },
    /// The model failed.
    #[error(transparent)]
    Model(#[from] enolattice_model::ModelError),
}

/// The engine: a store, a scheduler and a model.
#[derive(Debug)]
pub struct Engine {}

impl Engine {
    /// Opens the data directory, takes up unfinished jobs and starts the scheduler.
    pub async fn open(config: EngineConfig) -> Result<Engine, EngineError> {
        unimplemented!("{config:?}")
    }
    /// Queues a campaign. When this returns, the job survives a power cut.
    pub async fn submit(&self, submission: Submission) -> Result<Job, EngineError> {
        unimplemented!("{submission:?}")
    }
    /// All jobs, newest first.
    pub async fn jobs(&self) -> Result<Vec<Job>, EngineError> {
        unimplemented!()
    }
    /// One job.
    pub async fn job(&self, job: &str) -> Result<Job, EngineError> {
        unimplemented!("{job}")
    }
    /// Changes of one job, from now to its end; the first value is its present state.
    pub async fn watch(&self, job: &str) -> Result<tokio::sync::watch::Receiver<Job>, EngineError> {
        unimplemented!("{job}")
    }
    /// Cancels a job between two blocks.
    pub async fn cancel(&self, job: &str) -> Result<Job, EngineError> {
        unimplemented!("{job}")
    }
    /// A page of the ranking.
    pub async fn rank(&self, query: RankQuery) -> Result<RankPage, EngineError> {
        unimplemented!("{query:?}")
    }
    /// Everything about one cell.
    pub async fn explain(&self, target: ExplainTarget) -> Result<Explanation, EngineError> {
        unimplemented!("{target:?}")
    }
    /// Acidic sites of molecules.
    pub async fn sites(&self, smiles: &[String]) -> Result<Vec<SiteReport>, EngineError> {
        unimplemented!("{smiles:?}")
    }
    /// The library; `word` narrows it, empty gives all.
    pub async fn reagents(&self, word: &str) -> Result<Vec<ReagentRow>, EngineError> {
        unimplemented!("{word}")
    }
    /// Stops the scheduler between blocks and closes the store.
    pub async fn close(self) -> Result<(), EngineError> {
        unimplemented!()
    }
}
