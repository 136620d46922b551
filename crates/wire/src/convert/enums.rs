//! Closed lists, one to one. 0 on the wire is never a value of the engine.

use enolattice_engine::{Axis, JobState};
use enolattice_model::{Addition, Category, Channel, Origin, Severity};

use super::ConversionError;
use crate::v1;

/// The value of a closed list that has this number on the wire.
pub(crate) fn from_wire<T: Copy + Into<W>, W: Into<i32>>(
    field: &'static str,
    all: &[T],
    number: i32,
) -> Result<T, ConversionError> {
    optional_from_wire(field, all, number)?.ok_or(ConversionError::Missing { field })
}

/// The same where 0 stands for none.
pub(crate) fn optional_from_wire<T: Copy + Into<W>, W: Into<i32>>(
    field: &'static str,
    all: &[T],
    number: i32,
) -> Result<Option<T>, ConversionError> {
    if number == 0 {
        return Ok(None);
    }
    let value = all.iter().copied().find(|value| -> bool {
        let message: W = (*value).into();
        message.into() == number
    });
    value.map(Some).ok_or(ConversionError::Unknown {
        field,
        value: number.to_string(),
    })
}

impl From<JobState> for v1::JobState {
    fn from(state: JobState) -> Self {
        match state {
            JobState::Queued => v1::JobState::Queued,
            JobState::Running => v1::JobState::Running,
            JobState::Paused => v1::JobState::Paused,
            JobState::Done => v1::JobState::Done,
            JobState::DoneWithGaps => v1::JobState::DoneWithGaps,
            JobState::Failed => v1::JobState::Failed,
            JobState::Cancelled => v1::JobState::Cancelled,
        }
    }
}

/// All states of a job.
pub(crate) const JOB_STATES: [JobState; 7] = [
    JobState::Queued,
    JobState::Running,
    JobState::Paused,
    JobState::Done,
    JobState::DoneWithGaps,
    JobState::Failed,
    JobState::Cancelled,
];

impl From<Axis> for v1::Axis {
    fn from(axis: Axis) -> Self {
        match axis {
            Axis::Substrate => v1::Axis::Substrate,
            Axis::Base => v1::Axis::Base,
            Axis::Electrophile => v1::Axis::Electrophile,
            Axis::Solvent => v1::Axis::Solvent,
            Axis::Temperature => v1::Axis::Temperature,
            Axis::Additive => v1::Axis::Additive,
            Axis::FormationTemperature => v1::Axis::FormationTemperature,
            Axis::BaseEquiv => v1::Axis::BaseEquiv,
            Axis::ElectrophileEquiv => v1::Axis::ElectrophileEquiv,
            Axis::Concentration => v1::Axis::Concentration,
            Axis::Time => v1::Axis::Time,
            Axis::Dosing => v1::Axis::Dosing,
            Axis::Addition => v1::Axis::Addition,
        }
    }
}

impl From<Addition> for v1::AdditionOrder {
    fn from(addition: Addition) -> Self {
        match addition {
            Addition::SubstrateIntoBase => v1::AdditionOrder::SubstrateIntoBase,
            Addition::BaseIntoSubstrate => v1::AdditionOrder::BaseIntoSubstrate,
            Addition::AllTogether => v1::AdditionOrder::AllTogether,
        }
    }
}

impl From<Origin> for v1::AcidityOrigin {
    fn from(origin: Origin) -> Self {
        match origin {
            Origin::Measured => v1::AcidityOrigin::Measured,
            Origin::Estimated => v1::AcidityOrigin::Estimated,
        }
    }
}

/// All origins of an acidity.
pub(crate) const ORIGINS: [Origin; 2] = [Origin::Measured, Origin::Estimated];

impl From<Severity> for v1::CautionSeverity {
    fn from(severity: Severity) -> Self {
        match severity {
            Severity::Note => v1::CautionSeverity::Note,
            Severity::Warning => v1::CautionSeverity::Warning,
            Severity::Stop => v1::CautionSeverity::Stop,
        }
    }
}

impl From<Category> for v1::CautionCategory {
    fn from(category: Category) -> Self {
        match category {
            Category::Runaway => v1::CautionCategory::Runaway,
            Category::Violent => v1::CautionCategory::Violent,
            Category::Gas => v1::CautionCategory::Gas,
            Category::Pyrophoric => v1::CautionCategory::Pyrophoric,
            Category::Explosive => v1::CautionCategory::Explosive,
            Category::Carcinogen => v1::CautionCategory::Carcinogen,
            Category::AcutelyToxic => v1::CautionCategory::AcutelyToxic,
            Category::Flammable => v1::CautionCategory::Flammable,
            Category::PeroxideFormer => v1::CautionCategory::PeroxideFormer,
            Category::AboveBoilingPoint => v1::CautionCategory::AboveBoilingPoint,
            Category::BelowMeltingPoint => v1::CautionCategory::BelowMeltingPoint,
        }
    }
}

impl From<Channel> for v1::Channel {
    fn from(channel: Channel) -> Self {
        match channel {
            Channel::WeakBase => v1::Channel::WeakBase,
            Channel::SolventLevelsBase => v1::Channel::SolventLevelsBase,
            Channel::InsolubleBase => v1::Channel::InsolubleBase,
            Channel::CompetingAcid => v1::Channel::CompetingAcid,
            Channel::HeteroatomAttack => v1::Channel::HeteroatomAttack,
            Channel::SelfCondensation => v1::Channel::SelfCondensation,
            Channel::OverAlkylation => v1::Channel::OverAlkylation,
            Channel::OtherSite => v1::Channel::OtherSite,
            Channel::ProductQuenchesEnolate => v1::Channel::ProductQuenchesEnolate,
            Channel::OAttack => v1::Channel::OAttack,
            Channel::BaseConsumedByElectrophile => v1::Channel::BaseConsumedByElectrophile,
            Channel::BaseAddsToSubstrate => v1::Channel::BaseAddsToSubstrate,
            Channel::Elimination => v1::Channel::Elimination,
            Channel::Solvolysis => v1::Channel::Solvolysis,
            Channel::Reversible => v1::Channel::Reversible,
            Channel::SlowAttack => v1::Channel::SlowAttack,
            Channel::TooLittleReagent => v1::Channel::TooLittleReagent,
        }
    }
}

#[cfg(test)]
pub(crate) mod tests {
    use super::*;

    /// Every value comes back, no two share a number, and none is 0.
    pub(crate) fn one_to_one<T, W>(all: &[T])
    where
        T: Copy + Into<W> + PartialEq + std::fmt::Debug,
        W: Into<i32>,
    {
        let mut numbers = std::collections::BTreeSet::new();
        for value in all {
            let message: W = (*value).into();
            let number: i32 = message.into();
            assert!(number != 0 && numbers.insert(number), "{value:?}");
            assert_eq!(from_wire::<T, W>("field", all, number), Ok(*value));
        }
        assert!(from_wire::<T, W>("field", all, 0).is_err());
        assert!(from_wire::<T, W>("field", all, 1 << 20).is_err());
    }

    #[test]
    fn closed_lists_are_one_to_one() {
        one_to_one::<_, v1::JobState>(&JOB_STATES);
        one_to_one::<_, v1::Axis>(&Axis::ALL);
        one_to_one::<_, v1::AdditionOrder>(&Addition::ALL);
        one_to_one::<_, v1::AcidityOrigin>(&ORIGINS);
        one_to_one::<_, v1::CautionSeverity>(&Severity::ALL);
        one_to_one::<_, v1::CautionCategory>(&Category::ALL);
        one_to_one::<_, v1::Channel>(&Channel::ALL);
    }

    #[test]
    fn channels_keep_the_numbers_of_their_stored_form() {
        for channel in Channel::ALL {
            assert_eq!(v1::Channel::from(channel) as i32, channel as i32);
        }
    }
}
