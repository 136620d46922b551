//! Plans that jobs of their own make.

use std::sync::Arc;

use enolattice_grid::CampaignSpec;
use enolattice_plate::PlanRequest;
use enolattice_scheduler::Piece;
use enolattice_store::{JobId, JobKind, JobRecord, NewJob, PlanId, Store, Terms};

use crate::engine::{blocking, job_id, read_job};
use crate::grids::Grids;
use crate::kept_plans::{in_words, keep};
use crate::open::now_unix_ms;
use crate::plan::drafted;
use crate::{Engine, EngineError, Job, terms};

/// A plan that is to be made by a job of its own.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct PlanOrder {
    /// Job whose ranking it is made from; it may still wait or run.
    pub job: String,
    /// What the plan is asked to be.
    pub request: PlanRequest,
    /// Client's id of the request; the same id gives the same job. Empty: none.
    pub request_id: String,
    /// Whose the job is and when it may run.
    pub terms: Terms,
}

impl Engine {
    /// Queues a job that makes a plan once the job that it plans from has ended, and keeps it. When this returns, the order
    /// survives a power cut; the plan will have the id of the job.
    ///
    /// # Errors
    /// [`EngineError::Input`] with every fault of the request and the terms, [`EngineError::JobUnknown`],
    /// [`EngineError::WrongState`] where the job screens nothing, [`EngineError::RequestIdReused`],
    /// [`EngineError::QueueFull`], [`EngineError::Store`].
    pub async fn order_plan(&self, order: PlanOrder) -> Result<Job, EngineError> {
        let mut faults = order.request.faults();
        faults.extend(terms::faults(&order.terms));
        if !faults.is_empty() {
            return Err(EngineError::Input(faults));
        }
        let queue = self.queue()?;
        let store = queue.store.clone();
        let (id, job) = blocking(move || {
            let of = store.job(job_id(&order.job)?)?;
            if of.kind != JobKind::Screening {
                return Err(EngineError::WrongState {
                    job: order.job,
                    state: of.state.name(),
                    remedy: "it makes a plan itself; name the job that it plans from",
                });
            }
            let title = match order.request.title.as_str() {
                "" => of.title.clone(),
                title => title.to_owned(),
            };
            let new = NewJob {
                spec: CampaignSpec {
                    title,
                    ..CampaignSpec::default()
                },
                campaign_fingerprint: of.campaign_fingerprint,
                model_fingerprint: of.model_fingerprint,
                cells: 0,
                blocks: 0,
                request_id: order.request_id,
                warnings: Vec::new(),
                kind: JobKind::Planning {
                    of: of.id,
                    request: in_words(&order.request)?,
                },
                terms: order.terms,
            };
            terms::room(&store.jobs(), &new.terms, &new.request_id)?;
            let created = store.create_job(new, now_unix_ms())?;
            let id = created.record.id;
            Ok((created.is_new.then_some(id), read_job(&store, id)?))
        })
        .await?;
        if let (Some(id), Some(scheduler)) = (id, &queue.scheduler) {
            scheduler.submit(id);
        }
        Ok(job)
    }
}

/// What a planning job does: makes its plan and keeps it under the job's own id. A plan that was kept before the engine stopped
/// is not made again.
pub(crate) fn planning(
    store: &Arc<Store>,
    grids: &Arc<Grids>,
    record: &JobRecord,
    of: JobId,
    request: &str,
) -> Result<Piece, String> {
    let (store, grids) = (store.clone(), grids.clone());
    let id = PlanId::of_job(record.id);
    let request: PlanRequest = serde_json::from_str(request).map_err(|error| {
        format!(
            "its request is not as this version writes requests ({error}); order the plan again"
        )
    })?;
    Ok(Box::new(move |stop| {
        if store.plan(id).is_ok() {
            return Ok(());
        }
        let made = drafted(&store, &grids, of, &request, stop);
        made.and_then(|plan| keep(&store, id, plan))
            .map(drop)
            .map_err(|error| match error {
                EngineError::Input(faults) => {
                    let told: Vec<String> = faults.iter().map(ToString::to_string).collect();
                    told.join("; ")
                }
                other => other.to_string(),
            })
    }))
}
