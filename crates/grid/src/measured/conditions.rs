//! Conditions of a row of measured yields: as they are said, or those of the campaign.

use enolattice_model::{Addition, Base};

use super::Number;
use super::check::{RowReader, in_range, note_missing};
use crate::conditions::{ADDITIVE_EQUIV, CONDITIONS, FORMATION_TEMPERATURE, Quantity};
use crate::fault::value_of_row;
use crate::faults::Faults;
use crate::keys::quoted;
use crate::resolve::{self, NO_ADDITIVE};
use crate::{FaultCode, MeasuredEntry, Place};

/// Indices among [`CONDITIONS`].
const TEMPERATURE: usize = 0;
pub(super) const ADDITIVE: usize = 4;

impl RowReader<'_> {
    /// The conditions, those that the row leaves out filled in.
    pub(super) fn numbers(
        &self,
        row: &MeasuredEntry,
        place: &Place,
        additive: Option<&str>,
        faults: &mut Faults,
    ) -> Option<[Number; 8]> {
        let said = row.numbers();
        let mut numbers = [None; 8];
        for (at, quantity) in CONDITIONS.iter().enumerate() {
            let axis = &self.axes.numbers[at];
            numbers[at] = match said[at] {
                _ if at == ADDITIVE => self.amount(said[at], place, additive, faults),
                None if at == TEMPERATURE => {
                    note_missing(
                        value_of_row(place, quantity.name()),
                        quantity.name(),
                        faults,
                    );
                    None
                }
                // a deprotonation of which nothing is said is at the temperature of the reaction
                None if quantity.key == FORMATION_TEMPERATURE.key && axis.is_empty() => {
                    numbers[TEMPERATURE]
                }
                value => number(quantity, value, axis, place, faults),
            };
        }
        let mut all = [Number::of(0.0); 8];
        for (number, value) in all.iter_mut().zip(numbers) {
            *number = Number::of(value?);
        }
        Some(all)
    }

    /// Equivalents of the additive; 0 without one.
    fn amount(
        &self,
        said: Option<f64>,
        row: &Place,
        additive: Option<&str>,
        faults: &mut Faults,
    ) -> Option<f64> {
        let place = value_of_row(row, ADDITIVE_EQUIV.name());
        match (additive?, said) {
            (NO_ADDITIVE, None | Some(0.0)) => Some(0.0),
            (NO_ADDITIVE, Some(amount)) => {
                let reason = "an amount without an additive";
                let remedy = "name the additive under `additive`, or leave the amount out";
                let code = FaultCode::ValueMissing;
                faults.note(code, place, &amount.to_string(), reason, remedy);
                None
            }
            (name, said) => {
                let known = self.additives.iter().find(|(known, _)| *known == name);
                // where the campaign has it not, the row is of another campaign
                let amounts = known.map_or(&self.axes.numbers[ADDITIVE], |(_, amounts)| amounts);
                number(&ADDITIVE_EQUIV, said, amounts, row, faults)
            }
        }
    }

    pub(super) fn addition(
        &self,
        row: &MeasuredEntry,
        place: &Place,
        base: Option<&str>,
        faults: &mut Faults,
    ) -> Option<Addition> {
        let place = value_of_row(place, "addition");
        if !row.addition.is_empty() {
            return resolve::addition(&row.addition, place, faults);
        }
        match self.axes.addition.as_slice() {
            [Some(only)] => Some(*only),
            [] | [None] => Some(Base::usual_addition_of(self.library.base(base?)?)),
            several => {
                let words: Vec<&str> = several.iter().flatten().map(|order| order.name()).collect();
                note_unsaid(place, "addition", &quoted(&words), faults);
                None
            }
        }
    }
}

/// A condition of a row: as it is said, or the campaign's where it has one value.
fn number(
    quantity: &Quantity,
    said: Option<f64>,
    axis: &[f64],
    row: &Place,
    faults: &mut Faults,
) -> Option<f64> {
    match (said, axis) {
        (Some(_), _) => in_range(quantity, said, row, faults),
        (None, [only]) => Some(*only),
        // an axis without values is at fault itself
        (None, []) => None,
        (None, several) => {
            let words: Vec<String> = several.iter().take(10).map(f64::to_string).collect();
            let words: Vec<&str> = words.iter().map(String::as_str).collect();
            let place = value_of_row(row, quantity.name());
            note_unsaid(place, quantity.name(), &quoted(&words), faults);
            None
        }
    }
}

/// A condition of which the campaign has several values and the row names none.
pub(super) fn note_unsaid(place: Place, column: &str, values: &str, faults: &mut Faults) {
    let reason = format!("the campaign has several values of {column} and the row names none");
    let remedy = format!("say at which it was measured, e.g. one of {values}");
    faults.note(FaultCode::ValueMissing, place, "", reason, remedy);
}
