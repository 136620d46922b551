//! Pairs of species that mass alone does not tell apart.

use serde::{Deserialize, Serialize};

use super::{Ion, IonKind, SpeciesMasses};

/// Two species of a well that mass alone does not tell apart.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct MassClash {
    /// Index of one species.
    pub one: usize,
    /// Index of the other, the greater.
    pub other: usize,
    /// In what they agree.
    pub kind: ClashKind,
}

/// In what two species agree.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub enum ClashKind {
    /// The same compound, or stereoisomers, by canonical SMILES without stereo.
    SameCompound,
    /// Isomers: all ions agree, only retention or fragments tell them apart.
    SameFormula,
    /// Two ions of one polarity within the tolerance: near-isobars, or an adduct of one that has the
    /// m/z of another ion of the other.
    SameMz {
        /// Ion of the one species.
        ion_of_one: IonKind,
        /// Ion of the other.
        ion_of_other: IonKind,
        /// m/z of the ion of the one less that of the other, ppm.
        difference_ppm: f64,
    },
}

/// Every pair, with the closest pair of ions where formulas differ.
pub(super) fn clashes(species: &[SpeciesMasses], tolerance_ppm: f64) -> Vec<MassClash> {
    let mut clashes = Vec::new();
    for (other, b) in species.iter().enumerate() {
        for (one, a) in species[..other].iter().enumerate() {
            if let Some(kind) = kind_of(a, b, tolerance_ppm) {
                clashes.push(MassClash { one, other, kind });
            }
        }
    }
    clashes.sort_by_key(|clash| (clash.one, clash.other));
    clashes
}

fn kind_of(a: &SpeciesMasses, b: &SpeciesMasses, tolerance_ppm: f64) -> Option<ClashKind> {
    let same_mass = (a.monoisotopic_da - b.monoisotopic_da).abs() < 1e-6;
    if a.formula == b.formula && same_mass {
        let same = a.smiles_flat == b.smiles_flat;
        return Some(if same {
            ClashKind::SameCompound
        } else {
            ClashKind::SameFormula
        });
    }
    let pairs = a
        .ions
        .iter()
        .flat_map(|one| b.ions.iter().map(move |other| (one, other)));
    let close = pairs.filter_map(|(one, other)| {
        let ppm = difference_ppm(one, other)?;
        (ppm.abs() <= tolerance_ppm).then_some((ppm, one.kind, other.kind))
    });
    let closest = close.min_by(|one, other| one.0.abs().total_cmp(&other.0.abs()))?;
    Some(ClashKind::SameMz {
        ion_of_one: closest.1,
        ion_of_other: closest.2,
        difference_ppm: closest.0,
    })
}

/// None for ions of opposite polarity, which are never in one spectrum.
fn difference_ppm(one: &Ion, other: &Ion) -> Option<f64> {
    let mean = 0.5 * (one.mz + other.mz);
    let same_polarity = one.kind.is_positive() == other.kind.is_positive();
    same_polarity.then(|| (one.mz - other.mz) / mean * 1e6)
}
