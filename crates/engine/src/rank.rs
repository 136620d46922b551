//! Pages of a ranking.

use enolattice_grid::{CellId, Grid};
use enolattice_model::{Category, Cell, Score, Severity};
use enolattice_store::{PageToken, RankRequest};

use crate::engine::blocking;
use crate::{Axis, Engine, EngineError, Order, RankPage, RankQuery, RankedCell};

/// Rows of a page where the question does not say.
const USUAL_PAGE: u32 = 100;
/// Most rows of a page within the process; over the wire they are fewer.
const LARGEST_PAGE: u32 = 50_000;

impl Engine {
    /// A page of the ranking; 100 rows where `page_size` is 0, at most 50,000.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::Input`] where the filter cannot be read,
    /// [`EngineError::PageToken`], [`EngineError::Store`].
    pub async fn rank(&self, query: RankQuery) -> Result<RankPage, EngineError> {
        let shelf = self.queue()?.shelf();
        blocking(move || {
            let screened = shelf.screened(&query.job, &query.filter)?;
            let grid = &screened.grid;
            let token = PageToken {
                job: screened.job,
                order: query.order.into(),
                filter: query.filter,
                best_per: query.best_per.map_or("", Axis::name).to_owned(),
            };
            let after = match query.page_token.as_str() {
                "" => None,
                text => Some(token.decode(text)?),
            };
            let keeps = |cell: u64, score: &Score| screened.keeps(cell, score);
            let best_per = query.best_per;
            let group = |cell: u64| match (best_per, grid.digits(CellId(cell))) {
                (Some(axis), Some(digits)) => axis.digit(&digits),
                _ => 0,
            };
            let page_size = if query.page_size == 0 {
                USUAL_PAGE
            } else {
                query.page_size.min(LARGEST_PAGE)
            };
            let request = RankRequest {
                order: token.order,
                after,
                skip: query.skip,
                limit: page_size as usize,
                filter: if screened.filter.passes_all() {
                    None
                } else {
                    Some(&keeps)
                },
                best_per: if best_per.is_some() {
                    Some(&group)
                } else {
                    None
                },
            };
            let ranking = screened.store.rank(screened.job, &request)?;
            let rows = (ranking.first_rank..).zip(&ranking.rows);
            Ok(RankPage {
                rows: rows
                    .filter_map(|(rank, (cell, score))| ranked(grid, rank, *cell, score))
                    .collect(),
                next_page_token: ranking
                    .next
                    .map_or_else(String::new, |position| token.encode(&position)),
                total: ranking.total,
                cells_done: ranking.cells,
            })
        })
        .await
    }
}

impl From<Order> for enolattice_store::Order {
    fn from(order: Order) -> enolattice_store::Order {
        match order {
            Order::ExpectedYield => enolattice_store::Order::ExpectedYield,
            Order::PHit => enolattice_store::Order::PHit,
            Order::Selectivity => enolattice_store::Order::Selectivity,
            Order::Feasibility => enolattice_store::Order::Feasibility,
        }
    }
}

/// A cell with its names and numbers.
fn ranked(grid: &Grid, rank: u64, number: u64, score: &Score) -> Option<RankedCell> {
    let cell = grid.cell(CellId(number))?;
    let Cell {
        substrate,
        base,
        electrophile,
        solvent,
        additive,
        conditions,
        ..
    } = &cell;
    let cautions = Category::ALL
        .into_iter()
        .filter(|category| score.cautions & category.bit() != 0);
    Some(RankedCell {
        rank,
        cell: number,
        substrate: substrate.name.clone(),
        base: base.record.name.clone(),
        electrophile: electrophile.name.clone(),
        solvent: solvent.record.name.clone(),
        additive: additive.as_ref().map(|known| known.record.name.clone()),
        temperature_c: conditions.temperature_c,
        formation_temperature_c: conditions.formation_temperature_c,
        base_equiv: conditions.base_equiv,
        electrophile_equiv: conditions.electrophile_equiv,
        additive_equiv: additive.as_ref().map(|_| conditions.additive_equiv),
        concentration_m: conditions.concentration_m,
        time_h: conditions.time_h,
        dosing_min: conditions.dosing_min,
        addition: conditions
            .addition
            .unwrap_or_else(|| base.usual_addition())
            .name()
            .to_owned(),
        expected_yield: score.expected_yield,
        p_hit: score.p_hit,
        feasibility: score.feasibility,
        selectivity: score.selectivity,
        largest_loss: score.largest_loss,
        cautions: cautions
            .map(|category| category.name().to_owned())
            .collect(),
        severity: Severity::from_bits(score.cautions).map(|severity| severity.name().to_owned()),
        measured_yield: grid
            .measured(CellId(number))
            .map(|known| known.yield_fraction),
    })
}
