//! Ranges and defaults of the condition axes and of the target.

use std::fmt;

use crate::{ConditionsSpec, MeasuredEntry};

/// A number that a campaign may give, with its range and default.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Quantity {
    /// Key path in the campaign.
    pub(crate) key: &'static str,
    /// Unit as it is printed; empty for a pure number.
    unit: &'static str,
    low: f64,
    high: f64,
    /// Whether `low` itself is refused.
    above_low: bool,
    /// What is often mistaken about it; empty where nothing is.
    hint: &'static str,
    /// Taken where the campaign says nothing; `None` where nothing is a value of its own.
    pub(crate) default: Option<f64>,
}

impl Quantity {
    /// A quantity without a default.
    pub(crate) const fn of(key: &'static str, unit: &'static str, range: (f64, f64)) -> Quantity {
        quantity(key, unit, range, None)
    }

    /// The same, with the lower end refused.
    pub(crate) const fn above(
        key: &'static str,
        unit: &'static str,
        range: (f64, f64),
    ) -> Quantity {
        Quantity {
            above_low: true,
            ..quantity(key, unit, range, None)
        }
    }

    /// The number as it is kept, or why it is refused. There is one zero: −0 becomes 0.
    pub(crate) fn check(&self, value: f64) -> Result<f64, String> {
        let above = if self.above_low {
            value > self.low
        } else {
            value >= self.low
        };
        if above && value <= self.high {
            Ok(value + 0.0)
        } else {
            Err(format!("outside the range of {}, {self}", self.name()))
        }
    }

    /// What to do about a number that is refused.
    pub(crate) fn remedy(&self) -> String {
        let hint = if self.hint.is_empty() { "" } else { ": " };
        format!("give a number in this range{hint}{}", self.hint)
    }

    /// The last word of the key path.
    pub(crate) fn name(&self) -> &'static str {
        self.key.rsplit('.').next().unwrap_or(self.key)
    }
}

/// Prints the range, e.g. `-110 to 250 °C`.
impl fmt::Display for Quantity {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.above_low {
            write!(f, "above {}, at most {}", self.low, self.high)?;
        } else {
            write!(f, "{} to {}", self.low, self.high)?;
        }
        if self.unit.is_empty() {
            Ok(())
        } else {
            write!(f, " {}", self.unit)
        }
    }
}

const fn quantity(
    key: &'static str,
    unit: &'static str,
    (low, high): (f64, f64),
    default: Option<f64>,
) -> Quantity {
    Quantity {
        key,
        unit,
        low,
        high,
        above_low: false,
        hint: "",
        default,
    }
}

// The ranges are those of laboratory practice (common practice): the coldest bath in use is a
// little above the melting point of pentane, the hottest block a little above the boiling point
// of DMSO. The defaults are common practice too.
pub(crate) const TEMPERATURE: Quantity = Quantity {
    hint: "temperatures are in °C, not in K",
    ..quantity(
        "conditions.temperature_c",
        "°C",
        (-110.0, 250.0),
        Some(25.0),
    )
};
pub(crate) const FORMATION_TEMPERATURE: Quantity = Quantity {
    key: "conditions.formation_temperature_c",
    default: None,
    ..TEMPERATURE
};
pub(crate) const BASE_EQUIV: Quantity = Quantity {
    above_low: true,
    ..quantity(
        "conditions.base_equiv",
        "equivalents",
        (0.0, 20.0),
        Some(1.1),
    )
};
pub(crate) const ELECTROPHILE_EQUIV: Quantity = Quantity {
    above_low: true,
    ..quantity(
        "conditions.electrophile_equiv",
        "equivalents",
        (0.0, 20.0),
        Some(1.2),
    )
};
pub(crate) const ADDITIVE_EQUIV: Quantity = Quantity {
    above_low: true,
    ..quantity(
        "conditions.additive_equiv",
        "equivalents",
        (0.0, 20.0),
        Some(1.1),
    )
};
pub(crate) const CONCENTRATION: Quantity = quantity(
    "conditions.concentration_m",
    "mol/L",
    (1e-4, 5.0),
    Some(0.2),
);
pub(crate) const TIME: Quantity = quantity("conditions.time_h", "h", (0.001, 720.0), Some(16.0));
pub(crate) const DOSING: Quantity =
    quantity("conditions.dosing_min", "min", (0.0, 1440.0), Some(10.0));
pub(crate) const YIELD_AT_LEAST: Quantity = Quantity {
    hint: "0.5 is half",
    ..quantity("target.yield_at_least", "", (0.0, 1.0), Some(0.5))
};
/// From below the strongest acids to above the alkanes on the DMSO scale.
pub(crate) const PKA_DMSO: Quantity = quantity("pka_dmso", "", (-20.0, 60.0), None);
/// The default is from memory: what a careful determination repeats to.
pub(crate) const PKA_SIGMA: Quantity = Quantity {
    above_low: true,
    ..quantity("pka_sigma", "", (0.0, 10.0), Some(0.3))
};
/// A yield that was measured. What exceeds the substrate charged is a fault of the measurement.
pub(crate) const YIELD_FRACTION: Quantity = Quantity {
    hint: "yields are fractions, 0.85 for 85 %",
    ..quantity("yield_fraction", "", (0.0, 1.0), None)
};
pub(crate) const YIELD_SIGMA: Quantity = Quantity {
    above_low: true,
    hint: "it is a fraction like the yield, 0.05 for 5 %",
    ..quantity("sigma", "", (0.0, 1.0), None)
};

/// The quantities of the table `conditions`, in the order of the axes.
pub(crate) const CONDITIONS: [Quantity; 8] = [
    TEMPERATURE,
    FORMATION_TEMPERATURE,
    BASE_EQUIV,
    ELECTROPHILE_EQUIV,
    ADDITIVE_EQUIV,
    CONCENTRATION,
    TIME,
    DOSING,
];

impl ConditionsSpec {
    /// The axes of numbers, in the order of [`CONDITIONS`].
    pub(crate) fn axes(&self) -> [&Vec<f64>; 8] {
        [
            &self.temperature_c,
            &self.formation_temperature_c,
            &self.base_equiv,
            &self.electrophile_equiv,
            &self.additive_equiv,
            &self.concentration_m,
            &self.time_h,
            &self.dosing_min,
        ]
    }

    /// The axes of numbers, to be filled, in the order of [`CONDITIONS`].
    pub(crate) fn axes_mut(&mut self) -> [&mut Vec<f64>; 8] {
        [
            &mut self.temperature_c,
            &mut self.formation_temperature_c,
            &mut self.base_equiv,
            &mut self.electrophile_equiv,
            &mut self.additive_equiv,
            &mut self.concentration_m,
            &mut self.time_h,
            &mut self.dosing_min,
        ]
    }
}

impl MeasuredEntry {
    /// The conditions, in the order of [`CONDITIONS`].
    pub(crate) fn numbers(&self) -> [Option<f64>; 8] {
        [
            self.temperature_c,
            self.formation_temperature_c,
            self.base_equiv,
            self.electrophile_equiv,
            self.additive_equiv,
            self.concentration_m,
            self.time_h,
            self.dosing_min,
        ]
    }

    /// The conditions, to be filled, in the order of [`CONDITIONS`].
    pub(crate) fn numbers_mut(&mut self) -> [&mut Option<f64>; 8] {
        [
            &mut self.temperature_c,
            &mut self.formation_temperature_c,
            &mut self.base_equiv,
            &mut self.electrophile_equiv,
            &mut self.additive_equiv,
            &mut self.concentration_m,
            &mut self.time_h,
            &mut self.dosing_min,
        ]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ends_of_ranges_belong_to_them_unless_said_otherwise() {
        assert_eq!(TEMPERATURE.check(-110.0), Ok(-110.0));
        assert_eq!(TEMPERATURE.check(-0.0).map(f64::is_sign_positive), Ok(true));
        assert!(
            TEMPERATURE
                .check(-110.1)
                .is_err_and(|why| why == "outside the range of temperature_c, -110 to 250 °C")
        );
        assert!(BASE_EQUIV.check(0.0).is_err());
        assert_eq!(BASE_EQUIV.check(20.0), Ok(20.0));
        for quantity in CONDITIONS {
            assert!(quantity.check(f64::NAN).is_err(), "{quantity}");
            assert!(quantity.check(f64::INFINITY).is_err(), "{quantity}");
        }
    }

    #[test]
    fn defaults_are_in_range() {
        for quantity in CONDITIONS.iter().chain([&YIELD_AT_LEAST, &PKA_SIGMA]) {
            if let Some(default) = quantity.default {
                assert_eq!(quantity.check(default), Ok(default), "{quantity}");
            }
        }
    }
}
