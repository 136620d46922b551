//! What hydroxide and alkoxides do to ester groups and to the bond between two acyl groups.

use enolattice_molecule::AnionClass;
use enolattice_reagents::{BaseKind, SolventClass};

use super::Reactions;
use crate::network::Species;

/// An oxygen base and what it leaves where it is used up, or itself where it comes back.
struct OxygenBase {
    species: Species,
    is_hydroxide: bool,
    alcohol: Option<String>,
}

impl Reactions<'_> {
    /// Saponification, exchange of the alcohol and cleavage of 1,3-dicarbonyl compounds, of the substrate and of its products.
    pub(super) fn esters_with_oxygen_bases(&mut self) {
        let k = self.kinetics;
        let substrate = &k.cell.substrate;
        let cleavable = k.cell.pair.by_site.iter().flatten();
        let any = substrate.ester.is_some()
            || substrate.cleavable.is_some()
            || cleavable
                .into_iter()
                .any(|product| product.cleavable.is_some());
        if !any {
            return;
        }
        for base in self.oxygen_bases_that_attack() {
            self.ester_with(&base);
            self.cleavage_by(&base);
        }
    }

    fn oxygen_bases_that_attack(&self) -> Vec<OxygenBase> {
        let k = self.kinetics;
        let (base, solvent) = (&k.cell.base, &k.cell.solvent);
        let mut bases = vec![OxygenBase {
            species: Species::Hydroxide,
            is_hydroxide: true,
            alcohol: None,
        }];
        let is_hydroxide = base.record.kind == BaseKind::Hydroxide;
        if is_hydroxide || base.record.class == AnionClass::Alkoxide {
            bases.push(OxygenBase {
                species: Species::Base,
                is_hydroxide,
                alcohol: base.alcohol.clone(),
            });
        }
        let in_water = solvent.record.class == SolventClass::Water;
        if in_water || solvent.alcohol.is_some() {
            bases.push(OxygenBase {
                species: Species::Lyate,
                is_hydroxide: in_water,
                alcohol: solvent.alcohol.clone(),
            });
        }
        bases
    }

    /// Hydroxide is used up by an ester; an alkoxide of another alcohol comes back.
    fn ester_with(&mut self, base: &OxygenBase) {
        let k = self.kinetics;
        let substrate = &k.cell.substrate;
        let Some(ester) = substrate.ester else {
            return;
        };
        let exchanges = base.alcohol.is_some()
            && substrate.alcohol.is_some()
            && base.alcohol != substrate.alcohol;
        if !base.is_hydroxide && !exchanges {
            return;
        }
        let rate = k.attack_on_ester(ester, base.is_hydroxide);
        self.taken(base, rate, |_| rate);
    }

    /// An oxygen base cleaves a 1,3-diketone or a β-keto ester that has met it as the neutral compound. What acylation
    /// has made is in equilibrium with its parts already.
    fn cleavage_by(&mut self, base: &OxygenBase) {
        let k = self.kinetics;
        let of_substrate = k.cell.substrate.cleavable.map_or(0.0, |a| k.cleavage(a));
        let by_site = &k.cell.pair.by_site;
        let of_product = |i: usize| match by_site.get(i).and_then(Option::as_ref) {
            Some(product) if !k.acylates_reversibly() => product
                .cleavable
                .map_or(0.0, |acceptor| k.cleavage(acceptor)),
            _ => 0.0,
        };
        self.taken(base, of_substrate, of_product);
    }

    fn taken(&mut self, base: &OxygenBase, of_substrate: f64, of_product: impl Fn(usize) -> f64) {
        let k = self.kinetics;
        // an alkoxide comes back as that of the alcohol it has set free, or by way of the new ester
        let back = (!base.is_hydroxide).then_some(base.species);
        let mut add = |what: Species, taken: Species, rate: f64| {
            if rate > 0.0 {
                let products: Vec<_> = [taken].into_iter().chain(back).collect();
                self.add(base.species, Some(what), &products, rate);
            }
        };
        add(Species::Substrate, Species::Taken, of_substrate);
        if !k.is_wet() && base.is_hydroxide {
            return;
        }
        for i in 0..k.cell.substrate.carbon.len() {
            add(Species::Product(i), Species::ProductTaken, of_product(i));
        }
    }
}
