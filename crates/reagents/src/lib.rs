//! Reagent data with provenance: acidities, bases, solvents, electrophile parameters, hazards.
//!
//! The tables live in `data/` as tab-separated text, with the source of each value in
//! its row. Adding a reagent needs no code; `docs/library.md` says how.

mod bases;
mod electrophiles;
mod library;
mod measured;
mod names;
mod reagent;
mod records;
mod solvents;
mod structures;
mod table;

pub use library::{Library, LibraryError};
pub use reagent::{Reagent, ReagentKind};
pub use records::{
    Acidity, Base, BaseKind, Cation, Electrophilicity, Hazards, NamedElectrophile, Solvent,
    SolventClass, Value,
};
