//! Whole numbers: unsigned in the engine, signed on the wire.

use super::ConversionError;

/// A count for the wire; numbers of cells end at 2^48, so none is ever cut.
pub(crate) fn to_wire(number: u64) -> i64 {
    i64::try_from(number).unwrap_or(i64::MAX)
}

/// An index for the wire; molecules are capped at hundreds of atoms.
pub(crate) fn index_to_wire(index: usize) -> i32 {
    i32::try_from(index).unwrap_or(i32::MAX)
}

/// A number from the wire.
pub(crate) fn from_wire<T: TryFrom<i64>>(
    field: &'static str,
    value: impl Into<i64>,
) -> Result<T, ConversionError> {
    let value = value.into();
    T::try_from(value).map_err(|_| ConversionError::OutOfRange { field, value })
}
