//! Finding rows by structure.

use std::collections::HashMap;

use enolattice_molecule::Molecule;

/// Rows by canonical SMILES, exact ones first, those without stereo as a second choice.
#[derive(Default)]
pub(crate) struct StructureIndex {
    exact: HashMap<String, usize>,
    flat: HashMap<String, usize>,
}

impl StructureIndex {
    /// Adds a row; the first row with a structure keeps it.
    pub(crate) fn add(&mut self, molecule: &Molecule, row: usize) {
        self.exact
            .entry(molecule.canonical().to_owned())
            .or_insert(row);
        if let Some(flat) = without_stereo(molecule) {
            self.flat.entry(flat).or_insert(row);
        }
    }

    /// The rows by canonical SMILES, with stereo and without.
    pub(crate) fn finish(self) -> HashMap<String, usize> {
        let mut rows = self.flat;
        rows.extend(self.exact);
        rows
    }
}

/// Canonical SMILES without stereo, where that differs from the one with it.
pub(crate) fn without_stereo(molecule: &Molecule) -> Option<String> {
    // Canonical ranking is what reading the library costs; most rows need it once only.
    molecule
        .canonical()
        .contains(['@', '/', '\\'])
        .then(|| molecule.canonical_flat())
}
