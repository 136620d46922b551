//! Limits that both ends keep.

/// Largest message the server takes.
pub const MAX_MESSAGE_BYTES: usize = 4 << 20;

/// Largest message the client takes: a full page of cells with the longest names.
pub const MAX_ANSWER_BYTES: usize = 32 << 20;

/// Largest campaign that `SubmitJobStream` puts together.
pub const MAX_STREAMED_CAMPAIGN_BYTES: usize = 64 << 20;

/// Size about which a message of a stream of a plan or a report is ended.
pub const PART_BYTES: usize = 256 << 10;

/// Most transfers of a message of `StreamTransfers`.
pub const MAX_TRANSFERS_OF_A_PART: usize = 10_000;

/// Rows of a page where the client does not say.
pub const DEFAULT_PAGE_SIZE: u32 = 100;

/// Most rows of a page.
pub const MAX_PAGE_SIZE: u32 = 1000;

/// Most molecules of one `ListSites`.
pub const MAX_SITES_MOLECULES: usize = 1000;

/// Longest `request_id`.
pub const MAX_REQUEST_ID_BYTES: usize = 128;

/// Key of the request metadata by which a client says how large the details of an error may be.
///
/// Details travel in trailers, and many clients take no more than 8 KiB of those.
pub const DETAIL_BYTES_KEY: &str = "enolattice-detail-bytes";

/// Size of the details of an error where the client does not say, base 64 included.
pub const DEFAULT_DETAIL_BYTES: usize = 6 << 10;

/// Largest size of the details of an error.
pub const MAX_DETAIL_BYTES: usize = 4 << 20;
