//! Why a remote engine did not do what it was asked.

use enolattice_grid::InputError;
use prost::Message;
use tonic::{Code, Status};
use tonic_types::pb;

use crate::v1::{self, ErrorReason};
use crate::{ConversionError, ERROR_DOMAIN, INPUT_FAULTS_TYPE_URL};

/// Why a remote engine did not do what it was asked.
///
/// Where the engine itself refused, the text is that of the embedded engine's error.
#[derive(Debug, thiserror::Error)]
pub enum RemoteError {
    /// Faults of the input, all of them.
    #[error("{} fault(s) in the input; the first: {}", .0.len(), .0.first().map(ToString::to_string).unwrap_or_default())]
    Input(Vec<InputError>),
    /// Refused for another reason of the closed list.
    #[error("{message}")]
    Refused {
        /// Reason.
        reason: ErrorReason,
        /// The engine's words.
        message: String,
    },
    /// The server is not there, or not an enolattice server of this version.
    #[error(
        "the server {url} does not answer: {reason}; check the address and that `enolattice serve` runs there"
    )]
    Unreachable {
        /// Address.
        url: String,
        /// What the connection said.
        reason: String,
    },
    /// The server answered what this client does not understand.
    #[error("the server's answer is not understood: {0}; use a client of the server's version")]
    Answer(#[from] ConversionError),
}

impl RemoteError {
    /// Whether the caller can mend it by another request; otherwise the service is at fault.
    pub fn is_callers_fault(&self) -> bool {
        match self {
            RemoteError::Input(_) => true,
            RemoteError::Refused { reason, .. } => !matches!(
                reason,
                ErrorReason::StoreUnavailable
                    | ErrorReason::ModelFailed
                    | ErrorReason::ShuttingDown
                    | ErrorReason::Internal
                    | ErrorReason::Unspecified
            ),
            RemoteError::Unreachable { .. } | RemoteError::Answer(_) => false,
        }
    }

    /// The reason of the closed list, where the engine refused for one.
    pub fn reason(&self) -> Option<ErrorReason> {
        match self {
            RemoteError::Refused { reason, .. } => Some(*reason),
            _ => None,
        }
    }

    /// Reads the details of a status that came from the server at `url`.
    pub fn from_status(status: &Status, url: &str) -> RemoteError {
        let details = pb::Status::decode(status.details())
            .unwrap_or_default()
            .details;
        let faults = details
            .iter()
            .find(|detail| detail.type_url == INPUT_FAULTS_TYPE_URL);
        if let Some(faults) =
            faults.and_then(|detail| v1::InputFaults::decode(detail.value.as_slice()).ok())
        {
            return RemoteError::Input(faults.faults.into_iter().map(Into::into).collect());
        }
        let reason = details
            .iter()
            .filter_map(|detail| pb::ErrorInfo::decode(detail.value.as_slice()).ok())
            .find(|info| info.domain == ERROR_DOMAIN)
            .map(|info| {
                ErrorReason::from_str_name(&info.reason).unwrap_or(ErrorReason::Unspecified)
            });
        match reason {
            Some(reason) => RemoteError::Refused {
                reason,
                message: status.message().to_owned(),
            },
            None if status.code() == Code::OutOfRange => RemoteError::Refused {
                reason: ErrorReason::RequestTooLarge,
                message: status.message().to_owned(),
            },
            None => RemoteError::Unreachable {
                url: url.to_owned(),
                reason: format!("{}: {}", status.code().description(), status.message()),
            },
        }
    }
}
