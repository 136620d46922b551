//! Conjugate addition, and what becomes aromatic by it.

use chematic::core::BondOrder;

use super::Joining;
use crate::groups::CARBON;
use crate::{Acceptor, Bond, StructureError};

impl Joining<'_> {
    pub(super) fn add_to_alkene(
        &mut self,
        alpha: usize,
        acceptor: Acceptor,
    ) -> Result<(), StructureError> {
        let beta = self.atom;
        match acceptor {
            Acceptor::Quinone => return self.add_to_quinone(alpha),
            Acceptor::QuinoneMethide => {
                self.add_to_methide(alpha);
                return Ok(());
            }
            _ => {}
        }
        let order = match self.partner.bond(alpha, beta) {
            Some(Bond::Triple) => BondOrder::Double,
            _ => BondOrder::Single,
        };
        self.reorder(alpha, beta, order);
        self.draft.add_hydrogen(alpha + self.offset);
        Ok(())
    }

    /// The hydroquinone: hydrogen moves from the attacked carbon to oxygen.
    fn add_to_quinone(&mut self, alpha: usize) -> Result<(), StructureError> {
        let beta = self.atom;
        self.reorder(alpha, beta, BondOrder::Single);
        for (ring_carbon, other) in [(beta, alpha), (alpha, beta)] {
            let carbonyl = self
                .partner
                .bound_to(ring_carbon, CARBON, Bond::Single)
                .filter(|atom| *atom != other)
                .find_map(|atom| Some((atom, self.partner.carbonyl_oxygen(atom)?)));
            if let Some((carbon, oxygen)) = carbonyl {
                self.reorder(ring_carbon, carbon, BondOrder::Double);
                self.reduce(carbon, oxygen);
            }
        }
        self.draft.take_hydrogen(beta + self.offset)
    }

    /// The phenol: the double bonds move towards the ring's oxygen.
    fn add_to_methide(&mut self, alpha: usize) {
        let beta = self.atom;
        self.reorder(alpha, beta, BondOrder::Single);
        let around: Vec<usize> = self.partner.bound_to(alpha, CARBON, Bond::Single).collect();
        let carbonyl_beside = |atom: usize| {
            self.partner
                .bound_to(atom, CARBON, Bond::Single)
                .find_map(|carbon| Some((carbon, self.partner.carbonyl_oxygen(carbon)?)))
        };
        let ortho = around
            .iter()
            .find_map(|carbon| Some((*carbon, self.partner.carbonyl_oxygen(*carbon)?)));
        if let Some((carbon, oxygen)) = ortho {
            self.reorder(alpha, carbon, BondOrder::Double);
            self.reduce(carbon, oxygen);
            return;
        }
        let para = around.iter().find_map(|near| {
            let far = self.double_bonded(*near, CARBON)?;
            let (carbon, oxygen) = carbonyl_beside(far)?;
            Some((*near, far, carbon, oxygen))
        });
        if let Some((near, far, carbon, oxygen)) = para {
            self.reorder(alpha, near, BondOrder::Double);
            self.reorder(near, far, BondOrder::Single);
            self.reorder(far, carbon, BondOrder::Double);
            self.reduce(carbon, oxygen);
        }
    }
}
