//! Cells of published reactions, by SMILES and by the names of the library.

use std::sync::Arc;

use enolattice_model::{Cell, Conditions, Model};
use enolattice_molecule::Molecule;

/// The cell of a substrate and an electrophile by their SMILES, a base and a solvent by their names.
///
/// # Errors
/// A sentence that names the SMILES which cannot be read or the reagent which the library does not have.
pub(crate) fn cell(
    model: &Model,
    [substrate, base, electrophile, solvent]: [&str; 4],
    conditions: Conditions,
) -> Result<Cell, String> {
    let library = model.library();
    let unknown = |what: &str, name: &str| format!("the library has no {what} {name}");
    let base = library.base(base).ok_or_else(|| unknown("base", base))?;
    let solvent = library
        .solvent(solvent)
        .ok_or_else(|| unknown("solvent", solvent))?;
    let substrate = model.substrate(substrate, molecule(substrate)?, None);
    let electrophile = model.electrophile(electrophile, molecule(electrophile)?);
    Ok(Cell {
        pair: Arc::new(model.pair(&substrate, &electrophile)),
        substrate: Arc::new(substrate),
        base: Arc::new(model.base(base)),
        electrophile: Arc::new(electrophile),
        solvent: Arc::new(model.solvent(solvent)),
        additive: None,
        conditions,
    })
}

/// A structure by its SMILES.
///
/// # Errors
/// A sentence with the SMILES that cannot be read.
pub(crate) fn molecule(smiles: &str) -> Result<Molecule, String> {
    Molecule::parse(smiles).map_err(|error| format!("{smiles}: {error}"))
}
