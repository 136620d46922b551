//! Attack on the electrophile: rates, ends of ambident anions, what leaves.

use enolattice_molecule::{AcylDonor, AnionClass, ElectrophileKind, RingHeteroatom};
use enolattice_reagents::{Cation, SolventClass};
use enolattice_units::math;

use super::{Kinetics, PKA_ALCOHOL};
use crate::bonding::{self, Bonding, TakenByBase};
use crate::parameters::P;
use crate::prepared::CarbonSite;
use crate::rates::{self, Nucleophile};

impl<'a> Kinetics<'a> {
    /// Whether the bond-forming step gives the base back: the adduct's anion is about as strong a base
    /// as the carbanion was.
    pub(crate) fn regenerates_base(&self) -> bool {
        // within this many pK units the next substrate is still ionised (a working rule, common practice)
        const AS_STRONG_PK: f64 = 8.0;
        match self.kind().and_then(bonding::adduct_acid) {
            Some((pka, _)) => {
                let site = &self.cell.substrate.carbon[0].acid;
                pka + AS_STRONG_PK > site.pka_dmso
            }
            None => self.bonding() == Bonding::Michael,
        }
    }

    /// The acid of the group that leaves where its anion is a base: pKa in the medium, class.
    pub(crate) fn leaving_acid(&self) -> Option<(f64, AnionClass)> {
        let (pka, class) = self.kind().and_then(bonding::leaving_acid)?;
        Some((self.pka(pka, class), class))
    }

    /// Whether the electrophile is an ester or its kin, whose acylation comes back.
    pub(crate) fn acylates_reversibly(&self) -> bool {
        self.kind().is_some_and(bonding::is_claisen)
    }

    /// log10 k of a nucleophile with the electrophile, at its reacting atom.
    pub(crate) fn attack(&self, nucleophile: &Nucleophile) -> Option<f64> {
        let kind = self.kind()?;
        let to_ethyl_bromide = match *kind {
            ElectrophileKind::Alkyl { group, leaving, .. } => {
                Some(rates::alkyl_group(group) + rates::leaving_group(leaving))
            }
            ElectrophileKind::Ring {
                heteroatom,
                degree,
                activated,
            } => Some(self.ring_opening(heteroatom, degree, activated)),
            _ => None,
        };
        if let Some(relative) = to_ethyl_bromide {
            let (medium, values) = (&self.medium, self.values);
            return Some(rates::substitution(nucleophile, relative, medium, values));
        }
        let (e, _, _) = self.cell.electrophile.e.as_ref()?;
        let crowded = nucleophile.crowding + nucleophile.branches > 0;
        let pair = match *kind {
            ElectrophileKind::Michael {
                beta_alkyl,
                beta_aryl,
                ..
            } if crowded && beta_alkyl + beta_aryl > 0 => self.v(P::STERIC_PAIR),
            ElectrophileKind::Aldehyde { .. } | ElectrophileKind::Ketone { .. } => {
                self.by_way_of_iminium(P::IMINIUM_ADDITION)
            }
            ElectrophileKind::Acyl { .. } | ElectrophileKind::Aryl { .. } => {
                let breakdown = match self.leaving_acid() {
                    Some((leaving, _)) if self.acylates_reversibly() => {
                        self.return_from_adduct(nucleophile, leaving)
                    }
                    _ => 0.0,
                };
                f64::from(nucleophile.crowding) * self.v(P::STERIC_ACYL) + breakdown
            }
            _ => 0.0,
        };
        let carbonyl = self.carbonyl_activation(kind, nucleophile);
        Some(rates::addition(nucleophile, *e, &self.medium, self.values) + pair + carbonyl)
    }

    /// Share of the carbonyl compounds that react by way of an iminium ion, which forms of the amine's ammonium ion and
    /// not of the amine alone: 1 from a working concentration of that ion on.
    pub(crate) fn iminium_share(&self) -> f64 {
        // what piperidine and acetylacetone make of each other in dichloromethane, where they condense with aldehydes
        // (from memory)
        const WORKING_M: f64 = 1e-4;
        match self.kind() {
            Some(ElectrophileKind::Aldehyde { .. } | ElectrophileKind::Ketone { .. })
                if self.cell.base.makes_iminium =>
            {
                let in_acid = self
                    .solvent_donor()
                    .is_some_and(|(pka, _)| pka < self.pka_base());
                if in_acid {
                    1.0
                } else {
                    (self.acid_of_base_m() / WORKING_M).min(1.0)
                }
            }
            _ => 0.0,
        }
    }

    /// What a step gains, log10, by way of an iminium ion: `log10(1 − f + f·10^gain)`, f of
    /// [`Self::iminium_share`].
    pub(crate) fn by_way_of_iminium(&self, gain: P) -> f64 {
        let share = self.iminium_share();
        if share == 0.0 {
            return 0.0;
        }
        let ketone = match self.kind() {
            Some(ElectrophileKind::Ketone { .. }) => self.v(P::IMINIUM_KETONE),
            _ => 0.0,
        };
        let gain = math::exp10((self.v(gain) + ketone).max(0.0));
        math::log10(1.0 - share + share * gain)
    }

    /// Factor on acyl and aryl transfer to a carbanion that bears a cyano group and two others: the cyano group takes half
    /// the room of another there (from memory: cyanoacetates are arylated once).
    pub(crate) fn room_of_cyano(&self, site: &CarbonSite) -> f64 {
        const HALF: f64 = 0.5;
        match self.kind() {
            Some(ElectrophileKind::Acyl { .. } | ElectrophileKind::Aryl { .. })
                if site.beside_cyano && site.degree > 2 =>
            {
                math::exp10(HALF * self.v(P::STERIC_ACYL))
            }
            _ => 1.0,
        }
    }

    /// What a carbonyl group gains, log10, by binding the metal of the nucleophile or the solvent's O–H.
    fn carbonyl_activation(&self, kind: &ElectrophileKind, nucleophile: &Nucleophile) -> f64 {
        let is_carbonyl = bonding::is_claisen(kind)
            || matches!(
                kind,
                ElectrophileKind::Aldehyde { .. }
                    | ElectrophileKind::Ketone { .. }
                    | ElectrophileKind::Acyl {
                        donor: AcylDonor::ChelatingAmide | AcylDonor::Amide | AcylDonor::Thioester,
                        ..
                    }
            );
        if !is_carbonyl || nucleophile.class == AnionClass::Neutral {
            0.0
        } else if self.medium.is_protic() {
            self.v(P::CARBONYL_PROTIC) + self.acid_catalysis()
        } else if self.medium.binds_oxygen() {
            self.v(P::CARBONYL_METAL)
        } else {
            0.0
        }
    }

    /// What a carbonyl group gains, log10, in a solvent that is a stronger acid than an alcohol: carboxylic acids
    /// bring about condensations by general acid catalysis.
    fn acid_catalysis(&self) -> f64 {
        let acid = self.cell.solvent.record.acid.as_ref();
        let stronger = acid.map_or(0.0, |(acid, _)| (PKA_ALCOHOL - acid.value).max(0.0));
        self.v(P::CARBONYL_ACID) * stronger
    }

    /// What acyl transfer from an ester loses, log10, because the tetrahedral adduct gives back a nucleophile that is a
    /// weaker base than the alkoxide; `leaving` is the pKa of its alcohol in the medium.
    pub(crate) fn return_from_adduct(&self, nucleophile: &Nucleophile, leaving: f64) -> f64 {
        let nucleophile = self.pka(nucleophile.pka_dmso, nucleophile.class);
        -self.v(P::ACYL_BREAKDOWN) * (leaving - nucleophile).max(0.0)
    }

    /// What acylation of a stabilised anion moves log10 (kO/kC), by class and metal.
    fn acylation_of_stabilised(&self, class: AnionClass) -> f64 {
        match self.medium.cation {
            _ if !class.is_dicarbonyl() => 0.0,
            Cation::Magnesium => self.v(P::O_ACYL_STABILISED) + self.v(P::O_MAGNESIUM),
            _ => self.v(P::O_ACYL_STABILISED),
        }
    }

    /// log10 k of opening a three-membered ring against SN2 of ethyl bromide.
    pub(super) fn ring_opening(
        &self,
        heteroatom: RingHeteroatom,
        degree: u8,
        activated: bool,
    ) -> f64 {
        let ring = match heteroatom {
            RingHeteroatom::Oxygen => P::RING_EPOXIDE,
            RingHeteroatom::ActivatedNitrogen => P::RING_ACTIVATED_AZIRIDINE,
            RingHeteroatom::Nitrogen => P::RING_AZIRIDINE,
            RingHeteroatom::Sulfur => P::RING_THIIRANE,
        };
        let activation = if activated {
            self.v(P::RING_ACTIVATED)
        } else {
            0.0
        };
        let helped = if heteroatom == RingHeteroatom::Oxygen && self.medium.is_protic() {
            self.v(P::RING_PROTIC)
        } else {
            0.0
        };
        self.v(ring) + f64::from(degree) * self.v(P::RING_SUBSTITUTED) + activation + helped
    }

    /// Whether a base of this class that attacks the electrophile spends it for good.
    pub(crate) fn spends_electrophile(&self, class: AnionClass) -> bool {
        let Some(kind) = self.kind() else {
            return false;
        };
        let carried = class == AnionClass::Neutral
            && self.cell.base.is_tertiary_amine
            && bonding::is_carried_by_amines(kind);
        match bonding::taken_by_base(kind) {
            _ if carried => false,
            TakenByBase::Lost => true,
            TakenByBase::ExceptByAlkoxides => class != AnionClass::Alkoxide,
            TakenByBase::ByNitrogen => matches!(
                class,
                AnionClass::Neutral | AnionClass::AlkylNitrogen | AnionClass::SilylNitrogen
            ),
            TakenByBase::ComesBack => false,
        }
    }

    /// log10 (kO/kC) of the carbanion of a site; `None` where its oxygen does not attack.
    pub(crate) fn oxygen_over_carbon(&self, site: &CarbonSite) -> Option<f64> {
        let class = site.acid.class;
        let by_leaving = match *self.kind()? {
            ElectrophileKind::Alkyl { leaving, .. } => {
                rates::oxygen_by_leaving_group(leaving, self.values)
            }
            ElectrophileKind::Acyl { donor, .. } => {
                self.v(match donor {
                    AcylDonor::Halide
                    | AcylDonor::Anhydride
                    | AcylDonor::Chloroformate
                    | AcylDonor::CarbamoylChloride
                    | AcylDonor::Dicarbonate => P::O_ACYL_HALIDE,
                    AcylDonor::Sulfonyl => P::O_SULFONYL,
                    _ => P::O_ACYL_MILD,
                }) + self.acylation_of_stabilised(class)
            }
            ElectrophileKind::Silyl { .. } => self.v(P::O_SILYL),
            _ => return None,
        };
        let by_class = match class {
            class if class.is_dicarbonyl() && site.beside_ketone => P::O_BETA_DICARBONYL,
            class if class.is_dicarbonyl() => P::O_DIESTER,
            AnionClass::Ketone | AnionClass::ArylKetone | AnionClass::Aldehyde => P::O_KETONE,
            AnionClass::Ester | AnionClass::Amide => P::O_ESTER,
            AnionClass::Nitronate => P::O_NITRONATE,
            _ => return None,
        };
        // HMPA and its kin, by Kamlet–Taft β, bind the cation so well that the anion is bare (from memory)
        const BARE: f64 = 1.0;
        let by_solvent = if self.medium.is_protic() {
            self.v(P::O_PROTIC)
        } else if self.medium.class() == SolventClass::DipolarAprotic {
            if self.cell.solvent.record.hydrogen_bond_acceptance >= BARE {
                self.v(P::O_BARE)
            } else {
                self.v(P::O_DIPOLAR)
            }
        } else {
            self.v(P::O_ETHER)
        };
        Some(self.v(by_class) + by_leaving + by_solvent)
    }
}
