//! Acidic sites of a molecule and the descriptors of their surroundings.

mod carbon;
mod descriptors;
mod group;
mod hammett;
mod heteroaryl;
mod heteroatom;
mod neighbours;
mod nitrogen;
mod shape;
mod skeleton;

use crate::{AnionClass, Bond, Molecule};
pub(crate) use hammett::{Conjugation, ring_sigma};
pub(crate) use skeleton::{Bicycle, bicycles};

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
/// C–H at saturated carbon, at terminal alkynes and beside a heteroatom of five-membered aromatic
/// rings, N–H, O–H, S–H. Left out: other C–H of aromatic rings, alkenes and aldehydes, and bridgeheads where Bredt's
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
        6 if atom.aromatic && atom.charge == 0 => heteroaryl::describe(molecule, index)?,
        7 => always(nitrogen::describe(molecule, index)?),
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

#[cfg(test)]
mod tests {
    use super::*;

    fn of(smiles: &str) -> Vec<Site> {
        sites(&Molecule::parse(smiles).unwrap())
    }

    fn activated(smiles: &str) -> Vec<usize> {
        of(smiles)
            .into_iter()
            .filter(|site| site.activated)
            .map(|site| site.atom)
            .collect()
    }

    fn at(smiles: &str, atom: usize) -> Site {
        of(smiles)
            .into_iter()
            .find(|site| site.equivalent.contains(&atom))
            .unwrap()
    }

    fn descriptor(site: &Site, name: &str) -> f64 {
        site.descriptors
            .iter()
            .find(|(known, _)| *known == name)
            .map_or(0.0, |(_, value)| *value)
    }

    #[test]
    fn equivalent_atoms_are_one_site() {
        assert_eq!(at("CC(C)=O", 0).equivalent, [0, 2]);
        assert_eq!(at("O=C1CCCCC1", 2).equivalent, [2, 6]);
        assert_eq!(activated("CCC(=O)CC"), [1]);
        assert_eq!(activated("CCC(C)=O"), [1, 3]);
    }

    /// Bredt's rule: no enolate at the bridgehead of norbornanone, camphor or adamantanone,
    /// one at that of bicyclo[3.3.1]nonanone (measured: pKa 32.4, Bordwell's tables).
    #[test]
    fn small_bridgeheads_are_no_acids() {
        assert_eq!(activated("O=C1CC2CCC1C2"), [2]);
        assert_eq!(activated("CC1(C)C2CCC1(C)C(=O)C2"), [10]);
        assert_eq!(activated("O=C1C2CC3CC(C2)CC1C3"), Vec::<usize>::new());
        assert_eq!(activated("CC1(C)CC2CCCC(C2)C1=O"), [8]);
        // Fused rings have no bridgehead.
        assert_eq!(activated("O=C1CCCC2CCCCC12"), [2, 10]);
    }

    #[test]
    fn only_carbon_with_support_for_a_charge_is_activated() {
        for inert in [
            "CCCC",
            "C1CCOC1",
            "Cc1ccccc1",
            "CI",
            "ClCCl",
            "C=CCBr",
            "CC(C)(C)C(=O)OC",
        ] {
            assert_eq!(activated(inert), Vec::<usize>::new(), "{inert}");
        }
        for (acid, atom) in [
            ("CC#N", 0),
            ("C[N+](=O)[O-]", 0),
            ("CS(C)(=O)=O", 0),
            ("CN(=O)=O", 0),
            ("C1C=CC=C1", 0),
            ("c1ccc(Cc2ccccc2)cc1", 4),
            ("Cc1ccc([N+](=O)[O-])cc1", 0),
            ("CC=CC(=O)OC", 0),
            ("Cc1ccccn1", 0),
            ("Cc1ccncc1", 0),
            ("Cc1nc2ccccc2s1", 0),
            ("Cc1cc(=O)oc2ccccc12", 0),
            ("C1CSCSC1", 3),
            ("c1ccc(CSc2ccccc2)cc1", 4),
            ("c1ccc(P(CP(c2ccccc2)c2ccccc2)c2ccccc2)cc1", 5),
            ("C[S+](C)(C)=O", 0),
            ("OCC", 0),
            ("C#CC", 0),
        ] {
            assert_eq!(activated(acid), [atom], "{acid}");
        }
    }

    #[test]
    fn the_class_is_that_of_the_strongest_acceptor() {
        use AnionClass::*;
        for (smiles, atom, class) in [
            ("CC(C)=O", 0, Ketone),
            ("CC(=O)c1ccccc1", 0, ArylKetone),
            ("CC=O", 0, Aldehyde),
            ("CCOC(C)=O", 4, Ester),
            ("O=C1CCCO1", 2, Ester),
            ("CN1CCCC1=O", 4, Amide),
            ("CC#N", 0, Nitrile),
            ("N#CCC#N", 2, Nitrile),
            ("CC[N+](=O)[O-]", 1, Nitronate),
            ("CCOC(=O)C[N+](=O)[O-]", 5, Nitronate),
            ("CS(C)(=O)=O", 0, Sulfone),
            ("COC(=O)CC(=O)OC", 4, BetaDicarbonyl),
            ("CCOC(=O)CC#N", 5, BetaDicarbonyl),
            ("COC(=O)C1CCCCC1=O", 4, BetaDicarbonyl),
            ("O=C1CCCC(=O)C1", 7, CyclicBetaDicarbonyl),
            ("CC1(C)OC(=O)CC(=O)O1", 6, CyclicDiester),
            ("O", 0, Hydroxide),
            ("CO", 1, Alkoxide),
            ("Oc1ccccc1", 0, Phenoxide),
            ("CC(=O)O", 3, Carboxylate),
            ("CC(N)=O", 2, AmideNitrogen),
            ("O=C1CCC(=O)N1", 6, ImideNitrogen),
            ("NS(=O)(=O)c1ccccc1", 0, ImideNitrogen),
            ("c1c[nH]cn1", 2, AzoleNitrogen),
            ("Nc1ccccc1", 0, ArylNitrogen),
            ("CC(C)NC(C)C", 3, AlkylNitrogen),
            ("C[Si](C)(C)N[Si](C)(C)C", 4, SilylNitrogen),
            ("CCS", 2, Thiolate),
            ("CC[NH+](CC)CC", 2, Neutral),
        ] {
            assert_eq!(at(smiles, atom).class, class, "{smiles}");
        }
    }

    /// Hammett σ⁻ of 4-nitro 1.27, σm of 3-chloro 0.37 (Hansch, Leo, Taft 1991, from memory).
    #[test]
    fn substituents_of_a_ring_reach_the_site() {
        let name = "σ of aryl, charge shared by two";
        assert_eq!(descriptor(&at("N#CCc1ccc([N+](=O)[O-])cc1", 2), name), 1.27);
        assert_eq!(descriptor(&at("N#CCc1cccc(Cl)c1", 2), name), 0.37);
        assert_eq!(descriptor(&at("N#CCc1ccccc1", 2), name), 0.0);
        assert_eq!(
            descriptor(&at("Oc1ccc([N+](=O)[O-])cc1", 0), "σ of phenol"),
            1.27
        );
        assert_eq!(
            descriptor(&at("Oc1ccc(N(=O)=O)cc1", 0), "σ of phenol"),
            1.27
        );
    }

    /// What a site is does not depend on how the SMILES is written.
    #[test]
    fn rewriting_changes_nothing() {
        for (first, second) in [
            ("CCOC(=O)CC(C)=O", "O=C(C)CC(OCC)=O"),
            ("COC(=O)C1CCCCC1=O", "C1CCC(=O)C(C1)C(=O)OC"),
            ("O=C1Cc2ccccc2N1C", "c1ccc2c(c1)CC(=O)N2C"),
            ("N#CCc1cccc(Cl)c1", "Clc1cc(CC#N)ccc1"),
        ] {
            let mut sets = [first, second].map(|smiles| {
                of(smiles)
                    .into_iter()
                    .map(|site| format!("{:?}", site.descriptors))
                    .collect::<Vec<_>>()
            });
            sets.iter_mut().for_each(|set| set.sort());
            assert_eq!(sets[0], sets[1], "{first}");
        }
    }
}
