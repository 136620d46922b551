//! Prints the model's quality.

use std::process::ExitCode;
use std::sync::Arc;

use clap::{Parser, Subcommand};
use enolattice_calibration::cases;
use enolattice_model::Model;
use enolattice_reagents::Library;

/// Fits, trade cases and published checks.
#[derive(Parser)]
struct Arguments {
    #[command(subcommand)]
    command: Command,
}

#[derive(Subcommand)]
enum Command {
    /// Holds the cases of the trade against the model.
    Cases,
}

fn main() -> ExitCode {
    match run(&Arguments::parse()) {
        Ok(()) => ExitCode::SUCCESS,
        Err(reason) => {
            #[allow(clippy::print_stderr)]
            {
                eprintln!("{reason}");
            }
            ExitCode::FAILURE
        }
    }
}

fn run(arguments: &Arguments) -> Result<(), String> {
    let library = Library::builtin().map_err(|error| error.to_string())?;
    let model = Model::new(Arc::new(library));
    match arguments.command {
        Command::Cases => cases::print(&model, &mut std::io::stdout().lock()),
    }
}
