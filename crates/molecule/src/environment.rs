//! Acidic sites of a molecule and the descriptors of their surroundings.

mod carbon;
mod descriptors;
mod group;
mod hammett;
mod heteroatom;
mod skeleton;

use crate::{AnionClass, Bond, Molecule};

/// A candidate acidic X–H with what a group-contribution estimate needs to know of it.
#[derive(Clone, Debug)]
pub struct Site {
    /// Index of the atom, in the order of the SMILES.
    pub atom: usize,
    /// Atomic number of the atom.
    pub element: u8,
    /// Hydrogens on the atom.
    pub hydrogens: u8,
    /// All atoms equivalent to this one by symmetry, itself included.
    pub equivalent: Vec<usize>,
    /// Class of the anion that is left.
    pub class: AnionClass,
    /// Whether something takes up the charge: an acceptor, an aromatic anion, two or more
    /// aryl or vinyl groups. Other C–H (alkyl, benzyl, allyl, halomethyl) is no acid
    /// that bases of the trade reach; an estimate for it means nothing.
    pub activated: bool,
    /// Named descriptors with their counts or values, sorted by name.
    pub descriptors: Vec<(&'static str, f64)>,
}

/// All candidate sites, one of each class of equivalent atoms, by atom index.
///
/// C–H at saturated carbon and at terminal alkynes, N–H, O–H, S–H. Left out:
/// C–H of aromatic rings, alkenes and aldehydes, and bridgeheads where Bredt's
/// rule forbids the enolate.
pub fn sites(molecule: &Molecule) -> Vec<Site> {
    let classes = molecule.symmetry_classes();
    (0..molecule.atoms().len())
        .filter(|atom| molecule.atoms()[*atom].hydrogens > 0)
        .filter(|atom| !classes[..*atom].contains(&classes[*atom]))
        .filter_map(|atom| site(molecule, atom))
        .collect()
}

fn site(molecule: &Molecule, index: usize) -> Option<Site> {
    let atom = molecule.atoms()[index];
    let (class, activated, descriptors) = match atom.element {
        6 if atom.charge == 0 && group::is_saturated_carbon(molecule, index) => {
            let site = carbon::describe(molecule, index)?;
            (site.class, site.activated, site.descriptors)
        }
        6 if molecule
            .neighbours(index)
            .iter()
            .any(|(_, bond)| *bond == Bond::Triple) =>
        {
            always(heteroatom::alkyne(molecule, index)?)
        }
        7 => always(heteroatom::nitrogen(molecule, index)?),
        8 => always(heteroatom::oxygen(molecule, index)?),
        16 | 34 => always(heteroatom::sulfur(molecule, index)?),
        _ => return None,
    };
    let classes = molecule.symmetry_classes();
    Some(Site {
        atom: index,
        element: atom.element,
        hydrogens: atom.hydrogens,
        equivalent: (0..classes.len())
            .filter(|other| classes[*other] == classes[index])
            .collect(),
        class,
        activated,
        descriptors: descriptors.into_vec(),
    })
}

fn always(
    (class, descriptors): (AnionClass, descriptors::Descriptors),
) -> (AnionClass, bool, descriptors::Descriptors) {
    (class, true, descriptors)
}
