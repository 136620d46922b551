//! The model: prepares reagents, scores cells, explains them.

use std::sync::Arc;

use enolattice_molecule::Molecule;
use enolattice_reagents::Library;

use crate::{Base, Cell, Electrophile, Explanation, MeasuredPka, Pair, Score, Solvent, Substrate};

/// SHA-256 over code version, data, coefficients and arithmetic.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct Fingerprint(pub [u8; 32]);

impl std::fmt::Display for Fingerprint {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        self.0.iter().try_for_each(|byte| write!(f, "{byte:02x}"))
    }
}

/// Why the model cannot treat an input.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum ModelError {
    /// The reference integration failed.
    #[error("the reference integration failed: {reason}")]
    Integration {
        /// What the integrator said.
        reason: String,
    },
}

/// The model with its library and parameters.
#[derive(Debug)]
pub struct Model {
    library: Arc<Library>,
}

impl Model {
    /// A model over a library, all parameters at their means.
    pub fn new(library: Arc<Library>) -> Model {
        Model { library }
    }
    /// The library.
    pub fn library(&self) -> &Arc<Library> {
        &self.library
    }
    /// Fingerprint of code version, data, coefficients and arithmetic.
    pub fn fingerprint(&self) -> Fingerprint {
        unimplemented!()
    }
    /// Prepares a substrate.
    pub fn substrate(&self, name: &str, molecule: Molecule, measured: Option<MeasuredPka>) -> Substrate {
        unimplemented!("{name}{molecule:?}{measured:?}")
    }
    /// Prepares a base.
    pub fn base(&self, record: &enolattice_reagents::Base) -> Base {
        Base { record: record.clone() }
    }
    /// Prepares a solvent.
    pub fn solvent(&self, record: &enolattice_reagents::Solvent) -> Solvent {
        Solvent { record: record.clone() }
    }
    /// Prepares an electrophile.
    pub fn electrophile(&self, name: &str, molecule: Molecule) -> Electrophile {
        unimplemented!("{name}{molecule:?}")
    }
    /// Prepares what a substrate and an electrophile make together (products and their acidities).
    pub fn pair(&self, substrate: &Substrate, electrophile: &Electrophile) -> Pair {
        unimplemented!("{substrate:?}{electrophile:?}")
    }
    /// Screens one cell with the fast solver and quadrature.
    pub fn score(&self, cell: &Cell, yield_at_least: f64) -> Score {
        unimplemented!("{cell:?}{yield_at_least}")
    }
    /// Explains one cell: reference integration, every number with its source.
    ///
    /// # Errors
    /// [`ModelError::Integration`] if the reference integrator gives up.
    pub fn explain(&self, cell: &Cell, yield_at_least: f64) -> Result<Explanation, ModelError> {
        unimplemented!("{cell:?}{yield_at_least}")
    }
}
