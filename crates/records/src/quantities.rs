//! Quantities with their units.

use crate::ord::{
    Amount, Mass, Moles, Temperature, Time, Volume, amount, mass, moles, temperature, time, volume,
};

pub(crate) fn micromoles(value: f64) -> Amount {
    of(amount::Kind::Moles(Moles {
        value: Some(value as f32),
        precision: None,
        units: moles::MolesUnit::Micromole.into(),
    }))
}

/// A volume of a liquid that has the solutes of its input in it.
pub(crate) fn microliters(value: f64, has_solutes: bool) -> Amount {
    let volume = Volume {
        value: Some(value as f32),
        precision: None,
        units: volume::VolumeUnit::Microliter.into(),
    };
    Amount {
        kind: Some(amount::Kind::Volume(volume)),
        volume_includes_solutes: has_solutes.then_some(true),
    }
}

pub(crate) fn milligrams(value: f64) -> Amount {
    of(amount::Kind::Mass(Mass {
        value: Some(value as f32),
        precision: None,
        units: mass::MassUnit::Milligram.into(),
    }))
}

fn of(kind: amount::Kind) -> Amount {
    Amount {
        kind: Some(kind),
        volume_includes_solutes: None,
    }
}

pub(crate) fn celsius(value: f64) -> Temperature {
    Temperature {
        value: Some(value as f32),
        precision: None,
        units: temperature::TemperatureUnit::Celsius.into(),
    }
}

pub(crate) fn hours(value: f64) -> Time {
    time(value, time::TimeUnit::Hour)
}

pub(crate) fn minutes(value: f64) -> Time {
    time(value, time::TimeUnit::Minute)
}

fn time(value: f64, units: time::TimeUnit) -> Time {
    Time {
        value: Some(value as f32),
        precision: None,
        units: units.into(),
    }
}
