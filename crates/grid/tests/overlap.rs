//! The cells that two campaigns share.

use std::collections::BTreeMap;
use std::sync::Arc;

use enolattice_grid::{Campaign, CellId, Grid, Overlap, Sources, read};
use enolattice_model::{Cell, Model};
use enolattice_reagents::Library;

/// Two campaigns over one model.
fn grids(left: &str, right: &str) -> [Grid; 2] {
    let library = Library::builtin().expect("the tables are sound");
    let model = Arc::new(Model::new(Arc::new(library)));
    [left, right].map(|text| {
        let sources = Sources {
            campaign_name: "c.toml".into(),
            campaign: text.into(),
            files: BTreeMap::new(),
        };
        let spec = read(&sources).sound().expect("is read");
        let campaign = Campaign::new(&spec, &model).expect("is sound");
        Grid::new(campaign, model.clone()).expect("a small grid")
    })
}

fn campaign(substrates: &str, bases: &str, solvents: &str, conditions: &str) -> String {
    format!(
        "[substrates]\nsmiles = [{substrates}]\n[bases]\nlibrary = [{bases}]\n\
         [electrophiles]\nlibrary = [\"MeI\", \"BnBr\"]\n[solvents]\nlibrary = [{solvents}]\n\
         [conditions]\n{conditions}\n"
    )
}

/// What tells a cell of these campaigns from all others, but for the time.
fn words(cell: &Cell) -> String {
    format!(
        "{} {} {} {} {}",
        cell.substrate.molecule.canonical(),
        cell.base.record.name,
        cell.electrophile.name,
        cell.solvent.record.name,
        cell.conditions.temperature_c,
    )
}

/// Every shared cell, found one by one by its words.
fn by_words(left: &Grid, right: &Grid) -> Vec<(CellId, CellId)> {
    let told = |grid: &Grid, number: u64| words(&grid.cell(CellId(number)).expect("a cell"));
    let known: BTreeMap<String, u64> = (0..right.cells()).map(|n| (told(right, n), n)).collect();
    let partner = |number: u64| Some((CellId(number), CellId(*known.get(&told(left, number))?)));
    (0..left.cells()).filter_map(partner).collect()
}

#[test]
fn cells_are_matched_by_what_they_are_and_not_by_their_numbers() {
    let left = campaign(
        r#""CC(=O)c1ccccc1", "CCOC(C)=O", "O=C1CCCCC1""#,
        r#""LDA", "KOtBu", "Et3N""#,
        r#""THF", "DMF""#,
        "temperature_c = [-20, 25, 60]\ntime_h = 16",
    );
    let right = campaign(
        r#""C1CCCCC1=O", "CCC#N", "c1ccccc1C(C)=O""#,
        r#""K2CO3", "Et3N", "LDA""#,
        r#""DMF", "DMSO", "THF""#,
        "temperature_c = [25, 60, 100]\ntime_h = 2",
    );
    let [left, right] = grids(&left, &right);
    for (left, right) in [(&left, &right), (&right, &left), (&left, &left)] {
        let overlap = Overlap::of(left, right);
        let found: Vec<(CellId, CellId)> =
            left.blocks().flat_map(|b| overlap.of_block(b)).collect();
        assert_eq!(found, by_words(left, right));
        assert_eq!(overlap.cells(), found.len() as u64);
    }
    let overlap = Overlap::of(&left, &right);
    assert_eq!(overlap.cells(), 2 * 2 * 2 * 2 * 2);
    let of = |name| {
        overlap
            .axes()
            .iter()
            .find(|axis| axis.axis == name)
            .expect("an axis")
    };
    let substrates = of("substrates");
    assert_eq!(
        (
            substrates.shared,
            substrates.left_only,
            substrates.right_only
        ),
        (2, 1, 1)
    );
    assert_eq!(
        of("time_h").changed,
        Some(("16".to_owned(), "2".to_owned()))
    );
    assert_eq!(of("temperature_c").changed, None);
}

#[test]
fn one_structure_is_never_taken_for_another() {
    let conditions = "temperature_c = 25";
    let left = campaign(r#""CC(=O)c1ccccc1""#, r#""LDA""#, r#""THF""#, conditions);
    let right = campaign(r#""O=C1CCCCC1""#, r#""LDA""#, r#""DMF""#, conditions);
    let [left, right] = grids(&left, &right);
    let overlap = Overlap::of(&left, &right);
    assert_eq!(overlap.cells(), 0);
    assert_eq!(
        left.blocks()
            .flat_map(|block| overlap.of_block(block))
            .count(),
        0
    );
}
