//! Acidities in the medium of a cell.

mod onium;

use enolattice_molecule::AnionClass;
use enolattice_reagents::{Cation, SolventClass};
use enolattice_units::log10_k_at;

use crate::parameters::{P, Values, hydrogen_bonding, localisation};
use crate::prepared::Solvent;
pub use onium::{Onium, OniumKind};

/// Kamlet–Taft α of water, the scale on which the class parameters are given.
const ALPHA_WATER: f64 = 1.17;
/// Kamlet–Taft β of DMSO, the medium of the scale.
const ACCEPTANCE_DMSO: f64 = 0.76;
/// Permittivity of DMSO, the medium of the scale.
const PERMITTIVITY_DMSO: f64 = 46.7;
/// 1/ε − 1/46.7 at the permittivity of THF, where the ion-pair parameters are given.
const RECIPROCAL_THF: f64 = 0.112;
/// The effect of ion pairing levels off in hydrocarbons, where aggregates take over (from memory).
const PAIRING_CEILING: f64 = 1.6;
/// Above this share of water's α the ions are solvated, not paired (from memory).
const PROTIC_SHARE: f64 = 0.3;

/// What an additive does to contact pairs and aggregates.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(crate) struct Loosening {
    /// Share of contact pairs that it undoes, 0–1.
    pub(crate) freed: f64,
    /// log10 factor on the rates of aggregated lithium enolates.
    pub(crate) disaggregated: f64,
}

/// Solvent, counter-ion and temperature.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Medium<'a> {
    /// The solvent.
    pub(crate) solvent: &'a Solvent,
    /// Counter-ion of all anions.
    pub(crate) cation: Cation,
    /// What additives do to the counter-ion.
    pub(crate) additive: Loosening,
    /// Temperature, °C.
    pub(crate) temperature_c: f64,
}

impl Medium<'_> {
    /// Hydrogen-bond donation relative to water, 0–1.3.
    pub(crate) fn donation(&self) -> f64 {
        self.solvent.record.hydrogen_bond_donation / ALPHA_WATER
    }

    /// Whether the solvent donates hydrogen bonds strongly enough to free ions.
    pub(crate) fn is_protic(&self) -> bool {
        self.donation() > PROTIC_SHARE
    }

    /// Whether the solvent is an alcohol that solvates anions well: a primary or secondary one or its kin.
    fn is_alcohol(&self) -> bool {
        // of the α of water: 2-propanol 0.65, tert-butanol 0.36 (Kamlet and Taft, from memory)
        const GOOD_SHARE: f64 = 0.6;
        self.donation() > GOOD_SHARE && self.class() == SolventClass::Alcohol
    }

    /// Whether ions are contact pairs or aggregates.
    pub(crate) fn is_paired(&self) -> bool {
        !self.is_protic() && self.solvent.record.permittivity < 12.0
    }

    /// Whether the anions are contact pairs or aggregates with a metal that holds oxygen firmly.
    pub(crate) fn binds_oxygen(&self) -> bool {
        self.is_paired()
            && matches!(
                self.cation,
                Cation::Lithium
                    | Cation::Magnesium
                    | Cation::Calcium
                    | Cation::Barium
                    | Cation::Zinc
            )
    }

    /// Whether the counter-ion has two charges, and holds 1,3-dicarbonyl anions as chelates.
    fn is_divalent(&self) -> bool {
        matches!(
            self.cation,
            Cation::Magnesium | Cation::Calcium | Cation::Barium | Cation::Zinc
        )
    }

    /// Class of the solvent.
    pub(crate) fn class(&self) -> SolventClass {
        self.solvent.record.class
    }

    /// 1/ε − 1/46.7.
    fn reciprocal_permittivity(&self) -> f64 {
        1.0 / self.solvent.record.permittivity - 1.0 / PERMITTIVITY_DMSO
    }

    /// Strength of ion pairing, 0 in DMSO and protic media, 1 in THF.
    fn pairing(&self) -> f64 {
        if self.is_protic() {
            0.0
        } else {
            (self.reciprocal_permittivity() / RECIPROCAL_THF).clamp(0.0, PAIRING_CEILING)
        }
    }

    /// Strength of the contact pair: that of the medium times that of the cation, Na⁺ = 1.
    pub(crate) fn pair_strength(&self, values: &Values) -> f64 {
        let cation = match self.cation {
            Cation::Lithium => values.get(P::PAIR_LITHIUM),
            Cation::Sodium => 1.0,
            Cation::Potassium => values.get(P::PAIR_POTASSIUM),
            Cation::Caesium => values.get(P::PAIR_CAESIUM),
            Cation::Ammonium => values.get(P::PAIR_AMMONIUM),
            // no value is known for the other two: they are taken as magnesium (estimate)
            Cation::Magnesium | Cation::Calcium | Cation::Barium => values.get(P::PAIR_MAGNESIUM),
            Cation::Zinc => values.get(P::PAIR_ZINC),
            Cation::None => 0.0,
        };
        cation * self.pairing() * (1.0 - self.additive.freed)
    }

    /// Stabilisation of an anion by the hydrogen bonds of the solvent as rates feel it, pK units: in proportion
    /// to the solvent's donation.
    pub(crate) fn hydrogen_bond_shift(
        &self,
        pka_dmso: f64,
        class: AnionClass,
        values: &Values,
    ) -> f64 {
        hydrogen_bonding(pka_dmso, class, values) * self.donation()
    }

    /// What an alcohol adds to it at equilibrium: it solvates alkoxides, its own among them, better than its α says.
    pub(crate) fn shift_of_alkoxides(
        &self,
        pka_dmso: f64,
        class: AnionClass,
        values: &Values,
    ) -> f64 {
        // autoprotolysis of methanol, ethanol and 2-propanol (the page on the medium)
        // more than water gives is not known of any alcohol but methanol
        const LARGEST: f64 = 1.1;
        let is_alkoxide = matches!(class, AnionClass::Alkoxide | AnionClass::Hydroxide);
        if is_alkoxide && self.is_alcohol() {
            let share = (values.get(P::H_ALKOXIDE_IN_ALCOHOL) * self.donation()).min(LARGEST);
            hydrogen_bonding(pka_dmso, class, values) * (share - self.donation()).max(0.0)
        } else {
            0.0
        }
    }

    /// The pKa of an acid in the medium, on a scale that agrees with the medium's own up to one
    /// number for all acids ([`Medium::own_scale`]).
    ///
    /// `pKa(V, T) = [pKa(DMSO) − h·α/1.17 − loc·cat·g(ε)] · 298.15/T` for neutral acids;
    /// those of cationic acids in [`Medium::pka_cationic`].
    ///
    /// | symbol | meaning                                               |
    /// |--------|-------------------------------------------------------|
    /// | h      | stabilisation of the anion by water, pK               |
    /// | α, β   | Kamlet–Taft hydrogen-bond donation and acceptance     |
    /// | loc    | localisation against a ketone enolate, pK             |
    /// | cat    | counter-ion, Na⁺ = 1                                  |
    /// | g(ε)   | (1/ε − 1/46.7)/0.112, 0 in protic media, at most 1.6  |
    ///
    /// # Source
    /// Form and parameters: see each entry of the parameter vector.
    pub(crate) fn pka(&self, pka_dmso: f64, class: AnionClass, values: &Values) -> f64 {
        let shift = if class == AnionClass::Neutral {
            self.cationic_shift(Onium::TERTIARY, values)
                + self.onium_charge(Onium::TERTIARY, values)
        } else {
            let chelate = if class.is_dicarbonyl() && self.is_divalent() {
                values.get(P::LOC_CHELATE)
            } else {
                0.0
            };
            let pairing = localisation(class).map_or(0.0, |p| values.get(p)) + chelate;
            self.hydrogen_bond_shift(pka_dmso, class, values)
                + self.shift_of_alkoxides(pka_dmso, class, values)
                + pairing * self.pair_strength(values)
        };
        log10_k_at(pka_dmso - shift, self.temperature_c)
    }

    /// The pKa of a cationic acid as it acts in a pot.
    ///
    /// `pKa(V, T) = [pKa(DMSO) − a·α/1.17 − d·n·(0.76 − β·s(ε)) − z − c] · 298.15/T`
    ///
    /// | symbol | meaning                                                                        |
    /// |--------|--------------------------------------------------------------------------------|
    /// | a      | of the kind of acid: its base takes hydrogen bonds, its cation repels water    |
    /// | d, n   | hydrogen bond of an N–H with localised charge to the solvent, number of these   |
    /// | s(ε)   | an ion's hydrogen bond grows as the permittivity screens it less               |
    /// | z      | electron pairs of the solvent for the rest of a small cation, open flat ones    |
    /// | c      | cost of separating charges; in its place, where ε < 12, what contact pairs with the anions of the pot gain |
    pub(crate) fn pka_cationic(&self, pka_dmso: f64, onium: Onium, values: &Values) -> f64 {
        let shift = self.cationic_shift(onium, values) + self.onium_charge(onium, values);
        log10_k_at(pka_dmso - shift, self.temperature_c)
    }

    /// The pKa of the same acid as free ions.
    pub(crate) fn pka_cationic_free(&self, pka_dmso: f64, onium: Onium, values: &Values) -> f64 {
        let shift = self.cationic_shift(onium, values)
            + self.cation_solvation(onium, values)
            + self.charge_separation(values);
        log10_k_at(pka_dmso - shift, self.temperature_c)
    }

    /// What the charges of an onium ion and its anion cost: a contact pair never parts them and gains by its own
    /// hydrogen bond, the anion standing for the solvent's electron pairs; free ions pay for the separation.
    fn onium_charge(&self, onium: Onium, values: &Values) -> f64 {
        if self.is_paired() {
            -values.get(P::ONIUM_PAIR)
        } else {
            self.cation_solvation(onium, values) + self.charge_separation(values)
        }
    }

    /// The pKa of a protonated solvent molecule as it acts in a pot.
    pub(crate) fn pka_lyonium(&self, pka_dmso: f64, values: &Values) -> f64 {
        let charge = match self.is_paired() {
            true => -values.get(P::ONIUM_PAIR),
            false => self.charge_separation(values),
        };
        log10_k_at(pka_dmso - charge, self.temperature_c)
    }

    fn charge_separation(&self, values: &Values) -> f64 {
        if self.is_alcohol() {
            values.get(P::CHARGES_IN_ALCOHOL)
        } else if self.is_protic() {
            0.0
        } else {
            values.get(P::CHARGE_SEPARATION) * self.reciprocal_permittivity().max(0.0)
        }
    }

    /// By how much less the solvent binds an N–H with its electron pairs than DMSO does, in units of β.
    fn missing_acceptance(&self, values: &Values) -> f64 {
        let screening = 1.0 + values.get(P::H_CATIONIC_SCREENING) * self.pairing();
        ACCEPTANCE_DMSO - self.solvent.record.hydrogen_bond_acceptance * screening
    }

    /// Hydrogen bonds of a cationic acid and its base with the solvent.
    fn cationic_shift(&self, onium: Onium, values: &Values) -> f64 {
        let (by_donation, donors) = match onium.kind {
            OniumKind::Alkylammonium => (P::H_CATIONIC_ACID, onium.donors),
            OniumKind::Arylammonium => (P::H_CATIONIC_ARYL, onium.donors),
            OniumKind::Azinium => (P::H_CATIONIC_AZINE, onium.donors),
            // where the charge is spread over several nitrogens, an N–H hardly asks for a hydrogen bond
            OniumKind::Amidinium => (P::H_CATIONIC_AMIDINE, 0),
            OniumKind::Phosphazenium => (P::H_CATIONIC_PHOSPHAZENE, 0),
        };
        let bound = values.get(P::H_CATIONIC_DONOR) * f64::from(donors);
        values.get(by_donation) * self.donation() + bound * self.missing_acceptance(values)
    }

    /// What the rest of a cation misses of the solvent's electron pairs: phosphazenium ions are too large to miss
    /// any; flat ions are open to those of a solvent that screens little.
    fn cation_solvation(&self, onium: Onium, values: &Values) -> f64 {
        let missing = self.missing_acceptance(values);
        match onium.kind {
            OniumKind::Phosphazenium => 0.0,
            OniumKind::Azinium => {
                values.get(P::CATION_SOLVATION) * missing
                    - values.get(P::AZINE_OPEN) * self.pairing().min(1.0)
            }
            _ => values.get(P::CATION_SOLVATION) * missing,
        }
    }

    /// What to add to [`Medium::pka`] for the pKa on the solvent's own scale: the proton's better or worse
    /// solvation there than in DMSO. Zero in DMSO and, by the choice of the other parameters, in water;
    /// `None` where no scale is published.
    pub(crate) fn own_scale(&self, values: &Values) -> Option<f64> {
        let at_25 = match self.solvent.record.name.as_str() {
            "MeCN" => values.get(P::SCALE_MECN),
            "THF" => values.get(P::SCALE_THF),
            "DMF" => values.get(P::SCALE_DMF),
            "DMSO" | "water" => 0.0,
            "tBuOH" => 0.0,
            "MeOH" | "EtOH" | "iPrOH" => values.get(P::CHARGES_IN_ALCOHOL),
            _ => return None,
        };
        Some(log10_k_at(at_25, self.temperature_c))
    }
}
