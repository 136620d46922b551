//! Hammett σ of the substituents on the ring of an aromatic aldehyde.
//!
//! Values of σm and σp: Hansch, Leo, Taft, Chem. Rev. 1991, 91, 165, quoted from
//! memory. Ring nitrogen of pyridines: Jaffé, Chem. Rev. 1953, 53, 191, quoted from
//! memory. Ortho substituents are taken as para-like; their steric effect is not in σ.

use std::sync::LazyLock;

use chematic::smarts::{self, QueryMolecule};

use crate::Molecule;

/// One substituent: a pattern whose first atom is bound to the ring, σm, σp.
struct Substituent {
    pattern: &'static str,
    meta: f64,
    para: f64,
}

const fn substituent(pattern: &'static str, meta: f64, para: f64) -> Substituent {
    Substituent {
        pattern,
        meta,
        para,
    }
}

/// The first pattern that matches counts: special groups stand before general ones.
const SUBSTITUENTS: &[Substituent] = &[
    substituent("[N+](=O)[O-]", 0.71, 0.78),
    substituent("C#N", 0.56, 0.66),
    substituent("C(F)(F)F", 0.43, 0.54),
    substituent("[CH]=O", 0.35, 0.42),
    substituent("C(=O)[OX2,OX1]", 0.37, 0.45),
    substituent("C(=O)[#7]", 0.28, 0.36),
    substituent("C(=O)[#6]", 0.38, 0.50),
    substituent("S(=O)(=O)[#6]", 0.60, 0.72),
    substituent("S(=O)(=O)[#7]", 0.53, 0.60),
    substituent("[SX2]C(F)(F)F", 0.40, 0.50),
    substituent("[SX2]", 0.15, 0.00),
    substituent("[OX2]C(F)(F)F", 0.38, 0.35),
    substituent("[OX2]C(=O)", 0.39, 0.31),
    substituent("[OX2]c", 0.25, -0.03),
    substituent("[OX2H]", 0.12, -0.37),
    substituent("[OX2]", 0.12, -0.27),
    substituent("[OX1-]", -0.47, -0.81),
    substituent("[NX3]C(=O)", 0.21, 0.00),
    substituent("[NX3H2]", -0.16, -0.66),
    substituent("[NX3H1]", -0.21, -0.70),
    substituent("[NX3]", -0.16, -0.83),
    substituent("F", 0.34, 0.06),
    substituent("Cl", 0.37, 0.23),
    substituent("Br", 0.39, 0.23),
    substituent("I", 0.35, 0.18),
    substituent("[Si]", -0.04, -0.07),
    substituent("[B]", -0.01, 0.12),
    substituent("[CX4]([CH3])([CH3])[CH3]", -0.10, -0.20),
    substituent("[CX4H2][F,Cl,Br,I]", 0.11, 0.13),
    substituent("[CX4H2][OX2]", 0.02, 0.01),
    substituent("[CX4]", -0.07, -0.16),
    substituent("[CX3]=C", 0.06, -0.04),
    substituent("C#C", 0.21, 0.23),
    substituent("c", 0.06, -0.01),
];

/// Ring nitrogen at the ortho or para and at the meta position.
const AZA_PARA: f64 = 0.93;
const AZA_META: f64 = 0.62;

static PATTERNS: LazyLock<Vec<(QueryMolecule, &'static Substituent)>> = LazyLock::new(|| {
    SUBSTITUENTS
        .iter()
        .filter_map(|s| Some((smarts::parse_smarts(&format!("c-!@{}", s.pattern)).ok()?, s)))
        .collect()
});

/// Sum of σ over the six-membered ring of `ipso`; 0 for five-membered rings, whose
/// heteroatoms no σ describes.
pub(super) fn sigma(molecule: &Molecule, ipso: usize, aldehyde: usize) -> f64 {
    let ring = molecule
        .rings()
        .iter()
        .find(|ring| ring.len() == 6 && ring.contains(&ipso));
    let Some(ring) = ring else { return 0.0 };
    let start = ring.iter().position(|atom| *atom == ipso).unwrap_or(0);
    let assigned = assignments(molecule);
    (1..6)
        .map(|step| {
            let atom = ring[(start + step) % 6];
            let meta = step == 2 || step == 4;
            if molecule.element(atom) == 7 {
                return if meta { AZA_META } else { AZA_PARA };
            }
            let on_ring = |(_, at, substituent): &(usize, usize, usize)| {
                *at == atom && *substituent != aldehyde
            };
            assigned
                .iter()
                .filter(|a| on_ring(a))
                .map(|(row, _, substituent)| (*substituent, *row))
                .min_by_key(|(_, row)| *row)
                .map_or(0.0, |(_, row)| {
                    let s = PATTERNS[row].1;
                    if meta { s.meta } else { s.para }
                })
        })
        .sum()
}

/// Every match as (row of the table, ring atom, first atom of the substituent).
fn assignments(molecule: &Molecule) -> Vec<(usize, usize, usize)> {
    let config = smarts::MatchConfig::default();
    let mut found = Vec::new();
    for (row, (query, _)) in PATTERNS.iter().enumerate() {
        for hit in smarts::find_matches_perceived(query, &molecule.kekule, &config) {
            if let (Some(ring), Some(first)) = (hit.get(&0), hit.get(&1)) {
                found.push((row, ring.0 as usize, first.0 as usize));
            }
        }
    }
    found
}
