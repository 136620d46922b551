//! Aldehydes and ketones that are not conjugated with an alkene.

use super::{ElectrophileKind, ElectrophilicGroup};
use crate::environment::{Conjugation, ring_sigma};
use crate::groups::{Acyl, CARBON};
use crate::{Bond, Molecule};

/// The first aldehyde; the others count as further positions.
pub(super) fn aldehyde(molecule: &Molecule) -> Option<ElectrophilicGroup> {
    let mut carbons = free(molecule, Acyl::Aldehyde);
    let carbon = carbons.next()?;
    let bearer = molecule.bound_to(carbon, CARBON, Bond::Single).next();
    let aromatic = bearer.is_some_and(|atom| molecule.atoms()[atom].aromatic);
    let hammett_sigma = bearer.filter(|_| aromatic).map_or(0.0, |ipso| {
        ring_sigma(molecule, ipso, Conjugation::Insulated)
    });
    Some(ElectrophilicGroup {
        kind: ElectrophileKind::Aldehyde {
            aromatic,
            alpha_hydrogens: alpha_hydrogens(molecule, carbon),
            hammett_sigma,
            activated: is_activated(molecule, carbon),
        },
        atom: carbon,
        leaving_atom: None,
        further_positions: u8::try_from(carbons.count()).unwrap_or(u8::MAX),
    })
}

/// The most reactive ketone: activated before alkyl before aryl; its like count as further positions.
pub(super) fn ketone(molecule: &Molecule) -> Option<ElectrophilicGroup> {
    let rank = |carbon: &usize| (!is_activated(molecule, *carbon), is_aryl(molecule, *carbon));
    let carbons: Vec<usize> = free(molecule, Acyl::Ketone).collect();
    let best = *carbons.iter().min_by_key(|carbon| rank(carbon))?;
    let like = carbons.iter().filter(|c| rank(c) == rank(&best)).count();
    Some(ElectrophilicGroup {
        kind: ElectrophileKind::Ketone {
            aromatic: is_aryl(molecule, best),
            activated: is_activated(molecule, best),
            alpha_hydrogens: alpha_hydrogens(molecule, best),
        },
        atom: best,
        leaving_atom: None,
        further_positions: u8::try_from(like - 1).unwrap_or(u8::MAX),
    })
}

/// Carbonyl carbons of a class that bear neither alkenyl nor alkynyl.
fn free(molecule: &Molecule, class: Acyl) -> impl Iterator<Item = usize> + '_ {
    let unsaturated =
        |atom: usize| molecule.is_vinyl_carbon(atom) || molecule.is_alkynyl_carbon(atom);
    (0..molecule.atoms().len()).filter(move |carbon| {
        molecule.acyl(*carbon) == Some(class)
            && !molecule
                .bound_to(*carbon, CARBON, Bond::Single)
                .any(unsaturated)
    })
}

fn is_aryl(molecule: &Molecule, carbon: usize) -> bool {
    molecule
        .neighbours(carbon)
        .iter()
        .any(|(other, _)| molecule.atoms()[*other].aromatic)
}

/// Hydrogens on saturated carbons beside a carbonyl carbon.
pub(super) fn alpha_hydrogens(molecule: &Molecule, carbon: usize) -> u8 {
    molecule
        .bound_to(carbon, CARBON, Bond::Single)
        .filter(|atom| molecule.is_saturated_carbon(*atom))
        .map(|atom| molecule.atoms()[atom].hydrogens)
        .sum()
}

/// Whether the carbonyl carbon stands beside C=O, CN or a carbon with two halogens or more.
pub(super) fn is_activated(molecule: &Molecule, carbon: usize) -> bool {
    molecule.bound_to(carbon, CARBON, Bond::Single).any(|atom| {
        let halogens = molecule
            .neighbours(atom)
            .iter()
            .filter(|(other, _)| molecule.is_halogen(*other))
            .count();
        molecule.carbonyl_oxygen(atom).is_some()
            || molecule.is_nitrile_carbon(atom)
            || (molecule.is_saturated_carbon(atom) && halogens >= 2)
    })
}
