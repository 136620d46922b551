//! What the base makes of the substrate.

use enolattice_molecule::{
    AnionClass, Molecule, Product, alcohol_of_ester, carbonyl_product, dehalogenated,
};
use enolattice_reagents::BaseKind;

use super::{Drawing, Way, spent};
use crate::Channel;
use crate::carbonyl::acceptor_atom;
use crate::network::{Reaction, Species};
use crate::prepared::exchangeable_halogen_atom;

const OXYGEN: u8 = 8;

impl Drawing<'_> {
    /// What the base makes of the substrate: carbinol or ketone of an organometal, acid and alcohol of a
    /// saponification, the ester of another alcohol, hydrogen in the place of a halogen. What is left of a cleaved
    /// 1,3-dicarbonyl compound is not drawn.
    pub(super) fn taken_by_base(&mut self) {
        let channel = Some(Channel::BaseAddsToSubstrate);
        let ways = self.ways_of_base();
        if !ways.is_empty() {
            let share = self.at_end(Species::Taken);
            self.add(channel, share, ways);
        }
    }

    /// The ester of another alcohol, whose alkoxide the step brings.
    fn transesterified(&self, alkoxide: Species) -> Option<Molecule> {
        let alcohol = match alkoxide {
            Species::Lyate => self.cell.solvent.alcohol.as_ref()?,
            _ => self.cell.base.alcohol.as_ref()?,
        };
        let alcohol = Molecule::parse(alcohol).ok()?;
        let oxygen = (0..alcohol.atoms().len()).find(|atom| {
            let found = alcohol.atoms()[*atom];
            found.element == OXYGEN && found.hydrogens > 0
        })?;
        let substrate = &self.cell.substrate;
        let carbonyl = acceptor_atom(&substrate.molecule, substrate.ester?)?;
        let ester = carbonyl_product(&alcohol, oxygen, &substrate.molecule, carbonyl).ok()?;
        Some(ester.molecule)
    }

    /// Saponification, and exchange where the oxygen base comes back; each by its rate along the time course. A
    /// cleavage has the same reactants: then nothing is drawn.
    fn ways_at_ester(&self) -> Vec<Way> {
        let substrate = &self.cell.substrate;
        let carbonyl = substrate
            .ester
            .and_then(|ester| acceptor_atom(&substrate.molecule, ester));
        let steps = self.making(Species::Taken);
        let way = |r: &Reaction| {
            let weight = self.extent(r);
            if substrate.cleavable.is_some() {
                return Way::to(weight, None);
            }
            if r.products.contains(&Some(r.first)) {
                return Way::to(weight, self.transesterified(r.first));
            }
            let makes = carbonyl.and_then(|carbonyl| self.saponified(carbonyl));
            Way {
                weight,
                makes: makes.unwrap_or_default(),
            }
        };
        steps.map(way).collect()
    }

    fn ways_of_base(&self) -> Vec<Way> {
        let substrate = &self.cell.substrate;
        let kind = self.cell.base.record.kind;
        let carbonyl = substrate
            .acceptor
            .and_then(|acceptor| acceptor_atom(&substrate.molecule, acceptor));
        let mut ways = Vec::new();
        match kind {
            BaseKind::Organolithium | BaseKind::Grignard => {
                if substrate.acceptor.is_some() {
                    let molecules = carbonyl.and_then(|carbonyl| self.adducts(carbonyl));
                    ways.push(Way::to_one_of(0.0, molecules.unwrap_or_default()));
                } else if let Some(amide) = self.amide_beside_site() {
                    ways.push(Way::to(
                        0.0,
                        self.adduct(amide).map(|ketone| ketone.molecule),
                    ));
                }
                if kind == BaseKind::Organolithium && substrate.exchangeable_halogen.is_some() {
                    let halogen = exchangeable_halogen_atom(&substrate.molecule);
                    let bare = halogen.and_then(|x| dehalogenated(&substrate.molecule, x).ok());
                    ways.push(Way::to(0.0, bare));
                }
            }
            _ => ways = self.ways_at_ester(),
        }
        ways
    }

    /// The carbonyl carbon of an amide that activates the most acidic C–H.
    fn amide_beside_site(&self) -> Option<usize> {
        let substrate = &self.cell.substrate;
        let site = substrate.carbon.first().map(|site| &site.acid)?;
        let mut around = substrate.molecule.neighbours(site.atom).iter();
        let found = around.find(|(atom, _)| spent::is_carbonyl(&substrate.molecule, *atom))?;
        (site.class == AnionClass::Amide).then_some(found.0)
    }

    /// What the base's carbanion makes of a carbonyl group: carbinol, or the ketone of an ester or amide.
    fn adduct(&self, carbonyl: usize) -> Option<Product> {
        let (base, atom) = spent::nucleophile_of_base(&self.cell.base)?;
        carbonyl_product(&base, atom, &self.cell.substrate.molecule, carbonyl).ok()
    }

    /// The same, and of an ester also what a second molecule of base makes of the ketone.
    fn adducts(&self, carbonyl: usize) -> Option<Vec<Molecule>> {
        let first = self.adduct(carbonyl)?;
        if !self.kinetics.claisen() {
            return Some(vec![first.molecule]);
        }
        let around = first.molecule.neighbours(first.site).iter();
        let ketone = around
            .map(|(other, _)| *other)
            .find(|other| spent::is_carbonyl(&first.molecule, *other))?;
        let (base, atom) = spent::nucleophile_of_base(&self.cell.base)?;
        let second = carbonyl_product(&base, atom, &first.molecule, ketone).ok()?;
        Some(vec![first.molecule, second.molecule])
    }

    /// Acid and alcohol of an ester, each with the substrate that ends in it; of a lactone the hydroxy acid.
    fn saponified(&self, carbonyl: usize) -> Option<Vec<(Molecule, Option<f64>)>> {
        let substrate = &self.cell.substrate.molecule;
        let acid = carbonyl_product(&spent::water()?, 0, substrate, carbonyl).ok()?;
        let alcohol = alcohol_of_ester(substrate, carbonyl).ok()?;
        let both = std::iter::once(acid.molecule).chain(alcohol);
        Some(both.map(|molecule| (molecule, Some(1.0))).collect())
    }
}
