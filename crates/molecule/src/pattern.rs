//! SMARTS patterns, compiled once and looked for in molecules.

use std::fmt;

use chematic::core::Element;
use chematic::smarts::{
    self, AtomPrimitive, AtomQuery, BondPrimitive, BondQuery, MatchConfig, QueryMolecule,
};

use crate::{Bond, Molecule, StructureError};

/// A compiled SMARTS pattern.
pub struct Pattern {
    query: QueryMolecule,
    needs: Needs,
}

/// What a molecule must have for a pattern to be looked for at all.
struct Needs {
    /// For each atom of the pattern, the elements that it may be, as bits by atomic number.
    elements: Vec<u128>,
    triple_bond: bool,
}

impl fmt::Debug for Pattern {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "Pattern({} atoms)", self.query.atoms.len())
    }
}

impl Pattern {
    /// Compiles a SMARTS pattern.
    ///
    /// # Errors
    /// Text that is no SMARTS.
    pub fn parse(smarts: &str) -> Result<Pattern, StructureError> {
        let query = smarts::parse_smarts(smarts).map_err(|error| {
            StructureError::new(
                format!("`{smarts}` is no SMARTS: {error}"),
                "check brackets, branches and ring labels",
            )
        })?;
        let needs = Needs::of(&query);
        Ok(Pattern { query, needs })
    }

    /// Whether the molecule contains each of the patterns; aromaticity is perceived once for all.
    pub fn each_in(patterns: &[Pattern], molecule: &Molecule) -> Vec<bool> {
        let config = MatchConfig::default();
        let has = Has::of(molecule);
        smarts::with_perceived_target(&molecule.kekule, |target| {
            let is_in = |pattern: &Pattern| {
                pattern.needs.are_met(has)
                    && smarts::has_match_with_config(&pattern.query, target, &config)
            };
            patterns.iter().map(is_in).collect()
        })
    }

    /// Whether the molecule contains the pattern.
    pub(crate) fn is_in(&self, molecule: &Molecule) -> bool {
        self.needs.are_met(Has::of(molecule))
            && smarts::has_match_perceived(&self.query, &molecule.kekule, &MatchConfig::default())
    }

    /// Where the pattern is in the molecule: the atoms of each place in the order of the pattern, in
    /// every orientation, sorted.
    pub(crate) fn places_in(&self, molecule: &Molecule) -> Vec<Vec<usize>> {
        if !self.needs.are_met(Has::of(molecule)) {
            return Vec::new();
        }
        let config = MatchConfig {
            uniquify: false,
            ..MatchConfig::default()
        };
        let hits = smarts::find_matches_perceived(&self.query, &molecule.kekule, &config);
        let mut places: Vec<Vec<usize>> = hits
            .iter()
            .filter_map(|hit| {
                let atoms = 0..hit.len();
                atoms
                    .map(|i| hit.get(&i).map(|atom| atom.0 as usize))
                    .collect()
            })
            .collect();
        places.sort_unstable();
        places
    }
}

/// What a molecule has, as far as patterns need it.
#[derive(Clone, Copy)]
struct Has {
    elements: u128,
    triple_bond: bool,
}

impl Has {
    fn of(molecule: &Molecule) -> Has {
        let atoms = molecule.atoms.iter();
        let mut bonds = molecule.neighbours.iter().flatten();
        Has {
            elements: atoms.fold(0, |all, atom| all | element_bit(atom.element)),
            triple_bond: bonds.any(|(_, bond)| *bond == Bond::Triple),
        }
    }
}

impl Needs {
    fn of(query: &QueryMolecule) -> Needs {
        let is_triple =
            |bond: &BondQuery| matches!(bond, BondQuery::Primitive(BondPrimitive::Triple));
        let atoms = query.atoms.iter();
        Needs {
            elements: atoms.map(|atom| elements(&atom.query)).collect(),
            triple_bond: query.bonds.iter().any(|bond| is_triple(&bond.query)),
        }
    }

    fn are_met(&self, has: Has) -> bool {
        let mut atoms = self.elements.iter();
        (has.triple_bond || !self.triple_bond) && atoms.all(|may_be| may_be & has.elements != 0)
    }
}

fn element_bit(atomic_number: u8) -> u128 {
    1u128.checked_shl(atomic_number.into()).unwrap_or(u128::MAX)
}

/// The elements that an atom of a pattern may be; all of them where it does not say.
fn elements(query: &AtomQuery) -> u128 {
    match query {
        AtomQuery::Primitive(AtomPrimitive::AtomicNum(number)) => element_bit(*number),
        AtomQuery::Primitive(AtomPrimitive::Symbol(symbol)) => {
            let element = Element::from_symbol(symbol);
            element.map_or(u128::MAX, |element| element_bit(element.atomic_number()))
        }
        AtomQuery::And(one, other) => elements(one) & elements(other),
        AtomQuery::Or(one, other) => elements(one) | elements(other),
        AtomQuery::Primitive(_) | AtomQuery::Not(_) => u128::MAX,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn patterns_find_their_groups_in_kekule_and_aromatic_text() {
        let patterns = [
            "c[N+](=O)[O-]",
            "[#7]",
            "[CX4][Cl,Br,I]",
            "C#N",
            "[!#6;!#1]~*",
            "*=[$(O),$(S)]",
        ];
        let patterns = patterns.map(|smarts| Pattern::parse(smarts).unwrap());
        for (smiles, expected) in [
            ("O=[N+]([O-])C1=CC=CC=C1", [1, 1, 0, 0, 1, 1]),
            ("O=N(=O)c1ccccc1", [1, 1, 0, 0, 1, 1]),
            ("O=[N+]([O-])CC1=CC=CC=C1", [0, 1, 0, 0, 1, 1]),
            ("N#CCBr", [0, 1, 1, 1, 1, 0]),
            ("Brc1ccccc1", [0, 0, 0, 0, 1, 0]),
            ("CCC#C", [0, 0, 0, 0, 0, 0]),
        ] {
            let molecule = Molecule::parse(smiles).unwrap();
            let found = Pattern::each_in(&patterns, &molecule);
            assert_eq!(found, expected.map(|is_in| is_in == 1), "{smiles}");
        }
        let error = Pattern::parse("[C").unwrap_err();
        assert!(error.to_string().contains("`[C` is no SMARTS"), "{error}");
    }

    /// The needs only save work: without them the answers are the same.
    #[test]
    fn needs_hide_no_match() {
        let smarts = [
            "[#6][CX3](=O)[#6]",
            "[F,Cl,Br,I][CX4]",
            "C#C[CX3]=O",
            "[n,N;!+]",
            "[!C]",
        ];
        for smiles in ["CC(=O)C", "BrCC#CC(C)=O", "c1ccncc1", "C[N+](C)(C)C", "CC"] {
            let molecule = Molecule::parse(smiles).unwrap();
            let patterns = smarts.map(|smarts| Pattern::parse(smarts).unwrap());
            let config = MatchConfig::default();
            let plain = patterns.each_ref().map(|pattern| {
                smarts::has_match_perceived(&pattern.query, &molecule.kekule, &config)
            });
            assert_eq!(Pattern::each_in(&patterns, &molecule), plain, "{smiles}");
        }
    }
}
