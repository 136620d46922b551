//! The reactions of a cell at one temperature, channel by channel.

mod acceptors;
mod acids;
mod attacks;
mod departures;
mod enamines;
mod esters;
mod losses;

use enolattice_units::math;

use crate::kinetics::Kinetics;
use crate::network::{Reaction, Species};

/// Fastest return of an adduct that the network distinguishes, 1/s: three decades below the vibration of
/// a bond, and faster than any proton transfer at the concentrations of a pot. Beyond it only the ratio
/// of the two rates matters, and the elimination of the solvers would lose its digits.
const FASTEST_RETURN: f64 = 1e9;

/// Rates of an addition and of its return, `k₋ = k·10^log10_return`, slowed together where the return is
/// faster than [`FASTEST_RETURN`].
fn forth_and_back(k: f64, log10_return: f64) -> (f64, f64) {
    let ratio = math::exp10(log10_return);
    let forth = k.min(FASTEST_RETURN / ratio);
    (forth, forth * ratio)
}

/// Collects reactions.
pub(crate) struct Reactions<'a> {
    kinetics: &'a Kinetics<'a>,
    list: Vec<Reaction>,
}

impl<'a> Reactions<'a> {
    /// All reactions. The list has the same steps whatever the nudge; parameters can change their order.
    pub(crate) fn of(kinetics: &'a Kinetics<'a>) -> Vec<Reaction> {
        let mut all = Reactions {
            kinetics,
            list: Vec::with_capacity(96),
        };
        let fast = all.fast_acids();
        let slow = all.slow_acids();
        all.dissolution();
        all.decay();
        all.proton_transfers(&fast, &slow);
        all.attacks_of_carbanions();
        all.attack_of_dianion();
        all.attacks_of_products();
        all.attack_of_heteroatom();
        all.fates_of_electrophile_with_base(&fast);
        all.fates_of_electrophile_alone();
        all.self_condensation();
        all.base_and_substrate();
        all.esters_with_oxygen_bases();
        all.loss_in_beta();
        all.loss_of_water();
        all.closing_rings();
        all.polymerisation(&fast);
        all.addition_to_carbonyl_of_acceptor();
        all.addition_to_eliminated();
        all.enamine_catalysis();
        all.list
    }

    fn add(&mut self, first: Species, second: Option<Species>, products: &[Species], k: f64) {
        let products = std::array::from_fn(|i| products.get(i).copied());
        self.enter(first, second, products, k);
    }

    fn enter(
        &mut self,
        first: Species,
        second: Option<Species>,
        products: [Option<Species>; 3],
        k: f64,
    ) {
        self.list.push(Reaction {
            first,
            second,
            third: None,
            products,
            with: None,
            k,
        });
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

    /// The base decays in the solvent of its own accord.
    fn decay(&mut self) {
        let rate = self.kinetics.decay();
        self.add(Species::Base, None, &[Species::BaseAcid], rate);
        let of_anion = if self.kinetics.solvent_anion_is_lost() {
            rate
        } else {
            0.0
        };
        self.add(Species::SolventAnion, None, &[], of_anion);
    }

    fn loss_of_water(&mut self) {
        let k = self.kinetics;
        for site in 0..k.cell.substrate.carbon.len() {
            let dry = k.cell.pair.by_site.get(site).and_then(Option::as_ref);
            let can_lose = dry.is_some_and(|p| p.dehydrated.is_some() && p.closes.is_none());
            for (base, pka) in k.oxygen_bases() {
                let rate = if can_lose {
                    k.dehydration(site, pka)
                } else {
                    0.0
                };
                let products = [Species::Dehydrated(site), base];
                self.add(Species::Product(site), Some(base), &products, rate);
            }
        }
    }
}
