//! Patterns of groups and where they are found.

use chematic::smarts::{self, MatchConfig, QueryMolecule};

use crate::Molecule;

/// Patterns with what each of them means.
pub(super) struct Patterns<T>(Vec<(QueryMolecule, T)>);

impl<T: Copy> Patterns<T> {
    /// Compiles a table; a test of each table holds that no row is lost.
    pub(super) fn compile(rows: &[(&str, T)]) -> Patterns<T> {
        let compiled =
            |(pattern, meaning): &(&str, T)| Some((smarts::parse_smarts(pattern).ok()?, *meaning));
        Patterns(rows.iter().filter_map(compiled).collect())
    }

    /// What the first pattern means that is in the molecule.
    pub(super) fn first(&self, molecule: &Molecule) -> Option<T> {
        let config = MatchConfig::default();
        self.0
            .iter()
            .find(|(query, _)| smarts::has_match_perceived(query, &molecule.kekule, &config))
            .map(|(_, meaning)| *meaning)
    }

    /// What the first pattern means that is in the molecule, with all its places: the atoms of each in
    /// the order of the pattern, in every orientation.
    pub(super) fn places(&self, molecule: &Molecule) -> Option<(T, Vec<Vec<usize>>)> {
        self.0.iter().find_map(|(query, meaning)| {
            let found = places(query, molecule);
            (!found.is_empty()).then_some((*meaning, found))
        })
    }

    #[cfg(test)]
    pub(super) fn len(&self) -> usize {
        self.0.len()
    }
}

fn places(query: &QueryMolecule, molecule: &Molecule) -> Vec<Vec<usize>> {
    let config = MatchConfig {
        uniquify: false,
        ..MatchConfig::default()
    };
    let mut found: Vec<Vec<usize>> =
        smarts::find_matches_perceived(query, &molecule.kekule, &config)
            .into_iter()
            .filter_map(|hit| {
                (0..hit.len())
                    .map(|i| hit.get(&i).map(|atom| atom.0 as usize))
                    .collect()
            })
            .collect();
    found.sort_unstable();
    found
}

/// Number of different atoms beyond the first at one position of the places found.
pub(super) fn further(places: &[Vec<usize>], position: usize) -> u8 {
    let mut atoms: Vec<usize> = places.iter().map(|place| place[position]).collect();
    atoms.sort_unstable();
    atoms.dedup();
    u8::try_from(atoms.len().saturating_sub(1)).unwrap_or(u8::MAX)
}
