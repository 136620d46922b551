//! Structures: SMILES in and out, acidic sites, electrophilic groups, products, formula and mass.
//!
//! Nothing here knows of solvents, rates or jobs. Input is capped before it is
//! parsed, so that no text, however hostile, takes long or panics.

mod anion;
mod edit;
mod electrophile;
mod element;
mod environment;
mod groups;
mod molfile;
mod pattern;
mod product;
mod reading;
mod salt;
mod structure;
mod symmetry;
mod valence;

pub use anion::AnionClass;
pub use electrophile::{
    Acceptor, AcylDonor, AlkylGroup, ChalcogenDonor, Cumulene, Donor, ElectrophileKind,
    ElectrophilicGroup, HalogenDonor, ImineNitrogen, LeavingGroup, RingHeteroatom, recognise,
};
pub use element::element_symbol;
pub use environment::{Site, sites};
pub use pattern::Pattern;
pub use product::{
    Product, alcohol_of_ester, alkenes, c_product, carbonyl_product, dehalogenated, dehydrated,
    disproportionated, double_product, glycol_esters, heteroatom_product, o_product, ring_closed,
    self_condensation_product, substitution_product,
};
pub use salt::{CompanionRole, CounterIon, Salt};
pub use structure::{Atom, Bond, Molecule, StructureError};
