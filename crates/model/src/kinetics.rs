//! The constants of a cell at one temperature, from its reagents and the parameters.

use enolattice_molecule::{AlkylGroup, AnionClass, ElectrophileKind, LeavingGroup};
use enolattice_reagents::{BaseKind, Cation, SolventClass};
use enolattice_units::{KCAL_IN_KJ, LN_10, R_KJ, kelvin, math};

use crate::carbonyl::Carbonyl;
use crate::medium::Medium;
use crate::parameters::{P, Values};
use crate::prepared::CarbonSite;
use crate::rates::{self, Nucleophile};
use crate::{AcidSite, Cell};

/// pKa (DMSO) of the hydroxyl of an aldol adduct: a secondary alcohol, 2-propanol 30.3, with an
/// acceptor in β (from memory).
const PKA_ALDOL_HYDROXYL: f64 = 29.0;
/// pKa (DMSO) of water, ethanol and the like: Bordwell 1988 (from memory).
pub(crate) const PKA_WATER: f64 = 31.4;
/// log10 reactivity of hydroxide at carbon relative to a carbanion of the same pKa (from memory).
const HYDROXIDE_RELATIVE: f64 = -1.0;
/// Bulk of alkoxides and hydroxide of the solvent (the scale of the bases' table, from memory).
const LYATE_BULK: f64 = 0.2;

/// Only a carbanion this stabilised, pKa (DMSO), loses a second proton to the bases of the trade:
/// the dianions of 1,3-dicarbonyl compounds (common practice).
const STABILISED_PKA: f64 = 20.0;

/// pKa (DMSO) of the carbanion of a Michael adduct whose product shows no acidic C–H: an ester or
/// nitrile, 29.5 to 31.3 (Bordwell 1988, from memory).
const PKA_ADDUCT: f64 = 30.0;

/// How the electrophile's bond forms.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Bonding {
    /// Substitution: the product is neutral, the charge leaves.
    Substitution,
    /// Conjugate addition: the product is a carbanion.
    Michael,
    /// Aldol and nitroaldol: the product is an alkoxide.
    Aldol,
}

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
        let medium = Medium {
            solvent: &cell.solvent,
            cation,
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
        self.pka(
            self.cell.base.record.pka_dmso.value,
            self.cell.base.record.class,
        )
    }

    /// pKa of a carbon site of the substrate on the DMSO scale, its second one where the X–H went first.
    pub(crate) fn site_pka_dmso(&self, site: &CarbonSite) -> f64 {
        let second = if self.first_heteroatom().is_some() {
            self.second_shift(site)
        } else {
            0.0
        };
        site.acid.pka_dmso + second + self.nudge.acidity
    }

    /// pKa of a carbon site of the substrate in the medium.
    pub(crate) fn site_pka(&self, site: &CarbonSite) -> f64 {
        self.pka(self.site_pka_dmso(site), site.acid.class)
    }

    /// The substrate's X–H, where it goes before its C–H.
    pub(crate) fn first_heteroatom(&self) -> Option<&'a AcidSite> {
        self.cell.substrate.stronger_heteroatom()
    }

    /// By how much a neighbouring or remote charge weakens a C–H.
    fn second_shift(&self, site: &CarbonSite) -> f64 {
        let Some(x) = self.first_heteroatom() else {
            return 0.0;
        };
        if self.bonds_between(site.acid.atom, x.atom) <= 3 {
            self.v(P::SECOND_CONJUGATED)
        } else {
            self.v(P::SECOND_REMOTE)
        }
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

    /// The second C–H of a substrate that loses a carbon proton first: the site, its second pKa (DMSO).
    pub(crate) fn second_site(&self) -> Option<(usize, f64)> {
        if self.first_heteroatom().is_some() {
            return None;
        }
        let carbon = &self.cell.substrate.carbon;
        let first = carbon
            .first()
            .filter(|site| site.acid.pka_dmso < STABILISED_PKA)?;
        carbon
            .iter()
            .enumerate()
            .skip(1)
            .map(|(i, site)| {
                let near = self.bonds_between(first.acid.atom, site.acid.atom) <= 2;
                let shift = if near {
                    P::SECOND_CONJUGATED
                } else {
                    P::SECOND_REMOTE
                };
                (i, site.acid.pka_dmso + self.nudge.acidity + self.v(shift))
            })
            .min_by(|a, b| a.1.total_cmp(&b.1))
    }

    /// A dianion that reacts at a site: no aggregate, and as reactive as its basicity says.
    pub(crate) fn dianion(&self, site: &CarbonSite, pka_dmso: f64) -> Nucleophile {
        let carbanion = self.carbanion(site, pka_dmso);
        Nucleophile {
            aggregated_at_m: None,
            is_dianion: true,
            ..carbanion
        }
    }

    /// The substrate's carbanion at a site; a dianion where its heteroatom went first.
    pub(crate) fn substrate_carbanion(&self, site: &CarbonSite) -> Nucleophile {
        let pka = self.site_pka_dmso(site);
        if self.first_heteroatom().is_some() {
            self.dianion(site, pka)
        } else {
            self.carbanion(site, pka)
        }
    }

    /// A carbanion at a site.
    pub(crate) fn carbanion(&self, site: &CarbonSite, pka_dmso: f64) -> Nucleophile {
        Nucleophile {
            pka_dmso,
            class: site.acid.class,
            crowding: site.crowding,
            branches: site.branches,
            relative: 0.0,
            aggregated_at_m: Some(self.cell.conditions.concentration_m),
            is_dianion: false,
        }
    }

    pub(crate) fn base_nucleophile(&self) -> Nucleophile {
        let record = &self.cell.base.record;
        Nucleophile {
            pka_dmso: record.pka_dmso.value,
            class: record.class,
            crowding: 0,
            branches: 0,
            relative: record.nucleophilicity.value,
            aggregated_at_m: None,
            is_dianion: false,
        }
    }

    /// The anion of the solvent's O–H.
    pub(crate) fn lyate_nucleophile(&self) -> Option<Nucleophile> {
        let (acid, class) = self.cell.solvent.record.acid.as_ref()?;
        Some(self.oxygen_anion(acid.value, *class)).filter(|_| !class.is_carbanion())
    }

    /// Hydroxide.
    pub(crate) fn hydroxide_nucleophile(&self) -> Nucleophile {
        self.oxygen_anion(PKA_WATER, AnionClass::Hydroxide)
    }

    /// The carbanion of the solvent.
    pub(crate) fn solvent_carbanion(&self) -> Option<Nucleophile> {
        let (acid, class) = self.cell.solvent.record.acid.as_ref()?;
        class.is_carbanion().then(|| Nucleophile {
            relative: 0.0,
            aggregated_at_m: Some(self.cell.conditions.concentration_m),
            ..self.oxygen_anion(acid.value, *class)
        })
    }

    /// Rate constant of elimination by a carbanion of the substrate, paired as it is for substitution.
    pub(crate) fn elimination_by_carbanion(&self, site: &CarbonSite) -> f64 {
        let nucleophile = self.substrate_carbanion(site);
        let pairing = rates::pairing(&nucleophile, &self.medium, self.values, true);
        self.elimination(self.site_pka(site)) * math::exp10(pairing)
    }

    /// The substrate's heteroatom anion.
    pub(crate) fn heteroatom_nucleophile(&self) -> Option<Nucleophile> {
        let x = self.first_heteroatom()?;
        let relative = heteroatom_relative(x.class);
        Some(Nucleophile {
            relative,
            ..self.oxygen_anion(x.pka_dmso, x.class)
        })
    }

    fn oxygen_anion(&self, pka_dmso: f64, class: AnionClass) -> Nucleophile {
        Nucleophile {
            pka_dmso,
            class,
            crowding: 0,
            branches: 0,
            relative: HYDROXIDE_RELATIVE,
            aggregated_at_m: None,
            is_dianion: false,
        }
    }

    /// How the bond forms.
    pub(crate) fn bonding(&self) -> Bonding {
        match self.cell.electrophile.group.as_ref().map(|g| g.kind) {
            Some(ElectrophileKind::Michael { .. }) => Bonding::Michael,
            Some(ElectrophileKind::Aldehyde { .. }) => Bonding::Aldol,
            _ => Bonding::Substitution,
        }
    }

    /// log10 k of a nucleophile with the electrophile, at its reacting atom.
    pub(crate) fn attack(&self, nucleophile: &Nucleophile) -> Option<f64> {
        let group = self.cell.electrophile.group.as_ref()?;
        match group.kind {
            ElectrophileKind::Alkyl { group, leaving, .. } => Some(rates::substitution(
                nucleophile,
                group,
                leaving,
                &self.medium,
                self.values,
            )),
            _ => {
                let (e, _, _) = self.cell.electrophile.e.as_ref()?;
                let crowded = nucleophile.crowding + nucleophile.branches > 0;
                let pair = match group.kind {
                    ElectrophileKind::Michael {
                        beta_alkyl,
                        beta_aryl,
                        ..
                    } if crowded && beta_alkyl + beta_aryl > 0 => self.v(P::STERIC_PAIR),
                    _ => 0.0,
                };
                Some(rates::addition(nucleophile, *e, &self.medium, self.values) + pair)
            }
        }
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

    /// Rate constant of elimination by a base whose acid has this pKa in the medium.
    pub(crate) fn elimination(&self, pka_medium: f64) -> f64 {
        let Some((group, leaving, hydrogens, activated)) = self.alkyl() else {
            return 0.0;
        };
        let medium = &self.medium;
        rates::elimination(
            pka_medium,
            group,
            leaving,
            hydrogens,
            activated,
            medium,
            self.values,
        )
        .map_or(0.0, math::exp10)
    }

    /// log10 (kO/kC) of a carbanion; `None` where its oxygen does not attack.
    pub(crate) fn oxygen_over_carbon(&self, class: AnionClass) -> Option<f64> {
        let (_, leaving, ..) = self.alkyl()?;
        let by_class = match class {
            AnionClass::BetaDicarbonyl
            | AnionClass::CyclicBetaDicarbonyl
            | AnionClass::CyclicDiester => P::O_BETA_DICARBONYL,
            AnionClass::Ketone | AnionClass::ArylKetone | AnionClass::Aldehyde => P::O_KETONE,
            AnionClass::Ester | AnionClass::Amide => P::O_ESTER,
            AnionClass::Nitronate => P::O_NITRONATE,
            _ => return None,
        };
        let by_solvent = if self.medium.is_protic() {
            self.v(P::O_PROTIC)
        } else if self.medium.class() == SolventClass::DipolarAprotic {
            self.v(P::O_DIPOLAR)
        } else {
            self.v(P::O_ETHER)
        };
        Some(self.v(by_class) + rates::oxygen_by_leaving_group(leaving) + by_solvent)
    }

    /// ΔG° of adding the electrophile to a site, neutral to neutral, kcal/mol at the temperature; `None`: irreversible.
    pub(crate) fn addition_free_energy(&self, site: &CarbonSite) -> Option<f64> {
        let stabilised = matches!(
            site.acid.class,
            AnionClass::BetaDicarbonyl
                | AnionClass::CyclicBetaDicarbonyl
                | AnionClass::CyclicDiester
        );
        let at_25 = match self.cell.electrophile.group.as_ref()?.kind {
            ElectrophileKind::Michael {
                beta_alkyl,
                beta_aryl,
                ..
            } => {
                let crowded = f64::from(beta_alkyl + beta_aryl) * self.v(P::DG_MICHAEL_BETA);
                let stable = stabilised || site.acid.class == AnionClass::Nitronate;
                self.v(P::DG_MICHAEL)
                    + crowded
                    + if stable {
                        self.v(P::DG_MICHAEL_STABILISED)
                    } else {
                        0.0
                    }
            }
            ElectrophileKind::Aldehyde { .. } if stabilised => self.v(P::DG_ALDOL_STABILISED),
            ElectrophileKind::Aldehyde { .. } if site.acid.class == AnionClass::Nitronate => {
                self.v(P::DG_ALDOL_NITRO)
            }
            ElectrophileKind::Aldehyde { aromatic: true, .. } => self.v(P::DG_ALDOL_ARYL),
            ElectrophileKind::Aldehyde {
                aromatic: false, ..
            } => self.v(P::DG_ALDOL_ALKYL),
            _ => return None,
        };
        Some(at_25 + self.v(P::DG_ENTROPY) * (self.medium.temperature_c - 25.0))
    }

    /// log10 of an equilibrium constant from ΔG° in kcal/mol.
    fn log10_k(&self, free_energy_kcal: f64) -> f64 {
        -free_energy_kcal * KCAL_IN_KJ / (R_KJ * kelvin(self.medium.temperature_c) * LN_10)
    }

    /// log10 K of the addition at a site, neutral to neutral, L/mol.
    pub(crate) fn addition_log10_k(&self, site: &CarbonSite) -> Option<f64> {
        self.addition_free_energy(site).map(|dg| self.log10_k(dg))
    }

    /// pKa in the medium of the anion first formed by addition at site `i`.
    pub(crate) fn adduct_pka(&self, i: usize) -> f64 {
        match self.bonding() {
            Bonding::Aldol => self.aldol_hydroxyl(),
            _ => self.product_carbon(i).map_or(PKA_ADDUCT, |site| {
                self.pka(site.acid.pka_dmso, site.acid.class)
            }),
        }
    }

    /// The X–H of the product at a site: the hydroxyl of an aldol adduct, or the substrate's own.
    pub(crate) fn product_heteroatom(&self, i: usize) -> Option<(f64, AnionClass)> {
        let product = self.cell.pair.by_site.get(i)?.as_ref()?;
        if let Some(x) = self.first_heteroatom() {
            let own = product.heteroatom.as_ref().unwrap_or(x);
            return Some((self.pka(own.pka_dmso, own.class), own.class));
        }
        (self.bonding() == Bonding::Aldol).then(|| (self.aldol_hydroxyl(), AnionClass::Alkoxide))
    }

    /// pKa of the hydroxyl of an aldol adduct in the medium.
    pub(crate) fn aldol_hydroxyl(&self) -> f64 {
        self.medium
            .pka(PKA_ALDOL_HYDROXYL, AnionClass::Alkoxide, self.values)
            - self.v(P::LOC_CHELATE) * self.medium.pair_strength(self.values)
    }

    /// log10 K of the substrate's condensation with itself, neutral to neutral.
    pub(crate) fn self_condensation_log10_k(&self, acceptor: Carbonyl) -> f64 {
        let (at_25, entropy) = match acceptor {
            Carbonyl::Aldehyde => (P::DG_ALDOL_ALKYL, self.v(P::DG_ENTROPY)),
            Carbonyl::Ketone => (P::DG_ALDOL_KETONE_ACCEPTOR, self.v(P::DG_ENTROPY)),
            // two molecules give two
            Carbonyl::Ester | Carbonyl::TertAlkylEster => (P::DG_CLAISEN, 0.0),
        };
        self.log10_k(self.v(at_25) + entropy * (self.medium.temperature_c - 25.0))
    }

    /// Solubility of the base, where it is limited, mol/L.
    pub(crate) fn solubility_m(&self) -> Option<f64> {
        let log10 = self
            .cell
            .base
            .record
            .log_solubility_for(&self.cell.solvent.record)?;
        Some(math::exp10(log10))
    }

    pub(crate) fn product_carbon(&self, i: usize) -> Option<&'a CarbonSite> {
        self.cell.pair.by_site.get(i)?.as_ref()?.carbon.as_ref()
    }

    /// Rate of deprotonation of a substrate site relative to its most acidic one beyond what the
    /// Brønsted term of [`rates::exchange`] gives: hydrogens and bulk, and the lower sensitivity of
    /// competition within one molecule.
    pub(crate) fn kinetic_weight(&self, slow: usize, by_base: bool) -> f64 {
        let carbon = &self.cell.substrate.carbon;
        let Some(site) = carbon.get(slow) else {
            return 1.0;
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
        let excess = (self.v(beta) - self.v(P::KINETIC_BRONSTED)) * delta;
        site.hydrogens / first.hydrogens * math::exp10(excess - hindrance(site) + hindrance(first))
    }

    /// Rate at which a base of this pKa ionises the electrophile's own C–H.
    pub(crate) fn ionisation(&self, base_pka: f64) -> f64 {
        let Some(acid) = &self.cell.electrophile.acid else {
            return 0.0;
        };
        if acid.element != 6 || self.bonding() == Bonding::Substitution {
            return 0.0;
        }
        let pka = self.pka(acid.pka_dmso, acid.class);
        let delta = base_pka - pka;
        // uphill ionisation comes back at once and loses nothing
        if delta < 0.0 {
            return 0.0;
        }
        math::exp10(rates::exchange(
            delta,
            acid.class,
            &self.medium,
            self.values,
        ))
    }

    pub(crate) fn solvolysis(&self) -> f64 {
        if !self.medium.is_protic() {
            return 0.0;
        }
        let Some((group, leaving, ..)) = self.alkyl() else {
            return 0.0;
        };
        let (ethanol, ionising) = match group {
            AlkylGroup::Tertiary => (P::SOLVOLYSIS_TERTIARY, 1.0),
            AlkylGroup::SecondaryActivated => (P::SOLVOLYSIS_ACTIVATED, 0.8),
            AlkylGroup::Benzyl | AlkylGroup::Allyl => (P::SOLVOLYSIS_PRIMARY, 0.5),
            _ => (P::SOLVOLYSIS_PRIMARY, 0.3),
        };
        let water = if self.medium.class() == SolventClass::Water {
            self.v(P::SOLVOLYSIS_WATER) * ionising
        } else {
            0.0
        };
        let benzylic = if group == AlkylGroup::Benzyl {
            1.0
        } else {
            0.0
        };
        let at_25 = self.v(ethanol) + benzylic + water + rates::leaving_group(leaving);
        math::exp10(rates::at_temperature(
            at_25,
            25.0,
            self.medium.temperature_c,
            self.v(P::DS_SN2),
        ))
    }

    pub(crate) fn dehydration(&self) -> f64 {
        let Some(ElectrophileKind::Aldehyde { aromatic, .. }) =
            self.cell.electrophile.group.as_ref().map(|g| g.kind)
        else {
            return 0.0;
        };
        let p = if aromatic {
            P::DEHYDRATION_ARYL
        } else {
            P::DEHYDRATION_ALKYL
        };
        // lithium aldolates in ethers are chelated and keep their oxygen (common practice)
        let chelated = if self.medium.cation == Cation::Lithium && self.medium.is_paired() {
            -4.0
        } else {
            0.0
        };
        let at_25 = self.v(p) + chelated;
        math::exp10(rates::at_temperature(
            at_25,
            25.0,
            self.medium.temperature_c,
            self.v(P::DS_SN2),
        ))
    }

    /// Whether the substrate condenses with itself by Claisen condensation.
    pub(crate) fn claisen(&self) -> bool {
        matches!(
            self.cell.substrate.acceptor,
            Some(Carbonyl::Ester | Carbonyl::TertAlkylEster)
        )
    }
}

/// log10 reactivity of heteroatom anions at carbon relative to a carbanion of the same pKa.
///
/// # Source
/// Mayr N of phenoxide, carboxylates, amide anions and thiolates in DMSO against pKa (from memory).
fn heteroatom_relative(class: AnionClass) -> f64 {
    match class {
        AnionClass::Thiolate => 3.0,
        AnionClass::AmideNitrogen | AnionClass::ImideNitrogen | AnionClass::AzoleNitrogen => 0.0,
        AnionClass::Phenoxide => -0.3,
        AnionClass::Carboxylate => -0.5,
        _ => -1.0,
    }
}
