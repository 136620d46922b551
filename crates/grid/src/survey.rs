//! What a campaign holds, without scoring it: sizes, cells that the model does not cover, cautions.

use enolattice_model::{Category, FormationTable, Severity};
use rayon::prelude::*;

use crate::grid::kept;
use crate::{AXES, CELLS_PER_BLOCK, CellId, Grid};

/// Cells of which the cautions are looked up; of larger campaigns as many, evenly spread.
const MOST_LOOKED_AT: u64 = 1 << 20;
/// Pairs of substrate and electrophile that are looked at; of more as many, evenly spread.
const MOST_PAIRS: u64 = 100_000;

/// Bytes of the tables of one pair of substrate and electrophile, and of one prepared substance:
/// estimates from the sizes of their parts, rounded up.
const PAIR_BYTES: u64 = 8 << 10;
const SUBSTANCE_BYTES: u64 = 16 << 10;

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

/// Pairs of substrate and electrophile that the model does not cover, although it knows both.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PairsNotCovered {
    /// Why.
    pub reason: String,
    /// How many.
    pub pairs: u64,
    /// Substrate of the first of them.
    pub substrate: String,
    /// Its electrophile.
    pub electrophile: String,
}

/// Cells in which a category of caution has one severity.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct CautionCount {
    /// Severity: the severest at which the category is there.
    pub severity: Severity,
    /// Category; none: whichever is the severest.
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
    /// of their electrophile as well.
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

    /// Pairs of substrate and electrophile that put their cells outside the model, by reason, the
    /// most frequent first; and how many pairs were looked at: all of a hundred thousand or fewer, else
    /// as many that are evenly spread. Takes time.
    pub fn pairs_not_covered(&self) -> (Vec<PairsNotCovered>, u64) {
        let (substrates, electrophiles) =
            (&self.campaign().substrates, &self.campaign().electrophiles);
        let pairs = substrates.len() as u64 * electrophiles.len() as u64;
        let step = step(pairs, MOST_PAIRS);
        let looked_at: Vec<u64> = (0..pairs).step_by(step as usize).collect();
        let pair = |&number: &u64| {
            let of = number as usize;
            let substrate = &substrates[of / electrophiles.len()];
            let electrophile = &electrophiles[of % electrophiles.len()];
            let reason = self.model().pair_not_covered(substrate, electrophile)?;
            Some((reason, substrate.name.clone(), electrophile.name.clone()))
        };
        let found: Vec<_> = looked_at.par_iter().filter_map(pair).collect();
        let mut by_reason: Vec<PairsNotCovered> = Vec::new();
        for (reason, substrate, electrophile) in found {
            match by_reason.iter_mut().find(|known| known.reason == reason) {
                Some(known) => known.pairs += 1,
                None => by_reason.push(PairsNotCovered {
                    reason: reason.to_owned(),
                    pairs: 1,
                    substrate,
                    electrophile,
                }),
            }
        }
        by_reason.sort_by_key(|known| std::cmp::Reverse(known.pairs));
        (by_reason, looked_at.len() as u64)
    }

    /// Counts cautions from `warning` upwards, severest first, and says in how many cells: all of a
    /// small campaign, else about a million that are evenly spread.
    ///
    /// A category counts at its own severity: a cell that must be stopped and is flammable too, which
    /// is worth a note, does not count as a stop for its flammability.
    pub fn count_cautions(&self) -> (Vec<CautionCount>, u64) {
        let step = step(self.cells(), MOST_LOOKED_AT);
        let mut counts = [[0u64; Category::ALL.len() + 1]; Severity::ALL.len()];
        let mut looked_at = 0;
        for cell in (0..self.cells()).step_by(step as usize) {
            looked_at += 1;
            let categories = self.caution_categories(CellId(cell));
            let mut severer = 0;
            for (row, bits) in counts.iter_mut().zip(categories).rev() {
                row[0] += u64::from(severer == 0 && bits != 0);
                for (category, count) in Category::ALL.iter().zip(&mut row[1..]) {
                    *count += u64::from(bits & !severer & category.bit() != 0);
                }
                severer |= bits;
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
        let kept = kept(self.lattice());
        let at_once = kept.substrates.min(substrates);
        let of_one = electrophiles * PAIR_BYTES + kept.pots * FormationTable::POT_BYTES;
        at_once * of_one + (substrates + electrophiles) * SUBSTANCE_BYTES
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

/// Distance of the members that are looked at, so that they are at most about `most`.
fn step(all: u64, most: u64) -> u64 {
    match all.div_ceil(most).max(1) {
        1 => 1,
        // an odd step meets all digits of axes whose sizes are powers of two
        step => step | 1,
    }
}
