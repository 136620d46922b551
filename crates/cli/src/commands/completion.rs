//! `completion`: what a shell needs to complete the commands.

use clap::{Args, CommandFactory};
use clap_complete::{Shell, generate};

use super::Program;
use crate::fault::Fault;
use crate::out_file::write_to_stdout;

/// Print a script by which a shell completes commands and options.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice completion bash > ~/.local/share/bash-completion/completions/enolattice\n  \
    enolattice completion zsh > ~/.zfunc/_enolattice\n  \
    enolattice completion fish > ~/.config/fish/completions/enolattice.fish")]
pub(super) struct Completion {
    /// The shell.
    #[arg(value_enum)]
    shell: Shell,
}

impl Completion {
    pub(super) fn run(self) -> Result<(), Fault> {
        let mut script = Vec::new();
        generate(
            self.shell,
            &mut Program::command(),
            "enolattice",
            &mut script,
        );
        write_to_stdout(&script)
    }
}
