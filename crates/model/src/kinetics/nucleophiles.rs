//! The nucleophiles of a cell as the rate equations see them.

use enolattice_molecule::AnionClass;

use super::{Kinetics, PKA_WATER};
use crate::parameters::{P, Values};
use crate::prepared::{Beside, CarbonSite};
use crate::rates::{self, Nucleophile};

/// log10 reactivity of hydroxide at carbon relative to a carbanion of the same pKa (from memory).
const HYDROXIDE_RELATIVE: f64 = -1.0;

impl<'a> Kinetics<'a> {
    /// A dianion that reacts at a site: no aggregate, and as reactive as its basicity says.
    pub(crate) fn dianion(&self, site: &CarbonSite, pka_dmso: f64) -> Nucleophile {
        let carbanion = self.carbanion(site, pka_dmso);
        Nucleophile {
            aggregated_at_m: None,
            is_dianion: true,
            ..carbanion
        }
    }

    /// The substrate's carbanion at a site.
    pub(crate) fn substrate_carbanion(&self, site: &CarbonSite) -> Nucleophile {
        self.carbanion(site, self.site_pka_dmso(site))
    }

    /// A carbanion at a site.
    pub(crate) fn carbanion(&self, site: &CarbonSite, pka_dmso: f64) -> Nucleophile {
        Nucleophile {
            pka_dmso,
            class: site.acid.class,
            crowding: site.crowding,
            branches: site.branches,
            beside: beside(site),
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
            beside: None,
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

    /// The substrate's heteroatom anion.
    pub(crate) fn heteroatom_nucleophile(&self) -> Option<Nucleophile> {
        let x = self.first_heteroatom()?;
        let relative = heteroatom_relative(x.class);
        Some(Nucleophile {
            relative,
            ..self.oxygen_anion(x.pka_dmso, x.class)
        })
    }

    pub(super) fn oxygen_anion(&self, pka_dmso: f64, class: AnionClass) -> Nucleophile {
        Nucleophile {
            pka_dmso,
            class,
            crowding: 0,
            branches: 0,
            beside: None,
            relative: HYDROXIDE_RELATIVE,
            aggregated_at_m: None,
            is_dianion: false,
        }
    }
}

/// What stands beside the carbanion of a site and counts for its rate.
fn beside(site: &CarbonSite) -> Option<Beside> {
    let has_cyano = site.beside_cyano && site.acid.class.is_dicarbonyl();
    site.beside.or(has_cyano.then_some(Beside::Cyano))
}

/// Mayr's N in DMSO of the carbanion of a site; its crowding as N: log10 units over sN.
pub(crate) fn nucleophilicity_of(site: &CarbonSite, values: &Values) -> f64 {
    let carbanion = Nucleophile {
        pka_dmso: site.acid.pka_dmso,
        class: site.acid.class,
        crowding: site.crowding,
        branches: site.branches,
        beside: beside(site),
        relative: 0.0,
        aggregated_at_m: None,
        is_dianion: false,
    };
    let room = f64::from(site.crowding) * values.get(P::STERIC_POLAR)
        + f64::from(site.branches) * values.get(P::STERIC_BRANCH);
    rates::nucleophilicity(site.acid.pka_dmso, &carbanion, values) + room / values.get(P::MAYR_S_N)
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
