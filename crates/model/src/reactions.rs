//! The reactions of a cell at one temperature, channel by channel.

use enolattice_molecule::AnionClass;
use enolattice_reagents::BaseKind;
use enolattice_units::math;

use crate::carbonyl::Carbonyl;
use crate::kinetics::{Bonding, Kinetics, PKA_WATER};
use crate::network::{Reaction, Species};
use crate::parameters::P;
use crate::rates;

/// Proton transfer between X–H acids, downhill: far faster than anything that matters.
const FAST_TRANSFER: f64 = 1e7;
/// pKa (DMSO) of ethanol, the alcohol of an ester: Bordwell 1988 (from memory).
const PKA_ALCOHOL: f64 = 29.8;
/// pKa (DMSO) of the C–H between the carbonyls of a Claisen product: ethyl acetoacetate 14.2.
const PKA_CLAISEN: f64 = 14.2;
/// pKa (DMSO) of the carbanion of an ester or nitrile that a Michael addition leaves (measured
/// acidities of the library: 28 to 31).
const ADDUCT_PKA: f64 = 28.0;
/// A tert-alkyl ester is saponified about a hundred times more slowly (common practice).
const TERT_ALKYL_SAPONIFICATION: f64 = -2.0;

/// An acid and its anion in the pot.
#[derive(Clone, Copy, Debug)]
struct Acid {
    /// The acid, or its constant concentration where it is the solvent.
    acid: Result<Species, f64>,
    /// The anion.
    anion: Species,
    /// pKa in the medium.
    pka: f64,
    /// Class of the anion.
    class: AnionClass,
}

/// Collects reactions.
pub(crate) struct Reactions<'a> {
    kinetics: &'a Kinetics<'a>,
    list: Vec<Reaction>,
}

impl<'a> Reactions<'a> {
    /// All reactions. The list has the same steps whatever the parameters and the temperature.
    pub(crate) fn of(kinetics: &'a Kinetics<'a>) -> Vec<Reaction> {
        let mut all = Reactions {
            kinetics,
            list: Vec::with_capacity(96),
        };
        let fast = all.fast_acids();
        let slow = all.slow_acids();
        all.dissolution();
        all.proton_transfers(&fast, &slow);
        all.attacks_of_carbanions();
        all.attack_of_dianion();
        all.attacks_of_products();
        all.attack_of_heteroatom();
        all.fates_of_electrophile_with_base(&fast);
        all.self_condensation();
        all.base_and_substrate();
        all.loss_of_water();
        all.list
    }

    fn add(&mut self, first: Species, second: Option<Species>, products: &[Species], k: f64) {
        let products = [products.first().copied(), products.get(1).copied()];
        self.list.push(Reaction {
            first,
            second,
            products,
            with: None,
            k,
        });
    }

    /// Both directions of a proton transfer from an acid to another acid's anion.
    fn transfer(&mut self, from: &Acid, to: &Acid, k: f64) {
        let back = k * math::exp10(from.pka - to.pka);
        let (acid_from, factor_from) = species_or_factor(from.acid);
        let (acid_to, factor_to) = species_or_factor(to.acid);
        // to.anion + from.acid → to.acid + from.anion, and back
        let forward: Vec<Species> = acid_to.into_iter().chain([from.anion]).collect();
        self.add(to.anion, acid_from, &forward, k * factor_from);
        let backward: Vec<Species> = acid_from.into_iter().chain([to.anion]).collect();
        self.add(from.anion, acid_to, &backward, back * factor_to);
    }

    fn fast_acids(&self) -> Vec<Acid> {
        let k = self.kinetics;
        let mut acids = vec![Acid {
            acid: Ok(Species::BaseAcid),
            anion: Species::Base,
            pka: k.pka_base(),
            class: k.cell.base.record.class,
        }];
        if let Some((acid, class)) = &k.cell.solvent.record.acid
            && !class.is_carbanion()
        {
            let pka = k.pka(acid.value, *class);
            let solvent = Err(k.cell.solvent.concentration_m());
            acids.push(Acid {
                acid: solvent,
                anion: Species::Lyate,
                pka,
                class: *class,
            });
        }
        acids.push(Acid {
            acid: Ok(Species::Water),
            anion: Species::Hydroxide,
            pka: k.pka(PKA_WATER, AnionClass::Hydroxide),
            class: AnionClass::Hydroxide,
        });
        if let Some(x) = k.first_heteroatom() {
            let pka = k.pka(x.pka_dmso, x.class);
            let (acid, anion) = (Ok(Species::Substrate), Species::HeteroatomAnion);
            acids.push(Acid {
                acid,
                anion,
                pka,
                class: x.class,
            });
        }
        for site in 0..k.cell.substrate.carbon.len() {
            if let Some((pka, class)) = k.product_heteroatom(site) {
                let (acid, anion) = (Ok(Species::Product(site)), Species::ProductAnion(site));
                acids.push(Acid {
                    acid,
                    anion,
                    pka,
                    class,
                });
            }
        }
        let (pka, class) = if k.claisen() {
            (
                k.pka(PKA_CLAISEN, AnionClass::BetaDicarbonyl),
                AnionClass::BetaDicarbonyl,
            )
        } else {
            (k.aldol_hydroxyl(), AnionClass::Alkoxide)
        };
        acids.push(Acid {
            acid: Ok(Species::Dimer),
            anion: Species::DimerAnion,
            pka,
            class,
        });
        acids
    }

    fn slow_acids(&self) -> Vec<Acid> {
        let k = self.kinetics;
        let substrate = if k.first_heteroatom().is_some() {
            Species::HeteroatomAnion
        } else {
            Species::Substrate
        };
        let mut acids = Vec::with_capacity(8);
        for (i, site) in k.cell.substrate.carbon.iter().enumerate() {
            let (acid, anion) = (Ok(substrate), Species::Carbanion(i));
            acids.push(Acid {
                acid,
                anion,
                pka: k.site_pka(site),
                class: site.acid.class,
            });
            if k.product_heteroatom(i).is_none()
                && let Some(next) = k.product_carbon(i)
            {
                let pka = k.pka(next.acid.pka_dmso, next.acid.class);
                let (acid, anion) = (Ok(Species::Product(i)), Species::ProductAnion(i));
                acids.push(Acid {
                    acid,
                    anion,
                    pka,
                    class: next.acid.class,
                });
            }
        }
        if let Some((site, second)) = k.second_site() {
            let class = k.cell.substrate.carbon[site].acid.class;
            let acid = Ok(Species::Carbanion(0));
            acids.push(Acid {
                acid,
                anion: Species::Dianion,
                pka: k.pka(second, class),
                class,
            });
        }
        if let Some((acid, class)) = &k.cell.solvent.record.acid
            && class.is_carbanion()
        {
            let pka = k.pka(acid.value, *class);
            let solvent = Err(k.cell.solvent.concentration_m());
            acids.push(Acid {
                acid: solvent,
                anion: Species::SolventAnion,
                pka,
                class: *class,
            });
        }
        acids
    }

    /// A solid dissolves at a rate that falls with what is left of it: `k_La·(S·n/n₀ − [B])`.
    fn dissolution(&mut self) {
        let record = &self.kinetics.cell.base.record;
        let conditions = &self.kinetics.cell.conditions;
        let charged = conditions.concentration_m * conditions.base_equiv;
        let (out, back) = match self.kinetics.solubility_m() {
            Some(s) => (
                record.dissolution_per_s * s / charged,
                record.dissolution_per_s,
            ),
            None => (0.0, 0.0),
        };
        // the surface of the first crystals bounds the rate even of a base that dissolves well
        self.add(
            Species::Solid,
            None,
            &[Species::Base],
            out.min(record.dissolution_per_s),
        );
        self.add(
            Species::Base,
            None,
            &[Species::Solid],
            if out < record.dissolution_per_s {
                back
            } else {
                0.0
            },
        );
    }

    fn proton_transfers(&mut self, fast: &[Acid], slow: &[Acid]) {
        for (i, a) in fast.iter().enumerate() {
            for b in &fast[i + 1..] {
                let uphill = (a.pka - b.pka).max(0.0);
                self.transfer(a, b, FAST_TRANSFER * math::exp10(-uphill));
            }
        }
        let k = self.kinetics;
        for acid in slow {
            for base in fast {
                if same_molecule(base, acid) {
                    continue;
                }
                let by_base = base.anion == Species::Base;
                let weight = match acid.anion {
                    Species::Carbanion(site) => k.kinetic_weight(site, by_base),
                    _ => 1.0,
                };
                let delta = base.pka - acid.pka;
                let log_k = match k.cell.base.record.kind {
                    BaseKind::Amide if by_base => {
                        rates::exchange_with_amide(delta, &k.medium, k.values)
                    }
                    BaseKind::Organolithium if by_base => {
                        rates::exchange_with_organolithium(delta, &k.medium, k.values)
                    }
                    _ => rates::exchange(delta, acid.class, &k.medium, k.values),
                };
                self.transfer(acid, base, math::exp10(log_k) * weight);
            }
        }
        for (i, a) in slow.iter().enumerate() {
            for b in &slow[i + 1..] {
                if a.anion == Species::Dianion || b.anion == Species::Dianion {
                    continue;
                }
                let slower = if b.class == AnionClass::Nitronate {
                    b.class
                } else {
                    a.class
                };
                let log_k = rates::exchange(b.pka - a.pka, slower, &k.medium, k.values);
                self.transfer(a, b, math::exp10(log_k));
            }
        }
    }

    fn attacks_of_carbanions(&mut self) {
        let k = self.kinetics;
        let nudge = math::exp10(k.nudge.attack);
        let after = if k.first_heteroatom().is_some() {
            Species::HeteroatomAnion
        } else {
            Species::Substrate
        };
        for (i, site) in k.cell.substrate.carbon.iter().enumerate() {
            let nucleophile = k.substrate_carbanion(site);
            let product = k.cell.pair.by_site.get(i).and_then(Option::as_ref);
            let rate = match product {
                Some(_) => k.attack(&nucleophile).map_or(0.0, math::exp10) * nudge,
                None => 0.0,
            };
            let anion = Species::Carbanion(i);
            let e = Some(Species::Electrophile);
            let is_dianion = k.first_heteroatom().is_some();
            let gives = if k.bonding() == Bonding::Substitution && !is_dianion {
                Species::Product(i)
            } else {
                Species::ProductAnion(i)
            };
            // the second charge of a dianion's adduct stays on its oxygen until the work-up
            self.add(anion, e, &[gives], rate);
            let back = match k.addition_log10_k(site) {
                Some(log10_k) if !is_dianion => {
                    rate * math::exp10(k.adduct_pka(i) - log10_k - k.site_pka(site))
                }
                _ => 0.0,
            };
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
            self.add(anion, e, &[after, Species::Eliminated], eliminate);
            let ionise = k.ionisation(k.site_pka(site));
            self.add(anion, e, &[after, Species::Spent], ionise);
        }
    }

    fn attack_of_dianion(&mut self) {
        let k = self.kinetics;
        let Some((site, pka_dmso)) = k.second_site() else {
            return;
        };
        let nucleophile = k.dianion(&k.cell.substrate.carbon[site], pka_dmso);
        let rate = k.attack(&nucleophile).map_or(0.0, math::exp10) * math::exp10(k.nudge.attack);
        let e = Some(Species::Electrophile);
        // an adduct keeps its second charge on oxygen until the work-up: none comes back as base
        self.add(Species::Dianion, e, &[Species::ProductAnion(site)], rate);
    }

    /// The product's anion attacks again, unless it is an alkoxide.
    fn attacks_of_products(&mut self) {
        let k = self.kinetics;
        if k.bonding() == Bonding::Aldol {
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
    fn attack_of_heteroatom(&mut self) {
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

    fn fates_of_electrophile_with_base(&mut self, fast: &[Acid]) {
        let k = self.kinetics;
        let e = Some(Species::Electrophile);
        let substitutes = k.bonding() == Bonding::Substitution;
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
                .filter(|_| substitutes)
                .and_then(|n| k.attack(&n));
            self.add(acid.anion, e, &[spent], attack.map_or(0.0, math::exp10));
            let eliminated: Vec<_> = [Species::Eliminated].into_iter().chain(returned).collect();
            self.add(acid.anion, e, &eliminated, k.elimination(acid.pka));
            let ionised: Vec<_> = [Species::Spent].into_iter().chain(returned).collect();
            self.add(acid.anion, e, &ionised, k.ionisation(acid.pka));
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

    fn self_condensation(&mut self) {
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
        let dimer_anion = if claisen {
            k.pka(PKA_ALCOHOL, AnionClass::Alkoxide)
        } else {
            k.aldol_hydroxyl()
        };
        for (i, site) in k.cell.substrate.carbon.iter().enumerate() {
            let nucleophile = k.substrate_carbanion(site);
            let log_k = rates::addition(&nucleophile, e, &k.medium, k.values);
            let anion = Species::Carbanion(i);
            self.add(
                anion,
                Some(Species::Substrate),
                &[Species::DimerAnion],
                math::exp10(log_k),
            );
            let back = math::exp10(log_k - log10_k - k.site_pka(site) + dimer_anion);
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

    fn base_and_substrate(&mut self) {
        let k = self.kinetics;
        let record = &k.cell.base.record;
        let acceptor = k.cell.substrate.acceptor;
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
        if record.kind == BaseKind::Organolithium && acceptor.is_some() {
            let rate = at(k.v(P::ORGANOLITHIUM_ADDITION), P::DS_ADDITION);
            self.add(
                Species::Base,
                Some(Species::Substrate),
                &[Species::Taken],
                rate,
            );
        }
    }

    fn loss_of_water(&mut self) {
        let k = self.kinetics;
        let rate = k.dehydration();
        for site in 0..k.cell.substrate.carbon.len() {
            let dry = k.cell.pair.by_site.get(site).and_then(Option::as_ref);
            let rate = if dry.is_some_and(|p| p.dehydrated.is_some()) {
                rate
            } else {
                0.0
            };
            for base in [Species::Base, Species::Lyate, Species::Hydroxide] {
                let products = [Species::Dehydrated(site), base];
                self.add(Species::Product(site), Some(base), &products, rate);
            }
        }
    }
}

fn species_or_factor(acid: Result<Species, f64>) -> (Option<Species>, f64) {
    match acid {
        Ok(species) => (Some(species), 1.0),
        Err(concentration_m) => (None, concentration_m),
    }
}

/// Whether base and acid are forms of one molecule and cannot meet as such.
fn same_molecule(base: &Acid, acid: &Acid) -> bool {
    match (base.anion, acid.acid) {
        (Species::HeteroatomAnion, Ok(Species::HeteroatomAnion)) => true,
        (Species::ProductAnion(i), Ok(Species::Product(j))) => i == j,
        _ => false,
    }
}
