//! A solvent, pure or mixed.

use enolattice_molecule::AnionClass;

use crate::{Hazards, Value};

/// Class of a solvent, for solubilities and rates.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum SolventClass {
    /// Ethers, and esters and carbonates as solvents.
    Ether,
    /// Hydrocarbons.
    Hydrocarbon,
    /// Chlorinated hydrocarbons.
    Halogenated,
    /// Aprotic and dipolar: DMF, DMSO, MeCN, ketones, HMPA.
    DipolarAprotic,
    /// Alcohols, and the other organic liquids that donate hydrogen bonds.
    Alcohol,
    /// Water.
    Water,
}

impl SolventClass {
    /// The word of the tables for it.
    pub const fn name(self) -> &'static str {
        match self {
            SolventClass::Ether => "ether",
            SolventClass::Hydrocarbon => "hydrocarbon",
            SolventClass::Halogenated => "halogenated",
            SolventClass::DipolarAprotic => "dipolar aprotic",
            SolventClass::Alcohol => "alcohol",
            SolventClass::Water => "water",
        }
    }

    /// Whether such a solvent donates hydrogen bonds.
    pub fn is_protic(self) -> bool {
        matches!(self, SolventClass::Alcohol | SolventClass::Water)
    }
}

/// A solvent.
///
/// A mixture has the same fields; [`Library::mixture`](crate::Library::mixture) says by which
/// rule each is mixed.
#[derive(Clone, Debug)]
pub struct Solvent {
    /// The trade's short name; of a mixture the names of its parts with their volumes, `THF/DMF 4:1`.
    pub name: String,
    /// Other names.
    pub synonyms: Vec<String>,
    /// CAS registry number; empty where none is known, and for mixtures.
    pub cas: String,
    /// SMILES.
    pub smiles: String,
    /// Molecular formula, Hill order; empty for mixtures.
    pub formula: String,
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
    /// Molar mass, g/mol; of a mixture the mean over its molecules.
    pub molar_mass_g_mol: f64,
    /// Boiling point, °C; of a mixture the lowest of its parts, a bound from below but for azeotropes.
    pub boiling_c: f64,
    /// Melting point, °C; of a mixture the temperature at which the first crystals may come.
    pub melting_c: f64,
    /// Flash point, °C; none where the substance has none or it is not known.
    pub flash_c: Option<f64>,
    /// Grade that is commonly used, e.g. `anhydrous`.
    pub grade: String,
    /// Water in that grade, ppm by mass.
    pub water_ppm: f64,
    /// Whether it mixes with water in all proportions.
    pub water_miscible: bool,
    /// Whether a mixture is taken to separate into two liquids; false for a pure solvent.
    pub biphasic: bool,
    /// Whether it forms peroxides on storage.
    pub peroxide_former: bool,
    /// pKa of the solvent's own most acidic X–H on the DMSO scale, with its class.
    pub acid: Option<(Value, AnionClass)>,
    /// Concentration of the molecules that carry it, mol/L: of the pure solvent, or of that part of a
    /// mixture; 0 where there is none.
    pub acid_m: f64,
    /// Volume fractions of the pure solvents of a mixture, by name; empty for a pure solvent.
    pub parts: Vec<(String, f64)>,
    /// Classes of `parts`, in the same order.
    pub part_classes: Vec<SolventClass>,
    /// Hazard statements; those of a mixture are `unknown` where a part's are, beside the codes of the others.
    pub hazards: Hazards,
    /// When the row was last checked, `YYYY-MM`; of a mixture the oldest of its parts.
    pub date: String,
    /// Source of the row's facts.
    pub source: String,
}

/// A pure solvent as it is in a medium.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Component<'a> {
    /// Name in the library.
    pub name: &'a str,
    /// Class.
    pub class: SolventClass,
    /// Volume fraction; 1 of a pure solvent.
    pub volume_fraction: f64,
}

impl Solvent {
    /// The pure solvents that it is made of; itself where it is pure.
    pub fn components(&self) -> impl Iterator<Item = Component<'_>> {
        let pure = self.parts.is_empty().then_some(Component {
            name: &self.name,
            class: self.class,
            volume_fraction: 1.0,
        });
        let classes = self.part_classes.iter();
        let parts = self
            .parts
            .iter()
            .zip(classes)
            .map(|((name, fraction), class)| Component {
                name,
                class: *class,
                volume_fraction: *fraction,
            });
        pure.into_iter().chain(parts)
    }

    /// Whether it is a mixture.
    pub fn is_mixture(&self) -> bool {
        !self.parts.is_empty()
    }

    /// Concentration of the pure liquid, or of all molecules of a mixture, mol/L.
    pub fn concentration_m(&self) -> f64 {
        1000.0 * self.density_g_ml / self.molar_mass_g_mol
    }
}
