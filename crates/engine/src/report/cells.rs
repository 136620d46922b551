//! Cells as a report shows them.

use enolattice_grid::{CellId, Grid};
use enolattice_model::{Contents, Explanation, cautions};
use enolattice_report::{ExplainedCell, Share, ShownCell};
use rayon::prelude::*;

use crate::CellDescription;

/// A cell of a job with the numbers of its ranking.
#[derive(Clone, Copy, Debug)]
pub(super) struct Ranked {
    pub(super) cell: u64,
    pub(super) expected_yield: Option<f64>,
    pub(super) p_hit: Option<f64>,
}

/// Cells with their cautions, products and shares, in the order given; the stiff reference solves each. Takes time.
pub(super) fn shown(grid: &Grid, cells: &[Ranked]) -> Vec<ShownCell> {
    cells
        .par_iter()
        .filter_map(|ranked| one(grid, ranked))
        .collect()
}

fn one(grid: &Grid, ranked: &Ranked) -> Option<ShownCell> {
    let id = CellId(ranked.cell);
    let cell = grid.cell(id)?;
    // a cell that the reference gives up on has shares that are unknown, and still its other numbers
    let fate = grid.model().fate(&cell).ok().flatten();
    let known = CellDescription::of(Some(ranked.cell), &cell);
    Some(ShownCell {
        cell: ranked.cell,
        substrate: known.substrate,
        substrate_smiles: known.substrate_smiles,
        base: known.base,
        electrophile: known.electrophile,
        electrophile_smiles: known.electrophile_smiles,
        solvent: known.solvent,
        additive: known.additive.zip(known.additive_equiv),
        temperature_c: known.temperature_c,
        formation_temperature_c: known.formation_temperature_c,
        base_equiv: known.base_equiv,
        electrophile_equiv: known.electrophile_equiv,
        concentration_m: known.concentration_m,
        time_h: known.time_h,
        dosing_min: known.dosing_min,
        addition: known.addition,
        expected_yield: ranked.expected_yield,
        p_hit: ranked.p_hit,
        cautions: cautions(&Contents::from(&cell))
            .into_iter()
            .map(|caution| {
                (
                    caution.severity.name().to_owned(),
                    caution.category.name().to_owned(),
                )
            })
            .collect(),
        measured_yield: grid.measured(id).map(|known| known.yield_fraction),
        product_smiles: fate.as_ref().and_then(|fate| {
            let wanted = fate
                .products
                .iter()
                .find(|product| product.channel.is_none());
            wanted.map(|product| product.smiles.clone())
        }),
        shares: fate.map_or(Vec::new(), |fate| Share::of(fate.product, &fate.losses)),
    })
}

/// Cells in full; one that the reference gives up on is left out. Takes time.
pub(super) fn explained(grid: &Grid, cells: &[(ShownCell, String)]) -> Vec<ExplainedCell> {
    let in_full = |(cell, place): &(ShownCell, String)| {
        let known = grid.cell(CellId(cell.cell))?;
        let target = grid.campaign().yield_at_least;
        let explanation: Explanation = grid.model().explain(&known, target).ok()?;
        Some(ExplainedCell {
            cell: cell.clone(),
            place: place.clone(),
            explanation,
        })
    };
    cells.par_iter().filter_map(in_full).collect()
}

/// What a cell promises.
#[derive(Clone, Copy, Debug)]
pub(super) struct Promise<'a> {
    pub(super) substrate: &'a str,
    pub(super) cell: u64,
    pub(super) expected_yield: Option<f64>,
    pub(super) p_hit: Option<f64>,
}

/// Surest cells that are shown in full, and cells in doubt.
const SURE: usize = 2;
const DOUBTFUL: usize = 2;

/// Which cells are shown in full: the surest, then those whose p_hit is nearest to a half, each of another substrate.
pub(super) fn sure_and_doubtful<T>(cells: &[T], promise: impl Fn(&T) -> Promise<'_>) -> Vec<usize> {
    let sureness = |i: usize| {
        let promise = promise(&cells[i]);
        promise.p_hit.unwrap_or(0.0) + promise.expected_yield.unwrap_or(0.0)
    };
    let doubt = |i: usize| {
        promise(&cells[i])
            .p_hit
            .map_or(1.0, |p_hit| (p_hit - 0.5).abs())
    };
    let mut surest: Vec<usize> = (0..cells.len()).collect();
    surest.sort_by(|a, b| {
        let earlier = promise(&cells[*a]).cell.cmp(&promise(&cells[*b]).cell);
        sureness(*b).total_cmp(&sureness(*a)).then(earlier)
    });
    let mut doubtful = surest.clone();
    doubtful.sort_by(|a, b| doubt(*a).total_cmp(&doubt(*b)));
    let mut chosen: Vec<usize> = Vec::new();
    for (order, most) in [(surest, SURE), (doubtful, SURE + DOUBTFUL)] {
        for i in order {
            let substrate = promise(&cells[i]).substrate;
            let is_new = chosen
                .iter()
                .all(|known| promise(&cells[*known]).substrate != substrate);
            if is_new && chosen.len() < most {
                chosen.push(i);
            }
        }
    }
    chosen
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_surest_come_first_and_no_substrate_twice() {
        let cells = [
            ("a", 0.9),
            ("a", 0.99),
            ("b", 0.8),
            ("c", 0.5),
            ("d", 0.1),
            ("a", 0.5),
        ];
        let chosen = sure_and_doubtful(&cells, |(substrate, p_hit)| Promise {
            substrate,
            cell: 0,
            expected_yield: Some(0.0),
            p_hit: Some(*p_hit),
        });
        assert_eq!(chosen, [1, 2, 3, 4]);
    }
}
