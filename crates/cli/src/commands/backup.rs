//! `backup`: a copy of a data directory.

use std::path::PathBuf;

use clap::Args;
use enolattice_engine::{StoreError, back_up, back_up_jobs};

use super::EngineOptions;
use crate::fault::Fault;
use crate::json::CopiedDocument;
use crate::output::{print, print_json, talk};
use crate::text::copied_line;

/// Copy jobs, plans and scores into a new directory, which is a data directory of its own.
///
/// Without scores the copy can be taken while a server or another command works at the directory: jobs and plans alone
/// cannot be computed again. Exit code 1: a file could not be read and is not in the copy.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice backup --data /var/lib/enolattice --to /backup/monday\n  \
    enolattice backup --without-scores --to /backup/monday-jobs\n  \
    enolattice restore --from /backup/monday --data /var/lib/enolattice")]
pub(super) struct Backup {
    /// Directory of jobs and results [default: $ENOLATTICE_DATA, else ./enolattice-data].
    #[arg(long, value_name = "DIR")]
    data: Option<PathBuf>,
    /// Directory of the copy: new, or empty.
    #[arg(long, value_name = "DIR")]
    to: PathBuf,
    /// Leave out the scores; jobs that had ended wait in the copy to be screened again.
    #[arg(long)]
    without_scores: bool,
    /// Print JSON: one object.
    #[arg(long)]
    json: bool,
}

impl Backup {
    pub(super) fn run(self) -> Result<(), Fault> {
        let dir = EngineOptions::in_dir(self.data).data_dir();
        let outcome = match self.without_scores {
            true => back_up_jobs(&dir, &self.to),
            false => back_up(&dir, &self.to),
        };
        let done = outcome.map_err(|error| match error {
            StoreError::InUse { .. } => Fault::service(format!(
                "{error}; or give --without-scores, which copies jobs and plans meanwhile"
            )),
            error => error.into(),
        })?;
        for sentence in done.found.sentences() {
            talk(&format!("warning: {sentence}"));
        }
        for sentence in &done.copied.left_out {
            talk(&format!("warning: left out: {sentence}"));
        }
        match self.json {
            true => print_json(&CopiedDocument::new(&done.copied, &self.to))?,
            false => print(&copied_line(&done.copied, &self.to))?,
        }
        match done.copied.left_out.is_empty() {
            true => Ok(()),
            false => Err(Fault::Job("not everything is in the copy".to_owned())),
        }
    }
}
