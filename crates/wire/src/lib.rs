//! The messages of `proto/enolattice/v1`, their conversions and the client.
//!
//! Conversions go both ways, so that what a remote engine answers is printed
//! by the same code as what an embedded one answers. The reasons of errors are
//! the closed list [`v1::ErrorReason`].

mod client;
mod convert;
mod faults;
mod limits;
mod remote_error;

/// Messages, clients and servers generated from `proto/enolattice/v1`.
#[allow(missing_docs, unreachable_pub, clippy::all)]
pub mod v1 {
    tonic::include_proto!("enolattice.v1");
}

/// The encoded `FileDescriptorSet` of the proto files and their imports, for reflection.
pub const FILE_DESCRIPTOR_SET: &[u8] =
    include_bytes!(concat!(env!("OUT_DIR"), "/enolattice.v1.bin"));

/// Domain of the reasons in `google.rpc.ErrorInfo`.
pub const ERROR_DOMAIN: &str = "enolattice.v1";

pub use client::{Client, JobWatch};
pub use convert::{
    ConversionError, explained, measured, movers, page_size, plan_request, stock_parts, submission,
    terms, transfer_parts, well_parts,
};
pub use faults::{INPUT_FAULTS_TYPE_URL, bad_field};
pub use limits::{
    DEFAULT_DETAIL_BYTES, DEFAULT_PAGE_SIZE, DETAIL_BYTES_KEY, MAX_ANSWER_BYTES, MAX_DETAIL_BYTES,
    MAX_MESSAGE_BYTES, MAX_PAGE_SIZE, MAX_REQUEST_ID_BYTES, MAX_SITES_MOLECULES,
    MAX_STREAMED_CAMPAIGN_BYTES, MAX_TRANSFERS_OF_A_PART, PART_BYTES,
};
pub use remote_error::RemoteError;
