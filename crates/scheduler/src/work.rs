//! The seam between the queue and what computes: a block goes in, columns come out.

use std::fmt;
use std::sync::Arc;

use enolattice_grid::{BlockId, Columns, Grid};
use enolattice_model::Fingerprint;

/// A block to be scored.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct WorkBlock {
    /// Block.
    pub id: BlockId,
    /// Number of its first cell.
    pub first_cell: u64,
}

/// The work of one job.
#[derive(Clone)]
pub struct Work {
    /// Fingerprint of the model that scores.
    pub model_fingerprint: Fingerprint,
    /// All blocks, in order.
    pub blocks: Vec<WorkBlock>,
    /// Scores one block; runs on the compute pool.
    pub score: Arc<dyn Fn(BlockId) -> Columns + Send + Sync>,
}

impl Work {
    /// The work of a grid.
    pub fn of_grid(grid: Arc<Grid>) -> Work {
        let first_cell = |id| WorkBlock {
            id,
            first_cell: grid.block_cells(id).start,
        };
        let blocks = grid.blocks().map(first_cell).collect();
        let model_fingerprint = grid.model().fingerprint();
        Work {
            model_fingerprint,
            blocks,
            score: Arc::new(move |block| grid.score(block)),
        }
    }
}

impl fmt::Debug for Work {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.debug_struct("Work")
            .field("model_fingerprint", &self.model_fingerprint)
            .field("blocks", &self.blocks.len())
            .finish_non_exhaustive()
    }
}
