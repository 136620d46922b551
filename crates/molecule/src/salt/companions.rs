//! Counter-ions, acids and solvents of crystallisation.

use std::collections::HashMap;
use std::sync::LazyLock;

use super::CompanionRole::{self, Acid, Anion, Cation, Solvent};
use crate::Molecule;

/// A companion that is known.
#[derive(Debug)]
pub(super) struct Known {
    smiles: &'static str,
    pub(super) name: &'static str,
    pub(super) role: CompanionRole,
    /// Protons that use up base.
    pub(super) protons: i8,
    /// For those that are not read as molecules; IUPAC atomic weights of 2021.
    pub(super) molar_mass_g_mol: f64,
}

impl Known {
    /// Charge of one that is not read as a molecule.
    pub(super) fn charge(&self) -> i32 {
        match self.smiles {
            s if s.ends_with("+2]") => 2,
            s if s.contains("+]") => 1,
            s if s.contains('-') => -1,
            _ => 0,
        }
    }
}

const fn ion(smiles: &'static str, name: &'static str, role: CompanionRole, mass: f64) -> Known {
    Known {
        smiles,
        name,
        role,
        protons: 0,
        molar_mass_g_mol: mass,
    }
}

const fn known(
    smiles: &'static str,
    name: &'static str,
    role: CompanionRole,
    protons: i8,
) -> Known {
    Known {
        smiles,
        name,
        role,
        protons,
        molar_mass_g_mol: 0.0,
    }
}

/// Ions of elements or valences that no molecule here may have, found by their text.
static BY_TEXT: &[Known] = &[
    ion("[Li+]", "lithium", Cation, 6.94),
    ion("[Na+]", "sodium", Cation, 22.990),
    ion("[K+]", "potassium", Cation, 39.098),
    ion("[Rb+]", "rubidium", Cation, 85.468),
    ion("[Cs+]", "caesium", Cation, 132.905),
    ion("[Ag+]", "silver", Cation, 107.868),
    ion("[Mg+2]", "magnesium", Cation, 24.305),
    ion("[Ca+2]", "calcium", Cation, 40.078),
    ion("[Ba+2]", "barium", Cation, 137.327),
    ion("[Zn+2]", "zinc", Cation, 65.38),
    ion("F[P-](F)(F)(F)(F)F", "hexafluorophosphate", Anion, 144.964),
    ion(
        "[P-](F)(F)(F)(F)(F)F",
        "hexafluorophosphate",
        Anion,
        144.964,
    ),
    ion(
        "F[Sb-](F)(F)(F)(F)F",
        "hexafluoroantimonate",
        Anion,
        235.750,
    ),
    ion(
        "[Sb-](F)(F)(F)(F)(F)F",
        "hexafluoroantimonate",
        Anion,
        235.750,
    ),
    Known {
        smiles: "[H+]",
        name: "proton",
        role: Cation,
        protons: 1,
        molar_mass_g_mol: 1.008,
    },
];

/// The others. Protons: those of pKa below about 12 in water (common practice).
static BY_STRUCTURE: &[Known] = &[
    known("[F-]", "fluoride", Anion, 0),
    known("[Cl-]", "chloride", Anion, 0),
    known("[Br-]", "bromide", Anion, 0),
    known("[I-]", "iodide", Anion, 0),
    known("F[B-](F)(F)F", "tetrafluoroborate", Anion, 0),
    known("[O-]S(=O)(=O)C(F)(F)F", "triflate", Anion, 0),
    known("Cc1ccc(S(=O)(=O)[O-])cc1", "tosylate", Anion, 0),
    known("[O-]S(=O)(=O)c1ccccc1", "benzenesulfonate", Anion, 0),
    known("CS(=O)(=O)[O-]", "mesylate", Anion, 0),
    known("COS(=O)(=O)[O-]", "methyl sulfate", Anion, 0),
    known("CCOS(=O)(=O)[O-]", "ethyl sulfate", Anion, 0),
    known("OS(=O)(=O)[O-]", "hydrogensulfate", Anion, 1),
    known("[O-]S(=O)(=O)[O-]", "sulfate", Anion, 0),
    known("[O-][N+](=O)[O-]", "nitrate", Anion, 0),
    known("[O-]Cl(=O)(=O)=O", "perchlorate", Anion, 0),
    known("OP(=O)(O)[O-]", "dihydrogenphosphate", Anion, 1),
    known(
        "O=S(=O)([N-]S(=O)(=O)C(F)(F)F)C(F)(F)F",
        "triflimide",
        Anion,
        0,
    ),
    known("[O-]C(=O)C(F)(F)F", "trifluoroacetate", Anion, 0),
    known("CC(=O)[O-]", "acetate", Anion, 0),
    known("[O-]C=O", "formate", Anion, 0),
    known("OC(=O)C(=O)[O-]", "hydrogenoxalate", Anion, 1),
    known("[O-]C(=O)C(=O)[O-]", "oxalate", Anion, 0),
    known(
        "OC(=O)C=CC(=O)[O-]",
        "hydrogenfumarate or hydrogenmaleate",
        Anion,
        1,
    ),
    known("[OH-]", "hydroxide", Anion, -1),
    known("[H-]", "hydride", Anion, -1),
    known("[NH4+]", "ammonium", Cation, 1),
    known("CC[NH+](CC)CC", "triethylammonium", Cation, 1),
    known("CC[NH+](C(C)C)C(C)C", "diisopropylethylammonium", Cation, 1),
    known("C1CCCCC1[NH2+]C1CCCCC1", "dicyclohexylammonium", Cation, 1),
    known("c1cc[nH+]cc1", "pyridinium", Cation, 1),
    known("C[N+](C)(C)C", "tetramethylammonium", Cation, 0),
    known("CC[N+](CC)(CC)CC", "tetraethylammonium", Cation, 0),
    known("CCCC[N+](CCCC)(CCCC)CCCC", "tetrabutylammonium", Cation, 0),
    known("C[N+](C)(C)c1ccccc1", "trimethylphenylammonium", Cation, 0),
    known("C[N+](C)(C)Cc1ccccc1", "benzyltrimethylammonium", Cation, 0),
    known(
        "CC[N+](CC)(CC)Cc1ccccc1",
        "benzyltriethylammonium",
        Cation,
        0,
    ),
    known("F", "hydrogen fluoride", Acid, 1),
    known("Cl", "hydrogen chloride", Acid, 1),
    known("Br", "hydrogen bromide", Acid, 1),
    known("I", "hydrogen iodide", Acid, 1),
    known("OS(=O)(=O)O", "sulfuric acid", Acid, 2),
    known("O[N+](=O)[O-]", "nitric acid", Acid, 1),
    known("OP(=O)(O)O", "phosphoric acid", Acid, 2),
    known("OC(=O)C(F)(F)F", "trifluoroacetic acid", Acid, 1),
    known("OS(=O)(=O)C(F)(F)F", "triflic acid", Acid, 1),
    known("CS(=O)(=O)O", "methanesulfonic acid", Acid, 1),
    known("Cc1ccc(S(=O)(=O)O)cc1", "toluenesulfonic acid", Acid, 1),
    known("CC(=O)O", "acetic acid", Acid, 1),
    known("OC=O", "formic acid", Acid, 1),
    known("OC(=O)C(=O)O", "oxalic acid", Acid, 2),
    known("OC(=O)C=CC(=O)O", "fumaric or maleic acid", Acid, 2),
    known("OC(=O)CCC(=O)O", "succinic acid", Acid, 2),
    known("OC(=O)C(O)C(O)C(=O)O", "tartaric acid", Acid, 2),
    known("OC(=O)CC(O)(CC(=O)O)C(=O)O", "citric acid", Acid, 3),
    known("O", "water", Solvent, 0),
    known("CO", "methanol", Solvent, 0),
    known("CCO", "ethanol", Solvent, 0),
    known("CC(C)O", "isopropanol", Solvent, 0),
    known("CC(C)=O", "acetone", Solvent, 0),
    known("CC#N", "acetonitrile", Solvent, 0),
    known("CN(C)C=O", "DMF", Solvent, 0),
    known("CS(C)=O", "DMSO", Solvent, 0),
    known("C1CCOC1", "THF", Solvent, 0),
    known("C1COCCO1", "dioxane", Solvent, 0),
    known("CCOCC", "diethyl ether", Solvent, 0),
    known("CCOC(C)=O", "ethyl acetate", Solvent, 0),
    known("ClCCl", "dichloromethane", Solvent, 0),
    known("ClC(Cl)Cl", "chloroform", Solvent, 0),
    known("Cc1ccccc1", "toluene", Solvent, 0),
    known("c1ccccc1", "benzene", Solvent, 0),
    known("CCCCCC", "hexane", Solvent, 0),
];

static STRUCTURES: LazyLock<HashMap<String, &'static Known>> = LazyLock::new(|| {
    let read = |known: &'static Known| {
        let molecule = Molecule::parse(known.smiles).ok()?;
        Some((molecule.canonical_flat(), known))
    };
    BY_STRUCTURE.iter().filter_map(read).collect()
});

/// A companion that is known by its text.
pub(super) fn by_text(text: &str) -> Option<&'static Known> {
    let plain = |known: &&Known| known.smiles == text || spelt_otherwise(known.smiles) == text;
    BY_TEXT.iter().find(plain)
}

/// `[Mg++]` for `[Mg+2]`.
fn spelt_otherwise(smiles: &str) -> String {
    smiles.replace("+2]", "++]")
}

/// A companion that is known by its structure, stereo ignored.
pub(super) fn by_structure(molecule: &Molecule) -> Option<&'static Known> {
    STRUCTURES.get(&molecule.canonical_flat()).copied()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_companion_is_read() {
        assert_eq!(STRUCTURES.len(), BY_STRUCTURE.len());
        for known in BY_STRUCTURE {
            let molecule = Molecule::parse(known.smiles).unwrap();
            let charge: i32 = molecule.atoms().iter().map(|a| i32::from(a.charge)).sum();
            let sign = match known.role {
                Anion => -1,
                Cation => 1,
                Acid | Solvent => 0,
            };
            assert_eq!(charge.signum(), sign, "{}", known.name);
        }
    }
}
