//! Blocks scored: the right cells in the right order, whatever the threads.

use std::collections::BTreeMap;
use std::sync::Arc;

use enolattice_grid::{
    AxisSpec, BlockId, Campaign, CampaignSpec, CellId, Columns, ConditionsSpec, Entry, Grid,
    SubstrateEntry,
};
use enolattice_model::{FormationTable, Model};
use enolattice_reagents::Library;
use rayon::prelude::*;

/// Electrophiles by structure; the model covers the first and the last.
fn electrophiles(smiles: &[&str]) -> AxisSpec {
    let entry = |smiles: &&str| Entry {
        smiles: (*smiles).into(),
        ..Entry::default()
    };
    AxisSpec {
        all: false,
        entries: smiles.iter().map(entry).collect(),
    }
}

/// What is screened, and the order of the values on every axis.
fn spec(is_reversed: bool) -> CampaignSpec {
    let mut spec = usual_spec();
    if is_reversed {
        spec.substrates.reverse();
        for axis in [&mut spec.bases, &mut spec.electrophiles, &mut spec.solvents] {
            axis.entries.reverse();
        }
        spec.conditions.temperature_c.reverse();
        spec.conditions.formation_temperature_c.reverse();
        spec.conditions.time_h.reverse();
    }
    spec
}

fn grid() -> Grid {
    grid_of(&spec(false))
}

fn grid_of(spec: &CampaignSpec) -> Grid {
    let model = Arc::new(Model::new(Arc::new(
        Library::builtin().expect("the tables are sound"),
    )));
    let campaign = Campaign::new(spec, &model).expect("a sound campaign");
    Grid::new(campaign, model).expect("a small grid")
}

fn usual_spec() -> CampaignSpec {
    let named = |names: &[&str]| AxisSpec {
        all: false,
        entries: names
            .iter()
            .map(|name| Entry {
                name: (*name).into(),
                ..Entry::default()
            })
            .collect(),
    };
    let substrates = [
        "CC(=O)c1ccccc1",
        "CCOC(=O)CC(=O)OCC",
        "CC[N+](=O)[O-]",
        "CC#N",
        "O=C1CCCCC1",
    ];
    CampaignSpec {
        substrates: substrates
            .map(|smiles| SubstrateEntry {
                smiles: smiles.into(),
                ..SubstrateEntry::default()
            })
            .into(),
        bases: named(&["LDA", "KOtBu", "K2CO3", "DBU"]),
        electrophiles: electrophiles(&["CI", "CC(=O)Cl", "C=CC(=O)OC"]),
        solvents: named(&["THF", "DMF", "EtOH"]),
        conditions: ConditionsSpec {
            temperature_c: vec![-20.0, 0.0, 25.0, 60.0],
            formation_temperature_c: vec![-78.0, 0.0],
            time_h: vec![1.0, 4.0, 16.0],
            ..ConditionsSpec::default()
        },
        ..CampaignSpec::default()
    }
}

#[test]
fn a_cell_is_made_of_the_values_of_its_digits() {
    let grid = grid();
    assert_eq!(grid.cells(), 5 * 3 * 4 * 3 * 4 * 2 * 3);
    for number in (0..grid.cells()).step_by(97) {
        let digits = grid.digits(CellId(number)).expect("a cell of the grid");
        let cell = grid.cell(CellId(number)).expect("a cell of the grid");
        let campaign = grid.campaign();
        assert_eq!(
            cell.substrate.name,
            campaign.substrates[digits.substrate as usize].name
        );
        assert_eq!(
            cell.electrophile.name,
            campaign.electrophiles[digits.electrophile as usize].name
        );
        assert_eq!(
            cell.base.record.name,
            campaign.bases[digits.base as usize].record.name
        );
        assert_eq!(
            cell.solvent.record.name,
            campaign.solvents[digits.solvent as usize].record.name
        );
        assert_eq!(
            cell.conditions.temperature_c,
            campaign.temperature_c[digits.temperature as usize]
        );
        assert_eq!(
            Some(cell.conditions.formation_temperature_c),
            campaign.formation_temperature_c[digits.formation_temperature as usize]
        );
        assert_eq!(
            cell.conditions.time_h,
            campaign.time_h[digits.time as usize]
        );
    }
    assert!(grid.cell(CellId(grid.cells())).is_none());
}

#[test]
fn a_block_is_its_cells_scored_one_by_one() {
    let grid = grid();
    let block = BlockId {
        segment: 0,
        index: 1,
    };
    let columns = grid.score(block);
    let cells = grid.block_cells(block);
    assert_eq!(columns.len() as u64, cells.end - cells.start);
    for number in cells.clone().step_by(13) {
        let mut alone = Columns::default();
        let cell = grid.cell(CellId(number)).expect("a cell of the block");
        let cautions = columns.score((number - cells.start) as usize).cautions;
        let target = grid.campaign().yield_at_least;
        alone.push(&grid.model().score(&cell, target, cautions));
        assert_eq!(
            columns.score((number - cells.start) as usize),
            alone.score(0),
            "{number}"
        );
    }
    assert!(
        grid.score(BlockId {
            segment: 0,
            index: 2
        })
        .is_empty()
    );
    assert!(
        grid.score(BlockId {
            segment: 1,
            index: 0
        })
        .is_empty()
    );
}

#[test]
fn a_full_table_of_pots_changes_no_score() {
    let grid = grid();
    let tables = [0, 3].map(FormationTable::of_at_most);
    for number in (0..grid.cells()).step_by(97) {
        let cell = grid.cell(CellId(number)).expect("a cell of the grid");
        let alone = grid.model().score(&cell, 0.5, 0);
        for table in &tables {
            for _ in 0..2 {
                let tabled = grid.model().score_with(&cell, 0.5, 0, table, number);
                assert_eq!(format!("{tabled:?}"), format!("{alone:?}"), "{number}");
            }
        }
    }
}

#[test]
fn one_thread_and_four_give_the_same_bytes() {
    let bytes = |threads: usize| -> Vec<Vec<u8>> {
        let grid = grid();
        let pool = rayon::ThreadPoolBuilder::new()
            .num_threads(threads)
            .build()
            .expect("threads");
        let blocks: Vec<BlockId> = grid.blocks().collect();
        pool.install(|| {
            blocks
                .par_iter()
                .map(|block| grid.score(*block).to_bytes())
                .collect()
        })
    };
    assert_eq!(bytes(1), bytes(4));
}

/// Score of every cell by what the cell is made of.
fn scores_by_content(grid: &Grid) -> BTreeMap<String, String> {
    let mut scores = BTreeMap::new();
    for block in grid.blocks() {
        let columns = grid.score(block);
        for (i, number) in grid.block_cells(block).enumerate() {
            let cell = grid.cell(CellId(number)).expect("a cell of the block");
            let (substrate, electrophile) = (&cell.substrate.name, &cell.electrophile.name);
            let (base, solvent) = (&cell.base.record.name, &cell.solvent.record.name);
            let conditions = &cell.conditions;
            let content = format!("{substrate} {base} {electrophile} {solvent} {conditions:?}");
            scores.insert(content, format!("{:?}", columns.score(i)));
        }
    }
    scores
}

#[test]
fn the_order_of_the_values_on_the_axes_changes_no_score() {
    let usual = scores_by_content(&grid());
    let reversed = scores_by_content(&grid_of(&spec(true)));
    assert_eq!(usual.len() as u64, grid().cells());
    assert_eq!(usual, reversed);
}
