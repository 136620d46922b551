//! What a laboratory has of a substance.

use enolattice_grid::Stock;

use crate::v1;

/// For the wire; absent where nothing is known.
pub(crate) fn to_wire(stock: &Stock) -> Option<v1::Stock> {
    (!stock.is_empty()).then(|| v1::Stock {
        stock_mg: stock.stock_mg,
        stock_ml: stock.stock_ml,
        supplied_concentration_m: stock.supplied_concentration_m,
        price_per_g: stock.price_per_g,
        price_per_ml: stock.price_per_ml,
        currency: stock.currency.clone(),
        lot: stock.lot.clone(),
        location: stock.location.clone(),
    })
}

/// From the wire.
pub(crate) fn from_wire(stock: Option<v1::Stock>) -> Stock {
    let stock = stock.unwrap_or_default();
    Stock {
        stock_mg: stock.stock_mg,
        stock_ml: stock.stock_ml,
        supplied_concentration_m: stock.supplied_concentration_m,
        price_per_g: stock.price_per_g,
        price_per_ml: stock.price_per_ml,
        currency: stock.currency,
        lot: stock.lot,
        location: stock.location,
    }
}
