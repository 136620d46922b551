//! Plans that are kept.

use enolattice_plate::{Plan, PlanRequest};
use enolattice_store::{PlanId, PlanRecord, Store};
use serde::Serialize;

use crate::engine::{blocking, job_id};
use crate::open::now_unix_ms;
use crate::{Engine, EngineError};

/// A kept plan in a line.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PlanSummary {
    /// Id.
    pub plan: String,
    /// Job whose ranking it was made from.
    pub job: String,
    /// Title of the request; where it has none, of the campaign.
    pub title: String,
    /// When it was made, milliseconds since 1970-01-01 UTC.
    pub made_unix_ms: u64,
    /// Plates.
    pub plates: u32,
    /// Wells of all plates that hold something.
    pub wells: u32,
}

impl Engine {
    /// Turns a job into plates, as [`Engine::draft_plan`], and keeps the plan. When this returns, the plan survives a power cut.
    ///
    /// # Errors
    /// As [`Engine::draft_plan`].
    pub async fn plan(&self, job: String, request: PlanRequest) -> Result<Plan, EngineError> {
        let plan = self.draft_plan(job, request).await?;
        let store = self.queue()?.store.clone();
        blocking(move || {
            let id = store.new_plan_id(now_unix_ms())?;
            keep(&store, id, plan)
        })
        .await
    }

    /// Deletes a kept plan.
    ///
    /// # Errors
    /// [`EngineError::PlanUnknown`], [`EngineError::Store`].
    pub async fn delete_plan(&self, plan: &str) -> Result<(), EngineError> {
        let (store, id) = (self.queue()?.store.clone(), plan.parse::<PlanId>()?);
        blocking(move || match store.delete_plan(id)? {
            true => Ok(()),
            false => Err(EngineError::PlanUnknown {
                plan: id.to_string(),
            }),
        })
        .await
    }

    /// A kept plan.
    ///
    /// # Errors
    /// [`EngineError::PlanUnknown`], [`EngineError::Store`] where it cannot be read any more.
    pub async fn kept_plan(&self, plan: &str) -> Result<Plan, EngineError> {
        let (store, id) = (self.queue()?.store.clone(), plan.parse()?);
        blocking(move || {
            let (_, document) = store.plan(id)?;
            serde_json::from_str(&document).map_err(|error| EngineError::Store {
                reason: format!(
                    "plan `{id}` is not as this version writes plans ({error}); read it with the version that made it, or plan again"
                ),
            })
        })
        .await
    }

    /// Kept plans, newest first: those of a job, or all.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::Store`].
    pub async fn plans(&self, job: Option<&str>) -> Result<Vec<PlanSummary>, EngineError> {
        let store = &self.queue()?.store;
        let job = job.map(job_id).transpose()?;
        if let Some(job) = job {
            store.job(job)?;
        }
        let plans = store.plans().into_iter().rev();
        let wanted = plans.filter(|record| job.is_none_or(|job| record.job == job));
        Ok(wanted.map(summary).collect())
    }
}

/// The JSON of a plan or of a request for one.
pub(crate) fn in_words<T: Serialize>(what: &T) -> Result<String, EngineError> {
    serde_json::to_string(what).map_err(|error| EngineError::Store {
        reason: format!("the plan cannot be put into words: {error}"),
    })
}

/// Keeps a plan under an id; when this returns, it survives a power cut.
pub(crate) fn keep(store: &Store, id: PlanId, mut plan: Plan) -> Result<Plan, EngineError> {
    let now = now_unix_ms();
    plan.id = id.to_string();
    plan.made_unix_ms = now;
    let title = match plan.title.as_str() {
        "" => &plan.campaign,
        title => title,
    };
    let record = PlanRecord {
        id,
        job: job_id(&plan.job)?,
        title: title.to_owned(),
        made_unix_ms: now,
        plates: plan.plates.len() as u32,
        wells: plan.wells().count() as u32,
    };
    store.keep_plan(record, in_words(&plan)?)?;
    Ok(plan)
}

fn summary(record: PlanRecord) -> PlanSummary {
    PlanSummary {
        plan: record.id.to_string(),
        job: record.job.to_string(),
        title: record.title,
        made_unix_ms: record.made_unix_ms,
        plates: record.plates,
        wells: record.wells,
    }
}
