//! The closed list of reasons why an input is refused.

/// The closed list of reasons why an input is refused; programs branch on it.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum FaultCode {
    /// The campaign is no TOML.
    CampaignSyntax,
    /// A key that does not exist.
    KeyUnknown,
    /// A value of another kind than the key takes.
    ValueType,
    /// A value that must be there is not.
    ValueMissing,
    /// A value outside its range.
    ValueOutOfRange,
    /// A word outside the list of words allowed.
    ValueUnknown,
    /// A value that is given twice where one can be.
    ValueRepeated,
    /// A file that the campaign names was not given.
    FileMissing,
    /// A file that is not what its ending says, or is beyond the limits of size.
    FileSyntax,
    /// A column that must be there is not.
    ColumnMissing,
    /// A column that does not exist.
    ColumnUnknown,
    /// A SMILES that is no molecule the model can read.
    StructureInvalid,
    /// A name that the library does not have.
    ReagentUnknown,
    /// An axis without values.
    AxisEmpty,
    /// More cells than a campaign can have, or more structure than is read.
    CampaignTooLarge,
    /// A value that has its place but is not allowed yet.
    NotYetAllowed,
    /// A table of the laboratory's own library that cannot be laid over ours.
    LibraryInvalid,
    /// A plan that the deck, the shelf or the limits do not allow.
    PlanImpossible,
    /// Faults that are not listed; the value is their number.
    MoreFaults,
}

impl FaultCode {
    /// All codes.
    pub const ALL: [FaultCode; 19] = [
        FaultCode::CampaignSyntax,
        FaultCode::KeyUnknown,
        FaultCode::ValueType,
        FaultCode::ValueMissing,
        FaultCode::ValueOutOfRange,
        FaultCode::ValueUnknown,
        FaultCode::ValueRepeated,
        FaultCode::FileMissing,
        FaultCode::FileSyntax,
        FaultCode::ColumnMissing,
        FaultCode::ColumnUnknown,
        FaultCode::StructureInvalid,
        FaultCode::ReagentUnknown,
        FaultCode::AxisEmpty,
        FaultCode::CampaignTooLarge,
        FaultCode::NotYetAllowed,
        FaultCode::LibraryInvalid,
        FaultCode::PlanImpossible,
        FaultCode::MoreFaults,
    ];

    /// The code with this name.
    pub fn from_name(name: &str) -> Option<FaultCode> {
        FaultCode::ALL.into_iter().find(|code| code.name() == name)
    }

    /// The stable name, as in [`InputError::code`] and over gRPC.
    pub fn name(self) -> &'static str {
        match self {
            FaultCode::CampaignSyntax => "CAMPAIGN_SYNTAX",
            FaultCode::KeyUnknown => "KEY_UNKNOWN",
            FaultCode::ValueType => "VALUE_TYPE",
            FaultCode::ValueMissing => "VALUE_MISSING",
            FaultCode::ValueOutOfRange => "VALUE_OUT_OF_RANGE",
            FaultCode::ValueUnknown => "VALUE_UNKNOWN",
            FaultCode::ValueRepeated => "VALUE_REPEATED",
            FaultCode::FileMissing => "FILE_MISSING",
            FaultCode::FileSyntax => "FILE_SYNTAX",
            FaultCode::ColumnMissing => "COLUMN_MISSING",
            FaultCode::ColumnUnknown => "COLUMN_UNKNOWN",
            FaultCode::StructureInvalid => "STRUCTURE_INVALID",
            FaultCode::ReagentUnknown => "REAGENT_UNKNOWN",
            FaultCode::AxisEmpty => "AXIS_EMPTY",
            FaultCode::CampaignTooLarge => "CAMPAIGN_TOO_LARGE",
            FaultCode::NotYetAllowed => "NOT_YET_ALLOWED",
            FaultCode::LibraryInvalid => "LIBRARY_INVALID",
            FaultCode::PlanImpossible => "PLAN_IMPOSSIBLE",
            FaultCode::MoreFaults => "MORE_FAULTS",
        }
    }
}
