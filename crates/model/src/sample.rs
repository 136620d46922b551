//! Cells for the tests of this crate.

use std::sync::Arc;

use enolattice_molecule::Molecule;
use enolattice_reagents::Library;

use crate::{Cell, Conditions, Model};

/// The model over the built-in library.
pub(crate) fn model() -> Model {
    Model::new(Arc::new(Library::builtin().expect("the library reads")))
}

/// A cell by SMILES and names at 25 °C, 1.1 equivalents of each reagent, 0.2 mol/L, 16 h.
pub(crate) fn cell(
    model: &Model,
    substrate: &str,
    base: &str,
    electrophile: &str,
    solvent: &str,
) -> Cell {
    let parse = |smiles: &str| Molecule::parse(smiles).expect("a structure");
    let library = model.library();
    let substrate = model.substrate(substrate, parse(substrate), None);
    let electrophile = model.electrophile(electrophile, parse(electrophile));
    let pair = model.pair(&substrate, &electrophile);
    Cell {
        pair: Arc::new(pair),
        substrate: Arc::new(substrate),
        base: Arc::new(model.base(library.base(base).expect("a base"))),
        electrophile: Arc::new(electrophile),
        solvent: Arc::new(model.solvent(library.solvent(solvent).expect("a solvent"))),
        additive: None,
        conditions: Conditions {
            additive_equiv: 0.0,
            temperature_c: 25.0,
            formation_temperature_c: 25.0,
            base_equiv: 1.1,
            electrophile_equiv: 1.1,
            concentration_m: 0.2,
            time_h: 16.0,
            dosing_min: 10.0,
            addition: None,
        },
    }
}

/// Cells over all ways in which bonds form and bases behave.
pub(crate) fn cells(model: &Model) -> Vec<Cell> {
    [
        ("CC(=O)c1ccccc1", "LDA", "BrCc1ccccc1", "THF"),
        ("CCOC(=O)CC(=O)OCC", "NaOEt", "CCCCBr", "EtOH"),
        ("CCOC(=O)CC(=O)OCC", "DBU", "C=CC(=O)OC", "MeCN"),
        ("CC(=O)c1ccccc1", "NaOH", "O=Cc1ccccc1", "EtOH"),
        ("CCOC(=O)CC(C)=O", "K2CO3", "CI", "acetone"),
        ("CCC[N+](=O)[O-]", "Et3N", "O=Cc1ccccc1", "DCM"),
        ("O=C1CCCN1", "NaH", "BrCc1ccccc1", "DMF"),
        ("CCC=O", "KOtBu", "CCBr", "toluene"),
    ]
    .map(|(substrate, base, electrophile, solvent)| {
        cell(model, substrate, base, electrophile, solvent)
    })
    .into()
}
