//! Numbers of cells: segments, blocks and digits. Knows nothing of what the values are.

use std::ops::Range;

use crate::{AXES, CellDigits};

/// Cells in a full block; the last block of a segment may be shorter.
pub const CELLS_PER_BLOCK: u64 = 4096;

/// A campaign has fewer cells than this, 2^44: as many as 2^32 full blocks hold.
pub const MAX_CELLS: u64 = CELLS_PER_BLOCK << 32;

/// Number of a cell in its campaign; never shifts when axes grow.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct CellId(pub u64);

/// A block: the unit of work, commit and retry.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct BlockId {
    /// Segment, from 0.
    pub segment: u32,
    /// Block within the segment, from 0.
    pub index: u32,
}

/// Why a grid cannot be made.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum GridError {
    /// More cells than block numbers reach.
    #[error("the campaign has 2^44 cells or more; cut an axis")]
    TooLarge,
    /// An axis without values.
    #[error("the axis `{axis}` has no values; give at least one")]
    EmptyAxis {
        /// Name of the axis.
        axis: &'static str,
    },
    /// An axis that would lose values.
    #[error("the axis `{axis}` would lose values; values can only be appended")]
    ShrunkAxis {
        /// Name of the axis.
        axis: &'static str,
    },
}

/// A sub-grid of a campaign: a range of values on each axis.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Segment {
    /// Number of its first cell.
    pub first_cell: u64,
    /// Range of values on each axis, slowest (substrate) first: see [`CellDigits`].
    pub ranges: [Range<u32>; 13],
}

impl Segment {
    /// Number of cells.
    pub fn cells(&self) -> u64 {
        self.ranges
            .iter()
            .map(|range| u64::from(range.end - range.start))
            .product()
    }

    /// Number of blocks.
    pub fn blocks(&self) -> u32 {
        // at most 2^32 − 1 because a segment has at most MAX_CELLS − 1 cells
        self.cells().div_ceil(CELLS_PER_BLOCK) as u32
    }

    /// Digits of the cell `offset` places after the first; `offset` below [`Segment::cells`].
    pub(crate) fn digits(&self, mut offset: u64) -> [u32; 13] {
        let mut digits = [0; 13];
        for (digit, range) in digits.iter_mut().zip(&self.ranges).rev() {
            let values = u64::from(range.end - range.start);
            *digit = range.start + (offset % values) as u32;
            offset /= values;
        }
        digits
    }

    /// Moves digits to those of the next cell and gives the slowest axis that moved.
    ///
    /// After the last cell it starts again from the first.
    pub(crate) fn advance(&self, digits: &mut [u32; 13]) -> usize {
        for axis in (0..13).rev() {
            digits[axis] += 1;
            if digits[axis] < self.ranges[axis].end {
                return axis;
            }
            digits[axis] = self.ranges[axis].start;
        }
        0
    }

    /// Number of the cell with these digits, if it lies in the segment.
    fn cell_of(&self, digits: &[u32; 13]) -> Option<u64> {
        let mut offset = 0;
        for (digit, range) in digits.iter().zip(&self.ranges) {
            if !range.contains(digit) {
                return None;
            }
            offset = offset * u64::from(range.end - range.start) + u64::from(digit - range.start);
        }
        Some(self.first_cell + offset)
    }
}

/// The numbering of all cells of a campaign.
///
/// Within a segment numbers are mixed-radix with the substrate slowest. The first
/// segment holds every combination of the values that the campaign began with;
/// each growth of an axis appends segments, so that numbers already given stay.
///
/// ```
/// use enolattice_grid::{CellId, Lattice};
/// let mut sizes = [1; 13];
/// sizes[0] = 2; // substrates
/// sizes[5] = 3; // temperatures
/// let lattice = Lattice::new(sizes)?;
/// assert_eq!(lattice.cells(), 6);
/// let digits = lattice.digits(CellId(4)).expect("there are six cells");
/// assert_eq!((digits.substrate, digits.temperature), (1, 1));
/// # Ok::<(), enolattice_grid::GridError>(())
/// ```
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Lattice {
    sizes: [u32; 13],
    segments: Vec<Segment>,
}

impl Lattice {
    /// One segment over axes with this many values each.
    ///
    /// # Errors
    /// [`GridError::EmptyAxis`], [`GridError::TooLarge`].
    pub fn new(sizes: [u32; 13]) -> Result<Lattice, GridError> {
        if let Some(axis) = sizes.iter().position(|size| *size == 0) {
            return Err(GridError::EmptyAxis { axis: AXES[axis] });
        }
        check_size(&sizes)?;
        let segment = Segment {
            first_cell: 0,
            ranges: sizes.map(|size| 0..size),
        };
        Ok(Lattice {
            sizes,
            segments: vec![segment],
        })
    }

    /// The same lattice after values were appended to axes: all old numbers stay.
    ///
    /// The new combinations are those with at least one new value. They are cut
    /// into one segment for each axis that grew: there, that axis takes its new
    /// values, slower axes their old ones, faster axes all. The cut is disjoint,
    /// because each combination belongs to the slowest axis with a new value.
    ///
    /// # Errors
    /// [`GridError::ShrunkAxis`], [`GridError::TooLarge`].
    pub fn grown(&self, sizes: [u32; 13]) -> Result<Lattice, GridError> {
        if let Some(axis) = (0..13).find(|axis| sizes[*axis] < self.sizes[*axis]) {
            return Err(GridError::ShrunkAxis { axis: AXES[axis] });
        }
        check_size(&sizes)?;
        let mut grown = self.clone();
        grown.sizes = sizes;
        for axis in 0..13 {
            if sizes[axis] == self.sizes[axis] {
                continue;
            }
            let ranges = std::array::from_fn(|other| match other.cmp(&axis) {
                std::cmp::Ordering::Less => 0..self.sizes[other],
                std::cmp::Ordering::Equal => self.sizes[axis]..sizes[axis],
                std::cmp::Ordering::Greater => 0..sizes[other],
            });
            let first_cell = grown.cells();
            grown.segments.push(Segment { first_cell, ranges });
        }
        Ok(grown)
    }

    /// Number of values on each axis.
    pub fn sizes(&self) -> &[u32; 13] {
        &self.sizes
    }

    /// Number of cells.
    pub fn cells(&self) -> u64 {
        self.segments
            .last()
            .map_or(0, |last| last.first_cell + last.cells())
    }

    /// Segments, in the order of their cells.
    pub fn segments(&self) -> &[Segment] {
        &self.segments
    }

    /// All blocks, in the order of their cells.
    pub fn blocks(&self) -> impl Iterator<Item = BlockId> + '_ {
        (0u32..).zip(&self.segments).flat_map(|(segment, ranges)| {
            (0..ranges.blocks()).map(move |index| BlockId { segment, index })
        })
    }

    /// Cells of a block; empty if there is no such block.
    pub fn block_cells(&self, block: BlockId) -> Range<u64> {
        let Some(segment) = self.segments.get(block.segment as usize) else {
            return 0..0;
        };
        let start = u64::from(block.index) * CELLS_PER_BLOCK;
        if start >= segment.cells() {
            return 0..0;
        }
        let end = segment.cells().min(start + CELLS_PER_BLOCK);
        segment.first_cell + start..segment.first_cell + end
    }

    /// Block that holds a cell.
    pub fn block_of(&self, cell: CellId) -> Option<BlockId> {
        let (segment, offset) = self.locate(cell)?;
        Some(BlockId {
            segment: segment as u32,
            index: (offset / CELLS_PER_BLOCK) as u32,
        })
    }

    /// Digits of a cell.
    pub fn digits(&self, cell: CellId) -> Option<CellDigits> {
        let (segment, offset) = self.locate(cell)?;
        Some(CellDigits::from_array(
            self.segments[segment].digits(offset),
        ))
    }

    /// Digits of a run of cells of one segment, in the order of [`AXES`]; none beyond the segment.
    pub fn walk(&self, cells: Range<u64>) -> impl Iterator<Item = [u32; 13]> + '_ {
        let place = self.locate(CellId(cells.start));
        let segment = place.map(|(segment, offset)| (&self.segments[segment], offset));
        let cells = cells.end.saturating_sub(cells.start);
        segment.into_iter().flat_map(move |(segment, offset)| {
            let mut digits = segment.digits(offset);
            (0..cells.min(segment.cells() - offset)).map(move |_| {
                let these = digits;
                segment.advance(&mut digits);
                these
            })
        })
    }

    /// The cell with these digits.
    pub fn cell_of(&self, digits: CellDigits) -> Option<CellId> {
        let digits = digits.to_array();
        self.segments
            .iter()
            .find_map(|segment| segment.cell_of(&digits))
            .map(CellId)
    }

    /// Segment of a cell and the cell's place in it.
    pub(crate) fn locate(&self, cell: CellId) -> Option<(usize, u64)> {
        if cell.0 >= self.cells() {
            return None;
        }
        let after = self
            .segments
            .partition_point(|segment| segment.first_cell <= cell.0);
        let segment = after - 1;
        Some((segment, cell.0 - self.segments[segment].first_cell))
    }
}

fn check_size(sizes: &[u32; 13]) -> Result<(), GridError> {
    let cells = sizes
        .iter()
        .try_fold(1u64, |cells, size| cells.checked_mul(u64::from(*size)));
    match cells {
        Some(cells) if cells < MAX_CELLS => Ok(()),
        _ => Err(GridError::TooLarge),
    }
}
