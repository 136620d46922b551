//! Groups that detectors see, as patterns.

use std::sync::LazyLock;

use enolattice_molecule::{Molecule, Pattern};

use super::detection::Strength::{self, Strong, Weak};

/// A group: pattern, name, how well it is seen.
type Row = (&'static str, &'static str, Strength);

/// Absorption above 220 nm. Strong: π→π* bands with ε of some thousand; weak: n→π* and such with ε below
/// some hundred, or a band that only the minor enol has.
///
/// Woodward 1941, doi:10.1021/ja01849a066, and Fieser for dienes and enones; the rest `common practice`.
const CHROMOPHORES: [Row; 20] = [
    ("a1aaaaa1", "six-membered aromatic ring", Strong),
    ("[s,se]1aaaa1", "thiophene or thiazole ring", Strong),
    ("a-[CX3]=[O,N,S]", "aryl carbonyl", Strong),
    ("a-[CX3]=[CX3]", "aryl alkene", Strong),
    ("a-[NX3+](=O)[O-]", "nitroarene", Strong),
    ("[CX3]=[CX3]-[CX3](=O)[#6,#1]", "conjugated ketone", Strong),
    ("[CX3]=[CX3]-[CX3;H1,H2]=O", "conjugated aldehyde", Strong),
    ("[CX3]=[CX3]-[CX3]=[CX3]", "conjugated diene", Strong),
    ("[CX3]=[CX3]-[NX3+](=O)[O-]", "nitroalkene", Strong),
    (
        "[NX3,OX2,SX2]-[CX3]=[CX3]-[CX3]=O",
        "vinylogous amide or ester",
        Strong,
    ),
    (
        "[NX3,OX2,SX2]-[CX3]=[CX3]-C#N",
        "vinylogous cyanamide or cyanate",
        Strong,
    ),
    (
        "[#6][CX3](=O)[CX4;!H0][CX3](=O)[#6]",
        "1,3-diketone by its enol",
        Strong,
    ),
    ("[#6]=S", "thiocarbonyl group", Strong),
    ("C=[NX2+]=[NX1-]", "diazo group", Strong),
    ("[CX3]=[NX2]-[NX3]", "hydrazone", Strong),
    ("[#6]-N=N-[#6]", "azo group", Weak),
    (
        "[#6][CX3](=O)[CX4;!H0][CX3](=O)[O,N]",
        "β-keto ester or amide by its enol",
        Weak,
    ),
    ("[#6][CX3](=O)[#6,#1]", "ketone or aldehyde", Weak),
    ("[SX2]-[SX2]", "disulfide", Weak),
    ("[CX4]-[I]", "alkyl iodide", Weak),
];

/// Groups that take a proton or a sodium or ammonium ion; `common practice`.
const POSITIVE: [Row; 11] = [
    (
        "[NX3;!$(N-[CX3]=[O,N,S]);!$(N-[SX4]);!$(N-[SX3]);!$(N-[#7,#8]);!$(N-C#N);!$(N-P);!$(N-[CX3]=[CX3]);!$(N=*)]",
        "amine",
        Strong,
    ),
    ("[nX2]", "pyridine-type nitrogen", Strong),
    ("[NX3][CX3]=[NX2]", "amidine or guanidine", Strong),
    ("[PX4]=O", "phosphine oxide or phosphonate", Strong),
    ("[SX3]=O", "sulfoxide", Strong),
    ("[NX3][CX3]=[O,S]", "amide", Weak),
    ("[CX3]=[NX2]", "imine or oxime", Weak),
    (
        "[NX3]-[CX3]=[CX3]-[CX3,C]=,#[O,N]",
        "vinylogous amide",
        Weak,
    ),
    ("[CX3]=O", "carbonyl group", Weak),
    ("[SX4](=O)=O", "sulfone or sulfonamide", Weak),
    ("[OX2][CX4][CX4][OX2]", "polyether", Weak),
];

/// Groups that lose a proton; `common practice`.
const NEGATIVE: [Row; 13] = [
    ("[CX3](=O)[OX2H1]", "carboxylic acid", Strong),
    ("[SX4](=O)(=O)[OX2H1]", "sulfonic acid", Strong),
    ("[PX4](=O)[OX2H1]", "phosphoric or phosphonic acid", Strong),
    ("[OX2H1]a", "phenol", Strong),
    ("[#6][CX3](=O)[CX4;!H0][CX3]=O", "β-dicarbonyl", Strong),
    (
        "[CX3](=O)[CX4;!H0]C#N",
        "cyanoacetate or β-keto nitrile",
        Strong,
    ),
    ("N#C[CX4;!H0]C#N", "malononitrile", Strong),
    ("[CX3](=O)[NX3H1][CX3]=O", "imide", Strong),
    ("[NX3;!H0][SX4](=O)=O", "sulfonamide", Strong),
    ("[SX2H1]", "thiol", Strong),
    ("[CX4;!H0][NX3+](=O)[O-]", "nitronate", Weak),
    ("O[CX3](=O)[CX4;!H0][CX3](=O)O", "malonate", Weak),
    (
        "[CX4;!H0](S(=O)=O)[CX3]=O",
        "β-keto or β-ester sulfone",
        Weak,
    ),
];

/// Patterns compiled once, with their names.
struct Groups {
    rows: &'static [Row],
    patterns: Vec<Pattern>,
}

impl Groups {
    fn new(rows: &'static [Row]) -> Groups {
        let patterns = rows.iter().map(|(smarts, ..)| Pattern::parse(smarts));
        Groups {
            rows,
            // a test reads every row
            patterns: patterns.filter_map(Result::ok).collect(),
        }
    }

    /// The strongest group of a molecule, the first of equally strong ones.
    fn strongest(&self, molecule: &Molecule) -> Option<(Strength, &'static str)> {
        let found = Pattern::each_in(&self.patterns, molecule);
        let rows = self.rows.iter().zip(found).filter(|(_, is_in)| *is_in);
        rows.map(|((_, name, strength), _)| (*strength, *name))
            .min_by_key(|(strength, _)| *strength == Weak)
    }
}

static CHROMOPHORE_GROUPS: LazyLock<Groups> = LazyLock::new(|| Groups::new(&CHROMOPHORES));
static POSITIVE_GROUPS: LazyLock<Groups> = LazyLock::new(|| Groups::new(&POSITIVE));
static NEGATIVE_GROUPS: LazyLock<Groups> = LazyLock::new(|| Groups::new(&NEGATIVE));

pub(super) fn chromophore(molecule: &Molecule) -> Option<(Strength, &'static str)> {
    CHROMOPHORE_GROUPS.strongest(molecule)
}

pub(super) fn taking_a_cation(molecule: &Molecule) -> Option<(Strength, &'static str)> {
    POSITIVE_GROUPS.strongest(molecule)
}

pub(super) fn losing_a_proton(molecule: &Molecule) -> Option<(Strength, &'static str)> {
    NEGATIVE_GROUPS.strongest(molecule)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_pattern_can_be_read() {
        for (smarts, name, _) in CHROMOPHORES.iter().chain(&POSITIVE).chain(&NEGATIVE) {
            assert!(Pattern::parse(smarts).is_ok(), "{name}: {smarts}");
        }
    }
}
