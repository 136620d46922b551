//! Groups that leave a carbanion: those in β (E1cB) and the halide of a ring that closes.

use enolattice_units::math;

use super::Reactions;
use crate::network::Species;

impl Reactions<'_> {
    /// A carbanion of the substrate loses a group in β for good, where it has one.
    pub(super) fn loss_in_beta(&mut self) {
        let k = self.kinetics;
        for (i, site) in k.cell.substrate.carbon.iter().enumerate() {
            if let Some(group) = site.leaves_in_beta {
                let rate = math::exp10(k.departure_in_beta(site, group));
                self.add(Species::Carbanion(i), None, &[Species::Split], rate);
            }
        }
    }

    /// The anion of the product displaces its own halide: epoxides of halohydrins, cyclopropanes of Michael adducts.
    pub(super) fn closing_rings(&mut self) {
        let k = self.kinetics;
        for (i, product) in k.cell.pair.by_site.iter().enumerate() {
            let Some(closure) = product.as_ref().and_then(|product| product.closes) else {
                continue;
            };
            // where another proton of the product goes first, nothing closes
            let rate = k.ring_closure(i, closure).map_or(0.0, math::exp10);
            let anion = Species::ProductAnion(i);
            self.add(anion, None, &[Species::Dehydrated(i)], rate);
        }
    }
}
