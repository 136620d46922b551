//! Descriptors of the C–H beside a heteroatom of a five-membered aromatic ring.

use super::descriptors::Descriptors;
use super::group::group;
use crate::{AnionClass, Molecule};

/// Describes such a C–H, and whether it is activated: between two heteroatoms (C2 of azoles and
/// azolium ions). `None` elsewhere in aromatic rings.
///
/// The anion's pair lies in the plane of the ring: field effects count, resonance does not.
pub(super) fn describe(
    molecule: &Molecule,
    site: usize,
) -> Option<(AnionClass, bool, Descriptors)> {
    let atoms = molecule.atoms();
    let ring = molecule
        .rings()
        .iter()
        .find(|ring| ring.len() == 5 && ring.contains(&site))?;
    let beside: Vec<usize> = molecule
        .neighbours(site)
        .iter()
        .map(|(other, _)| *other)
        .filter(|other| atoms[*other].element != 6)
        .collect();
    // The heteroatom that gives two electrons to the ring: its field is the strongest.
    let donor = *beside
        .iter()
        .find(|other| gives_a_pair(molecule, **other))?;
    let mut d = Descriptors::default();
    d.add("five-ring aromatic C–H", 1.0);
    match atoms[donor].element {
        7 => d.add("nitrogen in place of ring sulfur", 1.0),
        8 => d.add("oxygen in place of ring sulfur", 1.0),
        _ => {}
    }
    let aza = |atom: &usize| atoms[*atom].element == 7 && *atom != donor;
    let near = beside.iter().filter(|atom| aza(atom)).count();
    let far = ring.iter().filter(|atom| aza(atom)).count() - near;
    d.add("aza beside aromatic C–H", near as f64);
    d.add("aza further in ring of aromatic C–H", far as f64);
    let cations = ring.iter().filter(|atom| atoms[**atom].charge > 0).count();
    d.add("azolium C–H", cations as f64);
    let benzo = molecule.rings().iter().any(|other| {
        other.len() == 6 && other.iter().filter(|atom| ring.contains(atom)).count() == 2
    });
    if benzo {
        d.add("benzo on ring of aromatic C–H", 1.0);
    }
    for member in ring {
        let acceptors = molecule
            .neighbours(*member)
            .iter()
            .filter(|(other, _)| !ring.contains(other))
            .filter(|(other, _)| group(molecule, *other, *member).is_acceptor())
            .count();
        d.add("acceptor on ring of aromatic C–H", acceptors as f64);
    }
    Some((AnionClass::Carbanion, beside.len() == 2, d))
}

fn gives_a_pair(molecule: &Molecule, atom: usize) -> bool {
    let this = molecule.atoms()[atom];
    match this.element {
        7 => this.charge == 0 && molecule.neighbours(atom).len() + usize::from(this.hydrogens) == 3,
        8 | 16 | 34 => true,
        _ => false,
    }
}
