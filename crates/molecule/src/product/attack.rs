//! How the partner of a nucleophile takes the new bond.

mod transfer;
mod unsaturated;

use chematic::core::BondOrder;

use super::Product;
use crate::edit::Draft;
use crate::groups::{CARBON, NITROGEN, OXYGEN, SULFUR};
use crate::{Bond, ElectrophileKind, ElectrophilicGroup, Molecule, StructureError};

/// A draft of nucleophile and partner on the way to the product.
struct Joining<'a> {
    draft: Draft,
    /// The attacking atom, in the draft.
    nucleophile: usize,
    partner: &'a Molecule,
    /// What must be added to the partner's atom indices.
    offset: usize,
    /// The attacked atom, in the partner.
    atom: usize,
    hydroxyl: Option<usize>,
    /// Order of the bond that is made.
    order: BondOrder,
}

/// Binds atom `nucleophile` of the draft, which has lost its hydrogen, to the electrophile.
pub(super) fn by_electrophile(
    draft: Draft,
    nucleophile: usize,
    electrophile: &Molecule,
    group: &ElectrophilicGroup,
) -> Result<Product, StructureError> {
    let mut joining = Joining::new(draft, nucleophile, electrophile, group.atom);
    match group.kind {
        ElectrophileKind::Alkyl { .. } => joining.displace_from_behind(group.leaving_atom)?,
        ElectrophileKind::Acyl { .. }
        | ElectrophileKind::Aryl { .. }
        | ElectrophileKind::Silyl { .. } => joining.displace(group.leaving_atom)?,
        ElectrophileKind::Michael {
            alpha, acceptor, ..
        } => joining.add_to_alkene(alpha, acceptor)?,
        ElectrophileKind::Aldehyde { .. } | ElectrophileKind::Ketone { .. } => {
            joining.add_to_carbonyl();
        }
        ElectrophileKind::Imine { .. } => joining.add_across(NITROGEN),
        ElectrophileKind::Cumulene { .. } => joining.add_to_cumulene(),
        ElectrophileKind::Ring { .. } => joining.open_strained_ring(),
        ElectrophileKind::Transfer { donor } => joining.take_over(donor, group.leaving_atom)?,
        ElectrophileKind::Inert { .. } => {
            return Err(StructureError::new(
                format!("{} gives no product", electrophile.smiles()),
                "choose an electrophile that reacts",
            ));
        }
    }
    joining.finish()
}

/// Binds the draft to a carbonyl carbon: by addition, or in the place of `leaving`.
pub(super) fn at_carbonyl(
    draft: Draft,
    nucleophile: usize,
    partner: &Molecule,
    carbon: usize,
    leaving: Option<usize>,
) -> Result<Product, StructureError> {
    let mut joining = Joining::new(draft, nucleophile, partner, carbon);
    match leaving {
        Some(_) => joining.displace(leaving)?,
        None => joining.add_to_carbonyl(),
    }
    joining.finish()
}

impl<'a> Joining<'a> {
    fn new(mut draft: Draft, nucleophile: usize, partner: &'a Molecule, atom: usize) -> Self {
        let offset = draft.append(partner);
        Joining {
            draft,
            nucleophile,
            partner,
            offset,
            atom,
            hydroxyl: None,
            order: BondOrder::Single,
        }
    }

    fn finish(mut self) -> Result<Product, StructureError> {
        let attacked = self.atom + self.offset;
        self.draft.bind(self.nucleophile, attacked, self.order);
        let (molecule, places) = self.draft.finish()?;
        Ok(Product {
            molecule,
            site: places[self.nucleophile].unwrap_or_default(),
            hydroxyl: self.hydroxyl.and_then(|oxygen| places[oxygen]),
        })
    }

    /// The first neighbour of an atom of the partner over a double bond.
    fn double_bonded(&self, atom: usize, element: u8) -> Option<usize> {
        self.partner.bound_to(atom, element, Bond::Double).next()
    }

    fn reorder(&mut self, a: usize, b: usize, order: BondOrder) {
        self.draft.reorder(a + self.offset, b + self.offset, order);
    }

    /// Makes a double bond to the heteroatom single and gives it a hydrogen, or takes its charge.
    fn reduce(&mut self, atom: usize, heteroatom: usize) {
        self.reorder(atom, heteroatom, BondOrder::Single);
        self.saturate(heteroatom);
    }

    /// Gives an atom that has got an electron pair a hydrogen; a cation becomes neutral instead.
    fn saturate(&mut self, atom: usize) {
        if self.partner.atoms()[atom].charge > 0 {
            self.draft.set_charge(atom + self.offset, 0);
        } else {
            self.draft.add_hydrogen(atom + self.offset);
        }
    }

    /// Removes what leaves with all behind it; where a ring leads back, the ring opens.
    fn displace(&mut self, leaving: Option<usize>) -> Result<(), StructureError> {
        let Some(leaving) = leaving else {
            return Ok(());
        };
        if self.partner.bond_in_ring(self.atom, leaving) {
            self.draft
                .cut(self.atom + self.offset, leaving + self.offset);
            self.saturate(leaving);
            return Ok(());
        }
        self.draft
            .remove_branch(self.atom + self.offset, leaving + self.offset)
    }

    fn displace_from_behind(&mut self, leaving: Option<usize>) -> Result<(), StructureError> {
        self.displace(leaving)?;
        if let Some(leaving) = leaving {
            let centre = self.atom + self.offset;
            self.draft
                .invert(centre, leaving + self.offset, self.nucleophile);
        }
        Ok(())
    }

    fn add_to_carbonyl(&mut self) {
        if let Some(oxygen) = self.partner.carbonyl_oxygen(self.atom) {
            self.reduce(self.atom, oxygen);
            self.hydroxyl = Some(oxygen + self.offset);
        }
    }

    /// Adds to the double bond between the attacked atom and one of the element.
    fn add_across(&mut self, element: u8) {
        if let Some(other) = self.double_bonded(self.atom, element) {
            self.reduce(self.atom, other);
        }
    }

    /// The hydrogen goes to nitrogen before carbon, sulfur and oxygen.
    fn add_to_cumulene(&mut self) {
        let end = [NITROGEN, CARBON, SULFUR, OXYGEN]
            .into_iter()
            .find_map(|element| self.double_bonded(self.atom, element));
        if let Some(end) = end {
            self.reduce(self.atom, end);
        }
    }

    fn open_strained_ring(&mut self) {
        if let Some(heteroatom) = self.partner.strained_heteroatom(self.atom) {
            let (centre, leaving) = (self.atom + self.offset, heteroatom + self.offset);
            self.draft.cut(centre, leaving);
            self.draft.add_hydrogen(leaving);
            self.draft.invert(centre, leaving, self.nucleophile);
        }
    }
}
