//! What one row of each table says.

mod additive;
mod base;
mod solvent;

pub use additive::{Additive, AdditiveKind};
pub use base::{Base, BaseKind, Cation, Decay, Supply};
pub use solvent::{Component, Solvent, SolventClass};

/// A number with its standard uncertainty and source.
#[derive(Clone, Debug, PartialEq)]
pub struct Value {
    /// The number; its unit is in the field's name.
    pub value: f64,
    /// Standard uncertainty, in the same unit.
    pub sigma: f64,
    /// A publication, or `from memory`, or `common practice`.
    pub source: String,
}

/// Hazard statements of a substance; empty with source `unknown` where nothing is known.
///
/// Empty with another source says that none is known to be assigned.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Hazards {
    /// GHS H-codes, e.g. `H225`.
    pub h_codes: Vec<String>,
    /// Where the codes were read; `unknown` where there are none.
    pub source: String,
    /// Date of the source, `YYYY-MM`; empty where unknown.
    pub date: String,
}

impl Hazards {
    /// Whether nothing is known, which is not the same as no hazard.
    pub fn is_unknown(&self) -> bool {
        self.source == "unknown"
    }

    /// Whether a statement is among them; `H360` also finds `H360D`.
    pub fn has(&self, code: &str) -> bool {
        self.h_codes.iter().any(|known| known.starts_with(code))
    }
}

/// An electrophile known by name.
#[derive(Clone, Debug)]
pub struct NamedElectrophile {
    /// The trade's short name.
    pub name: String,
    /// Other names.
    pub synonyms: Vec<String>,
    /// CAS registry number.
    pub cas: String,
    /// SMILES.
    pub smiles: String,
    /// Molecular formula with counter-ions, Hill order.
    pub formula: String,
    /// Boiling point, °C, where known.
    pub boiling_c: Option<f64>,
    /// Hazard statements.
    pub hazards: Hazards,
    /// When the row was last checked, `YYYY-MM`.
    pub date: String,
    /// Source of the row's facts.
    pub source: String,
}

/// A measured acidity in DMSO.
#[derive(Clone, Debug)]
pub struct Acidity {
    /// Canonical SMILES.
    pub canonical: String,
    /// SMILES as in the table; `atom` counts in it.
    pub smiles: String,
    /// Index of the acidic atom in `smiles`, where the table says it.
    pub atom: Option<usize>,
    /// Atomic number of the acidic atom.
    pub element: u8,
    /// pKa in DMSO at 25 °C.
    pub pka_dmso: Value,
    /// Whether the value lies beyond what the solvent lets one measure.
    pub extrapolated: bool,
    /// Group of compounds that share a scaffold, for cross-validation.
    pub scaffold: String,
}

/// A Mayr electrophilicity.
#[derive(Clone, Debug)]
pub struct Electrophilicity {
    /// Canonical SMILES.
    pub canonical: String,
    /// E of log k = sN (N + E) at 20 °C.
    pub e: Value,
}
