//! Aryl halides that take part in nucleophilic aromatic substitution.

use super::{ElectrophileKind, ElectrophilicGroup, LeavingGroup};
use crate::groups::{CARBON, NITROGEN};
use crate::{Bond, Molecule};

/// What a ring does to one of its halogens.
#[derive(Clone, Copy, PartialEq, Eq)]
struct Activation {
    leaving: LeavingGroup,
    nitro: u8,
    acceptors: u8,
    ring_nitrogens: u8,
    halogens: u8,
}

/// How ready an aryl halide is.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Readiness {
    /// By nitro, by two ring nitrogens, or by five halogens: before ketones and esters.
    Strong,
    /// By one ring nitrogen: neither before nor after ketones and esters.
    Medium,
    /// By other acceptors alone: after ketones and esters.
    Weak,
}

/// The aryl halide that reacts by SNAr, with how ready it is.
///
/// Fluoride leaves before the other halogens from the same place, since it is the addition that counts.
pub(super) fn find(molecule: &Molecule) -> Option<(Readiness, ElectrophilicGroup)> {
    let mut found: Vec<(usize, usize, Activation, Readiness)> = (0..molecule.atoms().len())
        .filter(|atom| molecule.is_halogen(*atom))
        .filter_map(|halogen| {
            let carbon = molecule.bound_to(halogen, CARBON, Bond::Single).next()?;
            let activation = activation(molecule, carbon, halogen)?;
            Some((carbon, halogen, activation, readiness(&activation)?))
        })
        .collect();
    found.sort_by_key(|(carbon, _, activation, readiness)| {
        (
            *readiness,
            std::cmp::Reverse(pull(activation)),
            activation.leaving != LeavingGroup::Fluoride,
            activation.leaving != LeavingGroup::Chloride,
            *carbon,
        )
    });
    let (carbon, halogen, best, readiness) = *found.first()?;
    // What has entered pushes electrons: one further place at most.
    let like = found.iter().filter(|(_, _, a, _)| *a == best).count() - 1;
    let group = ElectrophilicGroup {
        kind: ElectrophileKind::Aryl {
            leaving: best.leaving,
            nitro: best.nitro,
            acceptors: best.acceptors,
            ring_nitrogens: best.ring_nitrogens,
            halogens: best.halogens,
        },
        atom: carbon,
        leaving_atom: Some(halogen),
        further_positions: like.min(1) as u8,
    };
    Some((readiness, group))
}

/// Sum of what pulls; nitro counts double (common practice).
fn pull(activation: &Activation) -> u8 {
    2 * activation.nitro + 2 * activation.ring_nitrogens + activation.acceptors
}

fn readiness(activation: &Activation) -> Option<Readiness> {
    let fluoride = activation.leaving == LeavingGroup::Fluoride;
    if activation.nitro > 0
        || activation.ring_nitrogens > 1
        || (fluoride && activation.halogens >= 4)
    {
        Some(Readiness::Strong)
    } else if activation.ring_nitrogens > 0 {
        Some(Readiness::Medium)
    } else if activation.acceptors > 1 || (fluoride && activation.acceptors > 0) {
        Some(Readiness::Weak)
    } else {
        None
    }
}

fn activation(molecule: &Molecule, carbon: usize, halogen: usize) -> Option<Activation> {
    let leaving = match molecule.element(halogen) {
        9 => LeavingGroup::Fluoride,
        17 => LeavingGroup::Chloride,
        35 => LeavingGroup::Bromide,
        _ => LeavingGroup::Iodide,
    };
    if !molecule.atoms()[carbon].aromatic {
        return None;
    }
    let mut found = Activation {
        leaving,
        nitro: 0,
        acceptors: 0,
        ring_nitrogens: 0,
        halogens: 0,
    };
    // The smallest ring with the carbon; a ring fused to it is not conjugated as plainly.
    let ring = molecule
        .rings()
        .iter()
        .filter(|ring| ring.contains(&carbon))
        .min_by_key(|ring| ring.len())?;
    let start = ring.iter().position(|atom| *atom == carbon)?;
    for step in 1..ring.len() {
        let atom = ring[(start + step) % ring.len()];
        let meta = ring.len() == 6 && (step == 2 || step == 4);
        let remote = ring.len() == 5 && (step == 2 || step == 3);
        if is_pyridine_nitrogen(molecule, atom) && !meta && !remote {
            found.ring_nitrogens += 1;
        }
        for (outside, _) in molecule.neighbours(atom) {
            if ring.contains(outside) {
                continue;
            }
            if molecule.is_halogen(*outside) {
                found.halogens += 1;
            } else if !meta && molecule.is_nitro_nitrogen(*outside) {
                found.nitro += 1;
            } else if !meta && is_acceptor(molecule, *outside) {
                found.acceptors += 1;
            }
        }
    }
    Some(found)
}

fn is_pyridine_nitrogen(molecule: &Molecule, atom: usize) -> bool {
    let a = molecule.atoms()[atom];
    a.element == NITROGEN && a.aromatic && a.hydrogens == 0 && {
        molecule.neighbours(atom).len() == 2 || a.charge == 1
    }
}

fn is_acceptor(molecule: &Molecule, atom: usize) -> bool {
    let halogens = molecule
        .neighbours(atom)
        .iter()
        .filter(|(other, _)| molecule.is_halogen(*other))
        .count();
    molecule.is_nitrile_carbon(atom)
        || molecule.is_sulfonyl_sulfur(atom)
        || molecule.carbonyl_oxygen(atom).is_some()
        || (molecule.is_saturated_carbon(atom) && halogens > 1)
}
