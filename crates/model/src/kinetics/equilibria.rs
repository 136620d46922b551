//! Equilibria of the bond-forming steps and the acids that they make.

use enolattice_molecule::{AcylDonor, AnionClass, ElectrophileKind, ImineNitrogen};
use enolattice_reagents::{BaseKind, SolventClass};
use enolattice_units::{KCAL_IN_KJ, LN_10, R_KJ, kelvin, math};

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
            // a stabilised carbanion costs a ketone as much more as it costs an aldehyde
            ElectrophileKind::Ketone { aromatic, .. } => {
                self.ketone_acceptor(aromatic) + self.aldol_free_energy(site, false)
                    - self.v(P::DG_ALDOL_ALKYL)
            }
            ElectrophileKind::Aldehyde { aromatic, .. } => self.aldol_free_energy(site, aromatic),
            _ => return None,
        };
        Some(at_25 + self.v(P::DG_ENTROPY) * (self.medium.temperature_c - 25.0))
    }

    /// ΔG° of adding a ketone or ester to a ketone, kcal/mol at 25 °C.
    fn ketone_acceptor(&self, aromatic: bool) -> f64 {
        let aryl = if aromatic {
            self.v(P::DG_ALDOL_ARYL_KETONE)
        } else {
            0.0
        };
        self.v(P::DG_ALDOL_KETONE_ACCEPTOR) + aryl
    }

    /// ΔG° of adding a site to an aldehyde, kcal/mol at 25 °C.
    fn aldol_free_energy(&self, site: &CarbonSite, aromatic: bool) -> f64 {
        self.v(match site.acid.class {
            _ if site.beside_cyano => P::DG_ALDOL_CYANO,
            class if class.is_dicarbonyl() => P::DG_ALDOL_STABILISED,
            AnionClass::Nitronate => P::DG_ALDOL_NITRO,
            _ if aromatic => P::DG_ALDOL_ARYL,
            _ => P::DG_ALDOL_ALKYL,
        })
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

    /// log10 K of the condensation with an aldehyde or ketone to the conjugated product and water, two molecules to two;
    /// `None` for other electrophiles. The adducts of stabilised carbanions are crowded, their alkenes are not: all sites count
    /// as that of a ketone.
    pub(crate) fn condensation_log10_k(&self) -> Option<f64> {
        let addition = match *self.kind()? {
            ElectrophileKind::Aldehyde { aromatic: true, .. } => self.v(P::DG_ALDOL_ARYL),
            ElectrophileKind::Aldehyde { .. } => self.v(P::DG_ALDOL_ALKYL),
            ElectrophileKind::Ketone { aromatic, .. } => self.ketone_acceptor(aromatic),
            _ => return None,
        };
        Some(self.log10_k(addition + self.v(P::DG_DEHYDRATION)))
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

    /// The X–H that an addition at site `i` makes of the electrophile: pKa in the medium, class.
    ///
    /// The hydroxyl of an adduct is as acidic as its own estimate says: acceptors in β strengthen it.
    pub(super) fn adduct_acid(&self, i: usize) -> Option<(f64, AnionClass)> {
        let (usual, class) = self.kind().and_then(bonding::adduct_acid)?;
        if class != AnionClass::Alkoxide {
            return Some((self.pka(usual, class), class));
        }
        let product = self.cell.pair.by_site.get(i).and_then(Option::as_ref);
        let hydroxyl = product.and_then(|product| product.heteroatom.as_ref());
        let estimated = hydroxyl.filter(|acid| acid.class == AnionClass::Alkoxide);
        let pka_dmso = estimated.map_or(usual, |acid| acid.pka_dmso.min(usual));
        Some((self.pka(pka_dmso, class) - self.chelation(), class))
    }

    /// pKa in the medium of the X–H that the addition itself makes at site `i`; of the substrate's own X–H where
    /// it has one.
    pub(crate) fn addition_pka(&self, i: usize) -> f64 {
        self.own_heteroatom_of_product(i)
            .or_else(|| self.adduct_acid(i))
            .map_or_else(|| self.adduct_pka(i), |(pka, _)| pka)
    }

    /// The X–H of the product at a site, where it is more acidic than the product's C–H: that of the adduct, or the
    /// substrate's own. The aldol adducts of nitroalkanes and 1,3-dicarbonyl compounds lose the C–H first.
    pub(crate) fn product_heteroatom(&self, i: usize) -> Option<(f64, AnionClass)> {
        if let Some(own) = self.own_heteroatom_of_product(i) {
            return Some(own);
        }
        self.cell.pair.by_site.get(i)?.as_ref()?;
        let carbon = self.product_carbon(i).map(|site| &site.acid);
        let of_carbon = carbon.map_or(f64::INFINITY, |acid| self.pka(acid.pka_dmso, acid.class));
        self.adduct_acid(i).filter(|(pka, _)| *pka <= of_carbon)
    }

    fn own_heteroatom_of_product(&self, i: usize) -> Option<(f64, AnionClass)> {
        let product = self.cell.pair.by_site.get(i)?.as_ref()?;
        let x = self.first_heteroatom()?;
        let own = product.heteroatom.as_ref().unwrap_or(x);
        Some((self.pka(own.pka_dmso, own.class), own.class))
    }

    /// pKa of the X–H of the solvent in the medium and its concentration, mol/L.
    pub(crate) fn solvent_donor(&self) -> Option<(f64, f64)> {
        let record = &self.cell.solvent.record;
        let (acid, class) = record.acid.as_ref()?;
        (!class.is_carbanion()).then(|| (self.pka(acid.value, *class), record.acid_m))
    }

    /// Whether the solvent takes the proton's place: a base much stronger than the solvent's own anion is there as that anion.
    pub(crate) fn base_is_levelled(&self) -> bool {
        // beyond this little of the base is left beside the solvent (a working rule)
        const MUCH_PK: f64 = 0.5;
        let kind = self.cell.base.record.kind;
        kind != BaseKind::Hydroxide
            && self
                .solvent_donor()
                .is_some_and(|(pka, _)| pka + MUCH_PK < self.pka_base())
    }

    /// Association of a carbanion with the acid of the base where that can hand over a proton, L/mol. A
    /// hydroxylic solvent is there first.
    pub(crate) fn association_with_acid(&self) -> Option<f64> {
        let record = &self.cell.base.record;
        let has_acid = !matches!(
            record.kind,
            BaseKind::Hydride | BaseKind::Organolithium | BaseKind::Grignard
        );
        if !has_acid || self.solvent_donor().is_some() {
            return None;
        }
        let p = match (record.class, self.medium.class()) {
            (AnionClass::Neutral, SolventClass::DipolarAprotic) => P::ASSISTED_DIPOLAR,
            (AnionClass::Neutral, _) => P::ASSISTED_APOLAR,
            _ => P::ASSISTED_NEUTRAL,
        };
        Some(math::exp10(self.v(p)))
    }

    /// About how much of the base is in the form of its acid once it has met the substrate, mol/L:
    /// `x² = K·(s − x)·(b − x)`.
    pub(crate) fn acid_of_base_m(&self) -> f64 {
        let conditions = &self.cell.conditions;
        let substrate = conditions.concentration_m;
        let base = substrate * conditions.base_equiv;
        let pka = match self.first_heteroatom() {
            Some(x) => self.pka(x.pka_dmso, x.class),
            None => self.site_pka(&self.cell.substrate.carbon[0]),
        };
        let k = math::exp10(self.pka_base() - pka);
        // the root of (1 − K)·x² + K·(s + b)·x − K·s·b = 0 that is positive and smaller than s and b
        let half = 0.5 * k * (substrate + base);
        let product = k * substrate * base;
        product / (half + (half * half + (1.0 - k) * product).max(0.0).sqrt())
    }

    /// By how much a carbonyl oxygen in β holds the counter-ion of an alkoxide.
    pub(super) fn chelation(&self) -> f64 {
        self.v(P::LOC_ALDOLATE) * self.medium.pair_strength(self.values)
    }

    /// pKa of the hydroxyl of the substrate's aldol dimer in the medium.
    pub(crate) fn aldol_hydroxyl(&self) -> f64 {
        self.medium
            .pka(PKA_ALDOL_HYDROXYL, AnionClass::Alkoxide, self.values)
            - self.chelation()
    }

    /// pKa in the medium of the substrate's own aldol dimer, and the class of its anion: that of its hydroxyl, or of the C–H
    /// between hydroxyl and carbonyl group where that is left and is the more acidic, as where no metal holds the alkoxide.
    pub(crate) fn aldol_dimer_acid(&self) -> (f64, AnionClass) {
        let site = &self.cell.substrate.carbon[self.cell.substrate.condensing_site()];
        let hydroxyl = self.aldol_hydroxyl();
        let carbon = self.site_pka(site);
        if self.cell.substrate.keeps_hydrogen_on_condensing() && carbon < hydroxyl {
            (carbon, site.acid.class)
        } else {
            (hydroxyl, AnionClass::Alkoxide)
        }
    }

    /// log10 K of the substrate's condensation with itself, neutral to neutral.
    pub(crate) fn self_condensation_log10_k(&self, acceptor: Carbonyl) -> f64 {
        let site = &self.cell.substrate.carbon[self.cell.substrate.condensing_site()];
        let is_aryl = site.acid.class == AnionClass::ArylKetone;
        let (at_25, entropy) = match acceptor {
            Carbonyl::Aldehyde => (self.v(P::DG_ALDOL_ALKYL), self.v(P::DG_ENTROPY)),
            Carbonyl::Ketone => (self.ketone_acceptor(is_aryl), self.v(P::DG_ENTROPY)),
            // two molecules give two
            Carbonyl::Ester | Carbonyl::TertAlkylEster => (self.v(P::DG_CLAISEN), 0.0),
        };
        self.log10_k(at_25 + entropy * (self.medium.temperature_c - 25.0))
    }
}
