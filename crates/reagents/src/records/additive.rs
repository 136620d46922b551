//! An additive.

use crate::{Cation, Hazards, Value};

/// What an additive is there for.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum AdditiveKind {
    /// A crown ether or cryptand: takes up the counter-ion.
    Crown,
    /// A quaternary ammonium or phosphonium salt: carries anions into the organic phase.
    PhaseTransfer,
    /// A strong donor (HMPA, DMPU, TMEDA): solvates the counter-ion.
    Donor,
    /// A lithium salt: breaks aggregates of enolates.
    Salt,
}

/// An additive.
#[derive(Clone, Debug)]
pub struct Additive {
    /// The trade's short name.
    pub name: String,
    /// Other names.
    pub synonyms: Vec<String>,
    /// CAS registry number; empty where none is known.
    pub cas: String,
    /// SMILES.
    pub smiles: String,
    /// Molecular formula, Hill order.
    pub formula: String,
    /// Kind.
    pub kind: AdditiveKind,
    /// Share of a counter-ion's contact pairing that one equivalent (on the base) undoes, 0–1.
    pub frees: Vec<(Cation, f64)>,
    /// Standard uncertainty of each share in `frees`; 0 where it is empty.
    pub frees_sigma: f64,
    /// Source of `frees`.
    pub frees_source: String,
    /// log10 factor on the rate of aggregated lithium enolates at one equivalent.
    pub breaks_aggregates: Value,
    /// log10 factor on the solubility of a solid base at one equivalent, in media that dissolve little of it.
    pub dissolves: Value,
    /// Hazard statements.
    pub hazards: Hazards,
    /// When the row was last checked, `YYYY-MM`.
    pub date: String,
    /// Source of the row's facts that carry none of their own.
    pub source: String,
}
