//! Ranked cells column by column: as an Arrow IPC stream or a Parquet file.
//!
//! A crate of its own, so that the program is built without it unless it is asked for.

mod columns;
mod writer;

pub use writer::{ColumnarError, Writer};
