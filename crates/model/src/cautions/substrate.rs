//! A substrate alone and with a base.

use enolattice_molecule::Molecule;
use enolattice_reagents::{Base, BaseKind};

use super::groups::{explosive_group, has_carboxylic_acid, is_nitroalkane};
use super::{Category, Caution, is_strong};

/// Cautions of a base and a substrate, in whatever solvent.
pub fn base_substrate_cautions(base: &Base, substrate: &Molecule) -> Vec<Caution> {
    let mut found = Vec::new();
    found.extend(explosive_group(substrate, "the substrate"));
    if is_nitroalkane(substrate) {
        let text = format!(
            "the salt of the nitro compound with {} explodes when dry",
            base.name
        );
        found.push(if is_strong(base) {
            Caution::warning(Category::Explosive, text)
        } else {
            Caution::note(Category::Explosive, text)
        });
    }
    // Phosphate takes a proton without giving gas.
    let is_carbonate = base.kind == BaseKind::Carbonate && base.smiles.contains('C');
    if is_carbonate && has_carboxylic_acid(substrate) {
        let text = format!(
            "{} and a carboxylic acid give off carbon dioxide",
            base.name
        );
        found.push(Caution::note(Category::Gas, text));
    }
    found
}
