//! Quinones and quinone methides, which become aromatic when they are attacked.

use std::sync::LazyLock;

use super::matching::Patterns;
use super::{Acceptor, ElectrophileKind, ElectrophilicGroup};
use crate::groups::CARBON;
use crate::{Bond, Molecule};

/// What a ring is, with the places of the attacked carbon and its partner in the pattern.
#[derive(Clone, Copy)]
enum Ring {
    /// Attacked at 2, α at 3.
    Quinone,
    /// Attacked at 5, α at 4.
    ParaMethide,
    /// Attacked at 7, α at 6.
    OrthoMethide,
}

const ROWS: &[(&str, Ring)] = &[
    ("O=C1[#6]=[#6]C(=O)[#6]=,:[#6]1", Ring::Quinone),
    ("O=C1[#6]=[#6]C(=[CX3])[#6]=[#6]1", Ring::ParaMethide),
    ("O=C1[#6]=[#6][#6]=[#6]C1=[CX3]", Ring::OrthoMethide),
];

static PATTERNS: LazyLock<Patterns<Ring>> = LazyLock::new(|| Patterns::compile(ROWS));

/// A para-quinone or a quinone methide.
///
/// # Errors
/// Places that are not covered: halogens or heteroatoms on the double bonds, no hydrogen to be lost.
pub(super) fn find(molecule: &Molecule) -> Result<Option<ElectrophilicGroup>, String> {
    let Some((ring, places)) = PATTERNS.places(molecule) else {
        return Ok(None);
    };
    let found = match ring {
        Ring::Quinone => quinone(molecule, &places)?,
        Ring::ParaMethide => methide(molecule, places[0][5], places[0][4])?,
        Ring::OrthoMethide => methide(molecule, places[0][7], places[0][6])?,
    };
    Ok(Some(found))
}

fn quinone(molecule: &Molecule, places: &[Vec<usize>]) -> Result<ElectrophilicGroup, String> {
    let substituents = |carbon: usize| molecule.neighbours(carbon).len() - 2;
    if places.iter().any(|place| {
        place.iter().any(|atom| {
            let mut around = molecule.neighbours(*atom).iter();
            !molecule.atoms()[*atom].aromatic
                && around.any(|(other, _)| molecule.is_halogen(*other))
        })
    }) {
        return Err(
            "a halogenated quinone oxidises carbanions and loses halide, which is not covered"
                .to_owned(),
        );
    }
    let best = places
        .iter()
        .filter(|place| molecule.atoms()[place[2]].hydrogens == 1)
        .min_by_key(|place| (substituents(place[3]), place[2]))
        .ok_or(
            "a quinone without hydrogen on its double bonds takes electrons from carbanions, \
             which is not covered",
        )?;
    Ok(ElectrophilicGroup {
        kind: ElectrophileKind::Michael {
            alpha: best[3],
            acceptor: Acceptor::Quinone,
            further_acceptors: 0,
            beta_acceptors: 1,
            beta_alkyl: 0,
            beta_aryl: 0,
            alpha_alkyl: substituents(best[3]) as u8,
        },
        atom: best[2],
        leaving_atom: None,
        // The hydroquinone is no acceptor.
        further_positions: 0,
    })
}

fn methide(molecule: &Molecule, beta: usize, alpha: usize) -> Result<ElectrophilicGroup, String> {
    let around: Vec<usize> = molecule
        .bound_to(beta, CARBON, Bond::Single)
        .filter(|atom| *atom != alpha)
        .collect();
    if around.len() + 1 != molecule.neighbours(beta).len() {
        return Err("a quinone methide with a heteroatom on its double bond is not covered".into());
    }
    let alkyl = around
        .iter()
        .filter(|atom| molecule.is_saturated_carbon(**atom))
        .count();
    Ok(ElectrophilicGroup {
        kind: ElectrophileKind::Michael {
            alpha,
            acceptor: Acceptor::QuinoneMethide,
            further_acceptors: 0,
            beta_acceptors: 0,
            beta_alkyl: alkyl as u8,
            beta_aryl: (around.len() - alkyl) as u8,
            alpha_alkyl: 0,
        },
        atom: beta,
        leaving_atom: None,
        further_positions: 0,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_pattern_compiles() {
        assert_eq!(PATTERNS.len(), ROWS.len());
    }
}
