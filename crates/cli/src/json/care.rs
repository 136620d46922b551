//! How a data directory is, and what a copy of it holds.

use std::path::{Path, PathBuf};

use enolattice_engine::{Copied, Health};
use serde::Serialize;

/// The document of `mend --json` and `restore --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct HealthDocument {
    sound: bool,
    changed: bool,
    sentences: Vec<String>,
    jobs: u64,
    jobs_unfinished: u64,
    plans: u64,
    blocks: u64,
    cells: u64,
    format_damaged: Option<String>,
    database_damaged: Option<String>,
    damaged_blocks: Vec<DamagedBlock>,
    queued_again: Vec<String>,
    unreadable_records: Vec<UnreadableFile>,
    unreadable_plans: Vec<UnreadableFile>,
    blocks_of_no_job: u64,
    leftovers: Vec<String>,
    set_aside: Vec<SetAsideDatabase>,
}

/// A block that could not be believed.
#[derive(Clone, Debug, Serialize)]
struct DamagedBlock {
    job: String,
    segment: u32,
    block: u32,
    reason: String,
}

/// A file that cannot be read.
#[derive(Clone, Debug, Serialize)]
struct UnreadableFile {
    path: String,
    reason: String,
}

/// A database that was set aside.
#[derive(Clone, Debug, Serialize)]
struct SetAsideDatabase {
    path: String,
    bytes: u64,
}

impl HealthDocument {
    /// The document of what was found; `looked`: nothing was changed.
    pub(crate) fn new(health: &Health, looked: bool) -> HealthDocument {
        let report = &health.report;
        let damaged = report
            .damaged
            .iter()
            .map(|(job, block, reason)| DamagedBlock {
                job: job.to_string(),
                segment: block.segment,
                block: block.index,
                reason: reason.clone(),
            });
        let unreadable = |files: &[(PathBuf, String)]| -> Vec<UnreadableFile> {
            let file = |(path, reason): &(PathBuf, String)| UnreadableFile {
                path: shown(path),
                reason: reason.clone(),
            };
            files.iter().map(file).collect()
        };
        let aside = health.set_aside.iter().map(|one| SetAsideDatabase {
            path: shown(&one.path),
            bytes: one.bytes,
        });
        HealthDocument {
            sound: health.is_sound(),
            changed: !looked && !health.is_sound(),
            sentences: report.sentences(),
            jobs: health.jobs,
            jobs_unfinished: health.jobs_unfinished,
            plans: health.plans,
            blocks: health.blocks,
            cells: health.cells,
            format_damaged: health.format_damaged.clone(),
            database_damaged: report.set_aside.as_ref().map(|(_, reason)| reason.clone()),
            damaged_blocks: damaged.collect(),
            queued_again: report
                .queued_again
                .iter()
                .map(ToString::to_string)
                .collect(),
            unreadable_records: unreadable(&report.unreadable),
            unreadable_plans: unreadable(&report.unreadable_plans),
            blocks_of_no_job: report.blocks_of_no_job,
            leftovers: report.leftovers.iter().map(|path| shown(path)).collect(),
            set_aside: aside.collect(),
        }
    }
}

/// The document of `backup --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct CopiedDocument {
    to: String,
    jobs: u64,
    plans: u64,
    blocks: u64,
    cells: u64,
    bytes: u64,
    left_out: Vec<String>,
}

impl CopiedDocument {
    pub(crate) fn new(copied: &Copied, to: &Path) -> CopiedDocument {
        CopiedDocument {
            to: shown(to),
            jobs: copied.jobs,
            plans: copied.plans,
            blocks: copied.blocks,
            cells: copied.cells,
            bytes: copied.bytes,
            left_out: copied.left_out.clone(),
        }
    }
}

fn shown(path: &Path) -> String {
    path.display().to_string()
}
