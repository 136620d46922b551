//! The commands, one a file; their doc comments are their help.

mod backup;
mod cancel;
mod check_measured;
mod compare;
mod completion;
mod delete;
mod explain;
mod export;
mod following;
mod jobs;
mod man;
mod mend;
mod options;
mod pause;
mod plan;
mod plans;
mod rank;
mod reagents;
mod report;
mod restore;
mod resume;
mod screen;
mod serve;
mod sites;
mod submit;
mod terms;
mod watch;

use clap::{Parser, Subcommand};
use tracing_subscriber::EnvFilter;

pub(crate) use options::EngineOptions;

use crate::fault::Fault;
use options::LogFormat;

/// Screens grids of substrate × base × electrophile × solvent × conditions and ranks every cell.
///
/// Data go to stdout, talk to stderr. Exit code 0: done; 1: a job failed or was not finished;
/// 2: the input is at fault; 3: the service is.
#[derive(Debug, Parser)]
#[command(
    name = "enolattice",
    version,
    after_help = "One night:\n  \
    enolattice screen campaign.toml --dry-run   what it would take\n  \
    enolattice screen campaign.toml             every cell; prints the job\n  \
    enolattice rank JOB --map substrate,base    where it works\n  \
    enolattice explain JOB CELL                 why\n  \
    enolattice plan JOB --out tonight           plates, stocks, transfers\n\n\
    `enolattice COMMAND --help` says more of each. Predictions and cautions are no substitute for a hazard assessment."
)]
pub(crate) struct Program {
    #[command(subcommand)]
    command: Command,
}

#[derive(Debug, Subcommand)]
enum Command {
    Screen(screen::Screen),
    Serve(serve::Serve),
    Submit(submit::Submit),
    Jobs(jobs::Jobs),
    Watch(watch::Watch),
    Pause(pause::Pause),
    Resume(resume::Resume),
    Cancel(cancel::Cancel),
    Delete(delete::Delete),
    Rank(rank::Rank),
    Explain(Box<explain::Explain>),
    Export(export::Export),
    Plan(plan::Plan),
    Plans(plans::Plans),
    Report(report::Report),
    Compare(compare::Compare),
    CheckMeasured(check_measured::CheckMeasured),
    Sites(sites::Sites),
    Reagents(reagents::Reagents),
    Mend(mend::Mend),
    Backup(backup::Backup),
    Restore(restore::Restore),
    Completion(completion::Completion),
    Man(man::Man),
}

/// Starts the log on stderr; `ENOLATTICE_LOG` says what it takes, e.g. `debug`.
pub(crate) fn start_log(program: &Program) {
    let (usual, format) = match &program.command {
        Command::Serve(serve) => ("info", serve.log_format()),
        _ => ("warn", LogFormat::Text),
    };
    let filter =
        EnvFilter::try_from_env("ENOLATTICE_LOG").unwrap_or_else(|_| EnvFilter::new(usual));
    let log = tracing_subscriber::fmt()
        .with_env_filter(filter)
        .with_writer(std::io::stderr)
        .with_target(false);
    match format {
        LogFormat::Text => log.init(),
        LogFormat::Json => log.json().flatten_event(true).init(),
    }
}

/// Runs the command.
pub(crate) async fn run(program: Program) -> Result<(), Fault> {
    match program.command {
        Command::Screen(command) => command.run().await,
        Command::Serve(command) => command.run().await,
        Command::Submit(command) => command.run().await,
        Command::Jobs(command) => command.run().await,
        Command::Watch(command) => command.run().await,
        Command::Pause(command) => command.run().await,
        Command::Resume(command) => command.run().await,
        Command::Cancel(command) => command.run().await,
        Command::Delete(command) => command.run().await,
        Command::Rank(command) => command.run().await,
        Command::Explain(command) => command.run().await,
        Command::Export(command) => command.run().await,
        Command::Plan(command) => command.run().await,
        Command::Plans(command) => command.run().await,
        Command::Report(command) => command.run().await,
        Command::Compare(command) => command.run().await,
        Command::CheckMeasured(command) => command.run().await,
        Command::Sites(command) => command.run().await,
        Command::Reagents(command) => command.run().await,
        Command::Mend(command) => command.run(),
        Command::Backup(command) => command.run(),
        Command::Restore(command) => command.run(),
        Command::Completion(command) => command.run(),
        Command::Man(command) => command.run(),
    }
}
