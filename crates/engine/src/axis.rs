//! The axes of a campaign and how their values are written.

use enolattice_grid::{Campaign, CellDigits, Dose};

/// An axis of a campaign.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Axis {
    /// Substrates.
    Substrate,
    /// Bases.
    Base,
    /// Electrophiles.
    Electrophile,
    /// Solvents.
    Solvent,
    /// Temperatures of the reaction.
    Temperature,
    /// Additives with their amounts.
    Additive,
    /// Temperatures of the deprotonation.
    FormationTemperature,
    /// Equivalents of base.
    BaseEquiv,
    /// Equivalents of electrophile.
    ElectrophileEquiv,
    /// Concentrations of substrate.
    Concentration,
    /// Times.
    Time,
    /// Dosing times.
    Dosing,
    /// Orders of addition.
    Addition,
}

impl Axis {
    /// All axes.
    pub const ALL: [Axis; 13] = [
        Axis::Substrate,
        Axis::Base,
        Axis::Electrophile,
        Axis::Solvent,
        Axis::Temperature,
        Axis::Additive,
        Axis::FormationTemperature,
        Axis::BaseEquiv,
        Axis::ElectrophileEquiv,
        Axis::Concentration,
        Axis::Time,
        Axis::Dosing,
        Axis::Addition,
    ];

    /// The axis's name.
    pub fn name(self) -> &'static str {
        match self {
            Axis::Substrate => "substrate",
            Axis::Base => "base",
            Axis::Electrophile => "electrophile",
            Axis::Solvent => "solvent",
            Axis::Temperature => "temperature",
            Axis::Additive => "additive",
            Axis::FormationTemperature => "formation_temperature",
            Axis::BaseEquiv => "base_equiv",
            Axis::ElectrophileEquiv => "electrophile_equiv",
            Axis::Concentration => "concentration",
            Axis::Time => "time",
            Axis::Dosing => "dosing",
            Axis::Addition => "addition",
        }
    }

    /// Number of the axis among the digits of a cell (`enolattice_grid::AXES`).
    pub(crate) fn index(self) -> usize {
        match self {
            Axis::Substrate => 0,
            Axis::Electrophile => 1,
            Axis::Base => 2,
            Axis::Solvent => 3,
            Axis::Additive => 4,
            Axis::Temperature => 5,
            Axis::FormationTemperature => 6,
            Axis::BaseEquiv => 7,
            Axis::ElectrophileEquiv => 8,
            Axis::Concentration => 9,
            Axis::Time => 10,
            Axis::Dosing => 11,
            Axis::Addition => 12,
        }
    }

    /// Index of the cell's value on this axis.
    pub(crate) fn digit(self, digits: &CellDigits) -> u32 {
        digits.to_array()[self.index()]
    }

    /// The values of the axis, in its order, as they are written: names, and numbers with their units.
    pub(crate) fn labels(self, campaign: &Campaign) -> Vec<String> {
        let numbers = |values: &[f64], unit: &str| {
            let written = values.iter().map(|value| with_unit(*value, unit));
            written.collect()
        };
        match self {
            Axis::Substrate => names(&campaign.substrates, |known| &known.name),
            Axis::Base => names(&campaign.bases, |known| &known.record.name),
            Axis::Electrophile => names(&campaign.electrophiles, |known| &known.name),
            Axis::Solvent => names(&campaign.solvents, |known| &known.record.name),
            Axis::Additive => campaign.additives.iter().map(dose).collect(),
            Axis::Temperature => numbers(&campaign.temperature_c, " °C"),
            Axis::FormationTemperature => {
                let values = campaign.formation_temperature_c.iter();
                let written = values.map(|value| match value {
                    Some(value) => with_unit(*value, " °C"),
                    None => "that of the reaction".to_owned(),
                });
                written.collect()
            }
            Axis::BaseEquiv => numbers(&campaign.base_equiv, " equiv"),
            Axis::ElectrophileEquiv => numbers(&campaign.electrophile_equiv, " equiv"),
            Axis::Concentration => numbers(&campaign.concentration_m, " mol/L"),
            Axis::Time => numbers(&campaign.time_h, " h"),
            Axis::Dosing => numbers(&campaign.dosing_min, " min"),
            Axis::Addition => {
                let orders = campaign.addition.iter();
                let written = orders.map(|order| match order {
                    Some(order) => order.name().to_owned(),
                    None => "the usual one of the base".to_owned(),
                });
                written.collect()
            }
        }
    }
}

fn names<T>(values: &[T], name: impl Fn(&T) -> &String) -> Vec<String> {
    values.iter().map(|value| name(value).clone()).collect()
}

fn dose(dose: &Option<Dose>) -> String {
    match dose {
        Some(dose) => format!("{} ({} equiv)", dose.additive.record.name, dose.equiv),
        None => "none".to_owned(),
    }
}

/// A number with its unit and a true minus sign.
fn with_unit(value: f64, unit: &str) -> String {
    format!("{value}{unit}").replace('-', "−")
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_grid::AXES;

    #[test]
    fn every_axis_of_the_lattice_has_one_name() {
        let mut indices = Axis::ALL.map(Axis::index);
        indices.sort_unstable();
        assert_eq!(indices.to_vec(), (0..AXES.len()).collect::<Vec<_>>());
        for axis in Axis::ALL {
            // `AXES` has plurals and units: `substrates`, `time_h`
            let full = AXES[axis.index()];
            assert!(full.starts_with(axis.name()), "{full}");
        }
    }
}
