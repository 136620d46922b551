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

    /// Lays the rows over those that are known by canonical SMILES. A structure drawn without
    /// stereo finds the isomer that is there; it never hides a row that has no stereo itself.
    pub(crate) fn lay_over(self, known: &mut HashMap<String, usize>) {
        known.extend(self.exact);
        for (flat, row) in self.flat {
            known.entry(flat).or_insert(row);
        }
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
