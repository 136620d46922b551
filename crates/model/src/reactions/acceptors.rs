//! What befalls acceptors beside the conjugate addition, polymerisation and addition to the carbonyl group, and what
//! becomes one.

use enolattice_units::math;

use super::Reactions;
use super::acids::Acid;
use crate::network::Species;
use crate::rates;

impl Reactions<'_> {
    /// A base that adds to an acceptor begins a chain, which takes up acceptor until an acid of the pot ends it.
    pub(super) fn polymerisation(&mut self, fast: &[Acid]) {
        let k = self.kinetics;
        let Some(chain) = k.chain() else {
            return;
        };
        let e = Species::Electrophile;
        for acid in fast {
            let nucleophile = match acid.anion {
                Species::Base => k.base_initiator(),
                Species::Lyate => k.lyate_nucleophile(),
                Species::Hydroxide => Some(k.hydroxide_nucleophile()),
                _ => continue,
            };
            if let Some(nucleophile) = nucleophile {
                let rate = k.polymerisation(&chain, &nucleophile, acid.pka);
                self.add(acid.anion, Some(e), &[Species::Spent, acid.anion], rate);
            }
        }
        // the chain that a second addition has begun goes on
        let (over, rate) = (Species::OverReacted, k.polymerisation_from_product(&chain));
        self.add(over, Some(e), &[over, Species::Spent], rate);
    }

    /// What elimination has made of a β-halo carbonyl compound is an acceptor, which gives the same product.
    pub(super) fn addition_to_eliminated(&mut self) {
        let k = self.kinetics;
        let Some(e) = k.cell.electrophile.e_of_alkene else {
            return;
        };
        for (i, site) in k.cell.substrate.carbon.iter().enumerate() {
            let nucleophile = k.substrate_carbanion(site);
            let log10_k = rates::addition(&nucleophile, e, &k.medium, k.values) + k.nudge.attack;
            let products = [Species::Product(i), Species::Base];
            let alkene = Some(Species::Eliminated);
            self.add(
                Species::Carbanion(i),
                alkene,
                &products,
                math::exp10(log10_k),
            );
            self.list.last_mut().expect("just added").with = Some(Species::BaseAcid);
        }
    }

    /// Metal enolates add to the carbonyl group of enones and enals first, and leave it again where it is warm.
    pub(super) fn addition_to_carbonyl_of_acceptor(&mut self) {
        let k = self.kinetics;
        let i = k.cell.substrate.condensing_site();
        let Some((log10_k, log10_return)) = k.addition_to_conjugated_carbonyl(i) else {
            return;
        };
        let (forth, back) =
            super::forth_and_back(math::exp10(log10_k + k.nudge.attack), log10_return);
        let (anion, e) = (Species::Carbanion(i), Species::Electrophile);
        let adduct = Species::CarbonylAdduct;
        self.add(anion, Some(e), &[adduct], forth);
        self.add(adduct, None, &[anion, e], back);
    }
}
