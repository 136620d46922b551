//! The command line program enolattice.
//!
//! Data go to stdout, talk to stderr. Exit code 0: done; 1: a job failed or was
//! not finished; 2: the input is at fault; 3: the service is.

mod campaign_file;
mod client;
mod commands;
mod export;
mod fault;
mod json;
mod out_file;
mod output;
mod plan_folder;
mod progress;
mod text;

use std::process::ExitCode;

use clap::Parser;

fn main() -> ExitCode {
    let program = commands::Program::parse();
    commands::start_log(&program);
    let runtime = match tokio::runtime::Builder::new_multi_thread()
        .worker_threads(2)
        .enable_all()
        .build()
    {
        Ok(runtime) => runtime,
        Err(error) => {
            return fault::Fault::service(format!("no threads can be started: {error}")).report();
        }
    };
    match runtime.block_on(commands::run(program)) {
        Ok(()) => ExitCode::SUCCESS,
        Err(fault) => fault.report(),
    }
}
