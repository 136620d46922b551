//! Tables of patterns and what each of them means.

use crate::{Molecule, Pattern};

/// Patterns with what each of them means.
pub(super) struct Patterns<T>(Vec<(Pattern, T)>);

impl<T: Copy> Patterns<T> {
    /// Compiles a table; a test of each table holds that no row is lost.
    pub(super) fn compile(rows: &[(&str, T)]) -> Patterns<T> {
        let compiled =
            |(pattern, meaning): &(&str, T)| Some((Pattern::parse(pattern).ok()?, *meaning));
        Patterns(rows.iter().filter_map(compiled).collect())
    }

    /// What the first pattern means that is in the molecule.
    pub(super) fn first(&self, molecule: &Molecule) -> Option<T> {
        let mut rows = self.0.iter();
        rows.find(|(pattern, _)| pattern.is_in(molecule))
            .map(|(_, meaning)| *meaning)
    }

    /// What the first pattern means that is in the molecule, with all its places: the atoms of each in
    /// the order of the pattern, in every orientation.
    pub(super) fn places(&self, molecule: &Molecule) -> Option<(T, Vec<Vec<usize>>)> {
        self.0.iter().find_map(|(pattern, meaning)| {
            let found = pattern.places_in(molecule);
            (!found.is_empty()).then_some((*meaning, found))
        })
    }

    #[cfg(test)]
    pub(super) fn len(&self) -> usize {
        self.0.len()
    }
}

/// Number of different atoms beyond the first at one position of the places found.
pub(super) fn further(places: &[Vec<usize>], position: usize) -> u8 {
    let mut atoms: Vec<usize> = places.iter().map(|place| place[position]).collect();
    atoms.sort_unstable();
    atoms.dedup();
    u8::try_from(atoms.len().saturating_sub(1)).unwrap_or(u8::MAX)
}
