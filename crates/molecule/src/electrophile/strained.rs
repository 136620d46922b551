//! Epoxides, aziridines and thiiranes.

use super::{ElectrophileKind, ElectrophilicGroup, RingHeteroatom};
use crate::groups::{Acyl, CARBON, NITROGEN, OXYGEN, SULFUR};
use crate::{Bond, Molecule};

/// A carbon of a three-membered ring.
struct Corner {
    carbon: usize,
    heteroatom: RingHeteroatom,
    degree: u8,
    activated: bool,
}

/// The strained ring that opens, at its less substituted carbon; of two that are equal in
/// this, at the activated one.
///
/// # Errors
/// Two carbons that differ and are equal in both respects.
pub(super) fn find(molecule: &Molecule) -> Result<Option<ElectrophilicGroup>, String> {
    let mut corners: Vec<Corner> = molecule
        .rings()
        .iter()
        .filter(|ring| ring.len() == 3)
        .flat_map(|ring| corners(molecule, ring))
        .collect();
    corners.sort_by_key(|c| (c.degree, !c.activated, c.carbon));
    let Some(best) = corners.first() else {
        return Ok(None);
    };
    let equal: Vec<&Corner> = corners
        .iter()
        .filter(|c| (c.degree, c.activated) == (best.degree, best.activated))
        .collect();
    let classes = molecule.symmetry_classes();
    let is_twin = |c: &&Corner| classes[c.carbon] == classes[best.carbon];
    if !equal.iter().all(is_twin) {
        return Err(
            "it has a three-membered ring of which two carbons are equally substituted: which of \
             them is attacked is not covered"
                .to_owned(),
        );
    }
    let rings = equal
        .iter()
        .filter(|c| molecule.bond(c.carbon, best.carbon).is_none())
        .count()
        - 1;
    Ok(Some(ElectrophilicGroup {
        kind: ElectrophileKind::Ring {
            heteroatom: best.heteroatom,
            degree: best.degree,
            activated: best.activated,
        },
        atom: best.carbon,
        leaving_atom: None,
        further_positions: u8::try_from(rings).unwrap_or(u8::MAX),
    }))
}

fn corners(molecule: &Molecule, ring: &[usize]) -> Vec<Corner> {
    let (carbons, others): (Vec<usize>, Vec<usize>) = ring
        .iter()
        .partition(|atom| molecule.is_saturated_carbon(**atom));
    let ([_, _], [other]) = (carbons.as_slice(), others.as_slice()) else {
        return Vec::new();
    };
    let Some(heteroatom) = heteroatom(molecule, *other) else {
        return Vec::new();
    };
    carbons
        .into_iter()
        .map(|carbon| {
            let outside: Vec<usize> = molecule
                .bound_to(carbon, CARBON, Bond::Single)
                .filter(|atom| !ring.contains(atom))
                .collect();
            Corner {
                carbon,
                heteroatom,
                degree: outside.len() as u8,
                activated: outside
                    .iter()
                    .any(|atom| !molecule.is_saturated_carbon(*atom)),
            }
        })
        .collect()
}

fn heteroatom(molecule: &Molecule, atom: usize) -> Option<RingHeteroatom> {
    if molecule.atoms()[atom].charge != 0 {
        return None;
    }
    match molecule.element(atom) {
        OXYGEN => Some(RingHeteroatom::Oxygen),
        SULFUR if molecule.neighbours(atom).len() == 2 => Some(RingHeteroatom::Sulfur),
        NITROGEN => {
            // An N-acyl aziridine hands its acyl group over; carbamates and sulfonamides open.
            let is_acyl = |other: &usize| molecule.acyl(*other) == Some(Acyl::Amide);
            if molecule
                .bound_to(atom, CARBON, Bond::Single)
                .any(|c| is_acyl(&c))
            {
                return None;
            }
            let pulls = |other: usize| {
                molecule.is_sulfonyl_sulfur(other) || molecule.carbonyl_oxygen(other).is_some()
            };
            let activated = molecule
                .neighbours(atom)
                .iter()
                .any(|(other, _)| pulls(*other));
            Some(if activated {
                RingHeteroatom::ActivatedNitrogen
            } else {
                RingHeteroatom::Nitrogen
            })
        }
        _ => None,
    }
}
