//! Conditions and target of a specification: checked, defaults filled in, repeats merged.

use enolattice_model::Addition;

use crate::conditions::{CONDITIONS, YIELD_AT_LEAST};
use crate::faults::Faults;
use crate::resolve;
use crate::warnings::Warnings;
use crate::{CampaignSpec, FaultCode, Place};

/// Most values of a condition; a list of more is not looked at. No campaign needs so many, and each takes
/// time and memory before the number of cells is known.
pub(crate) const MOST_VALUES: usize = 10_000;

/// Whether an axis has no more values than are looked at; notes it if it has.
pub(crate) fn check_count(
    values: usize,
    most: usize,
    place: Place,
    written: &str,
    faults: &mut Faults,
) -> bool {
    let is_small = values <= most;
    if !is_small {
        let reason = format!("the axis has {values} values");
        let remedy = format!("give at most {most}");
        faults.note(FaultCode::ValueOutOfRange, place, written, reason, remedy);
    }
    is_small
}

/// The axes of numbers, in the order of [`CONDITIONS`], with defaults where nothing is given.
pub(crate) fn numbers(
    spec: &CampaignSpec,
    faults: &mut Faults,
    warnings: &mut Warnings,
) -> [Vec<f64>; 8] {
    let axes = spec.conditions.axes();
    std::array::from_fn(|axis| {
        let quantity = &CONDITIONS[axis];
        let given = axes[axis].len();
        if !check_count(
            given,
            MOST_VALUES,
            Place::of_field(quantity.key),
            "",
            faults,
        ) {
            return Vec::new();
        }
        let mut values: Vec<f64> = Vec::with_capacity(given);
        for (i, value) in axes[axis].iter().enumerate() {
            match quantity.check(*value) {
                Ok(value) if values.contains(&value) => {
                    warnings.merged(quantity.name(), &value.to_string(), &value.to_string());
                }
                Ok(value) => values.push(value),
                Err(reason) => {
                    let place = Place::of_field(&format!("{}[{i}]", quantity.key));
                    let remedy = quantity.remedy();
                    faults.note(
                        FaultCode::ValueOutOfRange,
                        place,
                        &value.to_string(),
                        reason,
                        remedy,
                    );
                }
            }
        }
        if axes[axis].is_empty() {
            values.extend(quantity.default);
        }
        values
    })
}

/// The orders of addition; the usual one of each base where none is given.
pub(crate) fn additions(
    names: &[String],
    faults: &mut Faults,
    warnings: &mut Warnings,
) -> Vec<Option<Addition>> {
    let mut orders = Vec::new();
    for (i, name) in names.iter().enumerate() {
        let place = Place::of_field(&format!("conditions.addition[{i}]"));
        let Some(order) = resolve::addition(name, place, faults) else {
            continue;
        };
        if orders.contains(&Some(order)) {
            warnings.merged("addition", name, name);
        } else {
            orders.push(Some(order));
        }
    }
    if names.is_empty() { vec![None] } else { orders }
}

/// The yield that makes a hit.
pub(crate) fn target(yield_at_least: Option<f64>, faults: &mut Faults) -> f64 {
    let value = yield_at_least
        .or(YIELD_AT_LEAST.default)
        .unwrap_or_default();
    YIELD_AT_LEAST.check(value).unwrap_or_else(|reason| {
        let place = Place::of_field(YIELD_AT_LEAST.key);
        let remedy = YIELD_AT_LEAST.remedy();
        faults.note(
            FaultCode::ValueOutOfRange,
            place,
            &value.to_string(),
            reason,
            remedy,
        );
        value
    })
}
