//! Attacks on the electrophile by what the substrate and its products become.

use enolattice_units::math;

use super::Reactions;
use crate::bonding::Bonding;
use crate::network::Species;
use crate::prepared::CarbonSite;

/// pKa (DMSO) of the carbanion of an ester or nitrile that a Michael addition leaves (measured
/// acidities of the library: 28 to 31).
const ADDUCT_PKA: f64 = 28.0;

impl Reactions<'_> {
    pub(super) fn attacks_of_carbanions(&mut self) {
        let k = self.kinetics;
        let nudge = math::exp10(k.nudge.attack);
        for (i, site) in k.cell.substrate.carbon.iter().enumerate() {
            let nucleophile = k.substrate_carbanion(site);
            let product = k.cell.pair.by_site.get(i).and_then(Option::as_ref);
            let rate = match product {
                Some(_) => k.attack(&nucleophile).map_or(0.0, math::exp10) * nudge,
                None => 0.0,
            };
            let (rate, back) = match k.addition_log10_k(site) {
                Some(log10_k) if !k.acylates_reversibly() => {
                    super::forth_and_back(rate, k.adduct_pka(i) - log10_k - k.site_pka(site))
                }
                _ => (rate, 0.0),
            };
            let anion = Species::Carbanion(i);
            let e = Some(Species::Electrophile);
            let gives = if k.bonding() == Bonding::Substitution {
                Species::Product(i)
            } else {
                Species::ProductAnion(i)
            };
            match k.leaving_acid() {
                Some(_) => self.add(anion, e, &[gives, Species::Leaving], rate),
                None => self.add(anion, e, &[gives], rate),
            }
            self.return_of_acyl_group(i, site, rate);
            self.add(
                Species::ProductAnion(i),
                None,
                &[anion, Species::Electrophile],
                back,
            );
            let ratio = match product {
                Some(p) if p.has_oxygen_attack => k.oxygen_over_carbon(site.acid.class),
                _ => None,
            };
            let oxygen = ratio.map_or(0.0, |ratio| rate * math::exp10(ratio));
            self.add(anion, e, &[Species::OxygenProduct], oxygen);
            let eliminate = k.elimination_by_carbanion(site);
            self.add(
                anion,
                e,
                &[Species::Substrate, Species::Eliminated],
                eliminate,
            );
        }
    }

    /// The alkoxide that left an ester brings the acyl group back from the product to the ester.
    pub(super) fn return_of_acyl_group(&mut self, i: usize, site: &CarbonSite, rate: f64) {
        let k = self.kinetics;
        let (true, Some((leaving_pka, _))) = (k.acylates_reversibly(), k.leaving_acid()) else {
            return;
        };
        let back = match k.addition_log10_k(site) {
            Some(log10_k) => rate * math::exp10(leaving_pka - log10_k - k.site_pka(site)),
            _ => 0.0,
        };
        self.add(
            Species::Product(i),
            Some(Species::Leaving),
            &[Species::Carbanion(i), Species::Electrophile],
            back,
        );
    }

    pub(super) fn attack_of_dianion(&mut self) {
        let k = self.kinetics;
        let Some((site, pka_dmso)) = k.second_site() else {
            return;
        };
        let nucleophile = k.dianion(&k.cell.substrate.carbon[site], pka_dmso);
        let rate = k.attack(&nucleophile).map_or(0.0, math::exp10) * math::exp10(k.nudge.attack);
        let e = Some(Species::Electrophile);
        // an adduct keeps its second charge until the work-up: none comes back as base
        let product = Species::ProductAnion(site);
        match k.leaving_acid() {
            Some(_) => self.add(Species::Dianion, e, &[product, Species::Leaving], rate),
            None => self.add(Species::Dianion, e, &[product], rate),
        }
    }

    /// The product's anion attacks again, unless it is that of an adduct's heteroatom or the attack would come
    /// back, as that of a 1,3-dicarbonyl anion on an ester does.
    pub(super) fn attacks_of_products(&mut self) {
        let k = self.kinetics;
        if k.bonding() == Bonding::Adduct || k.acylates_reversibly() {
            return;
        }
        for site in 0..k.cell.substrate.carbon.len() {
            let nucleophile = match (k.product_heteroatom(site), k.product_carbon(site)) {
                (Some(_), _) => k.heteroatom_nucleophile(),
                (None, Some(next)) => Some(k.carbanion(next, next.acid.pka_dmso)),
                (None, None) => None,
            };
            let is_heteroatom = k.product_heteroatom(site).is_some();
            let attacks = !is_heteroatom || k.bonding() == Bonding::Substitution;
            let Some(nucleophile) = nucleophile.filter(|_| attacks) else {
                continue;
            };
            let rate =
                k.attack(&nucleophile).map_or(0.0, math::exp10) * math::exp10(k.nudge.attack);
            let anion = Species::ProductAnion(site);
            let e = Some(Species::Electrophile);
            // the carbanion of a double adduct takes a proton from the acid of a base that is weak
            // enough to leave it one; a strong base does not come back
            if k.bonding() == Bonding::Michael && k.pka_base() < ADDUCT_PKA {
                self.add(anion, e, &[Species::OverReacted, Species::Base], rate);
                self.list.last_mut().expect("just added").with = Some(Species::BaseAcid);
            } else {
                self.add(anion, e, &[Species::OverReacted], rate);
            }
        }
    }

    /// Additions of heteroatoms to carbonyls and acceptors come back easily: left out.
    pub(super) fn attack_of_heteroatom(&mut self) {
        let k = self.kinetics;
        if k.bonding() != Bonding::Substitution {
            return;
        }
        if let Some(nucleophile) = k.heteroatom_nucleophile() {
            let rate = k.attack(&nucleophile).map_or(0.0, math::exp10);
            let e = Some(Species::Electrophile);
            self.add(
                Species::HeteroatomAnion,
                e,
                &[Species::HeteroatomProduct],
                rate,
            );
        }
    }
}
