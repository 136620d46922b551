//! Rings around a site: bridges, Bredt's rule, cyclopentadiene-like rings.

use super::group::is_trigonal;
use crate::Molecule;

/// How a site sits in a bridged bicycle.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Bridge {
    /// Not in one.
    None,
    /// On a bridge.
    Spanning,
    /// At a bridgehead where a double bond is strained but known.
    StrainedHead,
    /// At a bridgehead where a double bond cannot be (Bredt).
    ForbiddenHead,
}

/// Smallest sum of bridge atoms S at which a bridgehead enolate is known: 7, as in
/// bicyclo[3.3.1]nonan-2-ones (Fawcett, Chem. Rev. 1950, 47, 219; from memory).
const SMALLEST_BICYCLE: usize = 7;
/// From S = 9 on a bridgehead double bond is isolable at room temperature (same review).
const RELAXED_BICYCLE: usize = 9;

/// Two rings that share a bridge: three atoms or more.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Bicycle {
    /// The rings, by their numbers.
    rings: [usize; 2],
    /// Bridge atoms S: all but the two bridgeheads.
    bridge_atoms: usize,
}

/// The bridged bicycles of a molecule with these rings.
pub(crate) fn bicycles(rings: &[Vec<usize>]) -> Vec<Bicycle> {
    let mut found = Vec::new();
    for (i, first) in rings.iter().enumerate() {
        for (j, second) in rings.iter().enumerate().skip(i + 1) {
            let shared = first
                .iter()
                .filter(|member| second.contains(member))
                .count();
            if shared >= 3 && shared < first.len() {
                found.push(Bicycle {
                    rings: [i, j],
                    bridge_atoms: first.len() + second.len() - shared - 2,
                });
            }
        }
    }
    found
}

/// Where `atom` sits in the bridged bicycles of the molecule.
pub(crate) fn bridge(molecule: &Molecule, atom: usize) -> Bridge {
    let mut smallest_head = None;
    let mut heads = 0;
    let mut spanning = false;
    for bicycle in molecule.bicycles() {
        let [first, second] = bicycle.rings.map(|ring| molecule.rings()[ring].as_slice());
        let size = bicycle.bridge_atoms;
        let (in_first, in_second) = (first.contains(&atom), second.contains(&atom));
        if in_first && in_second && is_junction(molecule, atom, first, second) {
            heads += 1;
            smallest_head = Some(smallest_head.map_or(size, |s: usize| s.min(size)));
        } else if (in_first || in_second) && size < SMALLEST_BICYCLE {
            spanning = true;
        }
    }
    match smallest_head {
        Some(s) if s < SMALLEST_BICYCLE || (heads > 1 && s < RELAXED_BICYCLE) => {
            Bridge::ForbiddenHead
        }
        Some(s) if s < RELAXED_BICYCLE => Bridge::StrainedHead,
        _ if spanning => Bridge::Spanning,
        _ => Bridge::None,
    }
}

/// Whether `atom`, which is in both rings, has neighbours in each that the other lacks.
fn is_junction(molecule: &Molecule, atom: usize, first: &[usize], second: &[usize]) -> bool {
    let mut only_first = false;
    let mut only_second = false;
    for (other, _) in molecule.neighbours(atom) {
        let (in_first, in_second) = (first.contains(other), second.contains(other));
        only_first |= in_first && !in_second;
        only_second |= in_second && !in_first;
    }
    only_first && only_second
}

/// Size of the smallest ring that holds all these atoms.
pub(crate) fn smallest_ring(molecule: &Molecule, atoms: &[usize]) -> Option<usize> {
    molecule
        .rings()
        .iter()
        .filter(|ring| atoms.iter().all(|atom| ring.contains(atom)))
        .map(Vec::len)
        .min()
}

/// The five-membered ring around `atom` whose anion is aromatic: four trigonal carbons
/// without an exocyclic C=O (cyclopentadiene, indene, fluorene).
pub(crate) fn cyclopentadiene_ring(molecule: &Molecule, atom: usize) -> Option<&[usize]> {
    molecule
        .rings()
        .iter()
        .find(|ring| {
            ring.len() == 5
                && ring.contains(&atom)
                && ring.iter().filter(|member| **member != atom).all(|member| {
                    molecule.atoms()[*member].element == 6
                        && is_trigonal(molecule, *member)
                        && super::group::double_bonded(molecule, *member, 8).is_none()
                })
        })
        .map(Vec::as_slice)
}
