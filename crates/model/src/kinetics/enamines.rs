//! Enamines of the substrate with a secondary amine.

use enolattice_molecule::{AnionClass, ElectrophileKind};
use enolattice_reagents::SolventClass;
use enolattice_units::math;

use super::Kinetics;
use crate::parameters::P;
use crate::prepared::CarbonSite;
use crate::rates;

impl Kinetics<'_> {
    /// log10 of the rate constant of `substrate + amine + electrophile`, L²/(mol² s), for the enamine towards a site;
    /// `None` where there is no enamine or where it does not add.
    ///
    /// `k = sN·(N + E) + log K/[H2O]`, lowered where the amine is all enamine, N that of the enamines of
    /// pyrrolidine and less for others.
    pub(crate) fn enamine_addition(&self, i: usize, site: &CarbonSite) -> Option<f64> {
        // water of the air and of the reagents, mol/L, is always there (from memory)
        const LEAST_WATER_M: f64 = 0.02;
        const WATER_M: f64 = 55.0;
        let by_amine = self.cell.base.enamine?;
        let formation = match site.acid.class {
            AnionClass::Aldehyde => self.v(P::ENAMINE_ALDEHYDE),
            AnionClass::Ketone => self.v(P::ENAMINE_KETONE),
            AnionClass::ArylKetone => self.v(P::ENAMINE_KETONE) + self.v(P::ENAMINE_ARYL),
            _ => return None,
        };
        let adds = matches!(
            self.kind()?,
            ElectrophileKind::Michael { .. } | ElectrophileKind::Aldehyde { .. }
        );
        let product = self.cell.pair.by_site.get(i).and_then(Option::as_ref);
        if !adds || product.is_none() || self.first_heteroatom().is_some() {
            return None;
        }
        let (e, _, _) = self.cell.electrophile.e.as_ref()?;
        let crowded = f64::from(site.crowding) * self.v(P::ENAMINE_CROWDED);
        let conditions = &self.cell.conditions;
        let released = conditions.concentration_m * conditions.base_equiv;
        let water_m = match self.cell.solvent.record.class {
            SolventClass::Water => WATER_M,
            _ => (self.cell.solvent.water_m() + released).max(LEAST_WATER_M),
        };
        let each = formation - math::log10(water_m);
        // of the amine no more than all becomes enamine
        let all = math::log10(1.0 + math::exp10(each) * conditions.concentration_m);
        let attack = self.v(P::ENAMINE_S_N) * (self.v(P::ENAMINE_N) + e);
        let at_20 = (attack + by_amine + crowded + each - all).min(rates::FASTEST_CATALYSIS);
        let (to_c, entropy) = (self.medium.temperature_c, self.v(P::DS_ADDITION));
        Some(rates::at_temperature(at_20, 20.0, to_c, entropy))
    }
}
