//! What else befalls electrophile, products and base: elimination, its own C–H, solvolysis, loss of water, decay.

use enolattice_molecule::{AcylDonor, AlkylGroup, AnionClass, Cumulene, ElectrophileKind};
use enolattice_reagents::{Component, Decay, SolventClass};
use enolattice_units::math;

use super::{Kinetics, PKA_WATER};
use crate::carbonyl::Carbonyl;
use crate::network::Species;
use crate::parameters::P;
use crate::prepared::CarbonSite;
use crate::rates::{self, Nucleophile};

impl<'a> Kinetics<'a> {
    /// Rate constant of elimination by a carbanion of the substrate, paired as it is for substitution.
    pub(crate) fn elimination_by_carbanion(&self, site: &CarbonSite) -> f64 {
        let nucleophile = self.substrate_carbanion(site);
        let pairing = rates::pairing(&nucleophile, &self.medium, self.values, true);
        let carbon = self.v(P::E2_CARBANION);
        self.elimination(self.site_pka(site)) * math::exp10(pairing + carbon)
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

    /// By how much the rate of an alkoxide in an alcohol is that of a stronger base than its equilibria say, pK
    /// units.
    pub(crate) fn lag_of_alkoxide(&self, anion: Species) -> f64 {
        let (pka_dmso, class) = match anion {
            Species::Base => (
                self.cell.base.record.pka_dmso.value,
                self.cell.base.record.class,
            ),
            Species::Hydroxide => (PKA_WATER, AnionClass::Hydroxide),
            Species::Lyate => match &self.cell.solvent.record.acid {
                Some((acid, class)) => (acid.value, *class),
                None => return 0.0,
            },
            _ => return 0.0,
        };
        self.medium.shift_of_alkoxides(pka_dmso, class, self.values)
    }

    /// The electrophile's own C–H, where it gives its proton to bases: pKa in the medium, class. Alkylating
    /// agents eliminate instead.
    pub(crate) fn electrophile_acid(&self) -> Option<(f64, AnionClass)> {
        let acid = self.cell.electrophile.acid.as_ref()?;
        let is_carbon_acid = acid.element == 6 && self.alkyl().is_none();
        is_carbon_acid.then(|| (self.pka(acid.pka_dmso, acid.class), acid.class))
    }

    /// The electrophile's own X–H, where that is its strongest acid: pKa in the medium, class.
    pub(crate) fn electrophile_heteroatom(&self) -> Option<(f64, AnionClass)> {
        let acid = self.cell.electrophile.acid.as_ref()?;
        (acid.element != 6).then(|| (self.pka(acid.pka_dmso, acid.class), acid.class))
    }

    /// Rate constant at which the electrophile's carbanion attacks the next molecule of electrophile.
    pub(crate) fn self_attack_of_electrophile(&self) -> f64 {
        let carbanion = self.electrophile_acid().and_then(|(_, class)| {
            let acid = self.cell.electrophile.acid.as_ref()?;
            let nucleophile = Nucleophile {
                relative: 0.0,
                aggregated_at_m: Some(self.cell.conditions.concentration_m),
                ..self.oxygen_anion(acid.pka_dmso, class)
            };
            self.attack(&nucleophile)
        });
        carbanion.map_or(0.0, math::exp10)
    }

    /// Rate at which the carbanion of an acyl halide or anhydride loses its leaving group and is a ketene, 1/s:
    /// faster than anything else that it could do (from memory).
    pub(crate) fn loss_to_ketene(&self) -> f64 {
        const AT_ONCE_PER_S: f64 = 1e6;
        match self.kind() {
            Some(ElectrophileKind::Acyl {
                donor: AcylDonor::Halide | AcylDonor::Anhydride,
                ..
            }) => AT_ONCE_PER_S,
            _ => 0.0,
        }
    }

    /// Rate constant of the disproportionation of an aldehyde without α hydrogen by hydroxide (Cannizzaro),
    /// `k·[RCHO]²·[HO⁻]`, L²/(mol² s).
    pub(crate) fn disproportionation(&self) -> f64 {
        let electrophile = &self.cell.electrophile;
        let cannot_enolise = electrophile
            .acid
            .as_ref()
            .is_none_or(|acid| acid.element != 6);
        let (Some(ElectrophileKind::Aldehyde { .. }), Some((e, _, _)), true) =
            (self.kind(), electrophile.e.as_ref(), cannot_enolise)
        else {
            return 0.0;
        };
        // benzaldehyde is the reference; its E is that of the electrophilicities table
        const E_BENZALDEHYDE: f64 = -19.5;
        let at_25 = self.v(P::CANNIZZARO) + self.v(P::MAYR_S_N) * (e - E_BENZALDEHYDE);
        let (to_c, entropy) = (self.medium.temperature_c, self.v(P::DS_ADDITION));
        math::exp10(rates::at_temperature(at_25, 25.0, to_c, entropy))
    }

    pub(crate) fn solvolysis(&self) -> f64 {
        if !self.medium.is_protic() {
            return 0.0;
        }
        let Some((group, leaving, ..)) = self.alkyl() else {
            return self.alcoholysis();
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

    /// Rate at which a hydroxylic solvent takes an acyl, silyl or sulfonyl group, 1/s.
    ///
    /// # Source
    /// Acetyl chloride with ethanol reacts within a minute, acetic anhydride within a day, chloroformates,
    /// sulfonyl chlorides and isocyanates within hours (common practice); orders of magnitude.
    pub(super) fn alcoholysis(&self) -> f64 {
        let ethanol = match self.kind() {
            Some(ElectrophileKind::Acyl { donor, .. }) => match donor {
                AcylDonor::Halide => -1.5,
                AcylDonor::Azole | AcylDonor::Cyanide => -4.0,
                AcylDonor::Anhydride | AcylDonor::Chloroformate | AcylDonor::Sulfonyl => -4.5,
                AcylDonor::CarbamoylChloride | AcylDonor::Dicarbonate => -5.5,
                _ => return 0.0,
            },
            Some(ElectrophileKind::Silyl { bulk, .. }) => -0.5 - 1.5 * f64::from(*bulk),
            Some(ElectrophileKind::Cumulene {
                cumulene: Cumulene::Isocyanate | Cumulene::Ketene,
            }) => -4.5,
            _ => return 0.0,
        };
        math::exp10(rates::at_temperature(
            ethanol,
            25.0,
            self.medium.temperature_c,
            self.v(P::DS_ADDITION),
        ))
    }

    /// The bases that take water from an aldol adduct, with the pKa of their acids in the medium. The solvent's
    /// anion counts as a hydroxide where the solvent has no acid.
    pub(crate) fn oxygen_bases(&self) -> [(Species, f64); 3] {
        let hydroxide = self.pka(PKA_WATER, AnionClass::Hydroxide);
        let lyate = match &self.cell.solvent.record.acid {
            Some((acid, class)) => self.pka(acid.value, *class),
            None => hydroxide,
        };
        [
            (Species::Base, self.pka_base()),
            (Species::Lyate, lyate),
            (Species::Hydroxide, hydroxide),
        ]
    }

    /// Rate constant of the loss of water from the substrate's own aldol dimer, by a base of this pKa.
    pub(crate) fn dimer_dehydration(&self, acceptor: Carbonyl, base_pka: f64) -> f64 {
        let p = match acceptor {
            Carbonyl::Aldehyde => P::DEHYDRATION_DIMER_ALDEHYDE,
            Carbonyl::Ketone => P::DEHYDRATION_DIMER_KETONE,
            Carbonyl::Ester | Carbonyl::TertAlkylEster => return 0.0,
        };
        self.loss_of_water(p, base_pka)
    }

    /// Rate constant of the loss of water from the adduct at a site, by a base of this pKa in the medium.
    ///
    /// The carbanion of the adduct expels hydroxide: `log k = k₀ + a·(25.5 − pKa(C–H)) − b·(pKa(H₂O) − pKa(base))`.
    pub(crate) fn dehydration(&self, site: usize, base_pka: f64) -> f64 {
        match self.kind() {
            Some(ElectrophileKind::Aldehyde { aromatic, .. }) => {
                let p = if *aromatic {
                    P::DEHYDRATION_ARYL
                } else {
                    P::DEHYDRATION_ALKYL
                };
                let amine = math::exp10(self.by_way_of_iminium(P::IMINIUM_ELIMINATION));
                amine * self.by_acidity_of_adduct(site) * self.loss_of_water(p, base_pka)
            }
            Some(ElectrophileKind::Ketone { .. }) => {
                let amine = math::exp10(self.by_way_of_iminium(P::IMINIUM_ELIMINATION));
                let rate = self.loss_of_water(P::DEHYDRATION_ALKYL, base_pka);
                amine * self.by_acidity_of_adduct(site) * rate
            }
            _ => 0.0,
        }
    }

    /// How many times faster the adduct at a site loses water than one with the C–H of a ketone. Nitronates
    /// keep their hydroxyl (common practice: nitroalkenes are made from the neutral nitroalcohol).
    fn by_acidity_of_adduct(&self, site: usize) -> f64 {
        // the adduct of acetophenone and its like, 24 to 27 (Bordwell 1988, from memory)
        const KETONE_PKA: f64 = 25.5;
        match self.product_carbon(site).map(|site| &site.acid) {
            Some(acid) if acid.class != AnionClass::Nitronate => {
                math::exp10(self.v(P::DEHYDRATION_ACIDITY) * (KETONE_PKA - acid.pka_dmso))
            }
            _ => 1.0,
        }
    }

    pub(super) fn loss_of_water(&self, at_25: P, base_pka: f64) -> f64 {
        // lithium aldolates in ethers are chelated and keep their oxygen (common practice)
        const CHELATED: f64 = -4.0;
        // the acid of a weak base helps the hydroxide to leave: a gap beyond this counts no more (from memory)
        const HELPED: f64 = 10.0;
        let weaker = self.pka(PKA_WATER, AnionClass::Hydroxide) - base_pka;
        let weaker = weaker.clamp(0.0, HELPED);
        let at_25 = self.v(at_25)
            + if self.medium.binds_oxygen() {
                CHELATED
            } else {
                0.0
            }
            - self.v(P::DEHYDRATION_BRONSTED) * weaker;
        math::exp10(rates::at_temperature(
            at_25,
            25.0,
            self.medium.temperature_c,
            self.v(P::DS_SN2),
        ))
    }

    /// Whether a base is lost through the carbanion of the solvent, as fast as by itself: that of an ester
    /// condenses with the solvent, that of a halogenated solvent gives a carbene.
    pub(crate) fn solvent_anion_is_lost(&self) -> bool {
        let record = &self.cell.solvent.record;
        let acid = record.acid.as_ref().map(|(_, class)| *class);
        acid == Some(AnionClass::Ester)
            || acid.is_some() && record.class == SolventClass::Halogenated
    }

    /// Rate at which the base decays in the solvent, 1/s.
    ///
    /// `k = Σ φ·ln 2 / t½` over the parts of the solvent, each at the temperature of its half-life that is nearest
    /// to that of the cell, by Eyring to the latter.
    pub(crate) fn decay(&self) -> f64 {
        let to_c = self.medium.temperature_c;
        let base = &self.cell.base.record;
        let in_part = |part: &Component<'_>| {
            let known = base.decay_in(part);
            let gap = |row: &&Decay| (row.temperature_c - to_c).abs();
            let nearest = known.into_iter().min_by(|a, b| gap(a).total_cmp(&gap(b)))?;
            let log10_k = math::log10(std::f64::consts::LN_2 / (nearest.half_life_h * 3600.0));
            let entropy = self.v(P::DS_SN2);
            let at_c = nearest.temperature_c;
            Some(math::exp10(rates::at_temperature(
                log10_k, at_c, to_c, entropy,
            )))
        };
        let parts = self.cell.solvent.record.components();
        parts
            .filter_map(|part| Some(part.volume_fraction * in_part(&part)?))
            .sum()
    }
}
