//! What one row of each table says.

use enolattice_molecule::AnionClass;

/// A number with its standard uncertainty and source.
#[derive(Clone, Debug, PartialEq)]
pub struct Value {
    /// The number; its unit is in the field's name.
    pub value: f64,
    /// Standard uncertainty, in the same unit.
    pub sigma: f64,
    /// A publication, or `from memory`, or `common practice`.
    pub source: String,
}

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
    /// Carbonates.
    Carbonate,
    /// Neutral amines, amidines and guanidines.
    Amine,
    /// Alkyllithiums: the conjugate acid is no acid.
    Organolithium,
}

/// Class of a solvent, for solubilities and rates.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum SolventClass {
    /// Ethers.
    Ether,
    /// Hydrocarbons.
    Hydrocarbon,
    /// Chlorinated hydrocarbons.
    Halogenated,
    /// Aprotic and dipolar: DMF, DMSO, MeCN, ketones, HMPA.
    DipolarAprotic,
    /// Alcohols.
    Alcohol,
    /// Water.
    Water,
}

/// Hazard statements of a substance; empty with source `unknown` where nothing is known.
///
/// Empty with another source says that none is known to be assigned.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Hazards {
    /// GHS H-codes, e.g. `H225`.
    pub h_codes: Vec<String>,
    /// Where the codes were read; `unknown` where there are none.
    pub source: String,
    /// Date of the source, `YYYY-MM`; empty where unknown.
    pub date: String,
}

impl Hazards {
    /// Whether nothing is known, which is not the same as no hazard.
    pub fn is_unknown(&self) -> bool {
        self.source == "unknown"
    }

    /// Whether a statement is among them; `H360` also finds `H360D`.
    pub fn has(&self, code: &str) -> bool {
        self.h_codes.iter().any(|known| known.starts_with(code))
    }
}

/// A base as it is used.
#[derive(Clone, Debug)]
pub struct Base {
    /// The trade's short name.
    pub name: String,
    /// Other names.
    pub synonyms: Vec<String>,
    /// CAS registry number.
    pub cas: String,
    /// SMILES of the base as supplied (with cation).
    pub smiles: String,
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
    /// How it is bought, e.g. `solid`, `2.0 M in THF`.
    pub supplied: String,
    /// Hazard statements.
    pub hazards: Hazards,
    /// Source of the row's facts that carry none of their own.
    pub source: String,
}

impl Base {
    /// log10 of the solubility in mol/L in this solvent; none where it is taken as soluble.
    pub fn log_solubility_for(&self, solvent: &Solvent) -> Option<f64> {
        let single = self
            .log_solubility_in
            .iter()
            .find(|(name, _)| *name == solvent.name);
        let class = || {
            self.log_solubility
                .iter()
                .find(|(class, _)| *class == solvent.class)
        };
        single
            .map(|(_, log)| *log)
            .or_else(|| class().map(|(_, log)| *log))
    }
}

/// A solvent.
#[derive(Clone, Debug)]
pub struct Solvent {
    /// The trade's short name.
    pub name: String,
    /// Other names.
    pub synonyms: Vec<String>,
    /// CAS registry number.
    pub cas: String,
    /// SMILES.
    pub smiles: String,
    /// Class.
    pub class: SolventClass,
    /// Relative permittivity at 25 °C.
    pub permittivity: f64,
    /// Kamlet–Taft hydrogen-bond donation α.
    pub hydrogen_bond_donation: f64,
    /// Kamlet–Taft hydrogen-bond acceptance β.
    pub hydrogen_bond_acceptance: f64,
    /// Gutmann donor number, kcal/mol.
    pub donor_number: Option<f64>,
    /// Viscosity at 25 °C, mPa s.
    pub viscosity_mpa_s: f64,
    /// Density at 25 °C, g/mL.
    pub density_g_ml: f64,
    /// Molar mass, g/mol.
    pub molar_mass_g_mol: f64,
    /// Boiling point, °C.
    pub boiling_c: f64,
    /// Melting point, °C.
    pub melting_c: f64,
    /// Flash point, °C; none where the substance has none or it is not known.
    pub flash_c: Option<f64>,
    /// Water in the usual grade (dry where the trade uses it dry), ppm by mass.
    pub water_ppm: f64,
    /// Whether it forms peroxides on storage.
    pub peroxide_former: bool,
    /// pKa of the solvent's own most acidic X–H on the DMSO scale, with its class.
    pub acid: Option<(Value, AnionClass)>,
    /// Hazard statements.
    pub hazards: Hazards,
    /// Source of the row's facts.
    pub source: String,
}

/// An electrophile known by name.
#[derive(Clone, Debug)]
pub struct NamedElectrophile {
    /// The trade's short name.
    pub name: String,
    /// Other names.
    pub synonyms: Vec<String>,
    /// CAS registry number.
    pub cas: String,
    /// SMILES.
    pub smiles: String,
    /// Boiling point, °C, where known.
    pub boiling_c: Option<f64>,
    /// Hazard statements.
    pub hazards: Hazards,
    /// Source of the row's facts.
    pub source: String,
}

/// A measured acidity in DMSO.
#[derive(Clone, Debug)]
pub struct Acidity {
    /// Canonical SMILES.
    pub canonical: String,
    /// SMILES as in the table; `atom` counts in it.
    pub smiles: String,
    /// Index of the acidic atom in `smiles`, where the table says it.
    pub atom: Option<usize>,
    /// Atomic number of the acidic atom.
    pub element: u8,
    /// pKa in DMSO at 25 °C.
    pub pka_dmso: Value,
    /// Whether the value lies beyond what the solvent lets one measure.
    pub extrapolated: bool,
    /// Group of compounds that share a scaffold, for cross-validation.
    pub scaffold: String,
}

/// A Mayr electrophilicity.
#[derive(Clone, Debug)]
pub struct Electrophilicity {
    /// Canonical SMILES.
    pub canonical: String,
    /// E of log k = sN (N + E) at 20 °C.
    pub e: Value,
}
