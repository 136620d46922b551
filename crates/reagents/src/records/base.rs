//! A base as it is used.

use enolattice_molecule::AnionClass;
use enolattice_units::math;

use crate::{Component, Hazards, Solvent, SolventClass, Value};

/// Counter-ion of a base.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Cation {
    /// Li⁺
    Lithium,
    /// Na⁺
    Sodium,
    /// K⁺
    Potassium,
    /// Cs⁺
    Caesium,
    /// Tetraalkylammonium.
    Ammonium,
    /// Mg²⁺, as in Grignard reagents and magnesium amides.
    Magnesium,
    /// Ca²⁺, of the hydride and hydroxide.
    Calcium,
    /// Ba²⁺, of the hydroxide.
    Barium,
    /// Zn²⁺, as in zinc amides.
    Zinc,
    /// Neutral bases.
    None,
}

/// Kind of a base, by what it does beside taking a proton.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum BaseKind {
    /// Metal amides.
    Amide,
    /// Alkoxides.
    Alkoxide,
    /// Hydroxides.
    Hydroxide,
    /// Saline hydrides: the conjugate acid leaves as gas.
    Hydride,
    /// Carbonates, hydrogencarbonates and phosphates.
    Carbonate,
    /// Fluorides.
    Fluoride,
    /// Carboxylates.
    Carboxylate,
    /// Neutral amines, amidines, guanidines, phosphazenes and proazaphosphatranes.
    Amine,
    /// Alkyllithiums: the conjugate acid is no acid.
    Organolithium,
    /// Alkylmagnesium halides: the same, slower as bases, and they add to carbonyl groups.
    Grignard,
}

/// How a base is bought.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Supply {
    /// A solid that is weighed.
    Solid,
    /// A neat liquid.
    Liquid,
    /// A solid in oil.
    Dispersion,
    /// A solution in a solvent.
    Solution,
    /// Made in the pot from what the row's `supplied` says.
    MadeInThePot,
}

/// How fast a base decays in a medium of its own accord.
#[derive(Clone, Debug, PartialEq)]
pub struct Decay {
    /// Name of a solvent of the library, or of a class of solvents.
    pub solvent: String,
    /// Temperature of the half-life, °C.
    pub temperature_c: f64,
    /// Half-life, h.
    pub half_life_h: f64,
}

/// A base as it is used.
#[derive(Clone, Debug)]
pub struct Base {
    /// The trade's short name.
    pub name: String,
    /// Other names.
    pub synonyms: Vec<String>,
    /// CAS registry number; empty where none is known.
    pub cas: String,
    /// SMILES of the base as supplied (with cation).
    pub smiles: String,
    /// Molecular formula of the base without solvent and water, Hill order.
    pub formula: String,
    /// SMILES of the conjugate acid.
    pub conjugate_acid: String,
    /// Kind.
    pub kind: BaseKind,
    /// Counter-ion.
    pub cation: Cation,
    /// Class of the basic anion (or `Neutral`), for the shift by the medium.
    pub class: AnionClass,
    /// pKa of the conjugate acid on the DMSO scale at 25 °C (free ions).
    pub pka_dmso: Value,
    /// Steric bulk: 0 for hydroxide, 1 for a dialkylamide.
    pub bulk: Value,
    /// Reactivity as a nucleophile at carbon, log10 units relative to a carbanion of the same pKa.
    pub nucleophilicity: Value,
    /// log10 of the solubility in mol/L by class of solvent; a class that is absent: soluble.
    ///
    /// A solid that reacts without dissolving (hydrides) carries an effective figure:
    /// solubility times `dissolution_per_s` is the rate at which its suspension is used up.
    pub log_solubility: Vec<(SolventClass, f64)>,
    /// The same for single solvents, by name, that differ from their class.
    pub log_solubility_in: Vec<(String, f64)>,
    /// Rate constant of dissolution k_La, 1/s; 0 where `log_solubility` is empty.
    pub dissolution_per_s: f64,
    /// How it is bought.
    pub supply: Supply,
    /// The same in words, e.g. `solid, powdered`, `2.0 M in THF`.
    pub supplied: String,
    /// Concentration of the solution that is bought, mol/L; none where it is no solution.
    pub supply_m: Option<f64>,
    /// Solvent of the solution that is bought, as in the library where it is there.
    pub supply_solvent: Option<String>,
    /// Water that comes with the base as it is supplied, mol per mol of base.
    pub water_equiv: f64,
    /// Source of `water_equiv`.
    pub water_source: String,
    /// Decay in solvents; where nothing is listed none is known.
    pub decay: Vec<Decay>,
    /// Source of `decay`; empty where nothing is listed.
    pub decay_source: String,
    /// Hazard statements.
    pub hazards: Hazards,
    /// When the row was last checked, `YYYY-MM`.
    pub date: String,
    /// Source of the row's facts that carry none of their own.
    pub source: String,
}

/// Concentration that a component in which the base is not limited adds to a mixture in which
/// another component limits it, mol/L: beyond what cells use, and no more than a medium holds
/// (estimate).
const UNLIMITED_M: f64 = 1.0;

impl Base {
    /// log10 of the solubility in mol/L in this solvent; none where it is taken as soluble.
    ///
    /// In a mixture: S = Σ φᵢSᵢ with volume fractions φ, where a part that does not limit it counts
    /// with 1 mol/L; none where no part limits it. That takes the base as dissolved in the part
    /// that dissolves it, as stirred two-phase mixtures do (estimate).
    pub fn log_solubility_for(&self, solvent: &Solvent) -> Option<f64> {
        let parts = || {
            solvent
                .components()
                .map(|part| (self.log_solubility_in(&part), part))
        };
        if let [(only, _)] = parts().collect::<Vec<_>>()[..] {
            return only;
        }
        if parts().all(|(log, _)| log.is_none()) {
            return None;
        }
        let share = |(log, part): (Option<f64>, Component<'_>)| {
            part.volume_fraction * log.map_or(UNLIMITED_M, math::exp10)
        };
        Some(math::log10(parts().map(share).sum()))
    }

    /// What is known of its decay in one component of a solvent: the component's own rows, or
    /// those of its class where it has none.
    pub fn decay_in<'a>(&'a self, part: &Component<'_>) -> Vec<&'a Decay> {
        let of = |name: &str| -> Vec<&Decay> {
            self.decay
                .iter()
                .filter(|row| row.solvent == name)
                .collect()
        };
        let own = of(part.name);
        if own.is_empty() {
            of(part.class.name())
        } else {
            own
        }
    }

    fn log_solubility_in(&self, part: &Component<'_>) -> Option<f64> {
        let single = self.log_solubility_in.iter();
        let class = self.log_solubility.iter();
        single
            .filter(|(name, _)| name == part.name)
            .map(|(_, log)| *log)
            .chain(
                class
                    .filter(|(class, _)| *class == part.class)
                    .map(|(_, log)| *log),
            )
            .next()
    }
}
