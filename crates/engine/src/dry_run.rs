//! What a campaign would take, before it is screened.

use std::time::{Duration, Instant};

use enolattice_grid::{CampaignSpec, CautionCount, Grid};
use rayon::prelude::*;

use crate::engine::blocking;
use crate::submit::would_be;
use crate::{Axis, Engine, EngineError, Job};

/// Blocks of which a sample is scored at most, and the time after which no other one is begun.
const MOST_BLOCKS: usize = 64;
const LONGEST_SAMPLE: Duration = Duration::from_secs(2);

/// Bytes of a cell's columns, and how much more the database takes for them, as was measured.
const BYTES_PER_CELL: f64 = 11.0;
const DISK_OVERHEAD: f64 = 1.8;

/// Memory of the engine at rest, and of each cell of a job whose blocks are looked at (both as they
/// were measured; `docs/storage.md` of the store says why).
const RESTING_BYTES: u64 = 64 << 20;
const MEMORY_PER_CELL: u64 = 24;

/// What a campaign would take, and what of it cannot be screened or should not be run.
#[derive(Clone, Debug, PartialEq)]
pub struct DryRun {
    /// The job that the campaign would make, without an id.
    pub job: Job,
    /// Axes and their numbers of values, slowest first.
    pub axes: Vec<AxisSize>,
    /// Time to screen it on this engine as busy as it is now, s.
    pub seconds: f64,
    /// Space its results would take on disk, bytes.
    pub disk_bytes: u64,
    /// Memory the engine would take, bytes.
    pub memory_bytes: u64,
    /// Cells that were scored to find out.
    pub cells_scored: u64,
    /// Of these, cells that the model does not cover.
    pub cells_scored_not_covered: u64,
    /// Values of axes whose cells the model does not cover.
    pub not_covered: Vec<NotCovered>,
    /// Cells of which the cautions were looked up: all, or about a million.
    pub cells_looked_at: u64,
    /// Of these, how many carry severe cautions, severest first.
    pub cautions: Vec<CautionCount>,
}

/// A value of an axis whose cells the model does not cover.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct NotCovered {
    /// Axis.
    pub axis: Axis,
    /// Name of the value.
    pub name: String,
    /// Why.
    pub reason: String,
    /// Cells that have it.
    pub cells: u64,
}

/// An axis and its number of values.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct AxisSize {
    /// Name, e.g. `substrates` or `temperature_c`.
    pub axis: String,
    /// Number of values.
    pub values: u64,
}

impl Engine {
    /// Checks a campaign, scores a sample of its blocks for two seconds at most, and says what the
    /// whole would take. Queues nothing and needs no data directory.
    ///
    /// # Errors
    /// [`EngineError::Input`] with every fault.
    pub async fn dry_run(&self, campaign: CampaignSpec) -> Result<DryRun, EngineError> {
        let (models, threads) = (self.models.clone(), self.threads);
        blocking(move || {
            let grid = models.grid(&campaign)?;
            let sample = sample(&grid, threads)?;
            let (cautions, cells_looked_at) = grid.count_cautions();
            let cells = grid.cells();
            let axes = grid
                .axis_sizes()
                .into_iter()
                .map(|(axis, values)| AxisSize {
                    axis: axis.to_owned(),
                    values,
                });
            Ok(DryRun {
                job: would_be(&grid),
                axes: axes.collect(),
                seconds: sample.seconds * cells as f64 / sample.cells.max(1) as f64,
                disk_bytes: (cells as f64 * BYTES_PER_CELL * DISK_OVERHEAD) as u64,
                memory_bytes: RESTING_BYTES + grid.table_bytes() + cells * MEMORY_PER_CELL,
                cells_scored: sample.cells,
                cells_scored_not_covered: sample.not_covered,
                not_covered: not_covered(&grid),
                cells_looked_at,
                cautions,
            })
        })
        .await
    }
}

fn not_covered(grid: &Grid) -> Vec<NotCovered> {
    let of_axis = |axis: Axis, found: Vec<enolattice_grid::NotCovered>| {
        found.into_iter().map(move |known| NotCovered {
            axis,
            name: known.name,
            reason: known.reason,
            cells: known.cells,
        })
    };
    let electrophiles = of_axis(Axis::Electrophile, grid.electrophiles_not_covered());
    let substrates = of_axis(Axis::Substrate, grid.substrates_not_covered());
    electrophiles.chain(substrates).collect()
}

/// What scoring some blocks came to.
struct Sample {
    cells: u64,
    not_covered: u64,
    seconds: f64,
}

fn sample(grid: &Grid, threads: usize) -> Result<Sample, EngineError> {
    let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build();
    let pool = pool.map_err(|error| EngineError::Store {
        reason: format!("no compute threads can be started: {error}"),
    })?;
    let begun = Instant::now();
    let mut sample = Sample {
        cells: 0,
        not_covered: 0,
        seconds: 0.0,
    };
    let blocks = grid.spread_blocks(MOST_BLOCKS);
    // each thread gets one block at a time, so that all are busy until the time is looked at
    for run in blocks.chunks(pool.current_num_threads().max(1)) {
        if begun.elapsed() > LONGEST_SAMPLE {
            break;
        }
        let scored: Vec<(u64, u64)> = pool.install(|| {
            let one = |block: &_| {
                let columns = grid.score(*block);
                let unknown =
                    (0..columns.len()).filter(|i| columns.score(*i).expected_yield.is_none());
                (columns.len() as u64, unknown.count() as u64)
            };
            run.par_iter().map(one).collect()
        });
        for (cells, not_covered) in scored {
            sample.cells += cells;
            sample.not_covered += not_covered;
        }
    }
    sample.seconds = begun.elapsed().as_secs_f64();
    Ok(sample)
}
