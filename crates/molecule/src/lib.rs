//! Structures: SMILES in and out, acidic sites, electrophilic groups, products, formula and mass.
//!
//! Nothing here knows of solvents, rates or jobs. Input is capped before it is
//! parsed, so that no text, however hostile, takes long or panics.

mod anion;
mod edit;
mod electrophile;
mod environment;
mod groups;
mod product;
mod reading;
mod structure;
mod symmetry;
mod valence;

pub use anion::AnionClass;
pub use electrophile::{
    Acceptor, AlkylGroup, ElectrophileKind, ElectrophilicGroup, LeavingGroup, recognise,
};
pub use environment::{Site, sites};
pub use product::{
    Product, c_product, dehydrated, heteroatom_product, o_product, self_condensation_product,
};
pub use structure::{Atom, Bond, Molecule, StructureError};
