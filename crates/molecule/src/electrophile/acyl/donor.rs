//! What an acyl or sulfonyl group is bound to.

use super::super::{AcylDonor, carbonyl};
use crate::groups::{Acyl, CARBON, NITROGEN, OXYGEN, SULFUR};
use crate::{Bond, Molecule};

/// The donor that a carbonyl carbon and one of its neighbours make; `None` where the neighbour
/// does not leave.
pub(super) fn acyl(molecule: &Molecule, carbon: usize, leaving: usize) -> Option<AcylDonor> {
    let oxygen = molecule.carbonyl_oxygen(carbon)?;
    if molecule.bond(carbon, leaving) != Some(Bond::Single) || leaving == oxygen {
        return None;
    }
    let rest = molecule
        .neighbours(carbon)
        .iter()
        .map(|(other, _)| *other)
        .find(|other| *other != oxygen && *other != leaving)
        .filter(|other| molecule.element(*other) != 1);
    match molecule.element(leaving) {
        9 | 17 | 35 | 53 => halide(molecule, rest),
        CARBON if molecule.is_nitrile_carbon(leaving) => Some(AcylDonor::Cyanide),
        OXYGEN => oxygen_bound(molecule, carbon, leaving, rest),
        SULFUR => sulfur_bound(molecule, leaving, rest),
        NITROGEN => nitrogen_bound(molecule, carbon, leaving, rest),
        _ => None,
    }
}

fn halide(molecule: &Molecule, rest: Option<usize>) -> Option<AcylDonor> {
    match rest.map(|rest| molecule.element(rest)) {
        None | Some(CARBON) => Some(AcylDonor::Halide),
        Some(OXYGEN | SULFUR) => Some(AcylDonor::Chloroformate),
        Some(NITROGEN) => Some(AcylDonor::CarbamoylChloride),
        Some(_) => None,
    }
}

fn oxygen_bound(
    molecule: &Molecule,
    carbon: usize,
    leaving: usize,
    rest: Option<usize>,
) -> Option<AcylDonor> {
    let beyond = beyond(molecule, carbon, leaving)?;
    let is_carbonate = rest.is_some_and(|rest| matches!(molecule.element(rest), OXYGEN | SULFUR));
    if rest.is_some_and(|rest| molecule.element(rest) == NITROGEN) {
        return None;
    }
    if molecule.carbonyl_oxygen(beyond).is_some() {
        return anhydride(molecule, beyond, leaving, is_carbonate);
    }
    let is_mixed_anhydride = molecule.is_sulfonyl_sulfur(beyond) || molecule.element(beyond) == 15;
    if is_mixed_anhydride {
        return (!is_carbonate).then_some(AcylDonor::Anhydride);
    }
    if molecule.bond_in_ring(carbon, leaving) && molecule.is_vinyl_carbon(beyond) {
        return None;
    }
    let class =
        if makes_good_leaving_group(molecule, beyond) || in_small_ring(molecule, carbon, leaving) {
            AcylDonor::ActiveEster
        } else if is_carbonate {
            AcylDonor::Carbonate
        } else if carbonyl::is_activated(molecule, carbon) && !beside_ketone(molecule, carbon) {
            AcylDonor::Oxalate
        } else if rest.is_none() {
            AcylDonor::Formate
        } else if is_tertiary(molecule, beyond) {
            AcylDonor::TertAlkylEster
        } else {
            AcylDonor::Ester
        };
    Some(class)
}

/// A carboxylic anhydride, a dicarbonate, or the carboxylic side of a mixed carbonic anhydride.
fn anhydride(
    molecule: &Molecule,
    other_side: usize,
    leaving: usize,
    is_carbonate: bool,
) -> Option<AcylDonor> {
    let other_rest: Vec<usize> = molecule
        .bound_to(other_side, OXYGEN, Bond::Single)
        .filter(|atom| *atom != leaving)
        .collect();
    let other_nitrogen = molecule.bound_to(other_side, NITROGEN, Bond::Single).next();
    match (is_carbonate, !other_rest.is_empty()) {
        _ if other_nitrogen.is_some() => None,
        (true, true) => Some(AcylDonor::Dicarbonate),
        (true, false) => None,
        (false, _) => Some(AcylDonor::Anhydride),
    }
}

fn sulfur_bound(molecule: &Molecule, leaving: usize, rest: Option<usize>) -> Option<AcylDonor> {
    let is_thioether = molecule.neighbours(leaving).len() == 2;
    match rest.map(|rest| molecule.element(rest)) {
        _ if !is_thioether => None,
        None | Some(CARBON) => Some(AcylDonor::Thioester),
        Some(SULFUR) => Some(AcylDonor::Carbonate),
        Some(_) => None,
    }
}

fn nitrogen_bound(
    molecule: &Molecule,
    carbon: usize,
    leaving: usize,
    rest: Option<usize>,
) -> Option<AcylDonor> {
    if molecule.atoms()[leaving].aromatic {
        let azole = molecule.rings().iter().any(|ring| {
            ring.len() == 5
                && ring.contains(&leaving)
                && ring
                    .iter()
                    .filter(|a| molecule.element(**a) == NITROGEN)
                    .count()
                    > 1
        });
        if azole {
            return Some(AcylDonor::Azole);
        }
    }
    if rest.is_some_and(|rest| molecule.element(rest) != CARBON) {
        return None;
    }
    if molecule.atoms()[leaving].hydrogens > 0 || molecule.atoms()[leaving].charge != 0 {
        return None;
    }
    let pulls =
        |atom: usize| molecule.carbonyl_oxygen(atom).is_some() || molecule.is_sulfonyl_sulfur(atom);
    let others = || {
        molecule
            .neighbours(leaving)
            .iter()
            .map(|(other, _)| *other)
            .filter(|other| *other != carbon)
    };
    let in_strained_ring = molecule
        .rings()
        .iter()
        .any(|ring| ring.len() == 3 && ring.contains(&leaving));
    if others().any(|other| molecule.element(other) == OXYGEN) || in_strained_ring {
        return Some(AcylDonor::ChelatingAmide);
    }
    if others().any(pulls) && !molecule.bond_in_ring(carbon, leaving) {
        return Some(AcylDonor::ActiveEster);
    }
    Some(AcylDonor::Amide)
}

/// What leaves a sulfonyl sulfur: halide, sulfonate, or the nitrogen of an N-aryl sulfonimide.
pub(super) fn sulfonyl(molecule: &Molecule, sulfur: usize) -> Option<usize> {
    let around = || {
        molecule
            .neighbours(sulfur)
            .iter()
            .filter(|(_, bond)| *bond == Bond::Single)
            .map(|(other, _)| *other)
    };
    let carbons = around().filter(|other| molecule.element(*other) == CARBON);
    let [rest] = carbons.collect::<Vec<_>>()[..] else {
        return None;
    };
    let leaving = around().find(|other| *other != rest)?;
    let to_sulfonyl = molecule
        .neighbours(leaving)
        .iter()
        .any(|(other, _)| *other != sulfur && molecule.is_sulfonyl_sulfur(*other));
    let on_aryl = molecule
        .neighbours(leaving)
        .iter()
        .any(|(other, _)| molecule.atoms()[*other].aromatic);
    match molecule.element(leaving) {
        // Ethenesulfonyl fluoride and its kin are attacked at carbon.
        9 => (!molecule.is_vinyl_carbon(rest)).then_some(leaving),
        17 | 35 => Some(leaving),
        OXYGEN => to_sulfonyl.then_some(leaving),
        NITROGEN => (to_sulfonyl && on_aryl).then_some(leaving),
        _ => None,
    }
}

fn beyond(molecule: &Molecule, carbon: usize, heteroatom: usize) -> Option<usize> {
    molecule
        .neighbours(heteroatom)
        .iter()
        .map(|(other, _)| *other)
        .find(|other| *other != carbon && molecule.element(*other) != 1)
}

/// Phenols, enols, fluoroalcohols, N-hydroxy compounds, silanols.
fn makes_good_leaving_group(molecule: &Molecule, beyond: usize) -> bool {
    let fluorinated = |carbon: usize| {
        molecule
            .bound_to(carbon, CARBON, Bond::Single)
            .any(|other| molecule.bound_to(other, 9, Bond::Single).count() > 1)
    };
    molecule.atoms()[beyond].aromatic
        || molecule.is_vinyl_carbon(beyond)
        || matches!(molecule.element(beyond), NITROGEN | 14)
        || (molecule.is_saturated_carbon(beyond) && fluorinated(beyond))
}

fn beside_ketone(molecule: &Molecule, carbon: usize) -> bool {
    molecule
        .bound_to(carbon, CARBON, Bond::Single)
        .any(|other| molecule.acyl(other) == Some(Acyl::Ketone))
}

fn in_small_ring(molecule: &Molecule, one: usize, other: usize) -> bool {
    molecule
        .rings()
        .iter()
        .any(|ring| ring.len() <= 4 && ring.contains(&one) && ring.contains(&other))
}

fn is_tertiary(molecule: &Molecule, carbon: usize) -> bool {
    molecule.is_saturated_carbon(carbon)
        && molecule.bound_to(carbon, CARBON, Bond::Single).count() == 3
}
