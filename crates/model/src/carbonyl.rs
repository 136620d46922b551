//! The substrate's own carbonyl group as an electrophile.

use enolattice_molecule::{Bond, Molecule};

use crate::parameters::P;

/// How a carbonyl group takes an enolate of its own kind.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Carbonyl {
    /// Aldehyde: aldol.
    Aldehyde,
    /// Ketone: aldol, uphill.
    Ketone,
    /// Ester or lactone: Claisen.
    Ester,
    /// Ester of a tertiary alcohol: Claisen, slow.
    TertAlkylEster,
}

impl Carbonyl {
    /// The parameter that holds its Mayr E.
    pub(crate) fn electrophilicity(self) -> P {
        match self {
            Carbonyl::Aldehyde => P::E_ALDEHYDE,
            Carbonyl::Ketone => P::E_KETONE,
            Carbonyl::Ester => P::E_ESTER,
            Carbonyl::TertAlkylEster => P::E_TERT_ALKYL_ESTER,
        }
    }
}

/// The most electrophilic carbonyl group of a molecule; amides, acids and vinylogous kin are none.
///
/// The order of electrophilicity is aldehyde, ketone, ester (common practice).
pub(crate) fn self_acceptor(molecule: &Molecule) -> Option<Carbonyl> {
    let kinds: Vec<Carbonyl> = (0..molecule.atoms().len())
        .filter_map(|atom| carbonyl_at(molecule, atom))
        .collect();
    [
        Carbonyl::Aldehyde,
        Carbonyl::Ketone,
        Carbonyl::Ester,
        Carbonyl::TertAlkylEster,
    ]
    .into_iter()
    .find(|kind| kinds.contains(kind))
}

/// The ester group of a molecule that hydroxide and alkoxides attack first; none without one.
pub(crate) fn ester_group(molecule: &Molecule) -> Option<Carbonyl> {
    let kinds = || (0..molecule.atoms().len()).filter_map(|atom| carbonyl_at(molecule, atom));
    [Carbonyl::Ester, Carbonyl::TertAlkylEster]
        .into_iter()
        .find(|wanted| kinds().any(|kind| kind == *wanted))
}

/// The weakest of the two acceptors between which a carbon of a 1,3-diketone or a β-keto ester stands, where a base can
/// cleave the bond (retro-Claisen); none for other carbons.
pub(crate) fn cleavable_at(molecule: &Molecule, carbon: usize) -> Option<Carbonyl> {
    let around = molecule.neighbours(carbon).iter();
    let mut kinds: Vec<Carbonyl> = around
        .filter_map(|&(atom, _)| carbonyl_at(molecule, atom))
        .collect();
    let ketone = kinds.iter().position(|kind| *kind == Carbonyl::Ketone)?;
    kinds.swap_remove(ketone);
    kinds.into_iter().find(|kind| *kind != Carbonyl::Aldehyde)
}

/// The carbonyl carbon of this kind; `None` where there are several that are not equivalent.
pub(crate) fn acceptor_atom(molecule: &Molecule, kind: Carbonyl) -> Option<usize> {
    let classes = molecule.symmetry_classes();
    let mut atoms =
        (0..molecule.atoms().len()).filter(|atom| carbonyl_at(molecule, *atom) == Some(kind));
    let first = atoms.next()?;
    atoms
        .all(|other| classes[other] == classes[first])
        .then_some(first)
}

fn carbonyl_at(molecule: &Molecule, carbon: usize) -> Option<Carbonyl> {
    let atoms = molecule.atoms();
    if atoms[carbon].element != 6 || atoms[carbon].aromatic {
        return None;
    }
    let neighbours = molecule.neighbours(carbon);
    let is_oxo = |&(atom, bond): &(usize, Bond)| bond == Bond::Double && atoms[atom].element == 8;
    neighbours.iter().find(|n| is_oxo(n))?;
    let others: Vec<usize> = neighbours
        .iter()
        .filter(|n| !is_oxo(n))
        .map(|&(a, _)| a)
        .collect();
    if others
        .iter()
        .any(|&atom| !matches!(atoms[atom].element, 6 | 8))
    {
        return None;
    }
    match others.iter().find(|&&atom| atoms[atom].element == 8) {
        Some(&oxygen) => ester_of(molecule, carbon, oxygen),
        None if atoms[carbon].hydrogens > 0 => Some(Carbonyl::Aldehyde),
        None if others.len() == 2 => Some(Carbonyl::Ketone),
        None => None,
    }
}

fn ester_of(molecule: &Molecule, carbon: usize, oxygen: usize) -> Option<Carbonyl> {
    let (alkyl, _) = molecule
        .neighbours(oxygen)
        .iter()
        .copied()
        .find(|&(a, _)| a != carbon)?;
    let atom = molecule.atoms()[alkyl];
    let is_tertiary = atom.element == 6 && !atom.aromatic && molecule.neighbours(alkyl).len() == 4;
    Some(if is_tertiary {
        Carbonyl::TertAlkylEster
    } else {
        Carbonyl::Ester
    })
}
