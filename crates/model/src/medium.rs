//! Acidities in the medium of a cell.

use enolattice_molecule::AnionClass;
use enolattice_reagents::{Cation, SolventClass};
use enolattice_units::log10_k_at;

use crate::parameters::{P, Values, hydrogen_bonding, localisation};
use crate::prepared::Solvent;

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

    /// What an alcohol adds to it at equilibrium: it solvates alkoxides, its own among them, about as well as
    /// water does.
    pub(crate) fn shift_of_alkoxides(
        &self,
        pka_dmso: f64,
        class: AnionClass,
        values: &Values,
    ) -> f64 {
        // autoprotolysis of methanol, ethanol and 2-propanol (the page on the medium)
        const OF_ALKOXIDES: f64 = 0.95;
        let is_alkoxide = matches!(class, AnionClass::Alkoxide | AnionClass::Hydroxide);
        if is_alkoxide && self.is_alcohol() {
            hydrogen_bonding(pka_dmso, class, values) * (OF_ALKOXIDES - self.donation()).max(0.0)
        } else {
            0.0
        }
    }

    /// The pKa of an acid in the medium, on a scale that agrees with the medium's own up to one
    /// number for all acids ([`Medium::own_scale`]).
    ///
    /// `pKa(V, T) = [pKa(DMSO) − h·α/1.17 − loc·cat·g(ε)] · 298.15/T` for neutral acids;
    /// for cationic acids `− c·(1/ε − 1/46.7) − d·(0.76 − β) + p`, the cost of separating charges, the
    /// hydrogen bond of the N–H to the solvent and, where ε < 12, contact pairs with the anions of the pot,
    /// in place of the ion-pair term.
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
            self.cationic_shift(1, values) + self.onium_charge(values)
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

    /// The pKa of a cationic acid with this many N–H as it acts in a pot: contact pairs with the anions of the
    /// pot make its base stronger in media of low permittivity.
    pub(crate) fn pka_cationic(&self, pka_dmso: f64, donors: u8, values: &Values) -> f64 {
        let shift = self.cationic_shift(donors, values) + self.onium_charge(values);
        log10_k_at(pka_dmso - shift, self.temperature_c)
    }

    /// The pKa of the same acid as free ions.
    pub(crate) fn pka_cationic_free(&self, pka_dmso: f64, donors: u8, values: &Values) -> f64 {
        let shift = self.cationic_shift(donors, values) + self.charge_separation(values);
        log10_k_at(pka_dmso - shift, self.temperature_c)
    }

    /// What the charges of an onium ion and its anion cost: a contact pair never parts them and gains by its own
    /// hydrogen bond, free ions pay for the separation.
    fn onium_charge(&self, values: &Values) -> f64 {
        if self.is_paired() {
            -values.get(P::ONIUM_PAIR)
        } else {
            self.charge_separation(values)
        }
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

    fn cationic_shift(&self, donors: u8, values: &Values) -> f64 {
        let acceptance = ACCEPTANCE_DMSO - self.solvent.record.hydrogen_bond_acceptance;
        values.get(P::H_CATIONIC_ACID) * self.donation()
            + values.get(P::H_CATIONIC_DONOR) * f64::from(donors) * acceptance
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
