//! Plans as open records: datasets in the schema of the Open Reaction Database.
//!
//! Pure: takes a plan and gives bytes. What is written, and what is not, stands in `docs/records.md`.

mod dataset;
mod inputs;
mod outcome;
mod quantities;
mod structures;
mod written;

/// Messages made from `proto/third_party/ord-schema`.
#[allow(missing_docs, unreachable_pub, clippy::all)]
pub mod ord {
    include!(concat!(env!("OUT_DIR"), "/ord.rs"));
}

/// The encoded `FileDescriptorSet` of the schema.
const FILE_DESCRIPTOR_SET: &[u8] = include_bytes!(concat!(env!("OUT_DIR"), "/ord.bin"));

pub use dataset::{Person, dataset};
pub use structures::Structures;
pub use written::{RecordError, json, protobuf};
