//! The cells that measured yields belong to.

use std::collections::HashMap;
use std::hash::Hash;

use super::{MeasuredYield, Measurement, Number, Pot, row_at};
use crate::resolve::NO_ADDITIVE;
use crate::warnings::Warnings;
use crate::{Campaign, CellDigits};

/// The measured yields by cell; what is of no cell of the campaign is told.
pub(crate) fn by_cell(
    measurements: Vec<Measurement>,
    campaign: &Campaign,
    warnings: &mut Warnings,
) -> HashMap<CellDigits, MeasuredYield> {
    if measurements.is_empty() {
        return HashMap::new();
    }
    let axes = Axes::of(campaign);
    let mut cells = HashMap::with_capacity(measurements.len());
    for Measurement { of, value, place } in measurements {
        match axes.digits(&of) {
            Ok(digits) => drop(cells.insert(digits, value)),
            Err(missing) => warnings.of_no_cell(&row_at(&place), &missing),
        }
    }
    cells
}

/// Places on the axes of a campaign, by value.
struct Axes<'c> {
    campaign: &'c Campaign,
    substrates: HashMap<&'c str, u32>,
    electrophiles: HashMap<&'c str, u32>,
    bases: HashMap<&'c str, u32>,
    solvents: HashMap<&'c str, u32>,
    additives: HashMap<(&'c str, Number), u32>,
    temperature: Condition,
    /// `None` where the deprotonation is at the temperature of the reaction.
    formation_temperature: Option<Condition>,
    base_equiv: Condition,
    electrophile_equiv: Condition,
    concentration: Condition,
    time: Condition,
    dosing: Condition,
}

/// An axis of numbers.
struct Condition {
    name: &'static str,
    numbers: HashMap<Number, u32>,
}

impl Condition {
    fn of<'v>(name: &'static str, values: impl IntoIterator<Item = &'v f64>) -> Condition {
        let values = values.into_iter().map(|value| Number::of(*value));
        Condition {
            name,
            numbers: numbered(values),
        }
    }

    fn digit(&self, value: Number) -> Result<u32, String> {
        let digit = self.numbers.get(&value).copied();
        digit.ok_or_else(|| format!("{} {}", self.name, value.get()))
    }
}

impl<'c> Axes<'c> {
    fn of(campaign: &'c Campaign) -> Axes<'c> {
        let substrates = campaign.substrates.iter();
        let electrophiles = campaign.electrophiles.iter();
        let bases = campaign.bases.iter();
        let solvents = campaign.solvents.iter();
        let additives = campaign.additives.iter().map(|dose| match dose {
            Some(dose) => (dose.additive.record.name.as_str(), Number::of(dose.equiv)),
            None => (NO_ADDITIVE, Number::of(0.0)),
        });
        let formation = campaign.formation_temperature_c.as_slice();
        let is_own = formation.iter().any(Option::is_some);
        Axes {
            campaign,
            substrates: numbered(substrates.map(|s| s.molecule.canonical())),
            electrophiles: numbered(electrophiles.map(|e| e.molecule.canonical())),
            bases: numbered(bases.map(|base| base.record.name.as_str())),
            solvents: numbered(solvents.map(|solvent| solvent.record.name.as_str())),
            additives: numbered(additives),
            temperature: Condition::of("temperature_c", &campaign.temperature_c),
            formation_temperature: is_own
                .then(|| Condition::of("formation_temperature_c", formation.iter().flatten())),
            base_equiv: Condition::of("base_equiv", &campaign.base_equiv),
            electrophile_equiv: Condition::of("electrophile_equiv", &campaign.electrophile_equiv),
            concentration: Condition::of("concentration_m", &campaign.concentration_m),
            time: Condition::of("time_h", &campaign.time_h),
            dosing: Condition::of("dosing_min", &campaign.dosing_min),
        }
    }

    /// The digits of a pot, or what of it is on no axis.
    fn digits(&self, pot: &Pot) -> Result<CellDigits, String> {
        let [
            temperature,
            formation,
            base_equiv,
            electrophile_equiv,
            additive_equiv,
            concentration,
            time,
            dosing,
        ] = pot.numbers;
        let reagent = |axis: &HashMap<&str, u32>, kind: &str, name: &str| {
            let digit = axis.get(name).copied();
            digit.ok_or_else(|| format!("{kind} {name}"))
        };
        let base = reagent(&self.bases, "base", &pot.base)?;
        let additive = self.additives.get(&(pot.additive.as_str(), additive_equiv));
        let no_additive = || format!("{} equivalents of {}", additive_equiv.get(), pot.additive);
        Ok(CellDigits {
            substrate: reagent(&self.substrates, "substrate", &pot.substrate)?,
            electrophile: reagent(&self.electrophiles, "electrophile", &pot.electrophile)?,
            base,
            solvent: reagent(&self.solvents, "solvent", &pot.solvent)?,
            additive: *additive.ok_or_else(no_additive)?,
            temperature: self.temperature.digit(temperature)?,
            formation_temperature: match &self.formation_temperature {
                Some(axis) => axis.digit(formation)?,
                None if formation == temperature => 0,
                None => return Err(format!("formation_temperature_c {}", formation.get())),
            },
            base_equiv: self.base_equiv.digit(base_equiv)?,
            electrophile_equiv: self.electrophile_equiv.digit(electrophile_equiv)?,
            concentration: self.concentration.digit(concentration)?,
            time: self.time.digit(time)?,
            dosing: self.dosing.digit(dosing)?,
            addition: self.addition(pot, base)?,
        })
    }

    fn addition(&self, pot: &Pot, base: u32) -> Result<u32, String> {
        let usual = self.campaign.bases[base as usize].usual_addition();
        let mut orders = self.campaign.addition.iter();
        let place = orders.position(|order| order.unwrap_or(usual) == pot.addition);
        let digit = place.map(|at| at as u32);
        digit.ok_or_else(|| format!("addition {}", pot.addition.name()))
    }
}

/// Values with their numbers; of equal ones the first counts.
fn numbered<T: Hash + Eq>(values: impl Iterator<Item = T>) -> HashMap<T, u32> {
    let mut numbers = HashMap::new();
    for (number, value) in (0..).zip(values) {
        numbers.entry(value).or_insert(number);
    }
    numbers
}
