//! How even a plate is.

use enolattice_plate::{AxisBalance, BalancedAxis, ColumnCost, PlateBalance, Spread};

use super::given;
use crate::convert::{ConversionError, numbers};
use crate::v1;

/// For the wire.
pub(super) fn balance_message(balance: &PlateBalance) -> v1::PlateBalance {
    v1::PlateBalance {
        plate: numbers::index_to_wire(balance.plate as usize),
        balance: balance.balance,
        balance_at_start: balance.balance_at_start,
        axes: balance.axes.iter().map(axis_message).collect(),
        columns: balance.columns.as_ref().map(|cost| v1::ColumnCost {
            column_fills: numbers::index_to_wire(cost.column_fills as usize),
            column_fills_randomised: numbers::index_to_wire(cost.column_fills_randomised as usize),
            mixed_columns: numbers::index_to_wire(cost.mixed_columns as usize),
            balance_randomised: cost.balance_randomised,
        }),
    }
}

/// From the wire.
pub(super) fn balance(balance: v1::PlateBalance) -> Result<PlateBalance, ConversionError> {
    let count = |field, value: i32| numbers::from_wire(field, value);
    Ok(PlateBalance {
        plate: count("PlateBalance.plate", balance.plate)?,
        balance: balance.balance,
        balance_at_start: balance.balance_at_start,
        axes: balance
            .axes
            .into_iter()
            .map(axis)
            .collect::<Result<_, _>>()?,
        columns: match balance.columns {
            None => None,
            Some(cost) => Some(ColumnCost {
                column_fills: count("ColumnCost.column_fills", cost.column_fills)?,
                column_fills_randomised: count(
                    "ColumnCost.column_fills_randomised",
                    cost.column_fills_randomised,
                )?,
                mixed_columns: count("ColumnCost.mixed_columns", cost.mixed_columns)?,
                balance_randomised: cost.balance_randomised,
            }),
        },
    })
}

fn axis_message(axis: &AxisBalance) -> v1::AxisBalance {
    let (what, group) = match axis.axis {
        BalancedAxis::Group(group) => (v1::BalancedAxis::Group, group),
        BalancedAxis::Replicates => (v1::BalancedAxis::Replicates, 0),
        BalancedAxis::Controls => (v1::BalancedAxis::Controls, 0),
        BalancedAxis::ControlKinds => (v1::BalancedAxis::ControlKinds, 0),
    };
    v1::AxisBalance {
        axis: what.into(),
        group: numbers::index_to_wire(group),
        rows: Some(spread_message(&axis.rows)),
        columns: Some(spread_message(&axis.columns)),
        quadrants: Some(spread_message(&axis.quadrants)),
        ring: Some(spread_message(&axis.ring)),
    }
}

fn axis(axis: v1::AxisBalance) -> Result<AxisBalance, ConversionError> {
    let field = "AxisBalance.axis";
    let what = match v1::BalancedAxis::try_from(axis.axis) {
        Ok(v1::BalancedAxis::Group) => {
            BalancedAxis::Group(numbers::from_wire("AxisBalance.group", axis.group)?)
        }
        Ok(v1::BalancedAxis::Replicates) => BalancedAxis::Replicates,
        Ok(v1::BalancedAxis::Controls) => BalancedAxis::Controls,
        Ok(v1::BalancedAxis::ControlKinds) => BalancedAxis::ControlKinds,
        Ok(v1::BalancedAxis::Unspecified) => return Err(ConversionError::Missing { field }),
        Err(_) => {
            return Err(ConversionError::Unknown {
                field,
                value: axis.axis.to_string(),
            });
        }
    };
    Ok(AxisBalance {
        axis: what,
        rows: spread(given("AxisBalance.rows", axis.rows)?),
        columns: spread(given("AxisBalance.columns", axis.columns)?),
        quadrants: spread(given("AxisBalance.quadrants", axis.quadrants)?),
        ring: spread(given("AxisBalance.ring", axis.ring)?),
    })
}

fn spread_message(spread: &Spread) -> v1::ZoneSpread {
    v1::ZoneSpread {
        chi_square: spread.chi_square,
        least: spread.least,
        at_random: spread.at_random,
    }
}

fn spread(spread: v1::ZoneSpread) -> Spread {
    Spread {
        chi_square: spread.chi_square,
        least: spread.least,
        at_random: spread.at_random,
    }
}
