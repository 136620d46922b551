//! `restore`: a data directory from a copy.

use std::path::PathBuf;

use clap::Args;
use enolattice_engine::restore;

use super::EngineOptions;
use super::mend::show;
use crate::fault::Fault;

/// Make a data directory of a copy, check it and mend it.
///
/// The data directory must be new or empty; the copy stays as it is. Prints and exits as `mend` does.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice restore --from /backup/monday --data /var/lib/enolattice")]
pub(super) struct Restore {
    /// Directory of the copy.
    #[arg(long, value_name = "DIR")]
    from: PathBuf,
    /// Directory of jobs and results [default: $ENOLATTICE_DATA, else ./enolattice-data].
    #[arg(long, value_name = "DIR")]
    data: Option<PathBuf>,
    /// Print JSON: one object.
    #[arg(long)]
    json: bool,
}

impl Restore {
    pub(super) fn run(self) -> Result<(), Fault> {
        let dir = EngineOptions::in_dir(self.data).data_dir();
        show(&restore(&self.from, &dir)?, false, self.json)
    }
}
