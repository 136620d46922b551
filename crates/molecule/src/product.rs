//! Products by graph edit.

use crate::{ElectrophilicGroup, Molecule, StructureError};

/// A product and where the former site is in it.
#[derive(Clone, Debug)]
pub struct Product {
    /// The product, neutral.
    pub molecule: Molecule,
    /// Index of the substrate's reacting atom in the product.
    pub site: usize,
    /// For an aldol adduct: index of the new hydroxyl oxygen.
    pub hydroxyl: Option<usize>,
}

/// The product of one new bond between carbon `site` of the substrate and the electrophile.
pub fn c_product(
    substrate: &Molecule,
    site: usize,
    electrophile: &Molecule,
    group: &ElectrophilicGroup,
) -> Result<Product, StructureError> {
    unimplemented!("{substrate:?}{site}{electrophile:?}{group:?}")
}

/// The product of attack by the oxygen of the enolate formed at carbon `site`; `None` where the
/// anion has no such oxygen (nitriles, sulfones) or the electrophile adds reversibly.
pub fn o_product(
    substrate: &Molecule,
    site: usize,
    electrophile: &Molecule,
    group: &ElectrophilicGroup,
) -> Result<Option<Product>, StructureError> {
    unimplemented!("{substrate:?}{site}{electrophile:?}{group:?}")
}

/// The product of attack by a heteroatom (O–H, N–H or S–H atom `atom`) of the substrate.
pub fn heteroatom_product(
    substrate: &Molecule,
    atom: usize,
    electrophile: &Molecule,
    group: &ElectrophilicGroup,
) -> Result<Product, StructureError> {
    unimplemented!("{substrate:?}{atom}{electrophile:?}{group:?}")
}

/// The α,β-unsaturated product of loss of water from an aldol adduct; `None` without an α hydrogen.
pub fn dehydrated(adduct: &Product) -> Result<Option<Molecule>, StructureError> {
    unimplemented!("{adduct:?}")
}
