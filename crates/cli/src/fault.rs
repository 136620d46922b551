//! Why a command did not do what it was asked, and the exit code that says so.

use std::fmt;
use std::io;
use std::process::ExitCode;

use enolattice_engine::{EngineError, StoreError};
use enolattice_grid::{InputError, Place};
use enolattice_wire::RemoteError;
use enolattice_wire::v1::ErrorReason;

use crate::output::talk;

/// Why a command stopped.
#[derive(Debug)]
pub(crate) enum Fault {
    /// A job failed or was not finished: exit code 1.
    Job(String),
    /// What the user gave is at fault: exit code 2.
    Input(Vec<InputError>),
    /// The same in a sentence.
    Asked(String),
    /// The engine, its disk or the connection is at fault: exit code 3.
    Service(String),
    /// Whoever reads stdout has gone: quiet, exit code 0.
    ReaderGone,
}

impl Fault {
    pub(crate) fn service(reason: impl Into<String>) -> Fault {
        Fault::Service(reason.into())
    }

    /// One fault of one option or argument.
    pub(crate) fn option(
        field: &str,
        value: &str,
        code: &'static str,
        reason: &str,
        remedy: &str,
    ) -> Fault {
        Fault::Input(vec![InputError {
            place: Place {
                field: field.to_owned(),
                ..Place::default()
            },
            value: value.to_owned(),
            code,
            reason: reason.to_owned(),
            remedy: remedy.to_owned(),
        }])
    }

    /// Tells the user and gives the exit code.
    pub(crate) fn report(self) -> ExitCode {
        if !matches!(self, Fault::ReaderGone) {
            talk(&self.to_string());
        }
        ExitCode::from(match self {
            Fault::ReaderGone => 0,
            Fault::Job(_) => 1,
            Fault::Input(_) | Fault::Asked(_) => 2,
            Fault::Service(_) => 3,
        })
    }
}

impl fmt::Display for Fault {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Fault::Job(reason) | Fault::Asked(reason) | Fault::Service(reason) => {
                write!(f, "error: {reason}")
            }
            Fault::Input(faults) => {
                let lines: Vec<String> = faults.iter().map(ToString::to_string).collect();
                write!(f, "{}", lines.join("\n"))
            }
            Fault::ReaderGone => Ok(()),
        }
    }
}

impl From<EngineError> for Fault {
    fn from(error: EngineError) -> Fault {
        match error {
            EngineError::Input(faults) => Fault::Input(faults),
            EngineError::Store { .. } => Fault::Service(error.to_string()),
            EngineError::Model(_) => Fault::Job(error.to_string()),
            _ => Fault::Asked(error.to_string()),
        }
    }
}

impl From<StoreError> for Fault {
    fn from(error: StoreError) -> Fault {
        match error {
            StoreError::NoStore { .. }
            | StoreError::NotEmpty { .. }
            | StoreError::CopyUnfinished { .. } => Fault::Asked(error.to_string()),
            _ => Fault::Service(error.to_string()),
        }
    }
}

impl From<RemoteError> for Fault {
    fn from(error: RemoteError) -> Fault {
        let reason = error.to_string();
        match error {
            RemoteError::Input(faults) => Fault::Input(faults),
            RemoteError::Refused {
                reason: ErrorReason::ModelFailed,
                ..
            } => Fault::Job(reason),
            error if error.is_callers_fault() => Fault::Asked(reason),
            _ => Fault::Service(reason),
        }
    }
}

impl From<io::Error> for Fault {
    fn from(error: io::Error) -> Fault {
        match error.kind() {
            io::ErrorKind::BrokenPipe => Fault::ReaderGone,
            _ => Fault::Service(format!("the output cannot be written: {error}")),
        }
    }
}
