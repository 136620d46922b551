//! What else happens to electrophile and substrate.

use enolattice_molecule::AnionClass;
use enolattice_reagents::BaseKind;
use enolattice_units::math;

use super::Reactions;
use super::acids::Acid;
use crate::carbonyl::Carbonyl;
use crate::network::Species;
use crate::parameters::P;
use crate::rates;

/// pKa (DMSO) of ethanol, the alcohol of an ester: Bordwell 1988 (from memory).
const PKA_ALCOHOL: f64 = 29.8;
/// A tert-alkyl ester is saponified about a hundred times more slowly (common practice).
const TERT_ALKYL_SAPONIFICATION: f64 = -2.0;

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
            self.add(acid.anion, e, &eliminated, k.elimination(acid.pka));
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
            k.aldol_hydroxyl()
        };
        for (i, site) in k.cell.substrate.carbon.iter().enumerate() {
            let nucleophile = k.substrate_carbanion(site);
            let breakdown = if claisen {
                k.return_from_adduct(&nucleophile, dimer_anion)
            } else {
                0.0
            };
            let rate =
                math::exp10(rates::addition(&nucleophile, e, &k.medium, k.values) + breakdown);
            let log10_return = dimer_anion - log10_k - k.site_pka(site);
            let (forth, back) = if claisen {
                (rate, rate * math::exp10(log10_return))
            } else {
                super::forth_and_back(rate, log10_return)
            };
            let anion = Species::Carbanion(i);
            self.add(
                anion,
                Some(Species::Substrate),
                &[Species::DimerAnion],
                forth,
            );
            if claisen {
                let alkoxide = k.cell.base.record.kind == BaseKind::Alkoxide;
                let by_base = if alkoxide { back } else { 0.0 };
                self.add(
                    Species::Dimer,
                    Some(Species::Base),
                    &[anion, Species::Substrate],
                    by_base,
                );
                self.add(
                    Species::Dimer,
                    Some(Species::Lyate),
                    &[anion, Species::Substrate],
                    back,
                );
            } else {
                self.add(
                    Species::DimerAnion,
                    None,
                    &[anion, Species::Substrate],
                    back,
                );
            }
        }
    }

    /// The aldol dimer of an aldehyde or ketone loses water for good.
    pub(super) fn loss_of_water_from_dimer(&mut self, acceptor: Carbonyl) {
        let k = self.kinetics;
        // the new bond takes one hydrogen of the site, the water another
        let can_lose = k.cell.substrate.carbon[0].acid.hydrogens > 1;
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
        if k.claisen() {
            let tert = acceptor == Some(Carbonyl::TertAlkylEster);
            let at_25 = k.v(P::SAPONIFICATION) + if tert { TERT_ALKYL_SAPONIFICATION } else { 0.0 };
            let rate = at(at_25, P::DS_SN2);
            let water = k.cell.solvent.record.class == enolattice_reagents::SolventClass::Water;
            let s = Some(Species::Substrate);
            let by_base = if record.kind == BaseKind::Hydroxide {
                rate
            } else {
                0.0
            };
            self.add(Species::Base, s, &[Species::Taken], by_base);
            self.add(Species::Hydroxide, s, &[Species::Taken], rate);
            self.add(
                Species::Lyate,
                s,
                &[Species::Taken],
                if water { rate } else { 0.0 },
            );
        }
        if let Some(addition) = organometal.filter(|_| acceptor.is_some()) {
            let rate = at(k.v(addition), P::DS_ADDITION);
            self.add(
                Species::Base,
                Some(Species::Substrate),
                &[Species::Taken],
                rate,
            );
        }
    }
}
