//! What a campaign would take, before it is screened.

use std::time::{Duration, Instant};

use enolattice_grid::{CampaignSpec, CautionCount, Grid, PairsNotCovered};
use rayon::prelude::*;

use crate::engine::blocking;
use crate::submit::would_be;
use crate::{Axis, Engine, EngineError, Job, Terms};

/// Blocks of which a sample is scored at most, and the time after which no other one is begun.
const MOST_BLOCKS: usize = 64;
const LONGEST_SAMPLE: Duration = Duration::from_secs(2);

/// How much more the database takes on disk than the columns in it. Measured as the size of `db/` after
/// `screen`: 2.6 for the 155,520 cells of the demonstration, 2.9 for 10^6 and 2.1 for 10^7 cells that
/// are stored faster than a model would score them.
const DISK_OVERHEAD: f64 = 2.6;

/// Memory of an engine that screens, without its tables, and of each cell of its job. Measured as `VmHWM` of
/// `/proc/PID/status` at the end of `screen`, on two threads: 40 MB for 48 cells, 66 to 78 MB for 10^6 and 235 MB
/// for 10^7 cells of one pair; 65 MB for the demonstration, whose tables take a third of that.
const RESTING_BYTES: u64 = 38 << 20;
const MEMORY_PER_CELL: u64 = 19;

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
    /// Pairs of substrate and electrophile that were looked at: all, or about a hundred thousand.
    pub pairs_looked_at: u64,
    /// Of these, pairs that the model does not cover although it knows both, by reason.
    pub pairs_not_covered: Vec<PairsNotCovered>,
    /// Cells of which the cautions were looked up: all, or about a million.
    pub cells_looked_at: u64,
    /// Of these, how many carry cautions of the two severer kinds, severest first.
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
            let pool = pool(threads)?;
            let sample = sample(&grid, &pool);
            let (pairs_not_covered, pairs_looked_at) = pool.install(|| grid.pairs_not_covered());
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
                job: would_be(&grid, Terms::default()),
                axes: axes.collect(),
                seconds: sample.per_cell(sample.seconds) * cells as f64,
                disk_bytes: (sample.per_cell(sample.bytes as f64) * cells as f64 * DISK_OVERHEAD)
                    as u64,
                memory_bytes: memory_bytes(&grid),
                cells_scored: sample.cells,
                cells_scored_not_covered: sample.not_covered,
                not_covered: not_covered(&grid),
                pairs_looked_at,
                pairs_not_covered,
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

fn memory_bytes(grid: &Grid) -> u64 {
    (RESTING_BYTES + grid.cells() * MEMORY_PER_CELL).saturating_add(grid.table_bytes())
}

/// What scoring some blocks came to.
struct Sample {
    cells: u64,
    not_covered: u64,
    /// Bytes of their columns as they are stored.
    bytes: u64,
    seconds: f64,
}

impl Sample {
    fn per_cell(&self, measure: f64) -> f64 {
        measure / self.cells.max(1) as f64
    }
}

/// As many threads as the engine would screen with.
pub(crate) fn pool(threads: usize) -> Result<rayon::ThreadPool, EngineError> {
    let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build();
    pool.map_err(|error| EngineError::Store {
        reason: format!("no compute threads can be started: {error}"),
    })
}

fn sample(grid: &Grid, pool: &rayon::ThreadPool) -> Sample {
    let begun = Instant::now();
    let mut sample = Sample {
        cells: 0,
        not_covered: 0,
        bytes: 0,
        seconds: 0.0,
    };
    let blocks = grid.spread_blocks(MOST_BLOCKS);
    // each thread gets one block at a time, so that all are busy until the time is looked at
    for run in blocks.chunks(pool.current_num_threads().max(1)) {
        if begun.elapsed() > LONGEST_SAMPLE {
            break;
        }
        let scored: Vec<(u64, u64, u64)> = pool.install(|| {
            let one = |block: &_| {
                let columns = grid.score(*block);
                let unknown =
                    (0..columns.len()).filter(|i| columns.score(*i).expected_yield.is_none());
                let bytes = columns.to_bytes().len();
                (columns.len() as u64, unknown.count() as u64, bytes as u64)
            };
            run.par_iter().map(one).collect()
        });
        for (cells, not_covered, bytes) in scored {
            sample.cells += cells;
            sample.not_covered += not_covered;
            sample.bytes += bytes;
        }
    }
    sample.seconds = begun.elapsed().as_secs_f64();
    sample
}
