//! Acidities in the medium of a cell.

use enolattice_molecule::AnionClass;
use enolattice_reagents::{Cation, SolventClass};
use enolattice_units::log10_k_at;

use crate::parameters::{P, Values, hydrogen_bond, localisation};
use crate::prepared::Solvent;

/// Kamlet–Taft α of water, the scale on which the class parameters are given.
const ALPHA_WATER: f64 = 1.17;
/// Permittivity of DMSO, the medium of the scale.
const PERMITTIVITY_DMSO: f64 = 46.7;
/// 1/ε − 1/46.7 at the permittivity of THF, where the ion-pair parameters are given.
const RECIPROCAL_THF: f64 = 0.112;
/// The effect of ion pairing levels off in hydrocarbons, where aggregates take over (from memory).
const PAIRING_CEILING: f64 = 1.6;
/// Above this share of water's α the ions are solvated, not paired (from memory).
const PROTIC_SHARE: f64 = 0.3;

/// Solvent, counter-ion and temperature.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Medium<'a> {
    /// The solvent.
    pub(crate) solvent: &'a Solvent,
    /// Counter-ion of all anions.
    pub(crate) cation: Cation,
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

    /// Whether ions are contact pairs or aggregates.
    pub(crate) fn is_paired(&self) -> bool {
        !self.is_protic() && self.solvent.record.permittivity < 12.0
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
            Cation::None => 0.0,
        };
        cation * self.pairing()
    }

    /// Part of the shift of the pKa that comes from hydrogen bonds to the anion, pK units.
    pub(crate) fn hydrogen_bond_shift(&self, class: AnionClass, values: &Values) -> f64 {
        hydrogen_bond(class).map_or(0.0, |p| values.get(p)) * self.donation()
    }

    /// The pKa of an acid in the medium.
    ///
    /// `pKa(V, T) = [pKa(DMSO) − h·α/1.17 − loc·cat·g(ε)] · 298.15/T` for neutral acids;
    /// for cationic acids `− c·(1/ε − 1/46.7)`, the cost of separating charges, in place
    /// of the ion-pair term.
    ///
    /// | symbol | meaning                                               |
    /// |--------|-------------------------------------------------------|
    /// | h      | stabilisation of the class of anion by water, pK      |
    /// | α      | Kamlet–Taft hydrogen-bond donation                    |
    /// | loc    | localisation against a ketone enolate, pK             |
    /// | cat    | counter-ion, Na⁺ = 1                                  |
    /// | g(ε)   | (1/ε − 1/46.7)/0.112, 0 in protic media, at most 1.6  |
    ///
    /// # Source
    /// Form and parameters: see each entry of the parameter vector.
    pub(crate) fn pka(&self, pka_dmso: f64, class: AnionClass, values: &Values) -> f64 {
        let bonded = pka_dmso - self.hydrogen_bond_shift(class, values);
        let paired = if class == AnionClass::Neutral {
            let separation = self.reciprocal_permittivity().max(0.0);
            if self.is_protic() {
                0.0
            } else {
                values.get(P::CHARGE_SEPARATION) * separation
            }
        } else {
            localisation(class).map_or(0.0, |p| values.get(p)) * self.pair_strength(values)
        };
        log10_k_at(bonded - paired, self.temperature_c)
    }
}
