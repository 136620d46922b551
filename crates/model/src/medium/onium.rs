//! What a cationic acid is, as far as its solvation goes.

use enolattice_molecule::{Bond, Molecule};

/// A cationic acid: its kind, and how many of its N–H look for a hydrogen bond in the solvent.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Onium {
    /// What bears the charge.
    pub kind: OniumKind,
    /// N–H that the solvent can take as hydrogen-bond donors: those that a nitrogen of the same ion holds, as in the
    /// acid of proton sponge, are not among them.
    pub donors: u8,
}

/// What bears the charge of a cationic acid.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum OniumKind {
    /// Charge on one nitrogen between saturated groups.
    Alkylammonium,
    /// The same beside an aryl group.
    Arylammonium,
    /// Nitrogen in an aromatic ring: pyridinium, imidazolium.
    Azinium,
    /// Charge spread over the nitrogens of an amidine or guanidine.
    Amidinium,
    /// Charge spread over the nitrogens on phosphorus.
    Phosphazenium,
}

impl OniumKind {
    /// Name of the bases, for tables.
    pub fn bases(self) -> &'static str {
        match self {
            OniumKind::Alkylammonium => "alkylamines",
            OniumKind::Arylammonium => "anilines",
            OniumKind::Azinium => "pyridines and imidazole",
            OniumKind::Amidinium => "amidines and guanidines",
            OniumKind::Phosphazenium => "phosphazenes",
        }
    }
}

/// Bonds from a nitrogen to another that can hold its proton in a ring of six (1,8-diaminonaphthalenes).
const CLASP: usize = 4;

impl Onium {
    /// Triethylammonium and its like: what a cationic acid is taken for where its structure is not at hand.
    pub const TERTIARY: Onium = Onium {
        kind: OniumKind::Alkylammonium,
        donors: 1,
    };

    /// The cationic acid that a structure is; `None` where no charged N–H, P–H or N–H on phosphorus is in it.
    pub fn of(molecule: &Molecule) -> Option<Onium> {
        let atoms = molecule.atoms();
        let nitrogens =
            (0..atoms.len()).filter(|i| atoms[*i].charge > 0 && atoms[*i].hydrogens > 0);
        let charged: Vec<usize> = nitrogens.collect();
        let first = *charged.first()?;
        let donors: u8 = charged
            .iter()
            .filter(|nitrogen| !is_clasped(molecule, **nitrogen))
            .map(|nitrogen| atoms[*nitrogen].hydrogens)
            .sum();
        Some(Onium {
            kind: kind(molecule, first),
            donors,
        })
    }
}

fn kind(molecule: &Molecule, nitrogen: usize) -> OniumKind {
    let atoms = molecule.atoms();
    let beside = molecule.neighbours(nitrogen);
    if atoms[nitrogen].element == 15 || beside.iter().any(|(other, _)| atoms[*other].element == 15)
    {
        OniumKind::Phosphazenium
    } else if atoms[nitrogen].aromatic {
        OniumKind::Azinium
    } else if beside.iter().any(|(_, bond)| *bond == Bond::Double) {
        OniumKind::Amidinium
    } else if beside.iter().any(|(other, _)| atoms[*other].aromatic) {
        OniumKind::Arylammonium
    } else {
        OniumKind::Alkylammonium
    }
}

/// Whether another nitrogen, at the far end of a path through an arene, holds the proton of this one.
fn is_clasped(molecule: &Molecule, nitrogen: usize) -> bool {
    let atoms = molecule.atoms();
    let mut ends = vec![(nitrogen, nitrogen)];
    for step in 1..=CLASP {
        let on = |(atom, from): (usize, usize)| {
            molecule
                .neighbours(atom)
                .iter()
                .map(|(next, _)| *next)
                .filter(move |next| *next != from && *next != nitrogen)
                .filter(move |next| {
                    let this = atoms[*next];
                    match step {
                        CLASP => this.element == 7 && this.charge == 0 && !this.aromatic,
                        _ => this.element == 6 && this.aromatic,
                    }
                })
                .map(move |next| (next, atom))
        };
        ends = ends.into_iter().flat_map(on).collect();
    }
    !ends.is_empty()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The acids of common bases; that of proton sponge is held inside (its basicity is known for it).
    #[test]
    fn common_bases_are_of_the_kind_that_they_are_called() {
        use OniumKind::*;
        for (smiles, kind, donors) in [
            ("CC[NH+](CC)CC", Alkylammonium, 1),
            ("C1CC[NH2+]CC1", Alkylammonium, 2),
            ("[NH4+]", Alkylammonium, 4),
            ("[NH3+]c1ccccc1", Arylammonium, 3),
            ("[NH3+]c1ccccc1N", Arylammonium, 3),
            ("CN(C)c1cccc2cccc([NH+](C)C)c12", Arylammonium, 0),
            ("c1cc[nH+]cc1", Azinium, 1),
            ("C1CCC2=[NH+]CCCN2CC1", Amidinium, 1),
            ("CN(C)P(=[NH+]C(C)(C)C)(N(C)C)N(C)C", Phosphazenium, 1),
        ] {
            let molecule = Molecule::parse(smiles).unwrap();
            assert_eq!(
                Onium::of(&molecule),
                Some(Onium { kind, donors }),
                "{smiles}"
            );
        }
        assert_eq!(Onium::of(&Molecule::parse("CO").unwrap()), None);
    }
}
