//! Queueing a campaign.

use enolattice_grid::{CampaignSpec, Grid, InputError};
use enolattice_store::{JobKind, NewJob, Terms};

use crate::engine::{blocking, read_job};
use crate::open::now_unix_ms;
use crate::terms::{faults, room};
use crate::{Engine, EngineError, Job, JobState, Submission};

impl Engine {
    /// Queues a campaign. When this returns, the job survives a power cut.
    ///
    /// With `validate_only` the campaign is checked and the job that it would make is
    /// described, without an id; nothing is queued, and no data directory is needed.
    ///
    /// # Errors
    /// [`EngineError::Input`] with every fault, [`EngineError::RequestIdReused`], [`EngineError::QueueFull`],
    /// [`EngineError::Store`].
    pub async fn submit(&self, submission: Submission) -> Result<Job, EngineError> {
        let faults = faults(&submission.terms);
        if !faults.is_empty() {
            return Err(EngineError::Input(faults));
        }
        if submission.validate_only {
            let models = self.models.clone();
            return blocking(move || {
                Ok(would_be(
                    &*models.grid(&submission.campaign)?,
                    submission.terms,
                ))
            })
            .await;
        }
        let queue = self.queue()?;
        let (store, grids) = (queue.store.clone(), queue.grids.clone());
        let models = self.models.clone();
        let (id, job) = blocking(move || {
            let grid = models.grid(&submission.campaign)?;
            let new = NewJob {
                campaign_fingerprint: grid.fingerprint(),
                model_fingerprint: grid.model().fingerprint(),
                cells: grid.cells(),
                blocks: grid.blocks().count() as u64,
                request_id: submission.request_id,
                warnings: grid.campaign().warnings.clone(),
                kind: JobKind::Screening,
                terms: submission.terms,
                spec: submission.campaign.spelled_out(grid.model().library()),
            };
            room(&store.jobs(), &new.terms, &new.request_id)?;
            let created = store.create_job(new, now_unix_ms())?;
            let id = created.record.id;
            if created.is_new {
                grids.keep(id, grid);
            }
            Ok((created.is_new.then_some(id), read_job(&store, id)?))
        })
        .await?;
        if let (Some(id), Some(scheduler)) = (id, &queue.scheduler) {
            scheduler.submit(id);
        }
        Ok(job)
    }

    /// Every fault in the values of a campaign; none where it is sound.
    ///
    /// For those who have found faults of form already and want to tell all in one answer.
    ///
    /// # Errors
    /// [`EngineError::Stopping`].
    pub async fn faults(&self, campaign: CampaignSpec) -> Result<Vec<InputError>, EngineError> {
        let models = self.models.clone();
        blocking(move || Ok(models.faults(&campaign))).await
    }
}

pub(crate) fn would_be(grid: &Grid, terms: Terms) -> Job {
    Job {
        job: String::new(),
        title: grid.campaign().title.clone(),
        state: JobState::Queued,
        cells: grid.cells(),
        cells_done: 0,
        best_yield: None,
        campaign_fingerprint: grid.fingerprint().to_string(),
        model_fingerprint: grid.model().fingerprint().to_string(),
        submitted_unix_ms: now_unix_ms(),
        ended_unix_ms: None,
        failure: String::new(),
        warnings: grid.campaign().warnings.clone(),
        planning: None,
        terms,
    }
}
