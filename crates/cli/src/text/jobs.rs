//! Jobs.

use std::time::{Duration, SystemTime, UNIX_EPOCH};

use enolattice_engine::Job;
use indicatif::HumanDuration;

use super::numbers::{count, percent};
use super::table::{Side, table};
use crate::json::state_name;

/// A table of jobs.
pub(crate) fn job_table(jobs: &[Job]) -> String {
    use Side::{Left, Right};
    let columns = [
        ("job", Left),
        ("title", Left),
        ("state", Left),
        ("cells", Right),
        ("done", Right),
        ("best yield", Right),
        ("submitted", Right),
        ("failure", Left),
    ];
    table(&columns, jobs.iter().map(row))
}

fn row(job: &Job) -> Vec<String> {
    vec![
        job.job.clone(),
        job.title.clone(),
        state_name(job.state).to_owned(),
        count(job.cells),
        percent(Some(job.cells_done as f64 / job.cells.max(1) as f64)),
        job.best_yield
            .map_or_else(|| "none yet".to_owned(), |best| percent(Some(best))),
        ago(job.submitted_unix_ms),
        job.failure.clone(),
    ]
}

/// How long ago a time was.
pub(super) fn ago(unix_ms: u64) -> String {
    let age = SystemTime::now()
        .duration_since(UNIX_EPOCH + Duration::from_millis(unix_ms))
        .unwrap_or_default();
    format!("{} ago", HumanDuration(age))
}
