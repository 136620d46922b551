//! Equilibria of the bond-forming steps and the acids that they make.

use enolattice_molecule::{AcylDonor, AnionClass, ElectrophileKind, ImineNitrogen};
use enolattice_units::{KCAL_IN_KJ, LN_10, R_KJ, kelvin};

use super::Kinetics;
use crate::bonding;
use crate::carbonyl::Carbonyl;
use crate::parameters::P;
use crate::prepared::CarbonSite;

/// pKa (DMSO) of the hydroxyl of the substrate's own aldol dimer: a secondary alcohol, 2-propanol 30.3,
/// with an acceptor in β (from memory).
const PKA_ALDOL_HYDROXYL: f64 = 29.0;
/// pKa (DMSO) of the carbanion of a Michael adduct whose product shows no acidic C–H: an ester or
/// nitrile, 29.5 to 31.3 (Bordwell 1988, from memory).
const PKA_ADDUCT: f64 = 30.0;

impl<'a> Kinetics<'a> {
    /// ΔG° of adding the electrophile to a site, neutral to neutral, kcal/mol at the temperature; `None`: irreversible.
    pub(crate) fn addition_free_energy(&self, site: &CarbonSite) -> Option<f64> {
        let stabilised = site.acid.class.is_dicarbonyl();
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
            ElectrophileKind::Acyl { donor, .. } => {
                // two molecules give two
                return self
                    .acylates_reversibly()
                    .then(|| self.claisen_free_energy(donor, site));
            }
            ElectrophileKind::Imine {
                nitrogen: ImineNitrogen::Plain,
                ..
            } => self.v(P::DG_IMINE),
            ElectrophileKind::Ketone {
                activated: true, ..
            } => self.v(P::DG_ACTIVATED_KETONE),
            ElectrophileKind::Ketone { .. } => self.v(P::DG_ALDOL_KETONE_ACCEPTOR),
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

    /// ΔG° of acylating a site with an ester or its kin, neutral to neutral, kcal/mol.
    pub(super) fn claisen_free_energy(&self, donor: AcylDonor, site: &CarbonSite) -> f64 {
        let by_site = match site.acid.class {
            AnionClass::Ester | AnionClass::Amide => P::DG_CLAISEN,
            _ => P::DG_CLAISEN_KETONE,
        };
        let by_donor = match donor {
            AcylDonor::Formate | AcylDonor::Oxalate | AcylDonor::ActiveEster => {
                self.v(P::DG_CLAISEN_ACTIVE)
            }
            AcylDonor::Carbonate => self.v(P::DG_CLAISEN_CARBONATE),
            _ => 0.0,
        };
        self.v(by_site) + by_donor
    }

    /// log10 of an equilibrium constant from ΔG° in kcal/mol.
    pub(super) fn log10_k(&self, free_energy_kcal: f64) -> f64 {
        -free_energy_kcal * KCAL_IN_KJ / (R_KJ * kelvin(self.medium.temperature_c) * LN_10)
    }

    /// log10 K of the addition at a site, neutral to neutral, L/mol.
    pub(crate) fn addition_log10_k(&self, site: &CarbonSite) -> Option<f64> {
        self.addition_free_energy(site).map(|dg| self.log10_k(dg))
    }

    /// log10 K of the loss of water from an aldol adduct to the conjugated product and 1 mol/L of water.
    pub(crate) fn dehydration_log10_k(&self) -> f64 {
        self.log10_k(self.v(P::DG_DEHYDRATION))
    }

    /// pKa in the medium of the anion first formed by addition at site `i`.
    pub(crate) fn adduct_pka(&self, i: usize) -> f64 {
        match self.product_heteroatom(i) {
            Some((pka, _)) => pka,
            None => self.product_carbon(i).map_or(PKA_ADDUCT, |site| {
                self.pka(site.acid.pka_dmso, site.acid.class)
            }),
        }
    }

    /// The X–H that an addition makes of the electrophile: pKa in the medium, class.
    pub(super) fn adduct_acid(&self) -> Option<(f64, AnionClass)> {
        let (pka_dmso, class) = self.kind().and_then(bonding::adduct_acid)?;
        let chelate = if class == AnionClass::Alkoxide {
            self.chelation()
        } else {
            0.0
        };
        Some((self.pka(pka_dmso, class) - chelate, class))
    }

    /// The X–H of the product at a site: that of the adduct, or the substrate's own.
    pub(crate) fn product_heteroatom(&self, i: usize) -> Option<(f64, AnionClass)> {
        let product = self.cell.pair.by_site.get(i)?.as_ref()?;
        if let Some(x) = self.first_heteroatom() {
            let own = product.heteroatom.as_ref().unwrap_or(x);
            return Some((self.pka(own.pka_dmso, own.class), own.class));
        }
        self.adduct_acid()
    }

    /// By how much a carbonyl oxygen in β holds the counter-ion of an alkoxide.
    pub(super) fn chelation(&self) -> f64 {
        self.v(P::LOC_CHELATE) * self.medium.pair_strength(self.values)
    }

    /// pKa of the hydroxyl of the substrate's aldol dimer in the medium.
    pub(crate) fn aldol_hydroxyl(&self) -> f64 {
        self.medium
            .pka(PKA_ALDOL_HYDROXYL, AnionClass::Alkoxide, self.values)
            - self.chelation()
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
}
