//! From a finished job to plates.

mod limits;
mod shortlist;

use std::collections::BTreeSet;
use std::sync::atomic::{AtomicBool, Ordering};

use enolattice_grid::{CellId, Grid};
use enolattice_model::Draw;
use enolattice_plate::{Candidate, Ground, Plan, PlanRequest, plan};
use enolattice_store::{JobId, Store};
use rayon::prelude::*;

use crate::engine::{blocking, job_id};
use crate::grids::Grids;
use crate::{Engine, EngineError};
use limits::{pinned, quotas, vetoed};
use shortlist::Shortlist;

impl Engine {
    /// Turns a job into plates: chooses cells as a set, lays them out, works out stocks and transfers, and checks all. The
    /// plan is not kept; see [`Engine::plan`].
    ///
    /// # Errors
    /// [`EngineError::Input`] with every fault of the request and every reason why there is no such plan,
    /// [`EngineError::JobUnknown`], [`EngineError::WrongState`] where the job has no cells yet, [`EngineError::Store`].
    pub async fn draft_plan(&self, job: String, request: PlanRequest) -> Result<Plan, EngineError> {
        let queue = self.queue()?;
        let (store, grids) = (queue.store.clone(), queue.grids.clone());
        blocking(move || {
            let faults = request.faults();
            if !faults.is_empty() {
                return Err(EngineError::Input(faults));
            }
            let (job, nobody_stops_it) = (job_id(&job)?, AtomicBool::new(false));
            drafted(&store, &grids, job, &request, &nobody_stops_it)
        })
        .await
    }
}

/// Makes the plan of a sound request; gives up with [`EngineError::Stopping`] once it is told to stop.
pub(crate) fn drafted(
    store: &Store,
    grids: &Grids,
    job: JobId,
    request: &PlanRequest,
    stop: &AtomicBool,
) -> Result<Plan, EngineError> {
    let record = store.job(job)?;
    let grid = grids.of_record(&record)?;
    if store.progress(job)?.cells == 0 {
        return Err(EngineError::WrongState {
            job: job.to_string(),
            state: record.state.name(),
            remedy: "none of its cells is screened yet; wait until some are",
        });
    }
    let pinned = pinned(&grid, request)?;
    let vetoed = vetoed(&grid, request)?;
    let quotas = quotas(&grid, &record.spec, request)?;
    let shortlist = Shortlist::of(store, job, &grid, &record.spec, request, &vetoed, &quotas)?;
    let draws = draws(&grid, request);
    let cells: BTreeSet<u64> = shortlist.all().chain(pinned.iter().copied()).collect();
    let candidates = scored(&grid, &cells, &draws, stop);
    if stop.load(Ordering::Relaxed) {
        return Err(EngineError::Stopping);
    }
    let index = |cell: &u64| {
        candidates
            .binary_search_by_key(cell, |known| known.cell)
            .ok()
    };
    let top_list = shortlist.top.iter().filter_map(index).collect();
    let random = shortlist.random.iter().filter_map(index).collect();
    let ground = Ground {
        grid: &grid,
        job: job.to_string(),
        request,
        top_list,
        random,
        draws: &draws,
        quotas,
        left_out: shortlist.left_out,
        candidates,
    };
    plan(&ground).map_err(EngineError::Input)
}

fn draws(grid: &Grid, request: &PlanRequest) -> Vec<Draw> {
    let numbers = 1..=request.choice.draws;
    numbers
        .map(|number| grid.model().draw(request.seed, number))
        .collect()
}

/// Candidates with their yields in the draws, by cell; what the model does not cover is left out, and what is left once it is
/// told to stop.
fn scored(grid: &Grid, cells: &BTreeSet<u64>, draws: &[Draw], stop: &AtomicBool) -> Vec<Candidate> {
    let cells: Vec<u64> = cells.iter().copied().collect();
    let of_cell = |cell: &u64| {
        if stop.load(Ordering::Relaxed) {
            return None;
        }
        let id = CellId(*cell);
        let yields = grid.model().yields(&grid.cell(id)?, draws)?;
        Some(Candidate {
            cell: *cell,
            digits: grid.digits(id)?,
            yields: yields.iter().map(|y| *y as f32).collect(),
            eligible: true,
        })
    };
    cells.par_iter().filter_map(of_cell).collect()
}
