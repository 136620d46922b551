//! Additions by way of an enamine, which a secondary amine makes of a ketone or aldehyde in small amounts and gets back.

use enolattice_units::math;

use super::Reactions;
use crate::network::Species;

impl Reactions<'_> {
    /// `substrate + amine + electrophile → product + amine` and back, in the ratio of the addition's K.
    pub(super) fn enamine_catalysis(&mut self) {
        let k = self.kinetics;
        for (i, site) in k.cell.substrate.carbon.iter().enumerate() {
            let Some(log10_k) = k.enamine_addition(i, site) else {
                continue;
            };
            let Some(log10_equilibrium) = k.addition_log10_k(site) else {
                continue;
            };
            let (amine, e) = (Species::Base, Species::Electrophile);
            let rate = math::exp10(log10_k + k.nudge.attack);
            self.add(
                Species::Substrate,
                Some(amine),
                &[Species::Product(i), amine],
                rate,
            );
            self.list.last_mut().expect("just added").third = Some(e);
            self.add(
                Species::Product(i),
                Some(amine),
                &[Species::Substrate, e, amine],
                rate / math::exp10(log10_equilibrium),
            );
        }
    }
}
