//! Isotope patterns by nominal mass.

use enolattice_molecule::Molecule;
use serde::{Deserialize, Serialize};

/// One peak of an isotope pattern.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct IsotopePeak {
    /// Nominal mass less that of M, whose atoms are all of the most abundant isotope: 1 for M+1.
    pub offset: i32,
    /// Height as a share of the highest peak, 0 to 1.
    pub height: f64,
}

/// Isotopes of an element: mass number less that of the most abundant one, and abundance.
type Isotopes = &'static [(i32, f64)];

/// Natural abundances by atomic number: Berglund & Wieser 2011 (IUPAC), doi:10.1351/PAC-REP-10-06-02,
/// table 1, representative compositions. An element with one stable isotope needs no row.
const ABUNDANCES: [(u8, Isotopes); 9] = [
    (1, &[(0, 0.999_885), (1, 0.000_115)]),
    (5, &[(-1, 0.199), (0, 0.801)]),
    (6, &[(0, 0.989_3), (1, 0.010_7)]),
    (7, &[(0, 0.996_36), (1, 0.003_64)]),
    (8, &[(0, 0.997_57), (1, 0.000_38), (2, 0.002_05)]),
    (14, &[(0, 0.922_23), (1, 0.046_85), (2, 0.030_92)]),
    (
        16,
        &[(0, 0.949_9), (1, 0.007_5), (2, 0.042_5), (4, 0.000_1)],
    ),
    (17, &[(0, 0.757_6), (2, 0.242_4)]),
    (35, &[(0, 0.506_9), (2, 0.493_1)]),
];
/// The same for selenium, whose isotopes reach far below the most abundant one.
const SELENIUM: (u8, Isotopes) = (
    34,
    &[
        (-6, 0.008_9),
        (-4, 0.093_7),
        (-3, 0.076_3),
        (-2, 0.237_7),
        (0, 0.496_1),
        (2, 0.087_3),
    ],
);

/// Peaks below this share of the highest are left out of what is shown.
const LEAST_HEIGHT: f64 = 1e-3;
/// Tails below this cannot reach a peak that is shown.
const NEGLIGIBLE: f64 = 1e-15;

/// A distribution of nominal masses from `first` on.
#[derive(Clone, Debug)]
struct Distribution {
    first: i32,
    shares: Vec<f64>,
}

/// The pattern of a molecule by convolution over its atoms.
///
/// An atom with a label counts as one of natural composition around its own mass, which for hydrogen
/// changes heights by about 10⁻⁴.
pub(super) fn pattern(molecule: &Molecule) -> Vec<IsotopePeak> {
    let mut whole = Distribution {
        first: 0,
        shares: vec![1.0],
    };
    for (element, isotopes) in ABUNDANCES.iter().chain([&SELENIUM]) {
        let atoms = molecule.atoms().iter();
        let count: u32 = atoms
            .map(|atom| {
                let hydrogens = if *element == 1 {
                    atom.hydrogens.into()
                } else {
                    0
                };
                u32::from(atom.element == *element) + hydrogens
            })
            .sum();
        whole = whole.with(&Distribution::of(isotopes).power(count));
    }
    whole.peaks()
}

impl Distribution {
    fn of(isotopes: Isotopes) -> Distribution {
        let first = isotopes[0].0;
        let last = isotopes[isotopes.len() - 1].0;
        let mut shares = vec![0.0; (last - first) as usize + 1];
        for (offset, share) in isotopes {
            shares[(offset - first) as usize] = *share;
        }
        Distribution { first, shares }
    }

    /// The distribution of a sum of two.
    fn with(&self, other: &Distribution) -> Distribution {
        let mut shares = vec![0.0; self.shares.len() + other.shares.len() - 1];
        for (i, a) in self.shares.iter().enumerate() {
            for (j, b) in other.shares.iter().enumerate() {
                shares[i + j] += a * b;
            }
        }
        while shares.last().is_some_and(|share| *share < NEGLIGIBLE) {
            shares.pop();
        }
        Distribution {
            first: self.first + other.first,
            shares,
        }
    }

    /// The distribution of a sum of so many, by squaring.
    fn power(&self, mut count: u32) -> Distribution {
        let mut power = Distribution {
            first: 0,
            shares: vec![1.0],
        };
        let mut square = self.clone();
        while count > 0 {
            if count % 2 == 1 {
                power = power.with(&square);
            }
            count /= 2;
            if count > 0 {
                square = square.with(&square);
            }
        }
        power
    }

    fn peaks(&self) -> Vec<IsotopePeak> {
        let highest = self.shares.iter().copied().fold(0.0, f64::max);
        let peaks = (self.first..)
            .zip(&self.shares)
            .map(|(offset, share)| IsotopePeak {
                offset,
                height: share / highest,
            });
        peaks.filter(|peak| peak.height >= LEAST_HEIGHT).collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn heights(smiles: &str) -> Vec<(i32, f64)> {
        let peaks = pattern(&Molecule::parse(smiles).unwrap());
        peaks
            .iter()
            .map(|peak| (peak.offset, peak.height))
            .collect()
    }

    /// Patterns that every textbook of mass spectrometry shows.
    #[test]
    fn halogens_have_their_known_patterns() {
        for (smiles, expected) in [
            // Cl 3 : 1, Cl2 9 : 6 : 1, Br 1 : 1, Br2 1 : 2 : 1, BrCl 3 : 4 : 1
            ("Cl", vec![(0, 1.0), (2, 0.32)]),
            ("ClCl", vec![(0, 1.0), (2, 0.64), (4, 0.102)]),
            ("Br", vec![(0, 1.0), (2, 0.973)]),
            ("BrBr", vec![(0, 0.514), (2, 1.0), (4, 0.486)]),
            ("BrCl", vec![(0, 0.772), (2, 1.0), (4, 0.241)]),
        ] {
            let found: Vec<_> = heights(smiles)
                .into_iter()
                .filter(|peak| peak.0 % 2 == 0)
                .collect();
            assert_eq!(found.len(), expected.len(), "{smiles}: {found:?}");
            for (one, other) in found.iter().zip(&expected) {
                assert!(
                    one.0 == other.0 && (one.1 - other.1).abs() < 2e-3,
                    "{smiles}: {found:?}"
                );
            }
        }
    }

    #[test]
    fn fullerene_has_two_thirds_of_its_m_plus_one() {
        // C₆₀: M+1 at 60 · 0.0107/0.9893 = 0.649
        let carbon = Distribution::of(&[(0, 0.989_3), (1, 0.010_7)]).power(60);
        assert!((carbon.shares[1] / carbon.shares[0] - 0.648_94).abs() < 1e-4);
    }

    #[test]
    fn abundances_of_an_element_add_up_to_one() {
        for (element, isotopes) in ABUNDANCES.iter().chain([&SELENIUM]) {
            let sum: f64 = isotopes.iter().map(|(_, share)| share).sum();
            assert!((sum - 1.0).abs() < 1e-9, "{element}: {sum}");
        }
    }

    /// Boron and selenium have isotopes below the most abundant one.
    #[test]
    fn lighter_isotopes_stand_before_m() {
        assert!((heights("CB(O)O")[0].1 - 0.199 / 0.801).abs() < 2e-3);
        assert_eq!(heights("C[Se]C")[0].0, -6);
    }
}
