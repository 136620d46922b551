//! Jobs.

use std::time::{Duration, SystemTime, UNIX_EPOCH};

use enolattice_engine::{Job, Terms};
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
        ("queue", Left),
        ("failure", Left),
    ];
    table(&columns, jobs.iter().map(row))
}

fn row(job: &Job) -> Vec<String> {
    vec![
        job.job.clone(),
        job.title.clone(),
        state_name(job.state).to_owned(),
        match &job.planning {
            None => count(job.cells),
            Some(planning) => format!("plan of {}", planning.job),
        },
        match &job.planning {
            None => percent(Some(job.cells_done as f64 / job.cells.max(1) as f64)),
            Some(_) => String::new(),
        },
        match (job.best_yield, &job.planning) {
            (Some(best), _) => percent(Some(best)),
            (None, None) => "none yet".to_owned(),
            (None, Some(_)) => String::new(),
        },
        ago(job.submitted_unix_ms),
        whose(&job.terms),
        job.failure.clone(),
    ]
}

/// Who asks, how urgently, and for when.
fn whose(terms: &Terms) -> String {
    let now = SystemTime::now();
    let to_come = |unix_ms: u64| {
        let at = UNIX_EPOCH + Duration::from_millis(unix_ms);
        at.duration_since(now).map(HumanDuration).ok()
    };
    let not_before = terms.not_before_unix_ms.and_then(to_come);
    let deadline = terms.deadline_unix_ms.and_then(to_come);
    let parts = [
        Some(terms.requester.clone()).filter(|name| !name.is_empty()),
        (terms.priority != 0).then(|| format!("priority {}", terms.priority)),
        not_before.map(|wait| format!("not before {wait} from now")),
        deadline.map(|left| format!("{left} to its deadline")),
    ];
    let told: Vec<String> = parts.into_iter().flatten().collect();
    told.join(", ")
}

/// How long ago a time was.
pub(super) fn ago(unix_ms: u64) -> String {
    let age = SystemTime::now()
        .duration_since(UNIX_EPOCH + Duration::from_millis(unix_ms))
        .unwrap_or_default();
    format!("{} ago", HumanDuration(age))
}
