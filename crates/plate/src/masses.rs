//! What the LC-MS is told to look for.
//!
//! For every species that may be in a well: formula, monoisotopic mass, ions, isotope pattern, whether
//! a detector sees it, and which pairs of one well cannot be told apart by mass.

mod clashes;
mod detection;
mod groups;
mod ions;
mod isotopes;

use enolattice_molecule::{Molecule, StructureError};
use serde::{Deserialize, Serialize};

pub use clashes::{ClashKind, MassClash};
pub use detection::{Detection, SeenBy, Strength};
pub use ions::{Ion, IonKind};
pub use isotopes::IsotopePeak;

/// Largest difference of two m/z that counts as none, ppm, where nothing else is said:
/// `common practice` for time-of-flight and ion-trap instruments.
pub const USUAL_TOLERANCE_PPM: f64 = 5.0;

/// A species expected in a well.
#[derive(Clone, Debug)]
pub struct WellSpecies {
    name: String,
    molecule: Molecule,
    share: f64,
}

/// What is to be looked for of one species.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SpeciesMasses {
    /// Its name in the well: wanted product, substrate …
    pub name: String,
    /// Canonical SMILES.
    pub smiles: String,
    /// Canonical SMILES without stereo.
    pub smiles_flat: String,
    /// Expected share, 0 to 1.
    pub share: f64,
    /// Molecular formula, Hill order.
    pub formula: String,
    /// Mass of the molecule of the most abundant isotopes, Da; an ion without its electrons.
    pub monoisotopic_da: f64,
    /// Ions that may be seen, with their m/z.
    pub ions: Vec<Ion>,
    /// Isotope pattern by nominal mass, of peaks above 0.1 % of the highest.
    pub isotopes: Vec<IsotopePeak>,
    /// Which detectors see it.
    pub detection: Detection,
}

/// What is to be looked for in one well.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct WellMasses {
    /// The species in the order given.
    pub species: Vec<SpeciesMasses>,
    /// Pairs that mass alone does not tell apart.
    pub clashes: Vec<MassClash>,
}

/// Why no masses were given.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum MassError {
    /// A structure that cannot be read.
    #[error("`{smiles}` of species `{name}` is no molecule: {reason}")]
    Structure {
        /// The species.
        name: String,
        /// What was given, shortened.
        smiles: String,
        /// Why it cannot be read, and what to do.
        reason: StructureError,
    },
    /// A share that is none.
    #[error("share {share} of species `{name}` must be between 0 and 1")]
    Share {
        /// The species.
        name: String,
        /// The share.
        share: f64,
    },
    /// A tolerance that is none.
    #[error("a tolerance of {ppm} ppm is not possible; give a number from 0 to 1000")]
    Tolerance {
        /// The tolerance.
        ppm: f64,
    },
}

impl WellSpecies {
    /// A species by its molecule.
    ///
    /// # Errors
    /// A share outside 0 to 1.
    pub fn new(
        name: impl Into<String>,
        molecule: Molecule,
        share: f64,
    ) -> Result<WellSpecies, MassError> {
        let name = name.into();
        if !(0.0..=1.0).contains(&share) {
            return Err(MassError::Share { name, share });
        }
        Ok(WellSpecies {
            name,
            molecule,
            share,
        })
    }

    /// A species by its SMILES; of a salt the organic part is looked for.
    ///
    /// # Errors
    /// Text that is no molecule; a share outside 0 to 1.
    pub fn parse(
        name: impl Into<String>,
        smiles: &str,
        share: f64,
    ) -> Result<WellSpecies, MassError> {
        let name = name.into();
        match Molecule::parse_salt(smiles) {
            Ok(salt) => WellSpecies::new(name, salt.molecule, share),
            Err(reason) => Err(MassError::Structure {
                name,
                smiles: smiles.chars().take(60).collect(),
                reason,
            }),
        }
    }
}

/// The masses of one molecule.
pub fn masses_of(name: impl Into<String>, molecule: &Molecule, share: f64) -> SpeciesMasses {
    SpeciesMasses {
        name: name.into(),
        smiles: molecule.canonical().to_owned(),
        smiles_flat: molecule.canonical_flat(),
        share,
        formula: molecule.formula().to_owned(),
        monoisotopic_da: molecule.exact_mass(),
        ions: ions::ions(molecule),
        isotopes: isotopes::pattern(molecule),
        detection: detection::detection(molecule),
    }
}

/// What is to be looked for in a well, and what mass alone does not tell apart there.
///
/// ```
/// use enolattice_plate::{ClashKind, USUAL_TOLERANCE_PPM, WellSpecies, well_masses};
///
/// let by_carbon = WellSpecies::parse("C product", "CC(=O)C(C)C(C)=O", 0.8)?;
/// let by_oxygen = WellSpecies::parse("O product", "CC(=O)C=C(C)OC", 0.1)?;
/// let well = well_masses(&[by_carbon, by_oxygen], USUAL_TOLERANCE_PPM)?;
/// assert_eq!(well.clashes[0].kind, ClashKind::SameFormula);
/// # Ok::<(), enolattice_plate::MassError>(())
/// ```
///
/// # Errors
/// A tolerance that is no number from 0 to 1000 ppm.
pub fn well_masses(species: &[WellSpecies], tolerance_ppm: f64) -> Result<WellMasses, MassError> {
    if !(0.0..=1_000.0).contains(&tolerance_ppm) {
        return Err(MassError::Tolerance { ppm: tolerance_ppm });
    }
    let species: Vec<SpeciesMasses> = species
        .iter()
        .map(|one| masses_of(one.name.as_str(), &one.molecule, one.share))
        .collect();
    let clashes = clashes::clashes(&species, tolerance_ppm);
    Ok(WellMasses { species, clashes })
}
