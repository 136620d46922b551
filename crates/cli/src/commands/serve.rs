//! `serve`: the engine behind gRPC.

use std::io;
use std::net::SocketAddr;
use std::path::PathBuf;
use std::sync::Arc;

use clap::Args;
use enolattice_engine::{Engine, EngineConfig};
use tokio::net::TcpListener;

use super::EngineOptions;
use super::options::LogFormat;
use crate::campaign_file::own_tables;
use crate::fault::Fault;
use crate::output::{print, talk};

/// Run the engine with its queue as a gRPC service.
///
/// Prints `listening on ADDRESS` on stdout when it takes connections. Ends between two blocks
/// at SIGTERM or ctrl-c; unfinished jobs go on at the next start.
#[derive(Debug, Args)]
#[command(after_help = "Examples:\n  \
    enolattice serve --data /var/lib/enolattice\n  \
    enolattice jobs --server http://127.0.0.1:7413")]
pub(super) struct Serve {
    /// Address to listen on; port 0 takes a free one.
    #[arg(long, value_name = "ADDR", default_value = "127.0.0.1:7413")]
    listen: SocketAddr,
    /// Directory of jobs and results [default: $ENOLATTICE_DATA, else ./enolattice-data].
    #[arg(long, value_name = "DIR")]
    data: Option<PathBuf>,
    /// Compute threads; 0: one for each core.
    #[arg(long, value_name = "N", default_value_t = 0)]
    threads: usize,
    /// Lay a table of your own reagents over the library; may be given several times.
    #[arg(long, value_name = "FILE")]
    library: Vec<PathBuf>,
    /// Form of the log on stderr.
    #[arg(long, value_name = "FORM", value_enum, default_value_t)]
    log_format: LogFormat,
}

impl Serve {
    pub(super) fn log_format(&self) -> LogFormat {
        self.log_format
    }

    pub(super) async fn run(self) -> Result<(), Fault> {
        let data_dir = EngineOptions::in_dir(self.data).data_dir();
        let listener = TcpListener::bind(self.listen).await.map_err(|error| {
            Fault::Service(format!(
                "{} cannot be listened on: {error}; choose another address with --listen",
                self.listen
            ))
        })?;
        let address = listener
            .local_addr()
            .map_err(|error| Fault::service(error.to_string()))?;
        let config = EngineConfig {
            data_dir: data_dir.clone(),
            threads: self.threads,
            library: own_tables(&self.library)?,
        };
        let engine = Arc::new(Engine::open(config).await?);
        let stop = stop_signal().map_err(|error| Fault::service(error.to_string()))?;
        // A program that reads the log as JSON wants nothing else there.
        if let LogFormat::Text = self.log_format {
            talk(&format!(
                "serving {} on {address}; ctrl-c stops",
                data_dir.display()
            ));
        }
        print(&format!("listening on {address}"))?;
        let served = enolattice_server::serve(engine.clone(), listener, stop).await;
        engine.shutdown().await;
        served.map_err(|error| Fault::service(error.to_string()))
    }
}

/// Ends at SIGTERM or ctrl-c; from this call on they are waited for and no longer end the process.
#[cfg(unix)]
fn stop_signal() -> io::Result<impl Future<Output = ()>> {
    use tokio::signal::unix::{SignalKind, signal};
    let mut interrupt = signal(SignalKind::interrupt())?;
    let mut terminate = signal(SignalKind::terminate())?;
    Ok(async move {
        tokio::select! {
            _ = interrupt.recv() => {}
            _ = terminate.recv() => {}
        }
    })
}

/// Ends at ctrl-c.
#[cfg(not(unix))]
fn stop_signal() -> io::Result<impl Future<Output = ()>> {
    Ok(async {
        // Without a handler only the end of the process stops the service.
        if tokio::signal::ctrl_c().await.is_err() {
            std::future::pending::<()>().await;
        }
    })
}
