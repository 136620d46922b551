//! Yields that a laboratory has measured: rows of a file, checked, and the cells they belong to.
//!
//! They are kept with the campaign and shown beside what the model computes; no score depends on
//! them.

mod cells;
mod check;
mod conditions;
mod names;
mod prepared;
mod rows;

pub(crate) use cells::by_cell;
pub(crate) use check::checked;
pub use prepared::{Measured, MeasuredAcidity, MeasuredCell};
pub(crate) use rows::rows;

use enolattice_model::Addition;

use crate::Place;

/// A yield of one cell as a laboratory has measured it.
#[derive(Clone, Debug, PartialEq)]
pub struct MeasuredYield {
    /// Yield on the substrate charged, 0–1.
    pub yield_fraction: f64,
    /// Its standard uncertainty, 0–1; none where the laboratory gives none.
    pub sigma: Option<f64>,
    /// What the laboratory says of it; may be empty.
    pub note: String,
}

/// A measured yield whose row is sound.
#[derive(Clone, Debug)]
pub(crate) struct Measurement {
    of: Pot,
    value: MeasuredYield,
    place: Place,
}

/// What a yield was measured of, every condition filled in. The same pot has the same values here,
/// however its row is written.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
struct Pot {
    /// Canonical SMILES.
    substrate: String,
    /// Canonical SMILES.
    electrophile: String,
    /// Name in the library, as are the next two.
    base: String,
    solvent: String,
    /// `none` is a name.
    additive: String,
    numbers: [Number; 8],
    addition: Addition,
}

/// A condition as it is compared: by its bits, of which zero has one kind only.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
struct Number(u64);

impl Number {
    fn of(value: f64) -> Number {
        Number((value + 0.0).to_bits())
    }

    fn get(self) -> f64 {
        f64::from_bits(self.0)
    }
}

/// The row of a measured yield, for a sentence.
fn row_at(place: &Place) -> String {
    match place.file.as_str() {
        "" => place.field.clone(),
        file => format!("{file}:{}", place.line),
    }
}
