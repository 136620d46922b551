//! `report`: a job or a plan as a page to look at and to print.

use std::fs;
use std::path::{Path, PathBuf};

use clap::Args;
use enolattice_engine::{Axis, ReportQuery};
use enolattice_grid::FaultCode;

use super::EngineOptions;
use super::options::map_axes;
use crate::client::{Client, Need};
use crate::fault::Fault;
use crate::output::{print, talk};

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
        let path = match &self.out {
            Some(out) if out.as_os_str() == "-" => None,
            Some(out) => Some(out.clone()),
            None => Some(PathBuf::from(format!("{}.html", plain(&self.id)))),
        };
        if let Some(path) = &path {
            check_place(path, self.force)?;
        }
        let client = Client::open(&self.engine, Need::Jobs).await?;
        let query = ReportQuery {
            id: self.id,
            maps: self.map,
        };
        let written = client.report(query).await;
        client.close().await?;
        let html = written?;
        match path {
            None => print(&html),
            Some(path) => {
                write(&path, &html)?;
                talk(&format!(
                    "wrote {} ({} kB)",
                    path.display(),
                    html.len() / 1000
                ));
                Ok(())
            }
        }
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

/// Checks, before anything is computed, that the file may be written.
fn check_place(path: &Path, force: bool) -> Result<(), Fault> {
    let shown = path.display().to_string();
    let refused = |reason: &str, remedy: &str| {
        Err(Fault::option(
            "--out",
            &shown,
            FaultCode::ValueRepeated.name(),
            reason,
            remedy,
        ))
    };
    if path.is_dir() {
        return refused("is a folder", "name a file in it");
    }
    if path.exists() && !force {
        return refused("is there already", "name another file, or say `--force`");
    }
    match folder(path).is_dir() {
        true => Ok(()),
        false => refused("lies in no folder", "make the folder around it first"),
    }
}

fn folder(path: &Path) -> &Path {
    match path.parent() {
        Some(parent) if !parent.as_os_str().is_empty() => parent,
        _ => Path::new("."),
    }
}

/// Writes beside the file's place and moves it there at once, so that no half of a report is ever there.
fn write(path: &Path, html: &str) -> Result<(), Fault> {
    let name = path.file_name().unwrap_or_default().to_string_lossy();
    let unfinished = folder(path).join(format!(".{name}.unfinished"));
    let written = fs::write(&unfinished, html).and_then(|()| fs::rename(&unfinished, path));
    if written.is_err() {
        // what is left of it helps nobody; the first error is the one to tell
        let _ = fs::remove_file(&unfinished);
    }
    written.map_err(|error| Fault::service(format!("{}: {error}", path.display())))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn no_report_is_lost_and_no_half_is_left() {
        let folder = tempfile::tempdir().expect("a folder");
        let path = folder.path().join("report.html");
        write(&path, "one").expect("is written");
        assert!(check_place(&path, false).is_err());
        assert!(check_place(&path, true).is_ok());
        write(&path, "two").expect("is written");
        assert_eq!(fs::read_to_string(&path).expect("reads"), "two");
        assert_eq!(fs::read_dir(folder.path()).expect("lists").count(), 1);
        assert!(check_place(folder.path(), true).is_err());
        assert!(check_place(&folder.path().join("none/x.html"), false).is_err());
    }

    #[test]
    fn an_id_is_a_name_of_a_file() {
        assert_eq!(plain("../../etc/passwd"), "etcpasswd");
        assert_eq!(plain("//"), "report");
    }
}
