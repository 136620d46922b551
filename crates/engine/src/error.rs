//! Why an engine did not do what it was asked.

use enolattice_grid::{GridError, InputError};
use enolattice_scheduler::{Event, Refused, SchedulerError};
use enolattice_store::{JobId, StoreError, TokenError};

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
    /// No such plan.
    #[error("there is no plan `{plan}`; `plans` lists them")]
    PlanUnknown {
        /// The id given.
        plan: String,
    },
    /// Neither a job nor a plan.
    #[error("there is no job and no plan `{id}`; `jobs` and `plans` list them")]
    NothingKept {
        /// The id given.
        id: String,
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
    /// The request id was used for another request.
    #[error(
        "the request id `{request_id}` belongs to job `{job}`, which was another request; choose a new request id"
    )]
    RequestIdReused {
        /// The request id.
        request_id: String,
        /// The job it made.
        job: String,
    },
    /// The requester has too many jobs that have not ended.
    #[error(
        "{} has {most} jobs that have not ended; wait, or cancel some",
        whose(requester)
    )]
    QueueFull {
        /// Requester; empty: nobody in particular.
        requester: String,
        /// Jobs allowed.
        most: usize,
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
    /// The engine is being stopped.
    #[error("the engine is being stopped; ask again when it is back")]
    Stopping,
    /// The model failed.
    #[error(transparent)]
    Model(#[from] enolattice_model::ModelError),
}

fn whose(requester: &str) -> String {
    match requester {
        "" => "who gives no name".to_owned(),
        name => format!("requester `{name}`"),
    }
}

impl EngineError {
    /// One fault of one field.
    pub(crate) fn field(
        field: &str,
        value: &str,
        code: &'static str,
        reason: &str,
        remedy: &str,
    ) -> EngineError {
        let shown: String = value.chars().take(80).collect();
        EngineError::Input(vec![InputError::of_field(
            code, field, shown, reason, remedy,
        )])
    }

    /// A job's state does not allow what was asked.
    pub(crate) fn refused(job: JobId, refused: Refused) -> EngineError {
        let remedy = match refused.event {
            Event::Cancel => "a job that has ended cannot be cancelled",
            Event::Pause => "only a job that waits or runs can be paused",
            Event::Resume => "only a paused job can be resumed",
            _ => "look at it and ask again",
        };
        EngineError::WrongState {
            job: job.to_string(),
            state: refused.state.name(),
            remedy,
        }
    }

    /// The store was asked for although the engine was opened without one.
    pub(crate) fn without_store() -> EngineError {
        EngineError::Store {
            reason: "this engine was opened without a data directory".to_owned(),
        }
    }
}

impl From<StoreError> for EngineError {
    fn from(error: StoreError) -> EngineError {
        match error {
            StoreError::JobUnknown { job } => EngineError::JobUnknown { job },
            StoreError::PlanUnknown { plan } => EngineError::PlanUnknown { plan },
            StoreError::RequestIdReused { request_id, job } => EngineError::RequestIdReused {
                request_id,
                job: job.to_string(),
            },
            StoreError::RequestIdTooLong { length, limit } => EngineError::field(
                "request_id",
                "",
                "VALUE_OUT_OF_RANGE",
                &format!("it has {length} bytes"),
                &format!("give at most {limit} bytes"),
            ),
            StoreError::StateMoved { job, found, .. } => EngineError::WrongState {
                job: job.to_string(),
                state: found.name(),
                remedy: "its state changed meanwhile; look at it and ask again",
            },
            StoreError::NotEnded { job, state } => EngineError::WrongState {
                job: job.to_string(),
                state: state.name(),
                remedy: "cancel it before it is deleted",
            },
            StoreError::PageOutdated => EngineError::PageToken {
                reason: "the job was screened anew since the page before".to_owned(),
            },
            other => EngineError::Store {
                reason: other.to_string(),
            },
        }
    }
}

impl From<SchedulerError> for EngineError {
    fn from(error: SchedulerError) -> EngineError {
        match error {
            SchedulerError::Refused { job, refused } => EngineError::refused(job, refused),
            SchedulerError::Store(error) => error.into(),
            SchedulerError::ShutDown => EngineError::Stopping,
            SchedulerError::Threads { .. } => EngineError::Store {
                reason: error.to_string(),
            },
        }
    }
}

impl From<TokenError> for EngineError {
    fn from(error: TokenError) -> EngineError {
        EngineError::PageToken {
            reason: match error {
                TokenError::Damaged => "it is damaged".to_owned(),
                TokenError::OtherVersion => "it is of another version".to_owned(),
                TokenError::OtherArguments { argument } => {
                    format!("it was made for another {argument}")
                }
            },
        }
    }
}

impl From<GridError> for EngineError {
    fn from(error: GridError) -> EngineError {
        let (field, code) = match error {
            GridError::TooLarge => ("campaign", "CAMPAIGN_TOO_LARGE"),
            GridError::EmptyAxis { axis } => (axis, "AXIS_EMPTY"),
            GridError::ShrunkAxis { axis, .. } => (axis, "AXIS_EMPTY"),
        };
        EngineError::field(
            field,
            "",
            code,
            &error.to_string(),
            "change the axis and ask again",
        )
    }
}
