//! Atoms and small groups that are handed over.

use chematic::core::BondOrder;

use super::Joining;
use crate::groups::{CARBON, NITROGEN, OXYGEN};
use crate::{Bond, Donor, StructureError};

impl Joining<'_> {
    pub(super) fn take_over(
        &mut self,
        donor: Donor,
        leaving: Option<usize>,
    ) -> Result<(), StructureError> {
        match donor {
            Donor::Halogen(..) | Donor::Chalcogen(..) => self.displace(leaving),
            Donor::Azo => {
                self.add_across(NITROGEN);
                Ok(())
            }
            Donor::Nitroso => {
                self.add_across(OXYGEN);
                Ok(())
            }
            Donor::Nitrite => {
                self.displace(leaving)?;
                self.nitrosate()
            }
            Donor::Diazonium => self.couple(),
            Donor::SulfonylAzide => self.make_diazo(),
            Donor::Oxaziridine => {
                let oxygen = self.atom + self.offset;
                self.draft.keep_only(oxygen, self.offset);
                self.draft.add_hydrogen(oxygen);
                Ok(())
            }
        }
    }

    /// Whether the attacking atom is carbon with a hydrogen left, which then takes a double bond.
    fn has_another_hydrogen(&self) -> bool {
        self.draft.element(self.nucleophile) == CARBON && self.draft.hydrogens(self.nucleophile) > 0
    }

    /// The oxime where the site has another hydrogen, else the nitroso compound.
    fn nitrosate(&mut self) -> Result<(), StructureError> {
        if self.has_another_hydrogen() {
            self.draft.take_hydrogen(self.nucleophile)?;
            self.order = BondOrder::Double;
            self.add_across(OXYGEN);
        }
        Ok(())
    }

    /// The hydrazone where the site has another hydrogen, else the azo compound.
    fn couple(&mut self) -> Result<(), StructureError> {
        let bound = self.partner.bound_to(self.atom, NITROGEN, Bond::Triple);
        let Some(cation) = bound.into_iter().next() else {
            return Ok(());
        };
        self.reorder(self.atom, cation, BondOrder::Double);
        self.draft.set_charge(cation + self.offset, 0);
        if self.has_another_hydrogen() {
            self.draft.take_hydrogen(self.nucleophile)?;
            self.order = BondOrder::Double;
            self.reorder(self.atom, cation, BondOrder::Single);
            self.draft.add_hydrogen(cation + self.offset);
        }
        Ok(())
    }

    /// The diazo compound; the sulfonamide leaves.
    fn make_diazo(&mut self) -> Result<(), StructureError> {
        if !self.has_another_hydrogen() {
            return Err(StructureError::new(
                "a sulfonyl azide makes a diazo compound of carbon with two hydrogens only",
                "choose a substrate with CH2 at the site",
            ));
        }
        self.draft.take_hydrogen(self.nucleophile)?;
        self.order = BondOrder::Double;
        let Some(middle) = self.double_bonded(self.atom, NITROGEN) else {
            return Ok(());
        };
        let leaving = self
            .partner
            .neighbours(middle)
            .iter()
            .map(|(other, _)| *other)
            .find(|other| *other != self.atom);
        if let Some(leaving) = leaving {
            self.draft
                .remove_branch(middle + self.offset, leaving + self.offset)?;
        }
        self.draft.set_charge(self.atom + self.offset, 1);
        self.draft.set_charge(middle + self.offset, -1);
        Ok(())
    }
}
