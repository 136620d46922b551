//! Aldehydes that are not conjugated with an alkene.

use super::{ElectrophileKind, ElectrophilicGroup, hammett};
use crate::Molecule;
use crate::groups::{Acyl, CARBON};

/// The first aldehyde; the others count as further positions.
pub(super) fn find(molecule: &Molecule) -> Option<ElectrophilicGroup> {
    let mut carbons = (0..molecule.atoms().len()).filter(|carbon| is_free(molecule, *carbon));
    let carbon = carbons.next()?;
    let bearer = bearer(molecule, carbon);
    let aromatic = bearer.is_some_and(|atom| molecule.atoms()[atom].aromatic);
    let alpha_hydrogens = bearer
        .filter(|atom| molecule.is_saturated_carbon(*atom))
        .map_or(0, |atom| molecule.atoms()[atom].hydrogens);
    let hammett_sigma = bearer
        .filter(|_| aromatic)
        .map_or(0.0, |ipso| hammett::sigma(molecule, ipso, carbon));
    Some(ElectrophilicGroup {
        kind: ElectrophileKind::Aldehyde {
            aromatic,
            alpha_hydrogens,
            hammett_sigma,
        },
        carbon,
        leaving_atom: None,
        further_positions: u8::try_from(carbons.count()).unwrap_or(u8::MAX),
    })
}

fn bearer(molecule: &Molecule, carbon: usize) -> Option<usize> {
    let around = molecule.neighbours(carbon).iter();
    around
        .map(|(other, _)| *other)
        .find(|other| molecule.element(*other) == CARBON)
}

fn is_free(molecule: &Molecule, carbon: usize) -> bool {
    molecule.acyl(carbon) == Some(Acyl::Aldehyde)
        && bearer(molecule, carbon).is_none_or(|atom| !molecule.is_vinyl_carbon(atom))
}
