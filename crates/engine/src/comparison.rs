//! What two jobs say of the cells that they share.

use std::collections::HashMap;
use std::sync::Arc;

use enolattice_grid::{CellId, Grid, Overlap};
use enolattice_model::{Channel, Explanation, MeasuredPka};
use enolattice_store::{JobRecord, Store};
use rayon::prelude::*;

pub use enolattice_grid::AxisOverlap;

use crate::differences::differences;
use crate::dry_run::pool;
use crate::engine::{blocking, job_id, read_job};
use crate::shared_cells::{Moved, SharedCells, Tally};
use crate::{CellDescription, Engine, EngineError, Job};

/// Most movers that are shown: each is explained twice, which takes up to two seconds.
const MOST_MOVERS: u32 = 50;

/// What two jobs say of the cells that they share.
#[derive(Clone, Debug, PartialEq)]
pub struct Comparison {
    /// The first job.
    pub before: Job,
    /// The second job.
    pub after: Job,
    /// What the campaigns share on each axis, slowest first.
    pub axes: Vec<AxisOverlap>,
    /// Cells that both campaigns have.
    pub cells: u64,
    /// Of these, cells that one of the jobs has not screened.
    pub cells_missing: u64,
    /// Of these, cells that both models cover; the figures on yields are over them.
    pub cells_compared: u64,
    /// Cells that the first job alone has a yield of.
    pub covered_before_only: u64,
    /// Cells that the second job alone has a yield of.
    pub covered_after_only: u64,
    /// Spearman's rank correlation of the two yields; none where it does not exist.
    pub spearman: Option<f64>,
    /// Mean of the second yield minus the first; none without cells.
    pub mean_change: Option<f64>,
    /// Mean size of that change; none without cells.
    pub mean_absolute_change: Option<f64>,
    /// Cells whose yields differ by more than 0.1.
    pub cells_moved: u64,
    /// Hits of the first job: cells whose expected yield reaches its target.
    pub hits_before: u64,
    /// Hits of the second job, by its target.
    pub hits_after: u64,
    /// Cells that are a hit in the second job only.
    pub hits_entered: u64,
    /// Cells that are a hit in the first job only.
    pub hits_left: u64,
    /// The cells whose yields differ most, first.
    pub movers: Vec<Mover>,
    /// What differs between the jobs as wholes, and what cannot be told, in sentences.
    pub remarks: Vec<String>,
}

/// A cell whose yields differ.
#[derive(Clone, Debug, PartialEq)]
pub struct Mover {
    /// The cell in the first job.
    pub before: ComparedCell,
    /// The same cell in the second job.
    pub after: ComparedCell,
    /// What the cell is made of and its constants, where they differ: the makeup first, then the constants that
    /// differ most. Constants are told only where the engine has the models that scored both jobs.
    pub differences: Vec<Difference>,
}

/// A cell as one of two jobs has it.
#[derive(Clone, Debug, PartialEq)]
pub struct ComparedCell {
    /// What it is made of, with its number.
    pub cell: CellDescription,
    /// Expected yield.
    pub expected_yield: Option<f64>,
    /// Probability of a hit.
    pub p_hit: Option<f64>,
    /// Thermodynamic ceiling.
    pub feasibility: Option<f64>,
    /// Wanted / converted.
    pub selectivity: Option<f64>,
    /// The largest loss.
    pub largest_loss: Option<Channel>,
    /// What limits it, in sentences; empty where the engine no longer has the model that scored the job.
    pub limits: Vec<String>,
}

/// Something that differs between a cell of one job and the same cell of another.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Difference {
    /// What, e.g. `temperature_c` or `pKa here of the C–H of the substrate`.
    pub what: String,
    /// Its value in the first job.
    pub before: String,
    /// Its value in the second job.
    pub after: String,
}

/// One of the jobs.
struct Side {
    record: JobRecord,
    grid: Arc<Grid>,
}

impl Side {
    /// Whether the engine has the model that scored the job.
    fn has_its_model(&self) -> bool {
        self.grid.model().fingerprint() == self.record.model_fingerprint
    }
}

impl Engine {
    /// Compares two jobs that have ended, over the cells that both campaigns have, and explains the `movers`
    /// whose yields differ most, at most 50. Reads every stored block of the shared cells twice and holds a few
    /// at a time, whatever the size of the jobs.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::WrongState`] where one has not ended,
    /// [`EngineError::Store`], [`EngineError::Model`].
    pub async fn compare(
        &self,
        before: &str,
        after: &str,
        movers: u32,
    ) -> Result<Comparison, EngineError> {
        let queue = self.queue()?;
        let (store, grids) = (queue.store.clone(), queue.grids.clone());
        let ids = [job_id(before)?, job_id(after)?];
        let threads = self.threads;
        blocking(move || {
            let [before, after] = ids.map(|id| {
                let record = store.job(id)?;
                refuse_unfinished(&record)?;
                let grid = grids.of_record(&record)?;
                Ok::<_, EngineError>(Side { record, grid })
            });
            let (before, after) = (before?, after?);
            let movers = movers.min(MOST_MOVERS) as usize;
            pool(threads)?.install(|| comparison(&store, &before, &after, movers))
        })
        .await
    }
}

fn refuse_unfinished(record: &JobRecord) -> Result<(), EngineError> {
    if record.state.is_ended() {
        return Ok(());
    }
    Err(EngineError::WrongState {
        job: record.id.to_string(),
        state: record.state.name(),
        remedy: "jobs are compared when both have ended; watch it to its end",
    })
}

fn comparison(
    store: &Store,
    before: &Side,
    after: &Side,
    movers: usize,
) -> Result<Comparison, EngineError> {
    let overlap = Overlap::of(&before.grid, &after.grid);
    let shared = SharedCells::of(
        store,
        (before.record.id, &before.grid),
        (after.record.id, &after.grid),
    );
    let Tally {
        missing,
        compared,
        only_before,
        only_after,
        moved,
        change,
        hits_before,
        hits_after,
        hits_entered,
        hits_left,
        most_moved,
        spearman,
        ..
    } = shared.tally(movers)?;
    let movers = most_moved.into_par_iter();
    Ok(Comparison {
        before: read_job(store, before.record.id)?,
        after: read_job(store, after.record.id)?,
        axes: overlap.axes().to_vec(),
        cells: overlap.cells(),
        cells_missing: missing,
        cells_compared: compared,
        covered_before_only: only_before,
        covered_after_only: only_after,
        spearman,
        mean_change: change.map(|[mean, _]| mean),
        mean_absolute_change: change.map(|[_, size]| size),
        cells_moved: moved,
        hits_before,
        hits_after,
        hits_entered,
        hits_left,
        movers: movers
            .map(|moved| mover(store, before, after, moved))
            .collect::<Result<_, _>>()?,
        remarks: remarks(before, after),
    })
}

fn mover(store: &Store, before: &Side, after: &Side, moved: Moved) -> Result<Mover, EngineError> {
    let (before, told_before) = compared(store, before, moved.before)?;
    let (after, told_after) = compared(store, after, moved.after)?;
    let told = told_before.as_ref().zip(told_after.as_ref());
    Ok(Mover {
        differences: differences(&before.cell, &after.cell, told),
        before,
        after,
    })
}

/// A cell as a job has it, with its explanation by the model that scored it.
fn compared(
    store: &Store,
    side: &Side,
    number: u64,
) -> Result<(ComparedCell, Option<Explanation>), EngineError> {
    let job = side.record.id;
    let cell = side.grid.cell(CellId(number));
    let cell = cell.ok_or_else(|| EngineError::CellUnknown {
        job: job.to_string(),
        cell: number,
        last: side.grid.cells().saturating_sub(1),
    })?;
    let score = store.score(job, number)?.unwrap_or_default();
    let yield_at_least = side.grid.campaign().yield_at_least;
    let explained = side
        .has_its_model()
        .then(|| side.grid.model().explain(&cell, yield_at_least))
        .transpose()?;
    let limits = explained.as_ref().map(|told| told.limits.clone());
    let compared = ComparedCell {
        cell: CellDescription {
            measured: side.grid.measured(CellId(number)).cloned(),
            ..CellDescription::of(Some(number), &cell)
        },
        expected_yield: score.expected_yield,
        p_hit: score.p_hit,
        feasibility: score.feasibility,
        selectivity: score.selectivity,
        largest_loss: score.largest_loss,
        limits: limits.unwrap_or_default(),
    };
    Ok((compared, explained))
}

fn remarks(before: &Side, after: &Side) -> Vec<String> {
    let mut remarks = Vec::new();
    let fingerprints = [before, after].map(|side| side.record.model_fingerprint.to_string());
    if fingerprints[0] != fingerprints[1] {
        remarks.push(format!(
            "The jobs were scored by two models, {} and {}.",
            &fingerprints[0][..12],
            &fingerprints[1][..12]
        ));
    }
    for (side, which) in [(before, "first"), (after, "second")] {
        if !side.has_its_model() {
            remarks.push(format!(
                "This engine no longer has the model that scored the {which} job: of its cells the stored columns \
                 are shown, and their constants are not known."
            ));
        }
    }
    let targets = [before, after].map(|side| side.grid.campaign().yield_at_least);
    if targets[0] != targets[1] {
        remarks.push(format!(
            "A hit is a yield of {} or more in the first job and of {} or more in the second.",
            targets[0], targets[1]
        ));
    }
    let own = [before, after].map(own_pka);
    let differing = own[0].iter().filter(|(canonical, pka)| {
        let other = own[1].get(*canonical);
        other.is_some_and(|other| other != *pka)
    });
    match differing.count() {
        0 => {}
        count => remarks.push(format!(
            "The laboratory's own pKa differ for {count} of the substrates that both jobs have."
        )),
    }
    remarks
}

/// The laboratory's own pKa of each substrate, by canonical SMILES.
fn own_pka(side: &Side) -> HashMap<&str, Option<MeasuredPka>> {
    let campaign = side.grid.campaign();
    let structures = campaign
        .substrates
        .iter()
        .map(|known| known.molecule.canonical());
    structures.zip(campaign.own_pka.iter().copied()).collect()
}
