//! The constants of a cell at one temperature, from its reagents and the parameters.

mod acceptors;
mod attack;
mod enamines;
mod equilibria;
mod fates;
mod follow_ups;
mod nucleophiles;

pub(crate) use nucleophiles::nucleophilicity_of;

use enolattice_molecule::{AlkylGroup, AnionClass, ElectrophileKind, LeavingGroup};
use enolattice_reagents::BaseKind;
use enolattice_units::math;

use crate::bonding::{self, Bonding};
use crate::carbonyl::Carbonyl;
use crate::medium::{Loosening, Medium};
use crate::network::Species;
use crate::parameters::{P, Values};
use crate::prepared::CarbonSite;
use crate::{AcidSite, Cell};

/// pKa (DMSO) of water, ethanol and the like: Bordwell 1988 (from memory).
pub(crate) const PKA_WATER: f64 = 31.4;
/// pKa (DMSO) of ethanol, the alcohol of an ester: Bordwell 1988 (from memory).
pub(crate) const PKA_ALCOHOL: f64 = 29.8;
/// Bulk of alkoxides and hydroxide of the solvent (the scale of the bases' table, from memory).
const LYATE_BULK: f64 = 0.2;

/// Only a carbanion this stabilised, pKa (DMSO), loses a second proton to the bases of the trade:
/// the dianions of 1,3-dicarbonyl compounds (common practice).
const STABILISED_PKA: f64 = 20.0;

/// Two charges this many bonds apart share an acceptor, or are next to each other.
const NEAR_BONDS: usize = 2;

/// What moves the main uncertain quantities of one cell away from their means.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(crate) struct Nudge {
    /// Added to the pKa of the substrate's carbon sites.
    pub(crate) acidity: f64,
    /// Added to log10 k of all attacks of carbanions on the electrophile.
    pub(crate) attack: f64,
}

/// A cell at one temperature.
pub(crate) struct Kinetics<'a> {
    pub(crate) cell: &'a Cell,
    pub(crate) medium: Medium<'a>,
    pub(crate) values: &'a Values,
    pub(crate) nudge: Nudge,
}

impl<'a> Kinetics<'a> {
    pub(crate) fn new(
        cell: &'a Cell,
        temperature_c: f64,
        values: &'a Values,
        nudge: Nudge,
    ) -> Self {
        let cation = cell.base.record.cation;
        let on_base = cell.conditions.additive_equiv / cell.conditions.base_equiv;
        let additive = cell
            .additive
            .as_ref()
            .map_or_else(Loosening::default, |a| a.loosening(cation, on_base));
        let medium = Medium {
            solvent: &cell.solvent,
            cation,
            additive,
            temperature_c,
        };
        Kinetics {
            cell,
            medium,
            values,
            nudge,
        }
    }

    pub(crate) fn v(&self, p: P) -> f64 {
        self.values.get(p)
    }

    pub(crate) fn pka(&self, pka_dmso: f64, class: AnionClass) -> f64 {
        self.medium.pka(pka_dmso, class, self.values)
    }

    /// pKa of the base's conjugate acid in the medium.
    pub(crate) fn pka_base(&self) -> f64 {
        let base = &self.cell.base;
        let (pka, class) = (base.record.pka_dmso.value, base.record.class);
        if class == AnionClass::Neutral {
            return self.medium.pka_cationic(pka, base.onium, self.values);
        }
        self.pka(pka, class)
    }

    /// pKa of a carbon site of the neutral substrate on the DMSO scale.
    pub(crate) fn site_pka_dmso(&self, site: &CarbonSite) -> f64 {
        site.acid.pka_dmso + self.nudge.acidity
    }

    /// pKa of a carbon site of the substrate in the medium.
    pub(crate) fn site_pka(&self, site: &CarbonSite) -> f64 {
        self.pka(self.site_pka_dmso(site), site.acid.class)
    }

    /// The substrate's X–H, where it goes before its C–H.
    pub(crate) fn first_heteroatom(&self) -> Option<&'a AcidSite> {
        self.cell.substrate.stronger_heteroatom()
    }

    /// Bonds on the shortest path between two atoms of the substrate.
    fn bonds_between(&self, from: usize, to: usize) -> usize {
        let molecule = &self.cell.substrate.molecule;
        let mut distance = vec![usize::MAX; molecule.atoms().len()];
        let mut queue = std::collections::VecDeque::from([from]);
        distance[from] = 0;
        while let Some(atom) = queue.pop_front() {
            if atom == to {
                break;
            }
            for &(next, _) in molecule.neighbours(atom) {
                if distance[next] == usize::MAX {
                    distance[next] = distance[atom] + 1;
                    queue.push_back(next);
                }
            }
        }
        distance[to]
    }

    /// The form of the substrate that loses a second proton: without that of its X–H, where it goes
    /// first, else without that of its most acidic C–H.
    pub(crate) fn first_anion(&self) -> Species {
        match self.first_heteroatom() {
            Some(_) => Species::HeteroatomAnion,
            None => Species::Carbanion(0),
        }
    }

    /// The C–H that the substrate loses as its second proton: the site, its second pKa (DMSO).
    ///
    /// A charge next to it or on the same acceptor weakens an acid more than a remote one. Anions of
    /// carbon lose a second proton only where they are well stabilised.
    pub(crate) fn second_site(&self) -> Option<(usize, f64)> {
        let carbon = &self.cell.substrate.carbon;
        let (first, skipped) = match self.first_heteroatom() {
            Some(x) => (x.atom, 0),
            None => {
                let site = carbon.first()?;
                if site.acid.pka_dmso >= STABILISED_PKA {
                    return None;
                }
                (site.acid.atom, 1)
            }
        };
        let second = |(i, site): (usize, &CarbonSite)| {
            let near = self.bonds_between(first, site.acid.atom) <= NEAR_BONDS;
            let shift = if near {
                P::SECOND_CONJUGATED
            } else {
                P::SECOND_REMOTE
            };
            (i, self.site_pka_dmso(site) + self.v(shift))
        };
        carbon
            .iter()
            .enumerate()
            .skip(skipped)
            .map(second)
            .min_by(|a, b| a.1.total_cmp(&b.1))
    }

    fn kind(&self) -> Option<&'a ElectrophileKind> {
        self.cell.electrophile.group.as_ref().map(|g| &g.kind)
    }

    /// How the bond forms.
    pub(crate) fn bonding(&self) -> Bonding {
        self.kind().map_or(Bonding::Substitution, bonding::bonding)
    }

    fn alkyl(&self) -> Option<(AlkylGroup, LeavingGroup, u8, bool)> {
        match self.cell.electrophile.group.as_ref()?.kind {
            ElectrophileKind::Alkyl {
                group,
                leaving,
                beta_hydrogens,
                activated_beta_hydrogen,
            } => Some((group, leaving, beta_hydrogens, activated_beta_hydrogen)),
            _ => None,
        }
    }

    /// Solubility of the base, where it is limited, mol/L.
    pub(crate) fn solubility_m(&self) -> Option<f64> {
        let log10 = self
            .cell
            .base
            .record
            .log_solubility_for(&self.cell.solvent.record)?;
        let carried = self.cell.additive.as_ref().map_or(0.0, |additive| {
            // a carrier works in proportion to its amount: catalytic ones by turning over
            let dose = self.cell.conditions.additive_equiv / self.cell.conditions.base_equiv;
            let at_one_equivalent = math::exp10(additive.record.dissolves.value);
            math::log10(1.0 + dose.clamp(0.0, 1.0) * (at_one_equivalent - 1.0))
        });
        Some(math::exp10(log10 + carried))
    }

    pub(crate) fn product_carbon(&self, i: usize) -> Option<&'a CarbonSite> {
        self.cell.pair.by_site.get(i)?.as_ref()?.carbon.as_ref()
    }

    /// Sum over the carbon sites of a product of rate constant times share of the anions, against the anion of its most
    /// acidic site alone: an enolate that takes a substituent on one side is left open on the other.
    ///
    /// `k = Σ k_j·10^(pKa_1 − pKa_j)`, for anions of one molecule that are at equilibrium.
    pub(crate) fn over_sites_of_product(&self, i: usize, k_of: impl Fn(&CarbonSite) -> f64) -> f64 {
        let Some(product) = self.cell.pair.by_site.get(i).and_then(Option::as_ref) else {
            return 0.0;
        };
        let pka = |site: &CarbonSite| self.pka(site.acid.pka_dmso, site.acid.class);
        let Some(first) = &product.carbon else {
            return 0.0;
        };
        let share = |site: &CarbonSite| math::exp10((pka(first) - pka(site)).min(0.0));
        let further = product.further_carbon.iter();
        k_of(first) + further.map(|site| share(site) * k_of(site)).sum::<f64>()
    }

    /// log10 of the rate of deprotonation of a substrate site relative to its most acidic one beyond what
    /// the Brønsted term of [`rates::exchange`] gives: hydrogens and bulk, and, between sites of one
    /// kind, the lower sensitivity of competition within one molecule.
    pub(crate) fn kinetic_weight(&self, slow: usize, by_base: bool) -> f64 {
        let carbon = &self.cell.substrate.carbon;
        let Some(site) = carbon.get(slow) else {
            return 0.0;
        };
        let first = &carbon[0];
        let bulk = if by_base {
            self.cell.base.record.bulk.value
        } else {
            LYATE_BULK
        };
        let hindrance = |site: &CarbonSite| match site.degree {
            0 | 1 => 0.0,
            2 => bulk * self.v(P::KINETIC_SECONDARY),
            _ => bulk * self.v(P::KINETIC_TERTIARY),
        };
        let delta = site.acid.pka_dmso - first.acid.pka_dmso;
        let by_amide = by_base && self.cell.base.record.kind == BaseKind::Amide;
        let beta = if by_amide {
            P::AMIDE_BRONSTED
        } else {
            P::EXCHANGE_BRONSTED
        };
        let excess = if site.acid.class == first.acid.class {
            (self.v(beta) - self.v(P::KINETIC_BRONSTED)) * delta
        } else {
            0.0
        };
        math::log10(site.hydrogens / first.hydrogens) + excess - hindrance(site) + hindrance(first)
    }

    /// Whether the substrate condenses with itself by Claisen condensation.
    pub(crate) fn claisen(&self) -> bool {
        matches!(
            self.cell.substrate.acceptor,
            Some(Carbonyl::Ester | Carbonyl::TertAlkylEster)
        )
    }
}
