//! Reports: what a job or a plan says, gathered and written as one page of HTML.

mod cells;
mod job;
mod maps;
mod plan;
mod sources;

use crate::{Axis, Engine, EngineError};

/// A question for a report.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct ReportQuery {
    /// Id of a job or of a plan.
    pub id: String,
    /// Axes of the rows and the columns of each map of a job; empty: two maps that suit its axes.
    pub maps: Vec<[Axis; 2]>,
}

impl Engine {
    /// A report of a job or of a plan: one page of HTML that holds all that it shows.
    ///
    /// # Errors
    /// [`EngineError::NothingKept`] where no job and no plan has the id, [`EngineError::WrongState`] where the job's cells can no
    /// longer be read, [`EngineError::Model`], [`EngineError::Store`].
    pub async fn report(&self, query: ReportQuery) -> Result<String, EngineError> {
        match self.kept_plan(&query.id).await {
            Ok(plan) => self.plan_report(plan).await,
            Err(EngineError::PlanUnknown { .. }) => match self.job_report(&query).await {
                Err(EngineError::JobUnknown { job }) => Err(EngineError::NothingKept { id: job }),
                other => other,
            },
            Err(error) => Err(error),
        }
    }
}
