//! What a screen came to.

use serde::Serialize;

use super::{CellLine, JobRecord};

/// The document of `screen --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct ScreenedDocument {
    pub(crate) job: JobRecord,
    pub(crate) seconds: f64,
    pub(crate) cells_per_second: f64,
    pub(crate) cells_not_covered: u64,
    pub(crate) top: Vec<CellLine>,
    pub(crate) best_of_each_substrate: Vec<CellLine>,
}
