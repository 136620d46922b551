//! Axes and a cell's place on each of them.

/// Names of the axes, slowest first, in the order of [`CellDigits`].
pub const AXES: [&str; 13] = [
    "substrates",
    "electrophiles",
    "bases",
    "solvents",
    "additives",
    "temperature_c",
    "formation_temperature_c",
    "base_equiv",
    "electrophile_equiv",
    "concentration_m",
    "time_h",
    "dosing_min",
    "addition",
];

/// Index of a cell's value on each axis, slowest first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct CellDigits {
    /// Substrate.
    pub substrate: u32,
    /// Electrophile.
    pub electrophile: u32,
    /// Base.
    pub base: u32,
    /// Solvent.
    pub solvent: u32,
    /// Additive with its amount, or none.
    pub additive: u32,
    /// Temperature.
    pub temperature: u32,
    /// Temperature of the deprotonation.
    pub formation_temperature: u32,
    /// Equivalents of base.
    pub base_equiv: u32,
    /// Equivalents of electrophile.
    pub electrophile_equiv: u32,
    /// Concentration.
    pub concentration: u32,
    /// Time.
    pub time: u32,
    /// Dosing time.
    pub dosing: u32,
    /// Order of addition.
    pub addition: u32,
}

impl CellDigits {
    /// The digits in the order of [`AXES`].
    pub fn to_array(self) -> [u32; 13] {
        [
            self.substrate,
            self.electrophile,
            self.base,
            self.solvent,
            self.additive,
            self.temperature,
            self.formation_temperature,
            self.base_equiv,
            self.electrophile_equiv,
            self.concentration,
            self.time,
            self.dosing,
            self.addition,
        ]
    }

    /// Digits given in the order of [`AXES`].
    pub fn from_array(digits: [u32; 13]) -> CellDigits {
        let [
            substrate,
            electrophile,
            base,
            solvent,
            additive,
            temperature,
            formation_temperature,
            base_equiv,
            electrophile_equiv,
            concentration,
            time,
            dosing,
            addition,
        ] = digits;
        CellDigits {
            substrate,
            electrophile,
            base,
            solvent,
            additive,
            temperature,
            formation_temperature,
            base_equiv,
            electrophile_equiv,
            concentration,
            time,
            dosing,
            addition,
        }
    }
}
