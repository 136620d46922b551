//! Descriptors of O–H, S–H and alkyne C–H sites.
//!
//! Each site has one class, which anchors the estimate, and a few corrections.

use super::descriptors::Descriptors;
use super::group::{Group, beyond, double_bonded, group, is_saturated_carbon, oxo_count};
use super::hammett::{Conjugation, inductive, ring_sigma, six_ring};
use crate::{AnionClass, Bond, Molecule};

/// Describes an O–H; `None` where it is no acid that the tables know.
pub(super) fn oxygen(molecule: &Molecule, site: usize) -> Option<(AnionClass, Descriptors)> {
    let mut d = Descriptors::default();
    let Some(&(partner, bond)) = molecule.neighbours(site).first() else {
        d.add("water O–H", 1.0);
        return Some((AnionClass::Hydroxide, d));
    };
    let atom = molecule.atoms()[partner];
    let class = match atom.element {
        _ if bond != Bond::Single || molecule.atoms()[site].charge != 0 => return None,
        6 if atom.aromatic => {
            d.add("phenol O–H", 1.0);
            d.add(
                "σ of phenol",
                ring_sigma(molecule, partner, Conjugation::Direct),
            );
            d.add("benzo on phenol", fused_arenes(molecule, partner) as f64);
            AnionClass::Phenoxide
        }
        6 if double_bonded(molecule, partner, 8).is_some() => {
            carboxyl(molecule, partner, site, &mut d)
        }
        // the tautomer of a thiocarboxylic acid: the proton goes to sulfur
        6 if double_bonded(molecule, partner, 16).is_some() => {
            d.add("thiocarboxylic acid S–H", 1.0);
            AnionClass::Carboxylate
        }
        6 if is_saturated_carbon(molecule, partner) => {
            d.add("alcohol O–H", 1.0);
            d.add(
                "carbon on carbinol",
                carbons(molecule, partner, site) as f64,
            );
            d.add("σI of alcohol", inductive(molecule, partner, site));
            AnionClass::Alkoxide
        }
        6 => {
            d.add("enol O–H", 1.0);
            AnionClass::Phenoxide
        }
        7 => hydroxyl_on_nitrogen(molecule, partner, site, &mut d),
        14 => {
            d.add("silanol O–H", 1.0);
            AnionClass::Alkoxide
        }
        15 => {
            d.add("phosphorus acid O–H", 1.0);
            AnionClass::Carboxylate
        }
        16 => {
            let sulfonic = oxo_count(molecule, partner) == 2;
            d.add(
                if sulfonic {
                    "sulfonic acid O–H"
                } else {
                    "sulfinic acid O–H"
                },
                1.0,
            );
            AnionClass::Carboxylate
        }
        8 => {
            d.add("hydroperoxide O–H", 1.0);
            AnionClass::Phenoxide
        }
        _ => return None,
    };
    Some((class, d))
}

fn carbons(molecule: &Molecule, atom: usize, from: usize) -> usize {
    beyond(molecule, atom, from)
        .filter(|(other, _)| molecule.atoms()[*other].element == 6)
        .count()
}

/// Six-membered aromatic rings fused to that of `ipso`.
fn fused_arenes(molecule: &Molecule, ipso: usize) -> usize {
    let Some(ring) = six_ring(molecule, ipso) else {
        return 0;
    };
    let aromatic = |other: &Vec<usize>| other.iter().all(|atom| molecule.atoms()[*atom].aromatic);
    molecule
        .rings()
        .iter()
        .filter(|other| {
            other.len() == 6
                && other.as_slice() != ring
                && aromatic(other)
                && other.iter().filter(|atom| ring.contains(atom)).count() == 2
        })
        .count()
}

fn carboxyl(molecule: &Molecule, carbon: usize, site: usize, d: &mut Descriptors) -> AnionClass {
    d.add("carboxylic acid O–H", 1.0);
    if molecule.atoms()[carbon].hydrogens > 0 {
        d.add("formyl in place of acyl", 1.0);
    }
    for (far, bond) in beyond(molecule, carbon, site) {
        let atom = molecule.atoms()[far];
        match atom.element {
            8 if bond == Bond::Double => {}
            8 => return AnionClass::Carbonate,
            6 if atom.aromatic => {
                d.add("aryl on carboxyl", 1.0);
                d.add(
                    "σ of aryl on carboxyl",
                    ring_sigma(molecule, far, Conjugation::Insulated),
                );
            }
            6 => d.add("σI on carboxyl", inductive(molecule, far, carbon)),
            _ => {}
        }
    }
    AnionClass::Carboxylate
}

fn hydroxyl_on_nitrogen(
    molecule: &Molecule,
    nitrogen: usize,
    site: usize,
    d: &mut Descriptors,
) -> AnionClass {
    if let Some(carbon) = double_bonded(molecule, nitrogen, 6) {
        d.add("oxime O–H", 1.0);
        for (far, _) in beyond(molecule, carbon, nitrogen) {
            if molecule.atoms()[far].aromatic {
                d.add("aryl on oxime", 1.0);
                d.add(
                    "σ of aryl on oxime",
                    ring_sigma(molecule, far, Conjugation::Direct),
                );
            } else if group(molecule, far, carbon).is_acceptor() {
                d.add("acceptor on oxime", 1.0);
            }
        }
        return AnionClass::Phenoxide;
    }
    let acyl = beyond(molecule, nitrogen, site).find(|(other, _)| {
        double_bonded(molecule, *other, 8).is_some() && molecule.atoms()[*other].element == 6
    });
    if let Some((carbonyl, _)) = acyl {
        d.add("hydroxamic acid O–H", 1.0);
        if molecule.atoms()[nitrogen].hydrogens == 0 {
            d.add("carbon on hydroxamic nitrogen", 1.0);
        }
        if beyond(molecule, carbonyl, nitrogen).any(|(far, _)| molecule.atoms()[far].aromatic) {
            d.add("aryl on hydroxamic acyl", 1.0);
        }
        return AnionClass::Phenoxide;
    }
    d.add("hydroxylamine O–H", 1.0);
    AnionClass::Alkoxide
}

/// Describes an S–H (or Se–H).
pub(super) fn sulfur(molecule: &Molecule, site: usize) -> Option<(AnionClass, Descriptors)> {
    let mut d = Descriptors::default();
    let (partner, _) = *molecule.neighbours(site).first()?;
    let atom = molecule.atoms()[partner];
    if molecule.atoms()[site].charge != 0 {
        return None;
    }
    if atom.aromatic {
        d.add("thiophenol S–H", 1.0);
        d.add(
            "σ of thiophenol",
            ring_sigma(molecule, partner, Conjugation::Direct),
        );
    } else if double_bonded(molecule, partner, 8)
        .or(double_bonded(molecule, partner, 16))
        .is_some()
    {
        d.add("thiocarboxylic acid S–H", 1.0);
    } else {
        d.add("thiol S–H", 1.0);
        d.add("σI of thiol", inductive(molecule, partner, site));
    }
    if molecule.atoms()[site].element == 34 {
        d.add("selenium in place of sulfur", 1.0);
    }
    Some((AnionClass::Thiolate, d))
}

/// Describes the C–H at the end of a triple bond.
pub(super) fn alkyne(molecule: &Molecule, site: usize) -> Option<(AnionClass, Descriptors)> {
    let mut d = Descriptors::default();
    let (partner, _) = *molecule
        .neighbours(site)
        .iter()
        .find(|(_, bond)| *bond == Bond::Triple)?;
    if molecule.atoms()[partner].element == 7 {
        d.add("hydrogen cyanide C–H", 1.0);
        return Some((AnionClass::Carbanion, d));
    }
    d.add("alkyne C–H", 1.0);
    for (far, _) in beyond(molecule, partner, site) {
        match group(molecule, far, partner) {
            Group::Aryl | Group::Vinyl => d.add("aryl on alkyne", 1.0),
            kind if kind.is_acceptor() => d.add("acceptor on alkyne", 1.0),
            _ => {}
        }
    }
    Some((AnionClass::Carbanion, d))
}
