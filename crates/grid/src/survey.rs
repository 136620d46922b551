//! What a campaign holds, without scoring it: sizes, cells that the model does not cover, cautions.

use enolattice_model::{Category, Severity};

use crate::{AXES, CELLS_PER_BLOCK, CellId, Grid};

/// Cells of which the cautions are looked up; of larger campaigns as many, evenly spread.
const MOST_LOOKED_AT: u64 = 1 << 20;

/// Bytes of the tables of one pair of substrate and electrophile, and of one prepared substance:
/// estimates from the sizes of their parts, rounded up.
const PAIR_BYTES: u64 = 8 << 10;
const SUBSTANCE_BYTES: u64 = 16 << 10;
/// Substrates whose tables are kept at once.
const SUBSTRATES_KEPT: u64 = 32;

/// A value of an axis whose cells the model does not cover.
#[derive(Clone, Debug, PartialEq)]
pub struct NotCovered {
    /// Name of the value.
    pub name: String,
    /// Why.
    pub reason: String,
    /// Cells that have it.
    pub cells: u64,
}

/// Cells of one severity that carry a category of caution.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct CautionCount {
    /// Severest caution of these cells.
    pub severity: Severity,
    /// Category among their cautions; none: any.
    pub category: Option<Category>,
    /// How many.
    pub cells: u64,
}

impl Grid {
    /// Names and sizes of the axes, in the order of [`AXES`].
    pub fn axis_sizes(&self) -> Vec<(&'static str, u64)> {
        let sizes = self.lattice().sizes().map(u64::from);
        AXES.into_iter().zip(sizes).collect()
    }

    /// Electrophiles that put their cells outside the model.
    pub fn electrophiles_not_covered(&self) -> Vec<NotCovered> {
        let electrophiles = &self.campaign().electrophiles;
        let cells = self.cells() / electrophiles.len().max(1) as u64;
        let not_covered = electrophiles.iter().filter_map(|electrophile| {
            Some(NotCovered {
                name: electrophile.name.clone(),
                reason: electrophile.not_covered.clone()?,
                cells,
            })
        });
        not_covered.collect()
    }

    /// Substrates that put their cells outside the model. Some of these cells may be outside because
    /// of their electrophile as well; pairs of which no product can be drawn are found by scoring only.
    pub fn substrates_not_covered(&self) -> Vec<NotCovered> {
        let substrates = &self.campaign().substrates;
        let cells = self.cells() / substrates.len().max(1) as u64;
        let unknown = substrates.iter().filter(|s| s.sites.is_empty());
        let not_covered = unknown.map(|substrate| NotCovered {
            name: substrate.name.clone(),
            reason: "it has no acidic C–H that the model knows".to_owned(),
            cells,
        });
        not_covered.collect()
    }

    /// Counts cautions from `warning` upwards, severest first, and says in how many cells: all of a
    /// small campaign, else about a million that are evenly spread.
    pub fn count_cautions(&self) -> (Vec<CautionCount>, u64) {
        let step = self.cells().div_ceil(MOST_LOOKED_AT).max(1);
        // an odd step meets all digits of axes whose sizes are powers of two
        let step = if step > 1 { step | 1 } else { step };
        let mut counts = [[0u64; Category::ALL.len() + 1]; Severity::ALL.len()];
        let mut looked_at = 0;
        for cell in (0..self.cells()).step_by(step as usize) {
            looked_at += 1;
            let bits = self.caution_bits(CellId(cell));
            let Some(severity) = Severity::from_bits(bits) else {
                continue;
            };
            let row = &mut counts[severity as usize - 1];
            row[0] += 1;
            for (category, count) in Category::ALL.iter().zip(&mut row[1..]) {
                *count += u64::from(bits & category.bit() != 0);
            }
        }
        let severe = Severity::ALL
            .into_iter()
            .rev()
            .filter(|s| *s > Severity::Note);
        let counts = severe.flat_map(|severity| {
            let row = counts[severity as usize - 1];
            let categories = std::iter::once(None).chain(Category::ALL.into_iter().map(Some));
            categories
                .zip(row)
                .map(move |(category, cells)| CautionCount {
                    severity,
                    category,
                    cells,
                })
        });
        (counts.filter(|count| count.cells > 0).collect(), looked_at)
    }

    /// About how many bytes the campaign's tables take while it is screened.
    pub fn table_bytes(&self) -> u64 {
        let campaign = self.campaign();
        let [substrates, electrophiles] = [
            campaign.substrates.len() as u64,
            campaign.electrophiles.len() as u64,
        ];
        let pairs = substrates.min(SUBSTRATES_KEPT) * electrophiles;
        pairs * PAIR_BYTES + (substrates + electrophiles) * SUBSTANCE_BYTES
    }

    /// Blocks, at most `most` and evenly spread, in an order of which every beginning is spread too.
    pub fn spread_blocks(&self, most: usize) -> Vec<crate::BlockId> {
        let blocks = self.cells().div_ceil(CELLS_PER_BLOCK);
        let step = blocks.div_ceil(most.max(1) as u64).max(1);
        let mut chosen: Vec<_> = self.blocks().step_by(step as usize).collect();
        // bit reversal: the first of them are far apart
        let bits = usize::BITS - chosen.len().leading_zeros();
        let mut order: Vec<usize> = (0..chosen.len()).collect();
        order.sort_by_key(|i| i.reverse_bits() >> (usize::BITS - bits.max(1)));
        chosen = order.into_iter().map(|i| chosen[i]).collect();
        chosen
    }
}
