//! Classical designs over the levels of a few axes.
//!
//! A run is a tuple of levels, one an axis, counted from 0. Designs that choose among cells take a
//! list of candidates, so that only cells that are allowed are chosen, and give their indices.

mod d_optimal;
mod error;
mod factorial;
mod linear;
mod plackett_burman;
mod response;
mod sobol;
mod space_filling;

pub use d_optimal::{DOptimalOptions, d_optimal};
pub use error::DesignError;
pub use factorial::{Fraction, full_factorial, two_level_fraction, two_level_fraction_by};
pub use plackett_burman::plackett_burman;
pub use response::{Factor, Quality, ResponseModel};
pub use sobol::{MOST_SOBOL_AXES, sobol_candidates, sobol_cells, sobol_point};
pub use space_filling::{SpaceFilling, space_filling};

use serde::{Deserialize, Serialize};

/// Runs chosen from a list of candidates.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ChosenDesign {
    /// Indices of the candidates, ascending; one that is run twice is there twice.
    pub candidates: Vec<usize>,
    /// How well the runs determine the model.
    pub quality: Quality,
}
