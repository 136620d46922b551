//! `mend`: a data directory after a bad night.

use std::path::PathBuf;

use clap::Args;
use enolattice_engine::{Health, look, mend};

use super::EngineOptions;
use crate::fault::Fault;
use crate::json::HealthDocument;
use crate::output::{print, print_json};
use crate::text::health_page;

/// Check a data directory that no process has open, and mend it.
///
/// Reads every record, plan and block, says what is wrong and what was done. A broken database of scores is set aside,
/// never removed, and its jobs wait to be screened again. Exit code 0: nothing is wrong, or all of it is mended; 1: a
/// file needs somebody (with --look: something is to be mended); 2: there is no data directory; 3: it is in use or
/// cannot be read or written.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice mend --data /var/lib/enolattice --look\n  \
    enolattice mend --data /var/lib/enolattice")]
pub(super) struct Mend {
    /// Directory of jobs and results [default: $ENOLATTICE_DATA, else ./enolattice-data].
    #[arg(long, value_name = "DIR")]
    data: Option<PathBuf>,
    /// Change nothing: only say what would be done. Works on a copy below $TMPDIR, which needs the space.
    #[arg(long)]
    look: bool,
    /// Print JSON: one object.
    #[arg(long)]
    json: bool,
}

impl Mend {
    pub(super) fn run(self) -> Result<(), Fault> {
        let dir = EngineOptions::in_dir(self.data).data_dir();
        let health = match self.look {
            true => look(&dir)?,
            false => mend(&dir)?,
        };
        show(&health, self.look, self.json)
    }
}

/// Prints how a directory is; a fault where somebody is needed.
pub(super) fn show(health: &Health, look: bool, json: bool) -> Result<(), Fault> {
    match json {
        true => print_json(&HealthDocument::new(health, look))?,
        false => print(&health_page(health, look))?,
    }
    if health.needs_somebody() {
        return Err(Fault::Job(
            "there are files that cannot be read; they stay where they are".to_owned(),
        ));
    }
    match look && !health.is_sound() {
        true => Err(Fault::Job(
            "nothing was changed; without --look it is mended".to_owned(),
        )),
        false => Ok(()),
    }
}
