//! A kept plan in a line.

use enolattice_engine::PlanSummary;
use serde::Serialize;

/// A kept plan as `plans` prints it.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct PlanRecord {
    plan: String,
    job: String,
    title: String,
    made_unix_ms: u64,
    plates: u32,
    wells: u32,
}

impl From<PlanSummary> for PlanRecord {
    fn from(summary: PlanSummary) -> PlanRecord {
        PlanRecord {
            plan: summary.plan,
            job: summary.job,
            title: summary.title,
            made_unix_ms: summary.made_unix_ms,
            plates: summary.plates,
            wells: summary.wells,
        }
    }
}
