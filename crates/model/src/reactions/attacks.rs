//! Attacks on the electrophile by what the substrate and its products become.

use enolattice_molecule::AnionClass;
use enolattice_units::math;

use super::Reactions;
use crate::bonding::Bonding;
use crate::network::Species;
use crate::prepared::CarbonSite;

/// pKa (DMSO) of the carbanion of an ester or nitrile that a Michael addition leaves (measured
/// acidities of the library: 28 to 31).
const ADDUCT_PKA: f64 = 28.0;

/// Rate at which a proton is handed over within a hydrogen-bonded pair, 1/s (Eigen, Angew. Chem. Int. Ed. Engl. 1964,
/// 3, 1, from memory).
const HANDED_OVER_PER_S: f64 = 1e11;

/// Rate at which the alkoxide of an adduct takes the more acidic hydrogen of its own carbon, by way of others in the
/// pot, 1/s (from memory).
const TO_CARBON_PER_S: f64 = 1e6;

impl Reactions<'_> {
    pub(super) fn attacks_of_carbanions(&mut self) {
        let k = self.kinetics;
        let nudge = math::exp10(k.nudge.attack);
        for (i, site) in k.cell.substrate.carbon.iter().enumerate() {
            let nucleophile = k.substrate_carbanion(site);
            let product = k.cell.pair.by_site.get(i).and_then(Option::as_ref);
            let rate = match product {
                Some(_) => {
                    let room = k.room_of_cyano(site);
                    k.attack(&nucleophile).map_or(0.0, math::exp10) * nudge * room
                }
                None => 0.0,
            };
            self.assisted_addition(i, site, rate);
            let rate = rate * (1.0 - self.protonated_in_the_pair());
            let (rate, back) = match k.addition_log10_k(site) {
                Some(log10_k) if !k.acylates_reversibly() => {
                    let falls_apart = k.addition_pka(i) - log10_k - k.site_pka(site);
                    let carbanion_is_first = k.adduct_pka(i) < k.addition_pka(i);
                    let rate = if k.bonding() == Bonding::Adduct && carbanion_is_first {
                        let gone = rate * math::exp10(falls_apart);
                        rate * TO_CARBON_PER_S / (TO_CARBON_PER_S + gone)
                    } else {
                        rate
                    };
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
                Some(p) if p.has_oxygen_attack => k.oxygen_over_carbon(site),
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

    /// An addition in which the solvent or the acid of the base hands its proton over as the bond forms, so that no
    /// alkoxide is ever free: how nitroalkanes and 1,3-dicarbonyl compounds add to aldehydes with weak bases.
    ///
    /// Of the adducts that form at `rate` those are kept that get a proton before they fall apart. The enolate that a
    /// Michael addition leaves in a pair with an onium ion gets its proton before it meets another acceptor.
    fn assisted_addition(&mut self, i: usize, site: &CarbonSite, rate: f64) {
        let k = self.kinetics;
        let in_pairs = self.protonated_in_the_pair() > 0.0;
        let adduct = match k.addition_log10_k(site) {
            Some(log10_k) if in_pairs || k.bonding() == Bonding::Adduct => {
                Some((k.addition_pka(i), log10_k))
            }
            _ => None,
        };
        let (adduct_pka, log10_k) = adduct.unwrap_or((0.0, 0.0));
        let rate = if adduct.is_some() { rate } else { 0.0 };
        // an iminium ion leaves an amine, which holds
        let by_hydroxyl = 1.0 - k.iminium_share();
        let falls_apart = by_hydroxyl * rate * math::exp10(adduct_pka - log10_k - k.site_pka(site));
        let kept = |donor_pka: f64| {
            let taken = HANDED_OVER_PER_S * math::exp10((adduct_pka - donor_pka).min(0.0));
            rate * taken / (taken + falls_apart)
        };
        let (anion, e) = (Species::Carbanion(i), Some(Species::Electrophile));
        let product = Species::Product(i);

        let (by_solvent, back) = match k.solvent_donor() {
            Some((pka, acid_m)) => {
                let forth = kept(pka);
                let log10_equilibrium = log10_k + k.site_pka(site) - pka;
                (forth, forth / (math::exp10(log10_equilibrium) * acid_m))
            }
            None => (0.0, 0.0),
        };
        self.add(anion, e, &[product, Species::Lyate], by_solvent);
        self.add(
            product,
            Some(Species::Lyate),
            &[anion, Species::Electrophile],
            back,
        );

        let (by_acid, back) = match k.association_with_acid() {
            Some(association) => {
                let forth = kept(k.pka_base()) / (1.0 / association + k.acid_of_base_m());
                let log10_equilibrium = log10_k + k.site_pka(site) - k.pka_base();
                (forth, forth / math::exp10(log10_equilibrium))
            }
            None => (0.0, 0.0),
        };
        self.add(anion, e, &[product, Species::Base], by_acid);
        self.list.last_mut().expect("just added").third = Some(Species::BaseAcid);
        let apart = [anion, Species::Electrophile, Species::BaseAcid];
        self.add(product, Some(Species::Base), &apart, back);
    }

    /// Share of the carbanions that are paired with an onium ion which hands its proton to the product of a Michael
    /// addition; none with other counter-ions and in other additions.
    fn protonated_in_the_pair(&self) -> f64 {
        let k = self.kinetics;
        match k.association_with_acid() {
            Some(association)
                if k.bonding() == Bonding::Michael
                    && k.cell.base.record.class == AnionClass::Neutral =>
            {
                let acid_m = k.acid_of_base_m();
                acid_m / (1.0 / association + acid_m)
            }
            _ => 0.0,
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
            let attack = |nucleophile| k.attack(&nucleophile).map_or(0.0, math::exp10);
            let of_carbon = |next: &CarbonSite| {
                attack(k.carbanion(next, next.acid.pka_dmso)) * k.room_of_cyano(next)
            };
            let by_anion = match k.product_heteroatom(site) {
                Some(_) if k.bonding() != Bonding::Substitution => continue,
                Some(_) => k.heteroatom_nucleophile().map(attack),
                None => k
                    .product_carbon(site)
                    .map(|_| k.over_sites_of_product(site, of_carbon)),
            };
            let Some(by_anion) = by_anion else {
                continue;
            };
            let rate = by_anion * math::exp10(k.nudge.attack);
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
