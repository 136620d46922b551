//! Plans: what is asked for, the head, and the parts that are streamed.

mod assembly;
mod balance;
mod head;
mod lists;
mod masses;
mod parts;
mod request;
mod request_message;
mod stock;
mod summary;
#[cfg(test)]
mod tests;
mod transfers;
mod well;

use enolattice_plate::Well;

use super::ConversionError;

pub(crate) use assembly::Assembly;
pub use parts::{stock_parts, transfer_parts, well_parts};
pub use request::plan_request;

/// A well as it is written on the plate.
fn well_from_wire(field: &'static str, text: String) -> Result<Well, ConversionError> {
    text.parse()
        .map_err(|_| ConversionError::Unknown { field, value: text })
}

/// A message that must be there.
fn given<T>(field: &'static str, message: Option<T>) -> Result<T, ConversionError> {
    message.ok_or(ConversionError::Missing { field })
}
