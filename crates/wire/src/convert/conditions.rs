//! Conditions of a cell with every number given.

use enolattice_model::{Addition, Conditions};

use super::{ConversionError, enums};
use crate::v1;

/// Conditions for the wire; `addition` is the order's name, `additive_equiv` is none without an additive.
pub(crate) fn to_wire(
    conditions: &Conditions,
    additive_equiv: Option<f64>,
    addition: &str,
) -> v1::CellConditions {
    let order = Addition::from_name(addition);
    v1::CellConditions {
        temperature_c: Some(conditions.temperature_c),
        formation_temperature_c: Some(conditions.formation_temperature_c),
        base_equiv: Some(conditions.base_equiv),
        electrophile_equiv: Some(conditions.electrophile_equiv),
        concentration_m: Some(conditions.concentration_m),
        time_h: Some(conditions.time_h),
        dosing_min: Some(conditions.dosing_min),
        addition: order
            .map_or(v1::AdditionOrder::Unspecified, Into::into)
            .into(),
        additive_equiv,
    }
}

/// Conditions from the wire, with the name of the order of addition.
pub(crate) fn from_wire(
    message: Option<v1::CellConditions>,
) -> Result<(Conditions, String), ConversionError> {
    let message = message.ok_or(ConversionError::Missing {
        field: "conditions",
    })?;
    let given = |field, number: Option<f64>| number.ok_or(ConversionError::Missing { field });
    let addition = enums::from_wire::<_, v1::AdditionOrder>(
        "CellConditions.addition",
        &Addition::ALL,
        message.addition,
    )?;
    let conditions = Conditions {
        temperature_c: given("CellConditions.temperature_c", message.temperature_c)?,
        formation_temperature_c: given(
            "CellConditions.formation_temperature_c",
            message.formation_temperature_c,
        )?,
        base_equiv: given("CellConditions.base_equiv", message.base_equiv)?,
        electrophile_equiv: given(
            "CellConditions.electrophile_equiv",
            message.electrophile_equiv,
        )?,
        additive_equiv: message.additive_equiv.unwrap_or_default(),
        concentration_m: given("CellConditions.concentration_m", message.concentration_m)?,
        time_h: given("CellConditions.time_h", message.time_h)?,
        dosing_min: given("CellConditions.dosing_min", message.dosing_min)?,
        addition: Some(addition),
    };
    Ok((conditions, addition.name().to_owned()))
}
