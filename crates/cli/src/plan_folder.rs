//! The folder into which a plan's files go: all of them, or none.

use std::fs;
use std::path::{Path, PathBuf};

use enolattice_grid::FaultCode;
use enolattice_plate::PlanFile;

use crate::fault::Fault;

/// A folder that is not there yet.
#[derive(Debug)]
pub(crate) struct PlanFolder {
    path: PathBuf,
}

impl PlanFolder {
    /// Checks, before anything is computed, that the folder can be made.
    pub(crate) fn new(path: &Path) -> Result<PlanFolder, Fault> {
        let shown = path.display().to_string();
        let refused = |reason: &str, remedy: &str| {
            let code = FaultCode::ValueRepeated.name();
            Err(Fault::option("--out", &shown, code, reason, remedy))
        };
        if path.exists() {
            return refused(
                "is there already",
                "name a new folder, so that no older plan is lost",
            );
        }
        let parent = parent(path);
        if !parent.is_dir() {
            return refused("lies in no folder", "make the folder around it first");
        }
        Ok(PlanFolder {
            path: path.to_owned(),
        })
    }

    /// Writes all files beside the folder's place and moves them there at once.
    pub(crate) fn write(&self, files: &[PlanFile]) -> Result<(), Fault> {
        let name = self.path.file_name().unwrap_or_default().to_string_lossy();
        let unfinished = parent(&self.path).join(format!(".{name}.unfinished"));
        let written = self.write_into(&unfinished, files);
        if written.is_err() {
            // what is left of it helps nobody; the first error is the one to tell
            let _ = fs::remove_dir_all(&unfinished);
        }
        written.map_err(|error| Fault::service(format!("{}: {error}", self.path.display())))
    }

    fn write_into(&self, unfinished: &Path, files: &[PlanFile]) -> std::io::Result<()> {
        if unfinished.exists() {
            fs::remove_dir_all(unfinished)?;
        }
        fs::create_dir(unfinished)?;
        for file in files {
            fs::write(unfinished.join(file.name), &file.bytes)?;
        }
        fs::rename(unfinished, &self.path)
    }

    /// The folder as the user knows it.
    pub(crate) fn shown(&self) -> String {
        self.path.display().to_string()
    }
}

fn parent(path: &Path) -> &Path {
    match path.parent() {
        Some(parent) if parent.as_os_str().is_empty() => Path::new("."),
        Some(parent) => parent,
        None => path,
    }
}
