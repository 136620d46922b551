//! Why a request is refused, as a status: code, reason, all faults.
//!
//! Nothing else in this crate builds a [`Status`].

use std::collections::HashMap;

use enolattice_engine::EngineError;
use enolattice_grid::InputError;
use enolattice_wire::v1::{self, ErrorReason};
use enolattice_wire::{
    DEFAULT_DETAIL_BYTES, DETAIL_BYTES_KEY, ERROR_DOMAIN, INPUT_FAULTS_TYPE_URL, MAX_DETAIL_BYTES,
    bad_field,
};
use prost::Message;
use prost_types::Any;
use tonic::metadata::MetadataMap;
use tonic::{Code, Status};
use tonic_types::pb;

/// Why a request is refused.
#[derive(Debug)]
pub(crate) enum Refusal {
    /// Faults of the input; their fields are paths in the request.
    Input(Vec<InputError>),
    /// The engine refused for another reason.
    Engine(EngineError),
    /// The request is larger than the service takes.
    TooLarge {
        /// The limit.
        limit_bytes: usize,
    },
    /// The service is stopping.
    ShuttingDown,
}

impl From<Vec<InputError>> for Refusal {
    fn from(faults: Vec<InputError>) -> Self {
        Refusal::Input(faults)
    }
}

impl From<EngineError> for Refusal {
    fn from(error: EngineError) -> Self {
        match error {
            EngineError::Input(faults) => Refusal::Input(faults),
            other => Refusal::Engine(other),
        }
    }
}

impl Refusal {
    /// An error about the part of the request that the field `part` holds.
    pub(crate) fn within(part: &str, error: EngineError) -> Refusal {
        let mut refusal = Refusal::from(error);
        if let Refusal::Input(faults) = &mut refusal {
            // The id of a request and its terms stand beside its campaign.
            for fault in faults.iter_mut().filter(|fault| {
                let field = &fault.place.field;
                field != "request_id" && !field.starts_with("terms.")
            }) {
                fault.place.field = match fault.place.field.as_str() {
                    "" => part.to_owned(),
                    field => format!("{part}.{field}"),
                };
            }
        }
        refusal
    }

    /// Faults of the message itself together with those of its campaign, whose axes may be empty only
    /// because all their values are among the first.
    pub(crate) fn together(of_message: Vec<InputError>, of_campaign: Vec<InputError>) -> Refusal {
        let is_of_axis = |fault: &InputError, axis: &str| {
            let path = fault.place.field.strip_prefix("campaign.");
            path.is_some_and(|path| path.starts_with(axis))
        };
        let follows = |fault: &InputError| {
            let axis = fault.place.field.as_str();
            fault.code == ErrorReason::AxisEmpty.as_str_name()
                && of_message.iter().any(|known| is_of_axis(known, axis))
        };
        let new: Vec<InputError> = of_campaign
            .into_iter()
            .filter(|fault| !follows(fault))
            .collect();
        let new = match Refusal::within("campaign", EngineError::Input(new)) {
            Refusal::Input(faults) => faults,
            other => return other,
        };
        Refusal::Input(enolattice_grid::in_order(of_message.into_iter().chain(new)))
    }

    /// The status, with details as large as the client said it takes.
    pub(crate) fn status(self, metadata: &MetadataMap) -> Status {
        let reason = self.reason();
        let message = self.message();
        let mut facts = self.facts();
        let mut details = Vec::new();
        if let Refusal::Input(faults) = &self {
            let listed = fitting(faults, detail_bytes(metadata));
            let (all, told) = (
                counted(faults),
                listed.iter().filter(|fault| !counts_others(fault)),
            );
            facts.insert("faults".into(), all.to_string());
            facts.insert("faults_listed".into(), told.count().to_string());
            details.push(any("google.rpc.BadRequest", &bad_request(&listed)));
            let faults = listed.iter().map(Into::into).collect();
            details.push(Any {
                type_url: INPUT_FAULTS_TYPE_URL.to_owned(),
                value: v1::InputFaults { faults }.encode_to_vec(),
            });
        }
        let info = pb::ErrorInfo {
            reason: reason.as_str_name().to_owned(),
            domain: ERROR_DOMAIN.to_owned(),
            metadata: facts,
        };
        details.insert(0, any("google.rpc.ErrorInfo", &info));
        let code = code(reason);
        if code == Code::Internal || reason == ErrorReason::StoreUnavailable {
            tracing::error!(reason = reason.as_str_name(), message, "a request failed");
        }
        let status = pb::Status {
            code: code.into(),
            message: message.clone(),
            details,
        };
        Status::with_details(code, message, status.encode_to_vec().into())
    }

    fn reason(&self) -> ErrorReason {
        match self {
            Refusal::Input(_) => ErrorReason::InputInvalid,
            Refusal::TooLarge { .. } => ErrorReason::RequestTooLarge,
            Refusal::ShuttingDown => ErrorReason::ShuttingDown,
            Refusal::Engine(error) => match error {
                EngineError::Input(_) => ErrorReason::InputInvalid,
                EngineError::JobUnknown { .. } => ErrorReason::JobUnknown,
                EngineError::PlanUnknown { .. } => ErrorReason::PlanUnknown,
                EngineError::NothingKept { .. } => ErrorReason::NothingKept,
                EngineError::CellUnknown { .. } => ErrorReason::CellUnknown,
                EngineError::WrongState { .. } => ErrorReason::JobWrongState,
                EngineError::RequestIdReused { .. } => ErrorReason::RequestIdReused,
                EngineError::QueueFull { .. } => ErrorReason::QueueFull,
                EngineError::PageToken { .. } => ErrorReason::PageTokenInvalid,
                EngineError::Store { .. } => ErrorReason::StoreUnavailable,
                EngineError::Stopping => ErrorReason::ShuttingDown,
                EngineError::Model(_) => ErrorReason::ModelFailed,
            },
        }
    }

    fn message(&self) -> String {
        match self {
            Refusal::Input(faults) => match faults.as_slice() {
                [] => "the input is refused".to_owned(),
                [fault] => fault.to_string(),
                [first, ..] => format!("{} faults in the input; the first: {first}", faults.len()),
            },
            Refusal::Engine(error) => error.to_string(),
            Refusal::TooLarge { limit_bytes } => format!(
                "the campaign is larger than {} MiB; split it",
                limit_bytes >> 20
            ),
            Refusal::ShuttingDown => {
                "the service is stopping; its jobs go on when it is back".to_owned()
            }
        }
    }

    /// What a program may want to know without reading the message.
    fn facts(&self) -> HashMap<String, String> {
        let facts = match self {
            Refusal::Engine(EngineError::JobUnknown { job }) => vec![("job_id", job.clone())],
            Refusal::Engine(EngineError::PlanUnknown { plan }) => vec![("plan_id", plan.clone())],
            Refusal::Engine(EngineError::NothingKept { id }) => vec![("id", id.clone())],
            Refusal::Engine(EngineError::CellUnknown { job, cell, last }) => vec![
                ("job_id", job.clone()),
                ("cell", cell.to_string()),
                ("last_cell", last.to_string()),
            ],
            Refusal::Engine(EngineError::WrongState { job, state, .. }) => {
                vec![("job_id", job.clone()), ("state", (*state).to_owned())]
            }
            Refusal::Engine(EngineError::RequestIdReused { request_id, job }) => {
                vec![("job_id", job.clone()), ("request_id", request_id.clone())]
            }
            Refusal::Engine(EngineError::QueueFull { requester, most }) => {
                vec![("requester", requester.clone()), ("most", most.to_string())]
            }
            Refusal::TooLarge { limit_bytes } => vec![("limit_bytes", limit_bytes.to_string())],
            _ => vec![],
        };
        facts
            .into_iter()
            .map(|(key, value)| (key.to_owned(), value))
            .collect()
    }
}

/// The status code of a reason, as `error.proto` states it.
fn code(reason: ErrorReason) -> Code {
    match reason {
        ErrorReason::JobUnknown
        | ErrorReason::PlanUnknown
        | ErrorReason::NothingKept
        | ErrorReason::CellUnknown => Code::NotFound,
        ErrorReason::JobWrongState => Code::FailedPrecondition,
        ErrorReason::RequestIdReused => Code::AlreadyExists,
        ErrorReason::StoreUnavailable | ErrorReason::ShuttingDown => Code::Unavailable,
        ErrorReason::RequestTooLarge | ErrorReason::QueueFull => Code::ResourceExhausted,
        ErrorReason::Unspecified | ErrorReason::ModelFailed | ErrorReason::Internal => {
            Code::Internal
        }
        _ => Code::InvalidArgument,
    }
}

fn bad_request(faults: &[InputError]) -> pb::BadRequest {
    let violations = faults.iter().map(|fault| pb::bad_request::FieldViolation {
        field: fault.place.field.clone(),
        description: match fault.value.as_str() {
            "" => format!("{}; {}", fault.reason, fault.remedy),
            value => format!("`{value}`: {}; {}", fault.reason, fault.remedy),
        },
        reason: fault.code.to_owned(),
        localized_message: None,
    });
    pb::BadRequest {
        field_violations: violations.collect(),
    }
}

/// The first faults, as many as fit into details of this size, and one that counts the others.
fn fitting(faults: &[InputError], bytes: usize) -> Vec<InputError> {
    let mut used = 0;
    let fit = faults.iter().take_while(|fault| {
        // Twice: once in the standard detail, once in our own; on the wire in base 64.
        used += 2 * v1::InputFault::from(*fault).encoded_len() * 4 / 3;
        used <= bytes
    });
    let count = fit.count().max(1).min(faults.len());
    if count == faults.len() {
        return faults.to_vec();
    }
    let more = bad_field(
        ErrorReason::MoreFaults,
        "",
        (counted(faults) - count).to_string(),
        "they are not listed",
        "",
    );
    enolattice_grid::in_order(faults[..count].iter().cloned().chain([more]))
}

/// Whether a fault only says how many others there are.
fn counts_others(fault: &InputError) -> bool {
    fault.code == ErrorReason::MoreFaults.as_str_name()
}

/// Number of faults, those included that are counted only.
fn counted(faults: &[InputError]) -> usize {
    let count = |fault: &InputError| match counts_others(fault) {
        true => fault.value.parse().unwrap_or(1),
        false => 1,
    };
    faults.iter().map(count).sum()
}

fn detail_bytes(metadata: &MetadataMap) -> usize {
    let told = metadata
        .get(DETAIL_BYTES_KEY)
        .and_then(|value| value.to_str().ok());
    let bytes = told
        .and_then(|value| value.parse().ok())
        .unwrap_or(DEFAULT_DETAIL_BYTES);
    bytes.min(MAX_DETAIL_BYTES)
}

fn any(name: &str, message: &impl Message) -> Any {
    Any {
        type_url: format!("type.googleapis.com/{name}"),
        value: message.encode_to_vec(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_wire::RemoteError;
    use tonic_types::StatusExt;

    fn faults(count: usize) -> Vec<InputError> {
        let fault = |i| {
            bad_field(
                ErrorReason::ReagentUnknown,
                format!("bases.reagents[{i}]"),
                "LDDA",
                "there is no such base in the library",
                "did you mean `LDA`?",
            )
        };
        (0..count).map(fault).collect()
    }

    fn received(status: &Status) -> RemoteError {
        RemoteError::from_status(status, "http://there")
    }

    #[test]
    fn faults_come_back_whole() {
        let sent = faults(3);
        let status = Refusal::from(sent.clone()).status(&MetadataMap::new());
        assert_eq!(status.code(), Code::InvalidArgument);
        match received(&status) {
            RemoteError::Input(faults) => assert_eq!(faults, sent),
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn standard_clients_see_every_fault() {
        let status =
            Refusal::within("campaign", EngineError::Input(faults(2))).status(&MetadataMap::new());
        let details = status.get_error_details();
        let violations = &details
            .bad_request()
            .expect("a BadRequest")
            .field_violations;
        assert_eq!(violations.len(), 2);
        assert_eq!(violations[1].field, "campaign.bases.reagents[1]");
        assert_eq!(violations[1].reason, "REAGENT_UNKNOWN");
        assert!(violations[1].description.contains("LDDA"));
        let info = details.error_info().expect("an ErrorInfo");
        assert_eq!(
            (info.reason.as_str(), info.domain.as_str()),
            ("INPUT_INVALID", ERROR_DOMAIN)
        );
    }

    #[test]
    fn details_stay_within_what_the_client_takes() {
        let small = Refusal::from(faults(200)).status(&MetadataMap::new());
        assert!(
            small.details().len() * 4 / 3 <= 8192,
            "{}",
            small.details().len()
        );
        let details = small.get_error_details();
        let facts = &details.error_info().expect("an ErrorInfo").metadata;
        assert_eq!(facts["faults"], "200");
        let told = match received(&small) {
            RemoteError::Input(faults) => faults,
            other => panic!("{other:?}"),
        };
        let last = told.last().expect("faults");
        assert_eq!(last.code, "MORE_FAULTS");
        assert_eq!(facts["faults_listed"], (told.len() - 1).to_string());
        assert_eq!(last.value, (201 - told.len()).to_string());
        let mut metadata = MetadataMap::new();
        metadata.insert(DETAIL_BYTES_KEY, "1000000".parse().expect("ASCII"));
        let large = Refusal::from(faults(200)).status(&metadata);
        match received(&large) {
            RemoteError::Input(faults) => assert_eq!(faults.len(), 200),
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn every_refusal_keeps_its_reason_and_words() {
        let job = || "j".to_owned();
        let cases = [
            (EngineError::JobUnknown { job: job() }, Code::NotFound, true),
            (
                EngineError::PlanUnknown { plan: "p".into() },
                Code::NotFound,
                true,
            ),
            (
                EngineError::NothingKept { id: "x".into() },
                Code::NotFound,
                true,
            ),
            (
                EngineError::CellUnknown {
                    job: job(),
                    cell: 9,
                    last: 8,
                },
                Code::NotFound,
                true,
            ),
            (
                EngineError::WrongState {
                    job: job(),
                    state: "done",
                    remedy: "submit it again",
                },
                Code::FailedPrecondition,
                true,
            ),
            (
                EngineError::RequestIdReused {
                    request_id: "r".into(),
                    job: job(),
                },
                Code::AlreadyExists,
                true,
            ),
            (
                EngineError::PageToken {
                    reason: "old".into(),
                },
                Code::InvalidArgument,
                true,
            ),
            (EngineError::Stopping, Code::Unavailable, false),
            (
                EngineError::Store {
                    reason: "disk full".into(),
                },
                Code::Unavailable,
                false,
            ),
        ];
        for (error, code, callers) in cases {
            let words = error.to_string();
            let refusal = Refusal::from(error);
            let sent = refusal.reason();
            let status = refusal.status(&MetadataMap::new());
            assert_eq!(status.code(), code);
            let back = received(&status);
            assert_eq!(back.is_callers_fault(), callers);
            assert!(
                matches!(&back, RemoteError::Refused { reason, message }
                    if *reason == sent && *message == words),
                "{back:?}"
            );
        }
    }
}
