//! The seam between the queue and what computes: a block goes in, columns come out.

use std::fmt;
use std::sync::Arc;
use std::sync::atomic::AtomicBool;

use enolattice_grid::{BlockId, Columns, Grid};
use enolattice_model::Fingerprint;

/// A block to be scored.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct WorkBlock {
    /// Block.
    pub id: BlockId,
    /// Number of its first cell.
    pub first_cell: u64,
    /// Its cells.
    pub cells: u64,
}

/// The blocks of a job.
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
        let block = |id| {
            let cells = grid.block_cells(id);
            WorkBlock {
                id,
                first_cell: cells.start,
                cells: cells.end - cells.start,
            }
        };
        let blocks = grid.blocks().map(block).collect();
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

/// Work that is one piece; it keeps its own result. An error fails its job with this text. It may end early, with any
/// answer, once it is told to stop.
pub type Piece = Box<dyn FnOnce(&AtomicBool) -> Result<(), String> + Send>;

/// What a job takes.
pub enum Task {
    /// Blocks, each kept when it is done.
    Blocks(Work),
    /// One piece, begun anew where it was cut off.
    Piece(Piece),
}

impl From<Work> for Task {
    fn from(work: Work) -> Task {
        Task::Blocks(work)
    }
}
