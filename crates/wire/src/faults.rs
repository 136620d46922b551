//! Faults of the input, as the details of an error carry them.

use enolattice_grid::InputError;

use crate::v1::{self, ErrorReason};

/// Type of the detail that carries [`v1::InputFaults`].
pub const INPUT_FAULTS_TYPE_URL: &str = "type.googleapis.com/enolattice.v1.InputFaults";

/// A fault found in a message.
pub fn bad_field(
    reason: ErrorReason,
    field: impl Into<String>,
    value: impl Into<String>,
    why: impl Into<String>,
    remedy: impl Into<String>,
) -> InputError {
    InputError::of_field(reason.as_str_name(), field, value, why, remedy)
}

impl From<&InputError> for v1::InputFault {
    fn from(fault: &InputError) -> Self {
        let reason = ErrorReason::from_str_name(fault.code).unwrap_or(ErrorReason::InputInvalid);
        v1::InputFault {
            field: fault.place.field.clone(),
            value: fault.value.clone(),
            reason: reason.into(),
            why: fault.reason.clone(),
            remedy: fault.remedy.clone(),
        }
    }
}

impl From<v1::InputFault> for InputError {
    fn from(fault: v1::InputFault) -> Self {
        let reason = ErrorReason::try_from(fault.reason).unwrap_or(ErrorReason::InputInvalid);
        bad_field(reason, fault.field, fault.value, fault.why, fault.remedy)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use enolattice_grid::FaultCode;

    #[test]
    fn every_code_of_a_campaign_is_a_reason() {
        for code in FaultCode::ALL {
            let reason = ErrorReason::from_str_name(code.name());
            assert_eq!(reason.map(|reason| reason.as_str_name()), Some(code.name()));
        }
    }

    #[test]
    fn faults_come_back() {
        let fault = bad_field(
            ErrorReason::FilterInvalid,
            "filter",
            "p_hit >> 1",
            "at character 7: there is no such operator",
            "use >=",
        );
        assert_eq!(InputError::from(v1::InputFault::from(&fault)), fault);
    }
}
