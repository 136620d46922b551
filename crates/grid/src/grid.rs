//! A campaign as a lattice of cells that can be scored.

use std::ops::Range;
use std::sync::Arc;

use enolattice_model::{Additive, Cell, Conditions, Fingerprint, Model};

use crate::caution_table::CautionTable;
use crate::lattice::Lattice;
use crate::pairs::{Kept, PairsOfSubstrate, RecentPairs};
use crate::{
    BlockId, Campaign, CellDigits, CellId, Columns, GridError, MeasuredYield, Segment, fingerprint,
};

/// A campaign as a lattice of numbered cells.
#[derive(Debug)]
pub struct Grid {
    campaign: Campaign,
    model: Arc<Model>,
    lattice: Lattice,
    pairs: RecentPairs,
    cautions: CautionTable,
}

impl Grid {
    /// A lattice with one segment that holds all.
    ///
    /// # Errors
    /// [`GridError::EmptyAxis`], [`GridError::TooLarge`].
    pub fn new(campaign: Campaign, model: Arc<Model>) -> Result<Grid, GridError> {
        let lattice = Lattice::new(campaign.sizes()?)?;
        let pairs = RecentPairs::new(campaign.electrophiles.len(), kept(&lattice));
        let cautions = CautionTable::new(&campaign);
        Ok(Grid {
            campaign,
            model,
            lattice,
            pairs,
            cautions,
        })
    }

    /// The campaign.
    pub fn campaign(&self) -> &Campaign {
        &self.campaign
    }

    /// The model.
    pub fn model(&self) -> &Arc<Model> {
        &self.model
    }

    /// The numbering.
    pub fn lattice(&self) -> &Lattice {
        &self.lattice
    }

    /// Fingerprint of the campaign: the same axes and values give the same fingerprint.
    ///
    /// SHA-256 over the canonical content: structures, library names, numbers and target in
    /// the order of the axes; titles and names of substrates do not count.
    pub fn fingerprint(&self) -> Fingerprint {
        fingerprint::of(&self.campaign)
    }

    /// Number of cells.
    pub fn cells(&self) -> u64 {
        self.lattice.cells()
    }

    /// Segments.
    pub fn segments(&self) -> &[Segment] {
        self.lattice.segments()
    }

    /// All blocks in order.
    pub fn blocks(&self) -> impl Iterator<Item = BlockId> + '_ {
        self.lattice.blocks()
    }

    /// Numbers of the cells of a block; empty if there is no such block.
    pub fn block_cells(&self, block: BlockId) -> Range<u64> {
        self.lattice.block_cells(block)
    }

    /// Block that holds a cell.
    pub fn block_of(&self, cell: CellId) -> Option<BlockId> {
        self.lattice.block_of(cell)
    }

    /// Digits of a cell.
    pub fn digits(&self, cell: CellId) -> Option<CellDigits> {
        self.lattice.digits(cell)
    }

    /// The cell, prepared for the model.
    pub fn cell(&self, cell: CellId) -> Option<Cell> {
        Some(Walk::start(self, cell)?.cell)
    }

    /// Caution bits of a cell; none of a cell that is not there.
    pub fn caution_bits(&self, cell: CellId) -> u32 {
        let digits = self.digits(cell);
        digits.map_or(0, |digits| self.cautions.bits(&digits.to_array()))
    }

    /// Bits of the categories of caution of a cell at each severity, in the order of
    /// [`enolattice_model::Severity::ALL`]; none of a cell that is not there.
    pub fn caution_categories(&self, cell: CellId) -> [u32; 3] {
        let digits = self.digits(cell);
        digits.map_or([0; 3], |digits| {
            self.cautions.categories(&digits.to_array())
        })
    }

    /// What the laboratory has measured of a cell.
    pub fn measured(&self, cell: CellId) -> Option<&MeasuredYield> {
        self.campaign.measured.get(&self.digits(cell)?)
    }

    /// Scores all cells of a block, in the order of their numbers; none if there is no such block.
    ///
    /// Pairs (substrate × electrophile) are prepared once and kept for the next blocks. Threads
    /// may score different blocks at once: the columns do not depend on who scores what.
    pub fn score(&self, block: BlockId) -> Columns {
        let cells = self.block_cells(block);
        let mut columns = Columns::with_capacity((cells.end - cells.start) as usize);
        let Some(mut walk) = Walk::start(self, CellId(cells.start)) else {
            return columns;
        };
        for number in cells.clone() {
            if number > cells.start {
                walk.step();
            }
            let target = self.campaign.yield_at_least;
            let (table, key) = (&walk.pairs.formations, walk.formation_key());
            columns.push(
                &self
                    .model
                    .score_with(&walk.cell, target, walk.cautions, table, key),
            );
        }
        columns
    }
}

/// What is kept of the substrates of a campaign at once.
pub(crate) fn kept(lattice: &Lattice) -> Kept {
    let sizes = lattice.sizes();
    Kept::of(AXES_OF_FORMATION.iter().fold(1, |pots, &axis| {
        u64::saturating_mul(pots, sizes[axis].into())
    }))
}

/// Indices of the axes, beside the substrates, on which a deprotonation depends.
const AXES_OF_FORMATION: [usize; 8] = [2, 3, 4, 5, 6, 7, 9, 12];

/// A walk through the cells of one segment that changes only what moves.
///
/// Reference counts are shared by all threads, so a reagent is cloned when its digit moves and
/// not for each cell.
struct Walk<'g> {
    grid: &'g Grid,
    segment: &'g Segment,
    digits: [u32; 13],
    pairs: Arc<PairsOfSubstrate>,
    cell: Cell,
    cautions: u32,
}

impl<'g> Walk<'g> {
    fn start(grid: &'g Grid, cell: CellId) -> Option<Walk<'g>> {
        let (segment, offset) = grid.lattice.locate(cell)?;
        let segment = &grid.segments()[segment];
        let digits = segment.digits(offset);
        let [substrate, electrophile, base, solvent, additive, ..] =
            digits.map(|digit| digit as usize);
        let campaign = &grid.campaign;
        let pairs = grid.pairs.of(digits[0]);
        let cell = Cell {
            substrate: campaign.substrates[substrate].clone(),
            base: campaign.bases[base].clone(),
            electrophile: campaign.electrophiles[electrophile].clone(),
            solvent: campaign.solvents[solvent].clone(),
            additive: campaign.additive(additive),
            pair: grid.pair(&pairs, &digits),
            conditions: campaign.conditions(&digits),
        };
        Some(Walk {
            grid,
            segment,
            digits,
            pairs,
            cell,
            cautions: grid.cautions.bits(&digits),
        })
    }

    /// Number of the cell's deprotonation among those of its substrate.
    fn formation_key(&self) -> u64 {
        let sizes = self.grid.lattice.sizes();
        AXES_OF_FORMATION.iter().fold(0, |key, &axis| {
            key * u64::from(sizes[axis]) + u64::from(self.digits[axis])
        })
    }

    fn step(&mut self) {
        let slowest = self.segment.advance(&mut self.digits);
        let campaign = &self.grid.campaign;
        let [substrate, electrophile, base, solvent, additive, ..] =
            self.digits.map(|digit| digit as usize);
        if slowest == 0 {
            self.cell.substrate = campaign.substrates[substrate].clone();
            self.pairs = self.grid.pairs.of(self.digits[0]);
        }
        if slowest <= 1 {
            self.cell.electrophile = campaign.electrophiles[electrophile].clone();
            self.cell.pair = self.grid.pair(&self.pairs, &self.digits);
        }
        if slowest <= 2 {
            self.cell.base = campaign.bases[base].clone();
        }
        if slowest <= 3 {
            self.cell.solvent = campaign.solvents[solvent].clone();
        }
        if slowest <= 4 {
            self.cell.additive = campaign.additive(additive);
        }
        // amounts and times, the axes behind the temperatures, change no caution
        if slowest <= 6 {
            self.cautions = self.grid.cautions.bits(&self.digits);
        }
        self.cell.conditions = campaign.conditions(&self.digits);
    }
}

impl Grid {
    fn pair(&self, pairs: &PairsOfSubstrate, digits: &[u32; 13]) -> Arc<enolattice_model::Pair> {
        let substrate = &self.campaign.substrates[digits[0] as usize];
        let electrophile = &self.campaign.electrophiles[digits[1] as usize];
        pairs.with(digits[1], || self.model.pair(substrate, electrophile))
    }
}

impl Campaign {
    /// Number of values on each axis, in the order of [`crate::AXES`].
    pub(crate) fn sizes(&self) -> Result<[u32; 13], GridError> {
        let sizes = [
            self.substrates.len(),
            self.electrophiles.len(),
            self.bases.len(),
            self.solvents.len(),
            self.additives.len(),
            self.temperature_c.len(),
            self.formation_temperature_c.len(),
            self.base_equiv.len(),
            self.electrophile_equiv.len(),
            self.concentration_m.len(),
            self.time_h.len(),
            self.dosing_min.len(),
            self.addition.len(),
        ];
        if sizes.iter().any(|size| u32::try_from(*size).is_err()) {
            return Err(GridError::TooLarge);
        }
        Ok(sizes.map(|size| size as u32))
    }

    fn additive(&self, digit: usize) -> Option<Arc<Additive>> {
        let dose = self.additives[digit].as_ref()?;
        Some(dose.additive.clone())
    }

    /// Conditions of the cell with these digits.
    fn conditions(&self, digits: &[u32; 13]) -> Conditions {
        let [
            ..,
            additive,
            temperature,
            formation,
            base,
            electrophile,
            concentration,
            time,
            dosing,
            addition,
        ] = digits.map(|digit| digit as usize);
        let temperature_c = self.temperature_c[temperature];
        Conditions {
            temperature_c,
            formation_temperature_c: self.formation_temperature_c[formation]
                .unwrap_or(temperature_c),
            base_equiv: self.base_equiv[base],
            electrophile_equiv: self.electrophile_equiv[electrophile],
            additive_equiv: self.additives[additive]
                .as_ref()
                .map_or(0.0, |dose| dose.equiv),
            concentration_m: self.concentration_m[concentration],
            time_h: self.time_h[time],
            dosing_min: self.dosing_min[dosing],
            addition: self.addition[addition],
        }
    }
}
