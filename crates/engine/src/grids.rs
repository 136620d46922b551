//! The grids of jobs, built when first asked for and kept.

use std::collections::HashMap;
use std::sync::{Arc, Mutex, PoisonError};

use enolattice_grid::Grid;
use enolattice_store::{JobId, JobKind, JobRecord};

use crate::EngineError;
use crate::models::Models;

/// Grids kept at most; a large campaign's takes tens of megabytes.
const MOST_KEPT: usize = 8;

/// Grids by job.
#[derive(Debug)]
pub(crate) struct Grids {
    models: Arc<Models>,
    kept: Mutex<HashMap<JobId, Arc<Grid>>>,
}

impl Grids {
    pub(crate) fn new(models: Arc<Models>) -> Grids {
        Grids {
            models,
            kept: Mutex::default(),
        }
    }

    /// Keeps the grid of a job.
    pub(crate) fn keep(&self, job: JobId, grid: Arc<Grid>) {
        let mut kept = self.kept.lock().unwrap_or_else(PoisonError::into_inner);
        if kept.len() >= MOST_KEPT {
            // Ids sort by submission: the oldest job is the least likely to be asked for again.
            let oldest = kept.keys().min().copied();
            oldest.map(|oldest| kept.remove(&oldest));
        }
        kept.insert(job, grid);
    }

    /// The grid of a job that has been read from the store.
    ///
    /// # Errors
    /// [`EngineError::WrongState`] where the job plans and has no campaign, and where this version makes another campaign of the record, so
    /// that its cell numbers would be read wrongly.
    pub(crate) fn of_record(&self, record: &JobRecord) -> Result<Arc<Grid>, EngineError> {
        if let Some(grid) = self.kept(record.id) {
            return Ok(grid);
        }
        if let JobKind::Planning { .. } = record.kind {
            return Err(EngineError::WrongState {
                job: record.id.to_string(),
                state: record.state.name(),
                remedy: "it makes a plan and screens no cells; ask for the job that it plans from",
            });
        }
        let grid = self.models.grid(&record.spec)?;
        if grid.fingerprint() != record.campaign_fingerprint {
            return Err(EngineError::WrongState {
                job: record.id.to_string(),
                state: record.state.name(),
                remedy: "its campaign does not mean the same to this version of the program and \
                         its library; submit it again",
            });
        }
        self.keep(record.id, grid.clone());
        Ok(grid)
    }

    /// Lets go of the grid of a job that is no more.
    pub(crate) fn forget(&self, job: JobId) {
        let mut kept = self.kept.lock().unwrap_or_else(PoisonError::into_inner);
        kept.remove(&job);
    }

    fn kept(&self, job: JobId) -> Option<Arc<Grid>> {
        self.kept
            .lock()
            .unwrap_or_else(PoisonError::into_inner)
            .get(&job)
            .cloned()
    }
}
