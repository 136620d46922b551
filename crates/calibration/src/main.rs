//! Prints the model's quality.

use std::io::Write;
use std::process::ExitCode;
use std::sync::Arc;

use clap::{Parser, Subcommand};
use enolattice_calibration::{acidity_fit, balance, cases, medium, reactions, solvers};
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
    /// Fits the acidity estimate, cross-validates it and writes the model's tables and the page on them.
    Acidity,
    /// Prints proton balances with our solution as JSON.
    Balance,
    /// Holds the cases of the trade against the model.
    Cases,
    /// Holds the medium against published pKa in several solvents and writes the page on it.
    Medium,
    /// Holds published reactions against the model.
    Reactions,
    /// Compares the fast solver with the stiff reference on random cells.
    Solvers {
        /// Number of cells.
        #[arg(default_value_t = 500)]
        cells: usize,
    },
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
    match arguments.command {
        Command::Acidity => {
            let page = acidity_fit::run(&acidity_fit::Places::in_the_source_tree())
                .map_err(|error| error.to_string())?;
            write!(std::io::stdout().lock(), "{page}").map_err(|error| error.to_string())
        }
        Command::Balance => writeln!(std::io::stdout().lock(), "{}", balance::to_json())
            .map_err(|error| error.to_string()),
        Command::Cases => cases::print(&model()?, &mut std::io::stdout().lock()),
        Command::Medium => {
            let page = medium::page(&model()?)?;
            let place = concat!(env!("CARGO_MANIFEST_DIR"), "/docs/medium.md");
            std::fs::write(place, &page).map_err(|error| format!("{place}: {error}"))?;
            write!(std::io::stdout().lock(), "{page}").map_err(|error| error.to_string())
        }
        Command::Reactions => write!(std::io::stdout().lock(), "{}", reactions::page(&model()?)?)
            .map_err(|error| error.to_string()),
        Command::Solvers { cells } => {
            solvers::print(&model()?, cells, &mut std::io::stdout().lock())
        }
    }
}

fn model() -> Result<Model, String> {
    let library = Library::builtin().map_err(|error| error.to_string())?;
    Ok(Model::new(Arc::new(library)))
}
