//! What else happens to electrophile and substrate.

use enolattice_molecule::AnionClass;
use enolattice_reagents::BaseKind;
use enolattice_units::math;

use super::Reactions;
use super::acids::Acid;
use crate::carbonyl::Carbonyl;
use crate::kinetics::PKA_ALCOHOL;
use crate::network::Species;
use crate::parameters::P;
use crate::rates;

impl Reactions<'_> {
    pub(super) fn fates_of_electrophile_with_base(&mut self, fast: &[Acid]) {
        let k = self.kinetics;
        let e = Some(Species::Electrophile);
        for acid in fast {
            let (spent, returned, nucleophile) = match acid.anion {
                Species::Base if k.cell.base.record.kind == BaseKind::Hydride => {
                    (Species::Spent, Some(Species::BaseAcid), None)
                }
                Species::Base => (
                    Species::Spent,
                    Some(Species::BaseAcid),
                    Some(k.base_nucleophile()),
                ),
                Species::Lyate => (Species::Solvolysed, None, k.lyate_nucleophile()),
                Species::Hydroxide => (
                    Species::Solvolysed,
                    Some(Species::Water),
                    Some(k.hydroxide_nucleophile()),
                ),
                _ => continue,
            };
            // oxa- and aza-Michael additions and hemiacetals come back and lose nothing for good
            let attack = nucleophile
                .filter(|n| k.spends_electrophile(n.class))
                .and_then(|n| k.attack(&n));
            self.add(acid.anion, e, &[spent], attack.map_or(0.0, math::exp10));
            let eliminated: Vec<_> = [Species::Eliminated].into_iter().chain(returned).collect();
            self.add(
                acid.anion,
                e,
                &eliminated,
                k.elimination(acid.pka + k.lag_of_alkoxide(acid.anion)),
            );
        }
        if let Some(carbanion) = k.solvent_carbanion() {
            let rate = k.attack(&carbanion).map_or(0.0, math::exp10);
            self.add(Species::SolventAnion, e, &[Species::Solvolysed], rate);
        }
        self.add(
            Species::Electrophile,
            None,
            &[Species::Solvolysed],
            k.solvolysis(),
        );
    }

    /// The electrophile's carbanion takes the next molecule of electrophile or falls apart; an aldehyde that has
    /// none disproportionates.
    pub(super) fn fates_of_electrophile_alone(&mut self) {
        let k = self.kinetics;
        let (e, spent) = (Species::Electrophile, Species::Spent);
        // the adduct's alkoxide takes a proton from the acid of a weaker base, and the base is back
        let gives_base_back =
            k.association_with_acid().is_some() && k.pka_base() < k.aldol_hydroxyl();
        let (products, with): (&[Species], _) = if gives_base_back {
            (&[spent, spent, Species::Base], Some(Species::BaseAcid))
        } else {
            (&[spent, spent], None)
        };
        self.add(
            Species::ElectrophileAnion,
            Some(e),
            products,
            k.self_attack_of_electrophile(),
        );
        self.list.last_mut().expect("just added").with = with;
        self.add(
            Species::ElectrophileAnion,
            None,
            &[Species::Eliminated],
            k.loss_to_ketene(),
        );
        let hydroxides = [
            (Species::Hydroxide, true),
            (
                Species::Base,
                k.cell.base.record.kind == BaseKind::Hydroxide,
            ),
        ];
        for (hydroxide, is_there) in hydroxides {
            let rate = if is_there {
                k.disproportionation()
            } else {
                0.0
            };
            self.add(e, Some(e), &[spent, spent], rate);
            self.list.last_mut().expect("just added").third = Some(hydroxide);
        }
    }

    pub(super) fn self_condensation(&mut self) {
        let k = self.kinetics;
        let Some(acceptor) = k.cell.substrate.acceptor else {
            return;
        };
        if k.first_heteroatom().is_some() {
            // the carbanion is a dianion and the substrate an anion: they do not meet
            return;
        }
        let e = k.v(acceptor.electrophilicity());
        let log10_k = k.self_condensation_log10_k(acceptor);
        let claisen = k.claisen();
        self.loss_of_water_from_dimer(acceptor);
        let dimer_anion = if claisen {
            k.pka(PKA_ALCOHOL, AnionClass::Alkoxide)
        } else {
            k.aldol_dimer_acid().0
        };
        // one site makes the dimer, or its return would carry one enolate over into another
        let i = k.cell.substrate.condensing_site();
        let site = &k.cell.substrate.carbon[i];
        let nucleophile = k.substrate_carbanion(site);
        let breakdown = if claisen {
            k.return_from_adduct(&nucleophile, dimer_anion)
        } else {
            0.0
        };
        let rate = math::exp10(rates::addition(&nucleophile, e, &k.medium, k.values) + breakdown);
        let log10_return = dimer_anion - log10_k - k.site_pka(site);
        let (forth, back) = if claisen {
            (rate, rate * math::exp10(log10_return))
        } else {
            super::forth_and_back(rate, log10_return)
        };
        let (anion, substrate) = (Species::Carbanion(i), Species::Substrate);
        self.add(anion, Some(substrate), &[Species::DimerAnion], forth);
        if claisen {
            let alkoxide = k.cell.base.record.kind == BaseKind::Alkoxide;
            let by_base = if alkoxide { back } else { 0.0 };
            let apart = [anion, substrate];
            self.add(Species::Dimer, Some(Species::Base), &apart, by_base);
            self.add(Species::Dimer, Some(Species::Lyate), &apart, back);
        } else {
            self.add(Species::DimerAnion, None, &[anion, substrate], back);
        }
        if acceptor == Carbonyl::Aldehyde {
            let (trimer, lyate) = (Species::Trimer, Species::Lyate);
            let rate = k.aldol_tishchenko();
            self.add(Species::DimerAnion, Some(substrate), &[trimer, lyate], rate);
            let dry = [Species::DryDimer, Species::Hydroxide];
            self.add(Species::DimerAnion, None, &dry, k.expulsion_from_aldolate());
        }
    }

    /// The aldol dimer of an aldehyde or ketone loses water for good.
    pub(super) fn loss_of_water_from_dimer(&mut self, acceptor: Carbonyl) {
        let k = self.kinetics;
        // the new bond takes one hydrogen of the site, the water another
        let can_lose = k.cell.substrate.keeps_hydrogen_on_condensing();
        for (base, pka) in k.oxygen_bases() {
            let rate = if can_lose {
                k.dimer_dehydration(acceptor, pka)
            } else {
                0.0
            };
            let products = [Species::DryDimer, base];
            self.add(Species::Dimer, Some(base), &products, rate);
        }
    }

    pub(super) fn base_and_substrate(&mut self) {
        let k = self.kinetics;
        let record = &k.cell.base.record;
        let acceptor = k.cell.substrate.acceptor;
        let organometal = match record.kind {
            BaseKind::Organolithium => Some(P::ORGANOLITHIUM_ADDITION),
            BaseKind::Grignard => Some(P::GRIGNARD_ADDITION),
            _ => None,
        };
        let at = |log10_k: f64, entropy: P| {
            math::exp10(rates::at_temperature(
                log10_k,
                25.0,
                k.medium.temperature_c,
                k.v(entropy),
            ))
        };
        let exchange = k
            .cell
            .substrate
            .exchangeable_halogen
            .filter(|_| record.kind == BaseKind::Organolithium);
        if let Some(halogen) = exchange {
            let rate = at(k.v(halogen), P::DS_ADDITION);
            let s = Some(Species::Substrate);
            self.add(Species::Base, s, &[Species::Taken], rate);
        }
        if record.kind == BaseKind::Amide && acceptor == Some(Carbonyl::Aldehyde) {
            let rate = at(k.v(P::AMIDE_TO_ALDEHYDE), P::DS_EXCHANGE);
            let s = Some(Species::Substrate);
            self.add(Species::Base, s, &[Species::Taken], rate);
        }
        let is_amide = k.cell.substrate.carbon[0].acid.class == AnionClass::Amide;
        if let Some(addition) = organometal.filter(|_| acceptor.is_some() || is_amide) {
            let of_amide = if acceptor.is_none() {
                k.v(P::AMIDE_ADDITION)
            } else {
                0.0
            };
            let rate = at(k.v(addition) + of_amide, P::DS_ADDITION);
            self.add(
                Species::Base,
                Some(Species::Substrate),
                &[Species::Taken],
                rate,
            );
        }
    }
}
