//! The acids of the pot and the transfers of protons between them.

use enolattice_molecule::AnionClass;
use enolattice_reagents::BaseKind;
use enolattice_units::math;

use super::Reactions;
use crate::kinetics::PKA_WATER;
use crate::network::Species;
use crate::parameters::P;
use crate::rates;

/// Proton transfer between X–H acids, downhill: far faster than anything that matters.
const FAST_TRANSFER: f64 = 1e7;
/// pKa (DMSO) of the C–H between the carbonyls of a Claisen product: ethyl acetoacetate 14.2.
const PKA_CLAISEN: f64 = 14.2;

/// An acid and its anion in the pot.
#[derive(Clone, Copy, Debug)]
pub(super) struct Acid {
    /// The acid, or its constant concentration where it is the solvent.
    pub(super) acid: Result<Species, f64>,
    /// The anion.
    pub(super) anion: Species,
    /// pKa in the medium.
    pub(super) pka: f64,
    /// Class of the anion.
    pub(super) class: AnionClass,
}

impl Reactions<'_> {
    /// Both directions of a proton transfer from an acid to another acid's anion.
    pub(super) fn transfer(&mut self, from: &Acid, to: &Acid, k: f64) {
        let back = k * math::exp10(from.pka - to.pka);
        let (acid_from, factor_from) = species_or_factor(from.acid);
        let (acid_to, factor_to) = species_or_factor(to.acid);
        // to.anion + from.acid → to.acid + from.anion, and back
        let with = |acid: Option<Species>, anion| match acid {
            Some(acid) => [Some(acid), Some(anion), None],
            None => [Some(anion), None, None],
        };
        self.enter(
            to.anion,
            acid_from,
            with(acid_to, from.anion),
            k * factor_from,
        );
        self.enter(
            from.anion,
            acid_to,
            with(acid_from, to.anion),
            back * factor_to,
        );
    }

    pub(super) fn fast_acids(&self) -> Vec<Acid> {
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
            let solvent = Err(k.cell.solvent.record.acid_m);
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
        if let Some((pka, class)) = k.electrophile_heteroatom() {
            acids.push(Acid {
                acid: Ok(Species::Electrophile),
                anion: Species::ElectrophileAnion,
                pka,
                class,
            });
        }
        if let Some((pka, class)) = k.leaving_acid() {
            acids.push(Acid {
                acid: Ok(Species::LeavingAcid),
                anion: Species::Leaving,
                pka,
                class,
            });
        }
        let (pka, class) = if k.claisen() {
            (
                k.pka(PKA_CLAISEN, AnionClass::BetaDicarbonyl),
                AnionClass::BetaDicarbonyl,
            )
        } else {
            k.aldol_dimer_acid()
        };
        acids.push(Acid {
            acid: Ok(Species::Dimer),
            anion: Species::DimerAnion,
            pka,
            class,
        });
        acids
    }

    pub(super) fn slow_acids(&self) -> Vec<Acid> {
        let k = self.kinetics;
        let mut acids = Vec::with_capacity(8);
        for (i, site) in k.cell.substrate.carbon.iter().enumerate() {
            let (acid, anion) = (Ok(Species::Substrate), Species::Carbanion(i));
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
            let acid = Ok(k.first_anion());
            acids.push(Acid {
                acid,
                anion: Species::Dianion,
                pka: k.pka(second, class),
                class,
            });
        }
        if let Some((pka, class)) = k.electrophile_acid() {
            acids.push(Acid {
                acid: Ok(Species::Electrophile),
                anion: Species::ElectrophileAnion,
                pka,
                class,
            });
        }
        if let Some((acid, class)) = &k.cell.solvent.record.acid
            && class.is_carbanion()
        {
            let pka = k.pka(acid.value, *class);
            let solvent = Err(k.cell.solvent.record.acid_m);
            acids.push(Acid {
                acid: solvent,
                anion: Species::SolventAnion,
                pka,
                class: *class,
            });
        }
        acids
    }

    pub(super) fn proton_transfers(&mut self, fast: &[Acid], slow: &[Acid]) {
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
                    _ => 0.0,
                };
                let delta = base.pka - acid.pka;
                let log_k = match k.cell.base.record.kind {
                    BaseKind::Amide if by_base => {
                        rates::exchange_with_amide(delta, weight, &k.medium, k.values)
                    }
                    BaseKind::Organolithium if by_base => {
                        let at_25 = P::ORGANOLITHIUM_EXCHANGE;
                        rates::exchange_with_organometal(at_25, delta, weight, &k.medium, k.values)
                    }
                    BaseKind::Grignard if by_base => {
                        let at_25 = P::GRIGNARD_EXCHANGE;
                        rates::exchange_with_organometal(at_25, delta, weight, &k.medium, k.values)
                    }
                    _ => rates::exchange(delta, acid.class, weight, &k.medium, k.values),
                };
                self.transfer(acid, base, math::exp10(log_k));
            }
        }
        for (i, a) in slow.iter().enumerate() {
            for b in &slow[i + 1..] {
                let slower = if b.class == AnionClass::Nitronate {
                    b.class
                } else {
                    a.class
                };
                let delta = b.pka - a.pka;
                let log_k = rates::exchange_of_carbons(delta, slower, &k.medium, k.values);
                self.transfer(a, b, math::exp10(log_k));
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
