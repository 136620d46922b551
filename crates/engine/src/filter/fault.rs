//! Faults of a filter: where, why and what to write instead.

use enolattice_grid::{InputError, Place};

/// A fault of a filter.
pub(super) type Fault = Box<InputError>;

/// A fault at a character of the filter, counted from 1.
pub(super) fn fault(position: usize, value: String, reason: &str, remedy: String) -> Fault {
    Box::new(InputError {
        place: Place {
            field: "filter".to_owned(),
            ..Place::default()
        },
        value,
        code: "FILTER_INVALID",
        reason: format!("at character {position}: {reason}"),
        remedy,
    })
}
