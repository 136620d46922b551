//! Serving, and stopping without losing an answer.

use std::sync::Arc;
use std::time::Duration;

use enolattice_engine::Engine;
use enolattice_wire::v1::chemistry_service_server::ChemistryServiceServer;
use enolattice_wire::v1::job_service_server::JobServiceServer;
use enolattice_wire::v1::plan_service_server::PlanServiceServer;
use enolattice_wire::v1::report_service_server::ReportServiceServer;
use enolattice_wire::{FILE_DESCRIPTOR_SET, MAX_MESSAGE_BYTES};
use tokio::net::TcpListener;
use tokio::sync::watch;
use tonic::transport::Server;
use tonic::transport::server::TcpIncoming;
use tonic_health::ServingStatus;
use tonic_health::server::HealthReporter;

use crate::chemistry_service::Chemistry;
use crate::job_service::Jobs;
use crate::plan_service::Plans;
use crate::report_service::Reports;

/// Time that requests in flight get after the shutdown began.
const DRAIN_DEADLINE: Duration = Duration::from_secs(10);

/// Longest time to the head of an answer.
const ANSWER_DEADLINE: Duration = Duration::from_secs(300);

/// Silence on a connection after which the peer is asked whether it is there.
const KEEPALIVE: Duration = Duration::from_secs(30);

/// Why the services could not run.
#[derive(Debug, thiserror::Error)]
pub enum ServeError {
    /// The descriptors of the messages cannot be read.
    #[error("the service cannot describe itself: {0}")]
    Reflection(#[from] tonic_reflection::server::Error),
    /// The transport failed.
    #[error("the transport failed: {0}")]
    Transport(#[from] tonic::transport::Error),
}

/// Serves an engine on a listener until `shutdown` is ready.
///
/// Then health says NOT_SERVING, watch streams end with `SHUTTING_DOWN`, no
/// new request is taken, and those in flight have 10 s to end. The caller
/// closes the engine.
///
/// # Errors
/// [`ServeError`] where the transport or the descriptors fail.
pub async fn serve(
    engine: Arc<Engine>,
    listener: TcpListener,
    shutdown: impl Future<Output = ()> + Send,
) -> Result<(), ServeError> {
    let (stop, mut stopping) = watch::channel(false);
    let jobs = JobServiceServer::new(Jobs::new(engine.clone(), stopping.clone()))
        .max_decoding_message_size(MAX_MESSAGE_BYTES);
    let chemistry = ChemistryServiceServer::new(Chemistry::new(engine.clone()))
        .max_decoding_message_size(MAX_MESSAGE_BYTES);
    let plans = PlanServiceServer::new(Plans::new(engine.clone()))
        .max_decoding_message_size(MAX_MESSAGE_BYTES);
    let reports =
        ReportServiceServer::new(Reports::new(engine)).max_decoding_message_size(MAX_MESSAGE_BYTES);
    let (health, health_service) = tonic_health::server::health_reporter();
    report(&health, ServingStatus::Serving).await;
    let router = Server::builder()
        .timeout(ANSWER_DEADLINE)
        .http2_keepalive_interval(Some(KEEPALIVE))
        .add_service(health_service)
        .add_service(reflection().build_v1()?)
        .add_service(reflection().build_v1alpha()?)
        .add_service(jobs)
        .add_service(chemistry)
        .add_service(plans)
        .add_service(reports);
    let stopped = async {
        shutdown.await;
        tracing::info!("shutting down");
        report(&health, ServingStatus::NotServing).await;
        stop.send_replace(true);
    };
    let deadline = async {
        // Never an error: `stop` lives as long as this future.
        let _ = stopping.wait_for(|stopping| *stopping).await;
        tokio::time::sleep(DRAIN_DEADLINE).await;
    };
    let incoming = TcpIncoming::from(listener).with_nodelay(Some(true));
    tokio::select! {
        served = router.serve_with_incoming_shutdown(incoming, stopped) => served?,
        () = deadline => tracing::warn!("requests in flight were cut off at the deadline"),
    }
    Ok(())
}

fn reflection() -> tonic_reflection::server::Builder<'static> {
    tonic_reflection::server::Builder::configure()
        .register_encoded_file_descriptor_set(FILE_DESCRIPTOR_SET)
        .register_encoded_file_descriptor_set(tonic_health::pb::FILE_DESCRIPTOR_SET)
}

async fn report(health: &HealthReporter, status: ServingStatus) {
    for service in [
        "",
        "enolattice.v1.JobService",
        "enolattice.v1.ChemistryService",
        "enolattice.v1.PlanService",
        "enolattice.v1.ReportService",
    ] {
        health.set_service_status(service, status).await;
    }
}
