//! Limits that both ends keep.

/// Largest message either end takes.
pub const MAX_MESSAGE_BYTES: usize = 4 << 20;

/// Largest campaign that `SubmitJobStream` puts together.
pub const MAX_STREAMED_CAMPAIGN_BYTES: usize = 64 << 20;

/// Rows of a page where the client does not say.
pub const DEFAULT_PAGE_SIZE: u32 = 100;

/// Most rows of a page.
pub const MAX_PAGE_SIZE: u32 = 1000;

/// Most molecules of one `ListSites`.
pub const MAX_SITES_MOLECULES: usize = 1000;

/// Longest `request_id`.
pub const MAX_REQUEST_ID_BYTES: usize = 128;
