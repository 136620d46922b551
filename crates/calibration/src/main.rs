//! Prints the model's quality.

use std::io::Write;
use std::process::ExitCode;
use std::sync::Arc;

use clap::{Parser, Subcommand};
use enolattice_calibration::{
    acidity_fit, balance, cases, figures, medium, networks, practice, rates, reactions, solvers,
    uncertainty,
};
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
    /// Writes the page of all figures on acidity, medium and proton balance.
    Figures,
    /// Holds the medium against published pKa in several solvents and writes the page on it.
    Medium,
    /// Prints networks of random cells with the solution of the stiff reference as JSON.
    Networks,
    /// Holds common reactions against the model.
    Practice,
    /// Holds published reactions against the model.
    Reactions,
    /// Holds published selectivities, relative rates, nucleophilicities and reactions against the model and writes the pages
    /// on them and on what the model is good for.
    Rates,
    /// Holds the screen's p_hit and expected yield against joint draws and writes the page on it.
    Uncertainty {
        /// Number of cells.
        #[arg(default_value_t = 300)]
        cells: usize,
        /// Number of draws.
        #[arg(default_value_t = 4096)]
        draws: u32,
    },
    /// Compares the fast solver with the stiff reference on random cells and writes the page on it.
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
            printed(&page)
        }
        Command::Balance => printed(&format!("{}\n", balance::to_json(&model()?)?)),
        Command::Cases => cases::print(&model()?, &mut std::io::stdout().lock()),
        Command::Figures => written("figures.md", figures::page(&model()?)?),
        Command::Medium => written("medium.md", medium::page(&model()?)?),
        Command::Networks => printed(&format!("{}\n", networks::to_json(&model()?)?)),
        Command::Practice => {
            let model = model()?;
            let (first, second) = (practice::judge(&model)?, practice::judge_second(&model)?);
            printed(&practice::section(&first, &second))
        }
        Command::Reactions => printed(&reactions::page(&model()?)?),
        Command::Rates => {
            let pages = rates::pages(&model()?)?;
            written("quality.md", pages.quality)?;
            written("rates.md", pages.rates)
        }
        Command::Uncertainty { cells, draws } => written(
            "uncertainty.md",
            uncertainty::page(&model()?, cells, draws)?,
        ),
        Command::Solvers { cells } => written("solvers.md", solvers::page(&model()?, cells)?),
    }
}

/// Keeps a page in `docs/` and prints it.
fn written(name: &str, page: String) -> Result<(), String> {
    let place = format!("{}/docs/{name}", env!("CARGO_MANIFEST_DIR"));
    std::fs::write(&place, &page).map_err(|error| format!("{place}: {error}"))?;
    printed(&page)
}

fn printed(text: &str) -> Result<(), String> {
    let mut out = std::io::stdout().lock();
    out.write_all(text.as_bytes())
        .map_err(|error| error.to_string())
}

fn model() -> Result<Model, String> {
    let library = Library::builtin().map_err(|error| error.to_string())?;
    Ok(Model::new(Arc::new(library)))
}
