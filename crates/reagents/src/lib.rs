//! Reagent data with provenance: acidities, bases, solvents, electrophile parameters, hazards.
//!
//! The tables live in `data/` as tab-separated text, with the source of each value in
//! its row. Adding a reagent needs no code; `docs/library.md` says how.

mod additives;
mod bases;
mod composition;
mod conflicts;
mod electrophiles;
mod library;
mod measured;
mod mixture_text;
mod mixtures;
mod names;
mod notation;
mod own;
mod reagent;
mod records;
mod row;
mod shelf;
mod solvents;
mod structures;
mod table;

pub use composition::molar_mass_g_mol;
pub use conflicts::{Conflict, ReplacedValue};
pub use library::{Library, LibraryError};
pub use mixture_text::MixtureError;
pub use own::OwnTable;
pub use reagent::{Reagent, ReagentKind};
pub use records::{
    Acidity, Additive, AdditiveKind, Base, BaseKind, Cation, Component, Decay, Electrophilicity,
    Hazards, NamedElectrophile, Solvent, SolventClass, Supply, Value,
};
