//! `man`: the manual's pages.

use std::fs;
use std::path::PathBuf;

use clap::{Args, CommandFactory};
use enolattice_grid::FaultCode;

use super::Program;
use crate::fault::Fault;
use crate::output::talk;

/// Write the pages of the manual, one for each command, into a folder.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice man --out ~/.local/share/man/man1\n  \
    man enolattice-rank")]
pub(super) struct Man {
    /// Folder to write into; pages that are there are written anew.
    #[arg(long, value_name = "DIR")]
    out: PathBuf,
}

impl Man {
    pub(super) fn run(self) -> Result<(), Fault> {
        if !self.out.is_dir() {
            return Err(Fault::option(
                "--out",
                &self.out.display().to_string(),
                FaultCode::ValueUnknown.name(),
                "is no folder",
                "make it first",
            ));
        }
        let mut command = Program::command();
        command.build();
        let mut pages = Vec::new();
        let subcommands = command
            .get_subcommands()
            .filter(|known| known.get_name() != "help");
        for known in std::iter::once(&command).chain(subcommands) {
            // the built name of a subcommand is `enolattice rank`
            let name = match known.get_name() {
                "enolattice" => "enolattice".to_owned(),
                name => format!("enolattice-{name}"),
            };
            let mut page = Vec::new();
            let man = clap_mangen::Man::new(known.clone()).title(name.to_uppercase());
            man.render(&mut page)?;
            pages.push((format!("{name}.1"), page));
        }
        for (name, page) in &pages {
            let path = self.out.join(name);
            let written = fs::write(&path, page);
            written.map_err(|error| Fault::service(format!("{}: {error}", path.display())))?;
        }
        talk(&format!(
            "wrote {} pages to {}",
            pages.len(),
            self.out.display()
        ));
        Ok(())
    }
}
