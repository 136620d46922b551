//! `report`: a job or a plan as a page to look at and to print.

use std::path::PathBuf;

use clap::Args;
use enolattice_engine::{Axis, ReportQuery};

use super::EngineOptions;
use super::options::map_axes;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::out_file::OutFile;
use crate::output::talk;

/// Write a report of a job or of a plan: one HTML file to look at, to print and to keep.
///
/// The file needs no network and no script. A job's says what to run and why, with maps, structures and the best
/// conditions of each substrate; a plan's has the plates, what is expected of each well, and the stock sheet to tick off.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice report JOB\n  \
    enolattice report PLAN --out tonight.html\n  \
    enolattice report JOB --map base,solvent --out job.html")]
pub(super) struct Report {
    /// The job or the plan.
    id: String,
    /// File to write; `-` writes to stdout [default: ID.html].
    #[arg(long, value_name = "FILE")]
    out: Option<PathBuf>,
    /// Write over a file that is there already.
    #[arg(long)]
    force: bool,
    /// Axes of the rows and columns of a map of a job, e.g. `base,solvent`; may be given several times [default: two that
    /// suit the job].
    #[arg(long, value_name = "AXIS,AXIS", value_parser = map_axes)]
    map: Vec<[Axis; 2]>,
    #[command(flatten)]
    engine: EngineOptions,
}

impl Report {
    pub(super) async fn run(self) -> Result<(), Fault> {
        let usual = || PathBuf::from(format!("{}.html", plain(&self.id)));
        let path = self.out.clone().unwrap_or_else(usual);
        let out = OutFile::new("--out", &path, self.force)?;
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let query = ReportQuery {
            id: self.id,
            maps: self.map,
        };
        let written = client.report(query).await;
        client.close().await?;
        let html = written?;
        out.write(html.as_bytes())?;
        if let Some(file) = out.shown() {
            talk(&format!("wrote {file} ({} kB)", html.len() / 1000));
        }
        Ok(())
    }
}

/// An id as the name of a file: letters and digits, whatever was given.
fn plain(id: &str) -> String {
    let kept: String = id
        .chars()
        .filter(char::is_ascii_alphanumeric)
        .take(40)
        .collect();
    if kept.is_empty() {
        "report".to_owned()
    } else {
        kept
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_id_is_a_name_of_a_file() {
        assert_eq!(plain("../../etc/passwd"), "etcpasswd");
        assert_eq!(plain("//"), "report");
    }
}
