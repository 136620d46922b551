//! Yields that a laboratory has measured.

use enolattice_grid::{InputError, MeasuredEntry, Place};

use super::cell::{addition_from_name, addition_from_wire};
use crate::v1;

/// A measured yield for the wire; `field` is its place in the campaign.
pub(crate) fn to_wire(
    entry: &MeasuredEntry,
    field: &str,
) -> Result<v1::MeasuredYield, Vec<InputError>> {
    let addition = match entry.addition.as_str() {
        "" => v1::AdditionOrder::Unspecified,
        name => addition_from_name(name, &format!("{field}.addition"))?,
    };
    Ok(v1::MeasuredYield {
        substrate: entry.substrate.clone(),
        base: entry.base.clone(),
        electrophile: entry.electrophile.clone(),
        solvent: entry.solvent.clone(),
        additive: entry.additive.clone(),
        temperature_c: entry.temperature_c,
        formation_temperature_c: entry.formation_temperature_c,
        base_equiv: entry.base_equiv,
        electrophile_equiv: entry.electrophile_equiv,
        additive_equiv: entry.additive_equiv,
        concentration_m: entry.concentration_m,
        time_h: entry.time_h,
        dosing_min: entry.dosing_min,
        addition: addition.into(),
        yield_fraction: entry.yield_fraction,
        sigma: entry.sigma,
        note: entry.note.clone(),
    })
}

/// A measured yield from the wire.
pub(crate) fn from_wire(
    message: v1::MeasuredYield,
    field: &str,
) -> Result<MeasuredEntry, Vec<InputError>> {
    let addition = addition_from_wire(message.addition, &format!("{field}.addition"))?;
    Ok(MeasuredEntry {
        substrate: message.substrate,
        base: message.base,
        electrophile: message.electrophile,
        solvent: message.solvent,
        additive: message.additive,
        temperature_c: message.temperature_c,
        formation_temperature_c: message.formation_temperature_c,
        base_equiv: message.base_equiv,
        electrophile_equiv: message.electrophile_equiv,
        additive_equiv: message.additive_equiv,
        concentration_m: message.concentration_m,
        time_h: message.time_h,
        dosing_min: message.dosing_min,
        addition: addition.map_or_else(String::new, |order| order.name().to_owned()),
        yield_fraction: message.yield_fraction,
        sigma: message.sigma,
        note: message.note,
        place: Place {
            field: field.to_owned(),
            ..Place::default()
        },
    })
}
