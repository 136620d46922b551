//! The stored scores of the cells that two jobs share, looked at block by block.

use std::cmp::Reverse;
use std::collections::{BinaryHeap, HashMap};

use enolattice_grid::{BlockId, CellId, Columns, Grid, Overlap, RankCounts};
use enolattice_store::{JobId, Store};
use rayon::prelude::*;

use crate::EngineError;
use crate::screened::STEPS;

/// Blocks that are read side by side before their cells are counted.
const BLOCKS_AT_ONCE: usize = 64;
/// Blocks of the other job that are kept for the next cells of a block.
const BLOCKS_KEPT: usize = 32;

/// A yield that differs by more than this has moved: 0.1.
const MOVED: u16 = STEPS / 10;

/// The cells that two jobs share.
pub(crate) struct SharedCells<'s> {
    store: &'s Store,
    /// The job with fewer cells: of the other one only the blocks that hold shared cells are read.
    leading: (JobId, &'s Grid),
    other: (JobId, &'s Grid),
    /// Whether the second job leads.
    swapped: bool,
    overlap: Overlap<'s>,
    /// Yields that make a hit, of the first and the second job.
    targets: [f64; 2],
}

/// A cell of both jobs, with its yields as they are stored.
#[derive(Clone, Copy, Debug)]
struct Row {
    before: u64,
    after: u64,
    /// `None` where one of the jobs has not screened it.
    yields: Option<[u16; 2]>,
}

/// A cell whose yields differ.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Moved {
    pub(crate) before: u64,
    pub(crate) after: u64,
}

/// What the shared cells come to.
#[derive(Clone, Debug, Default)]
pub(crate) struct Tally {
    pub(crate) missing: u64,
    pub(crate) compared: u64,
    pub(crate) only_before: u64,
    pub(crate) only_after: u64,
    pub(crate) moved: u64,
    /// Mean of after minus before, and of its size.
    pub(crate) change: Option<[f64; 2]>,
    pub(crate) hits_before: u64,
    pub(crate) hits_after: u64,
    pub(crate) hits_entered: u64,
    pub(crate) hits_left: u64,
    pub(crate) most_moved: Vec<Moved>,
    pub(crate) spearman: Option<f64>,
    /// Sums of the change and of its size, in steps.
    steps: [i64; 2],
}

impl<'s> SharedCells<'s> {
    pub(crate) fn of(
        store: &'s Store,
        before: (JobId, &'s Grid),
        after: (JobId, &'s Grid),
    ) -> SharedCells<'s> {
        let swapped = after.1.cells() < before.1.cells();
        let (leading, other) = match swapped {
            true => (after, before),
            false => (before, after),
        };
        SharedCells {
            store,
            leading,
            other,
            swapped,
            overlap: Overlap::of(leading.1, other.1),
            targets: [before, after].map(|(_, grid)| grid.campaign().yield_at_least),
        }
    }

    /// Looks at every shared cell twice: first to count, then to correlate the ranks.
    ///
    /// All sums are of whole numbers, so that the order in which blocks are read does not count.
    pub(crate) fn tally(&self, movers: usize) -> Result<Tally, EngineError> {
        let mut tally = Tally::default();
        let mut counts = RankCounts::new(usize::from(STEPS) + 1);
        let mut most_moved = MostMoved::new(movers);
        self.each(|row| {
            tally.count(row, self.targets);
            if let Some([before, after]) = row.known() {
                counts.add(before.into(), after.into());
                most_moved.take(row, before.abs_diff(after));
            }
        })?;
        let mut ranks = counts.ranks();
        self.each(|row| {
            if let Some([before, after]) = row.known() {
                ranks.add(before.into(), after.into());
            }
        })?;
        let mean = |sum: i64| sum as f64 / (f64::from(STEPS) * tally.compared as f64);
        tally.change = (tally.compared > 0).then(|| tally.steps.map(mean));
        tally.spearman = ranks.value();
        tally.most_moved = most_moved.into_list();
        Ok(tally)
    }

    /// Calls `take` with every shared cell.
    fn each(&self, mut take: impl FnMut(&Row)) -> Result<(), EngineError> {
        if self.overlap.cells() == 0 {
            return Ok(());
        }
        let mut blocks = self.leading.1.blocks();
        loop {
            let some: Vec<BlockId> = blocks.by_ref().take(BLOCKS_AT_ONCE).collect();
            if some.is_empty() {
                return Ok(());
            }
            let rows: Vec<Vec<Row>> = some
                .par_iter()
                .map(|block| self.of_block(*block))
                .collect::<Result<_, _>>()?;
            rows.iter().flatten().for_each(&mut take);
        }
    }

    /// The shared cells of one block of the leading job.
    fn of_block(&self, block: BlockId) -> Result<Vec<Row>, EngineError> {
        let (leading, other) = (self.leading, self.other);
        let mut cells = self.overlap.of_block(block).peekable();
        if cells.peek().is_none() {
            return Ok(Vec::new());
        }
        let first = leading.1.block_cells(block).start;
        let columns = self.store.block(leading.0, block)?;
        let mut others = Others {
            store: self.store,
            job: other.0,
            grid: other.1,
            kept: HashMap::new(),
        };
        let rows = cells.map(|(cell, partner)| {
            let own = columns
                .as_ref()
                .map(|columns| columns.expected_yield[(cell.0 - first) as usize]);
            let yields = own.zip(others.stored_yield(partner)?);
            Ok(match self.swapped {
                false => Row {
                    before: cell.0,
                    after: partner.0,
                    yields: yields.map(|(own, of_partner)| [own, of_partner]),
                },
                true => Row {
                    before: partner.0,
                    after: cell.0,
                    yields: yields.map(|(own, of_partner)| [of_partner, own]),
                },
            })
        });
        rows.collect()
    }
}

/// Blocks of the job that does not lead, read when they are asked for.
struct Others<'s> {
    store: &'s Store,
    job: JobId,
    grid: &'s Grid,
    kept: HashMap<BlockId, Option<Columns>>,
}

impl Others<'_> {
    fn stored_yield(&mut self, cell: CellId) -> Result<Option<u16>, EngineError> {
        let Some(block) = self.grid.block_of(cell) else {
            return Ok(None);
        };
        if !self.kept.contains_key(&block) {
            if self.kept.len() == BLOCKS_KEPT {
                self.kept.clear();
            }
            self.kept.insert(block, self.store.block(self.job, block)?);
        }
        let first = self.grid.block_cells(block).start;
        let columns = self.kept.get(&block).and_then(Option::as_ref);
        Ok(columns.map(|columns| columns.expected_yield[(cell.0 - first) as usize]))
    }
}

impl Row {
    /// Both yields, where both are known.
    fn known(&self) -> Option<[u16; 2]> {
        self.yields
            .filter(|yields| yields.iter().all(|code| *code <= STEPS))
    }
}

impl Tally {
    fn count(&mut self, row: &Row, targets: [f64; 2]) {
        let Some(yields) = row.yields else {
            self.missing += 1;
            return;
        };
        let known = yields.map(|code| code <= STEPS);
        let is_hit =
            |at: usize| known[at] && f64::from(yields[at]) / f64::from(STEPS) >= targets[at];
        let hits = [is_hit(0), is_hit(1)];
        self.hits_before += u64::from(hits[0]);
        self.hits_after += u64::from(hits[1]);
        self.hits_entered += u64::from(hits == [false, true]);
        self.hits_left += u64::from(hits == [true, false]);
        match known {
            [true, true] => {
                let change = i64::from(yields[1]) - i64::from(yields[0]);
                self.compared += 1;
                self.steps[0] += change;
                self.steps[1] += change.abs();
                self.moved += u64::from(change.unsigned_abs() > u64::from(MOVED));
            }
            [true, false] => self.only_before += 1,
            [false, true] => self.only_after += 1,
            [false, false] => {}
        }
    }
}

/// The cells that moved most; of equal ones the first cells of the first job.
struct MostMoved {
    wanted: usize,
    least_first: BinaryHeap<Reverse<(u16, Reverse<u64>, u64)>>,
}

impl MostMoved {
    fn new(wanted: usize) -> MostMoved {
        MostMoved {
            wanted,
            least_first: BinaryHeap::with_capacity(wanted + 1),
        }
    }

    fn take(&mut self, row: &Row, by: u16) {
        if by == 0 {
            return;
        }
        let entry = Reverse((by, Reverse(row.before), row.after));
        if self.least_first.len() < self.wanted {
            self.least_first.push(entry);
        } else if self.least_first.peek().is_some_and(|least| entry < *least) {
            self.least_first.pop();
            self.least_first.push(entry);
        }
    }

    /// The greatest first.
    fn into_list(self) -> Vec<Moved> {
        let sorted = self.least_first.into_sorted_vec().into_iter();
        sorted
            .map(|Reverse((_, Reverse(before), after))| Moved { before, after })
            .collect()
    }
}
