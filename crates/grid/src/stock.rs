//! Columns of what a laboratory has of a substance, and their ranges.

use crate::conditions::Quantity;
use crate::entries::check_text;
use crate::fault::value_of_row;
use crate::faults::Faults;
use crate::heading::Column;
use crate::{FaultCode, Place, Stock};

/// The columns, in the order of [`Quantities::ALL`] and [`TEXTS`].
pub(crate) const STOCK: [Column; 8] = [
    Column::optional("stock_mg"),
    Column::optional("stock_ml"),
    Column::optional("supplied_concentration_m"),
    Column::optional("price_per_g"),
    Column::optional("price_per_ml"),
    Column::optional("currency"),
    Column::optional("lot"),
    Column::optional("location"),
];

/// Columns that hold numbers; those after them hold texts.
pub(crate) const NUMBERS: usize = 5;

// The ranges end where a laboratory's shelf does (common practice): tonnes, the neat density of the
// lightest solvents, and prices that nobody pays.
pub(crate) const QUANTITIES: [Quantity; NUMBERS] = [
    Quantity::of("stock_mg", "mg", (0.0, 1e9)),
    Quantity::of("stock_ml", "mL", (0.0, 1e6)),
    Quantity::above("supplied_concentration_m", "mol/L", (0.0, 30.0)),
    Quantity::of("price_per_g", "", (0.0, 1e9)),
    Quantity::of("price_per_ml", "", (0.0, 1e9)),
];

impl Stock {
    /// The numbers, in the order of [`QUANTITIES`].
    pub(crate) fn numbers(&self) -> [Option<f64>; NUMBERS] {
        [
            self.stock_mg,
            self.stock_ml,
            self.supplied_concentration_m,
            self.price_per_g,
            self.price_per_ml,
        ]
    }

    /// From numbers and texts in the order of [`STOCK`].
    pub(crate) fn from_columns(numbers: [Option<f64>; NUMBERS], texts: [String; 3]) -> Stock {
        let [
            stock_mg,
            stock_ml,
            supplied_concentration_m,
            price_per_g,
            price_per_ml,
        ] = numbers;
        let [currency, lot, location] = texts;
        Stock {
            stock_mg,
            stock_ml,
            supplied_concentration_m,
            price_per_g,
            price_per_ml,
            currency,
            lot,
            location,
        }
    }
}

/// Notes every fault of a row's stock.
pub(crate) fn check(stock: &Stock, row: &Place, faults: &mut Faults) {
    for (quantity, value) in QUANTITIES.iter().zip(stock.numbers()) {
        let Some(value) = value else { continue };
        if let Err(reason) = quantity.check(value) {
            let remedy = "give a number in this range, or none";
            let place = value_of_row(row, quantity.key);
            faults.note(
                FaultCode::ValueOutOfRange,
                place,
                &value.to_string(),
                reason,
                remedy,
            );
        }
    }
    let is_currency =
        stock.currency.len() == 3 && stock.currency.bytes().all(|b| b.is_ascii_uppercase());
    if !stock.currency.is_empty() && !is_currency {
        let place = value_of_row(row, "currency");
        let reason = "this is no code of a currency";
        let remedy = "give the three capital letters of ISO 4217, e.g. `EUR`";
        faults.note(
            FaultCode::ValueUnknown,
            place,
            &stock.currency,
            reason,
            remedy,
        );
    }
    let has_price = stock.price_per_g.is_some() || stock.price_per_ml.is_some();
    if has_price && stock.currency.is_empty() {
        let reason = "there is a price without a currency";
        let remedy = "name the currency of the prices, e.g. `EUR`";
        faults.note(
            FaultCode::ValueMissing,
            value_of_row(row, "currency"),
            "",
            reason,
            remedy,
        );
    }
    for (text, column) in [(&stock.lot, "lot"), (&stock.location, "location")] {
        check_text(text, value_of_row(row, column), faults);
    }
}
