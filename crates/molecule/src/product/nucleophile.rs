//! What a base, a solvent or another nucleophile makes of an electrophile.

use super::{Product, attack};
use crate::edit::Draft;
use crate::groups::NITROGEN;
use crate::{ElectrophilicGroup, Molecule, StructureError};

/// The product of attack by atom `atom` of any nucleophile on the electrophile: the ether of an alkoxide,
/// the amide of an amine, the ammonium ion of a tertiary amine, the alkane of an organolithium.
///
/// The nucleophile is an anion with its charge on `atom`, a neutral molecule that loses a hydrogen there,
/// or a nitrogen without a hydrogen, which becomes a cation.
///
/// # Errors
/// `atom` is none of these, the electrophile is inert, or the product is beyond the caps of
/// [`Molecule::parse`].
pub fn substitution_product(
    nucleophile: &Molecule,
    atom: usize,
    electrophile: &Molecule,
    group: &ElectrophilicGroup,
) -> Result<Product, StructureError> {
    attack::by_electrophile(draft(nucleophile, atom)?, atom, electrophile, group)
}

/// A draft of the nucleophile whose atom is ready for a new bond.
pub(super) fn draft(nucleophile: &Molecule, atom: usize) -> Result<Draft, StructureError> {
    let Some(found) = nucleophile.atoms().get(atom) else {
        return Err(StructureError::new(
            format!("{} has no atom {atom}", nucleophile.smiles()),
            "count atoms from 0 in the order of the SMILES",
        ));
    };
    let mut draft = Draft::of(nucleophile);
    if found.charge < 0 || found.charge == 0 && found.hydrogens == 0 && found.element == NITROGEN {
        draft.set_charge(atom, found.charge + 1);
    } else {
        draft.take_hydrogen(atom)?;
    }
    draft.flatten(atom);
    Ok(draft)
}
