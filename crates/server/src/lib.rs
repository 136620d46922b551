//! The gRPC services in front of an engine.
//!
//! Every handler translates, asks the engine and translates back; nothing here
//! knows chemistry or touches the disk. [`tonic::Status`] is built in
//! `status.rs` alone. How to call the services: `docs/api.md`.

mod chemistry_service;
mod job_service;
mod paging;
mod plan_service;
mod report_service;
mod serve;
mod status;
mod upload;
mod watch;

pub use serve::{ServeError, serve};
