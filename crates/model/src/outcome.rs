//! From the amounts at the end to yield, selectivity and losses.

use enolattice_molecule::AnionClass;

use crate::bonding::Bonding;
use crate::kinetics::Kinetics;
use crate::network::{Amounts, Network, Species};
use crate::prepared::SITES;
use crate::{Cell, Channel};

/// A share of the substrate below which a loss is not named.
const LEAST_LOSS: f64 = 5e-4;

/// Working rules by which unreacted substrate is given to a reason; they move no yield (common practice).
///
/// Product below this share cannot have quenched the enolate.
const QUENCHING_PRODUCT: f64 = 0.02;
/// A dianion below this share means that the X–H took the base.
const DIANION_FORMED: f64 = 0.5;
/// Carbanion above this share means that the base was strong enough.
const ENOLATE_FORMED: f64 = 0.3;
/// Electrophile below this share is used up.
const ELECTROPHILE_GONE: f64 = 0.05;
/// Base undissolved above this share is the reason.
const UNDISSOLVED: f64 = 0.5;
/// Charge on the solvent above this share of the base levels it.
const ON_SOLVENT: f64 = 0.4;
/// Base left below this share was levelled.
const BASE_LEFT: f64 = 0.1;
/// Electrophile left below this share is nearly used up; then a fate that took [`FATE_COUNTS`] is the reason.
const ELECTROPHILE_SHORT: f64 = 0.2;
/// Share of the electrophile that a fate must have taken to count where little is left.
const FATE_COUNTS: f64 = 0.1;
/// Share of the electrophile that makes a fate the reason whatever is left.
const FATE_DOMINATES: f64 = 0.4;

/// What became of the substrate, as shares of what was charged.
#[derive(Clone, Debug)]
pub(crate) struct Outcome {
    /// Site of the wanted product.
    pub(crate) site: usize,
    /// Wanted product.
    pub(crate) product: f64,
    /// Wanted product per substrate converted.
    pub(crate) selectivity: f64,
    /// Losses, largest first.
    pub(crate) losses: Vec<(Channel, f64)>,
}

impl Outcome {
    /// Reads the end of a network. The wanted product is that at the site with most product by
    /// carbon; where there is none, at the most acidic site.
    pub(crate) fn read(
        cell: &Cell,
        kinetics: &Kinetics<'_>,
        network: &Network,
        end: &Amounts,
        formed: &Amounts,
    ) -> Outcome {
        let charged = network.charged[0];
        let by_site: [f64; SITES] =
            std::array::from_fn(|site| end.product(site).max(0.0) / charged);
        let site = (0..SITES).fold(
            0,
            |best, i| if by_site[i] > by_site[best] { i } else { best },
        );
        let product = by_site[site].clamp(0.0, 1.0);
        let mut losses = made_of_losses(end, charged, site).to_vec();
        let converted = product + losses.iter().map(|loss| loss.1.max(0.0)).sum::<f64>();
        let unreacted = Unreacted {
            cell,
            kinetics,
            network,
            end,
            formed,
        };
        for (channel, share) in unreacted.losses(by_site[site]) {
            match losses.iter_mut().find(|loss| loss.0 == channel) {
                Some(loss) => loss.1 += share,
                None => losses.push((channel, share)),
            }
        }
        losses.retain(|loss| loss.1 > LEAST_LOSS);
        losses.sort_by(|a, b| b.1.total_cmp(&a.1).then(a.0.cmp(&b.0)));
        let selectivity = if converted > 1e-9 {
            (product / converted).clamp(0.0, 1.0)
        } else {
            0.0
        };
        Outcome {
            site,
            product,
            selectivity,
            losses,
        }
    }
}

/// Substrate in what each loss has made of it, as shares of what was charged; `site` is that of the wanted product.
pub(crate) fn made_of_losses(amounts: &Amounts, charged: f64, site: usize) -> [(Channel, f64); 7] {
    let elsewhere = (0..SITES)
        .filter(|i| *i != site)
        .map(|i| amounts.product(i).max(0.0))
        .sum::<f64>();
    let taken = amounts.of(Species::Taken) + amounts.of(Species::ProductTaken);
    [
        (
            Channel::OtherSite,
            elsewhere + amounts.of(Species::CarbonylAdduct),
        ),
        (Channel::OAttack, amounts.of(Species::OxygenProduct)),
        (
            Channel::HeteroatomAttack,
            amounts.of(Species::HeteroatomProduct),
        ),
        (Channel::OverAlkylation, amounts.of(Species::OverReacted)),
        (Channel::SelfCondensation, amounts.self_condensed()),
        (Channel::BaseAddsToSubstrate, taken),
        (Channel::Elimination, amounts.of(Species::Split)),
    ]
    .map(|(channel, amount)| (channel, amount / charged))
}

/// Substrate that has not reacted, and why.
struct Unreacted<'a> {
    cell: &'a Cell,
    kinetics: &'a Kinetics<'a>,
    network: &'a Network,
    end: &'a Amounts,
    formed: &'a Amounts,
}

impl Unreacted<'_> {
    /// Shares what is left among its reasons, in the order of the vocabulary: too little reagent,
    /// the product as acid, the base, the electrophile, reversibility, time.
    fn losses(&self, product: f64) -> Vec<(Channel, f64)> {
        let mut left = (self.end.unreacted() / self.network.charged[0]).clamp(0.0, 1.0);
        let mut losses = Vec::with_capacity(3);
        let mut give = |channel: Channel, share: f64, left: &mut f64| {
            let share = share.min(*left);
            if share > 0.0 {
                losses.push((channel, share));
                *left -= share;
            }
        };
        give(Channel::TooLittleReagent, self.missing_reagent(), &mut left);
        if product > QUENCHING_PRODUCT {
            give(Channel::ProductQuenchesEnolate, self.quenched(), &mut left);
        }
        let reason = self
            .base()
            .or_else(|| self.electrophile())
            .or_else(|| self.reversible())
            .unwrap_or(Channel::SlowAttack);
        let rest = left;
        give(reason, rest, &mut left);
        losses
    }

    /// Share of the substrate that the electrophile or the base charged cannot serve.
    fn missing_reagent(&self) -> f64 {
        let [substrate, base, electrophile] = self.network.charged;
        let regenerated = self.kinetics.regenerates_base();
        let by_electrophile = 1.0 - electrophile / substrate;
        let by_base = if regenerated {
            0.0
        } else {
            1.0 - base / substrate
        };
        by_electrophile.max(by_base).max(0.0)
    }

    /// Share of the base that sits on the product's carbon while substrate is left.
    fn quenched(&self) -> f64 {
        if self.kinetics.bonding() != Bonding::Substitution {
            return 0.0;
        }
        let on_product = self.end.over_sites(Species::ProductAnion);
        let free = self.end.of(Species::Base) + self.end.carbanions();
        if free < on_product {
            on_product / self.network.charged[0]
        } else {
            0.0
        }
    }

    /// A reason that lies with the base, if the enolate never formed well and that is what held the cell up.
    fn base(&self) -> Option<Channel> {
        let charged = self.network.charged[0];
        if self.kinetics.first_heteroatom().is_some() {
            let on_carbon = self.formed.carbanions() / charged;
            if on_carbon < DIANION_FORMED {
                return Some(Channel::CompetingAcid);
            }
        }
        let enolate = self.end.carbanions().max(self.formed.carbanions()) / charged;
        let electrophile_left =
            self.end.of(Species::Electrophile) / self.network.charged[2].max(1e-12);
        if enolate > ENOLATE_FORMED
            || electrophile_left < ELECTROPHILE_GONE && self.network.charged[2] >= charged
        {
            return self.levelled_early();
        }
        if self.would_be_slow_anyway() {
            return None;
        }
        let undissolved = self.end.of(Species::Solid) / self.network.charged[1].max(1e-12);
        if undissolved > UNDISSOLVED {
            return Some(Channel::InsolubleBase);
        }
        self.levelled_early().or(Some(Channel::WeakBase))
    }

    /// Whether the solvent's anion holds most of the base's charge.
    fn levelled_early(&self) -> Option<Channel> {
        let base = self.cell.base.record.pka_dmso.value;
        let (acid, class) = self.cell.solvent.record.acid.as_ref()?;
        let stronger = self.kinetics.pka(acid.value, *class) + 1.0 < self.kinetics.pka_base();
        let enolate = self.formed.carbanions() / self.network.charged[0];
        let on_solvent = self.formed.of(Species::SolventAnion) + self.formed.of(Species::Lyate);
        let most = on_solvent > ON_SOLVENT * self.network.charged[1];
        let own_lyate = *class == AnionClass::Alkoxide && (acid.value - base).abs() < 0.5;
        (stronger
            && !own_lyate
            && enolate < ENOLATE_FORMED
            && (most || self.formed.of(Species::Base) < BASE_LEFT * self.network.charged[1]))
            .then_some(Channel::SolventLevelsBase)
    }

    /// Whether even the fully ionised substrate would have been too slow for the time given.
    fn would_be_slow_anyway(&self) -> bool {
        let time: f64 = self
            .network
            .stages
            .iter()
            .map(|stage| stage.duration_s)
            .sum();
        let k: f64 = self
            .network
            .reactions
            .iter()
            .filter(|r| {
                matches!(r.first, Species::Carbanion(_)) && r.second == Some(Species::Electrophile)
            })
            .map(|r| r.k)
            .fold(0.0, f64::max);
        k * self.network.charged[2] * time < 1.0
    }

    /// What befell the electrophile, if it is used up and little of it is in the product.
    fn electrophile(&self) -> Option<Channel> {
        let charged = self.network.charged[2];
        let left = self.end.of(Species::Electrophile);
        let fates = [
            (Channel::Elimination, self.end.of(Species::Eliminated)),
            (Channel::Solvolysis, self.end.of(Species::Solvolysed)),
            (
                Channel::BaseConsumedByElectrophile,
                self.end.of(Species::Spent) + self.end.of(Species::ElectrophileAnion),
            ),
        ];
        let (channel, lost) =
            fates.into_iter().fold(
                fates[0],
                |best, fate| if fate.1 > best.1 { fate } else { best },
            );
        let counts = left < ELECTROPHILE_SHORT * charged && lost > FATE_COUNTS * charged;
        (counts || lost > FATE_DOMINATES * charged).then_some(channel)
    }

    fn reversible(&self) -> Option<Channel> {
        let carbon = &self.cell.substrate.carbon;
        let log10_k = carbon
            .first()
            .and_then(|site| self.kinetics.addition_log10_k(site))?;
        // at 0.2 mol/L half conversion needs K = 10 L/mol; slower than that is another matter
        let concentration = self.network.charged[0];
        let back = self.network.reactions.iter().any(|r| {
            let gives_back = r.products.contains(&Some(Species::Electrophile));
            gives_back
                && r.k
                    * if r.second.is_some() {
                        concentration
                    } else {
                        1.0
                    }
                    * 3600.0
                    > 1.0
        });
        (back && log10_k + enolattice_units::math::log10(concentration) < 1.0)
            .then_some(Channel::Reversible)
    }
}
