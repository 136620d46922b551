//! A file that is there whole or not at all.

use std::fs::{self, File};
use std::io::{self, BufWriter, Write};
use std::path::{Path, PathBuf};

use enolattice_grid::FaultCode;

use crate::fault::Fault;

/// Where a command's file goes.
#[derive(Debug)]
pub(crate) struct OutFile {
    /// None: stdout.
    path: Option<PathBuf>,
}

/// What is written so far, to a file beside its place or to stdout.
pub(crate) struct Unfinished {
    /// Where it is and where it goes; none: stdout.
    paths: Option<(PathBuf, PathBuf)>,
    writer: Option<Box<dyn Write + Send>>,
}

impl OutFile {
    /// Checks, before anything is computed, that the file may be written; `-` is stdout.
    pub(crate) fn new(option: &str, path: &Path, force: bool) -> Result<OutFile, Fault> {
        if path.as_os_str() == "-" {
            return Ok(OutFile { path: None });
        }
        let shown = path.display().to_string();
        let refused = |reason: &str, remedy: &str| {
            let code = FaultCode::ValueRepeated.name();
            Err(Fault::option(option, &shown, code, reason, remedy))
        };
        if path.is_dir() {
            return refused("is a folder", "name a file in it");
        }
        if path.exists() && !force {
            return refused("is there already", "name another file, or say `--force`");
        }
        if !folder(path).is_dir() {
            return refused("lies in no folder", "make the folder around it first");
        }
        Ok(OutFile {
            path: Some(path.to_owned()),
        })
    }

    /// Begins to write, beside the file's place.
    pub(crate) fn begin(&self) -> Result<Unfinished, Fault> {
        let Some(path) = &self.path else {
            return Ok(Unfinished {
                paths: None,
                writer: Some(Box::new(BufWriter::new(io::stdout()))),
            });
        };
        let name = path.file_name().unwrap_or_default().to_string_lossy();
        let unfinished = folder(path).join(format!(".{name}.unfinished"));
        let file = File::create(&unfinished).map_err(|error| unwritten(path, &error))?;
        Ok(Unfinished {
            paths: Some((unfinished, path.clone())),
            writer: Some(Box::new(BufWriter::new(file))),
        })
    }

    /// Writes the whole file.
    pub(crate) fn write(&self, bytes: &[u8]) -> Result<(), Fault> {
        let mut unfinished = self.begin()?;
        unfinished.writer().write_all(bytes).map_err(Fault::from)?;
        unfinished.finish()
    }

    /// The file as the user knows it; none of stdout.
    pub(crate) fn shown(&self) -> Option<String> {
        self.path.as_ref().map(|path| path.display().to_string())
    }
}

impl Unfinished {
    /// Takes the writer out, for one that closes what it writes; [`Unfinished::finish_with`] takes it back.
    pub(crate) fn take(&mut self) -> Box<dyn Write + Send> {
        self.writer.take().unwrap_or_else(|| Box::new(io::sink()))
    }

    fn writer(&mut self) -> &mut (dyn Write + Send) {
        self.writer.get_or_insert_with(|| Box::new(io::sink()))
    }

    /// Finishes with the writer that was taken out.
    pub(crate) fn finish_with(mut self, writer: Box<dyn Write + Send>) -> Result<(), Fault> {
        self.writer = Some(writer);
        self.finish()
    }

    /// Moves the file to its place.
    pub(crate) fn finish(mut self) -> Result<(), Fault> {
        self.writer().flush()?;
        match self.paths.take() {
            None => Ok(()),
            Some((unfinished, path)) => {
                drop(self.writer.take());
                fs::rename(&unfinished, &path).map_err(|error| {
                    let _ = fs::remove_file(&unfinished);
                    unwritten(&path, &error)
                })
            }
        }
    }
}

impl Drop for Unfinished {
    fn drop(&mut self) {
        if let Some((unfinished, _)) = self.paths.take() {
            // what is left of it helps nobody; the first error is the one to tell
            let _ = fs::remove_file(unfinished);
        }
    }
}

/// Writes bytes to stdout as they are.
pub(crate) fn write_to_stdout(bytes: &[u8]) -> Result<(), Fault> {
    OutFile { path: None }.write(bytes)
}

fn folder(path: &Path) -> &Path {
    match path.parent() {
        Some(parent) if !parent.as_os_str().is_empty() => parent,
        _ => Path::new("."),
    }
}

fn unwritten(path: &Path, error: &io::Error) -> Fault {
    Fault::service(format!("{}: {error}", path.display()))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nothing_is_lost_and_no_half_is_left() {
        let folder = tempfile::tempdir().expect("a folder");
        let path = folder.path().join("cells.csv");
        let place = |force| OutFile::new("--out", &path, force);
        place(false)
            .expect("is free")
            .write(b"one")
            .expect("is written");
        assert!(place(false).is_err());
        drop(place(true).expect("by force").begin().expect("begins"));
        assert_eq!(
            fs::read(&path).expect("reads"),
            b"one",
            "given up, the old one stays"
        );
        place(true)
            .expect("by force")
            .write(b"two")
            .expect("is written");
        assert_eq!(fs::read(&path).expect("reads"), b"two");
        assert_eq!(fs::read_dir(folder.path()).expect("lists").count(), 1);
        assert!(OutFile::new("--out", folder.path(), true).is_err());
        assert!(OutFile::new("--out", &folder.path().join("none/x"), true).is_err());
    }
}
