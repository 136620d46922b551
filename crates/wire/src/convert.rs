//! Conversions between the messages and the types of the engine, by subject.

mod acidity;
mod agreement;
mod campaign;
mod cell;
mod comparison;
mod conditions;
mod description;
mod dry_run;
mod enums;
mod explanation;
mod job;
mod library;
mod map;
mod measured;
mod media;
mod numbers;
mod plan;
mod ranking;
mod report;
mod stock;

pub use agreement::measured;
pub(crate) use agreement::request as measured_request;
pub use campaign::submission;
pub use comparison::movers;
pub use description::explained;
pub use job::terms;
pub(crate) use plan::Assembly;
pub use plan::{plan_request, stock_parts, transfer_parts, well_parts};
pub use ranking::page_size;

/// What of a server's answer a client does not understand.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum ConversionError {
    /// A field that must be there is not.
    #[error("the field `{field}` is missing")]
    Missing {
        /// Message and field.
        field: &'static str,
    },
    /// A value of a closed list that this client does not know.
    #[error("the field `{field}` has the value {value}, which this client does not know")]
    Unknown {
        /// Message and field.
        field: &'static str,
        /// The value.
        value: String,
    },
    /// A number outside the range of its field.
    #[error("the field `{field}` has the value {value}, which is out of range")]
    OutOfRange {
        /// Message and field.
        field: &'static str,
        /// The value.
        value: i64,
    },
}
