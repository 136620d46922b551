//! What makes a reagent dangerous: groups read off its structure, and facts of its record.

mod table;

use std::sync::LazyLock;

use enolattice_molecule::{Molecule, Pattern};
use enolattice_reagents::{Additive, Base, Solvent};

pub(super) use table::Trait;
use table::{TRAITS, Test};

/// A set of traits.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub(super) struct Traits {
    low: u128,
    high: u128,
}

impl Traits {
    fn add(&mut self, one: Trait) {
        match one as u32 {
            bit @ 0..128 => self.low |= 1 << bit,
            bit => self.high |= 1 << (bit - 128),
        }
    }

    fn has(self, one: Trait) -> bool {
        match one as u32 {
            bit @ 0..128 => self.low >> bit & 1 == 1,
            bit => self.high >> (bit - 128) & 1 == 1,
        }
    }

    /// Whether any of the traits is in the set.
    pub(super) fn has_any(self, any_of: &[Trait]) -> bool {
        any_of.iter().any(|one| self.has(*one))
    }

    fn join(&mut self, other: Traits) {
        self.low |= other.low;
        self.high |= other.high;
    }

    /// Traits of a molecule's structure.
    pub(super) fn of_molecule(molecule: &Molecule) -> Traits {
        let mut found = Traits::default();
        let Patterns { of, patterns } = &*PATTERNS;
        for (one, is_in) in of.iter().zip(Pattern::each_in(patterns, molecule)) {
            if is_in {
                found.add(*one);
            }
        }
        for (one, _, test) in TRAITS {
            if matches!(test, Test::Whole(holds) if holds(molecule, found)) {
                found.add(*one);
            }
        }
        found
    }

    /// Traits of the parts of a salt or mixture; parts that are no molecules (metal ions) have none.
    fn of_smiles(smiles: &str) -> Traits {
        let mut found = Traits::default();
        let parts = smiles.split('.').filter(|part| !part.is_empty());
        for molecule in parts.filter_map(|part| Molecule::parse(part).ok()) {
            found.join(Traits::of_molecule(&molecule));
        }
        found
    }

    fn of_record(mut self, holds: impl Fn(&Test) -> bool) -> Traits {
        let held = TRAITS.iter().filter(|(_, _, test)| holds(test));
        held.for_each(|(one, ..)| self.add(*one));
        self
    }

    /// Traits of a base.
    pub(super) fn of_base(base: &Base) -> Traits {
        let structure = Traits::of_smiles(&base.smiles);
        structure.of_record(|test| matches!(test, Test::Base(holds) if holds(base)))
    }

    /// Traits of a solvent's structure.
    pub(super) fn of_solvent_structure(solvent: &Solvent) -> Traits {
        Traits::of_smiles(&solvent.smiles)
    }

    /// Adds what the record says of a solvent whose cell gets as hot as this.
    pub(super) fn of_solvent_record(self, solvent: &Solvent, hottest_c: f64) -> Traits {
        self.of_record(|test| matches!(test, Test::Solvent(holds) if holds(solvent, hottest_c)))
    }

    /// Traits of an additive.
    pub(super) fn of_additive(additive: &Additive) -> Traits {
        let structure = Traits::of_smiles(&additive.smiles);
        structure.of_record(|test| matches!(test, Test::Additive(holds) if holds(additive)))
    }
}

/// The compiled patterns, each with the trait that it stands for.
struct Patterns {
    of: Vec<Trait>,
    patterns: Vec<Pattern>,
}

static PATTERNS: LazyLock<Patterns> = LazyLock::new(|| {
    let rows = TRAITS.iter().filter_map(|(one, _, test)| match test {
        Test::Any(patterns) => Some((*one, *patterns)),
        _ => None,
    });
    let each = rows.flat_map(|(one, patterns)| patterns.iter().map(move |smarts| (one, smarts)));
    let compiled = each.filter_map(|(one, smarts)| Some((one, Pattern::parse(smarts).ok()?)));
    let (of, patterns) = compiled.unzip();
    Patterns { of, patterns }
});

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_pattern_compiles_and_every_trait_stands_at_its_number() {
        let written = TRAITS.iter().map(|(_, _, test)| match test {
            Test::Any(patterns) => patterns.len(),
            _ => 0,
        });
        assert_eq!(PATTERNS.patterns.len(), written.sum::<usize>());
        for (i, (one, ..)) in TRAITS.iter().enumerate() {
            assert_eq!(*one as usize, i);
        }
        assert!(TRAITS.len() <= 256, "a set has room for 256 traits");
    }
}
