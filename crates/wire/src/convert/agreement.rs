//! What was measured, held against the model.

use enolattice_engine::{
    AcidityAgreement, Agreement, CheckedAcidity, CheckedRun, Miss, YieldAgreement,
};
use enolattice_grid::{CampaignSpec, Decile, InputError};

use super::campaign::{campaign_message, named_campaign};
use super::{ConversionError, numbers};
use crate::bad_field;
use crate::v1::{self, ErrorReason};

/// Misses that are explained where the request does not say how many.
const USUAL_MISSES: u32 = 5;

/// What was measured, for the wire.
pub(crate) fn request(
    spec: &CampaignSpec,
    misses: u32,
) -> Result<v1::CheckMeasuredRequest, Vec<InputError>> {
    Ok(v1::CheckMeasuredRequest {
        campaign: Some(campaign_message(spec)?),
        misses: Some(misses.min(i32::MAX as u32) as i32),
    })
}

/// What a request of `CheckMeasured` says that was measured and how many misses to explain, without the
/// values that are at fault in the message itself, and those faults.
pub fn measured(request: v1::CheckMeasuredRequest) -> (CampaignSpec, u32, Vec<InputError>) {
    let (campaign, mut faults) = named_campaign(request.campaign);
    let misses = match request.misses.map(u32::try_from) {
        None => USUAL_MISSES,
        Some(Ok(misses)) => misses,
        Some(Err(_)) => {
            faults.push(bad_field(
                ErrorReason::ValueOutOfRange,
                "misses",
                request.misses.unwrap_or_default().to_string(),
                "it is negative",
                "use 0 or more",
            ));
            0
        }
    };
    (campaign, misses, faults)
}

impl From<&Agreement> for v1::CheckMeasuredResponse {
    fn from(agreement: &Agreement) -> Self {
        let YieldAgreement {
            yield_at_least,
            runs,
            covered,
            spearman,
            mean_absolute_error,
            mean_error,
            hits_expected,
            hits_measured,
            deciles,
            misses,
        } = &agreement.yields;
        let yields = v1::YieldAgreement {
            yield_at_least: *yield_at_least,
            runs: runs.iter().map(run).collect(),
            covered: numbers::to_wire(*covered),
            spearman: *spearman,
            mean_absolute_error: *mean_absolute_error,
            mean_error: *mean_error,
            hits_expected: *hits_expected,
            hits_measured: numbers::to_wire(*hits_measured),
            deciles: deciles.iter().map(decile).collect(),
            misses: misses.iter().map(miss).collect(),
        };
        let AcidityAgreement {
            compounds,
            spearman,
            mean_absolute_error,
            mean_absolute_error_of_estimates,
            within_two_sigma,
        } = &agreement.acidities;
        let acidities = v1::AcidityAgreement {
            compounds: compounds.iter().map(compound).collect(),
            spearman: *spearman,
            mean_absolute_error: *mean_absolute_error,
            mean_absolute_error_of_estimates: *mean_absolute_error_of_estimates,
            within_two_sigma: numbers::to_wire(*within_two_sigma),
        };
        v1::CheckMeasuredResponse {
            model: agreement.model.clone(),
            yields: Some(yields),
            acidities: Some(acidities),
        }
    }
}

fn run(run: &CheckedRun) -> v1::CheckedRun {
    v1::CheckedRun {
        cell: Some((&run.cell).into()),
        expected_yield: run.expected_yield,
        p_hit: run.p_hit,
        not_covered: run.not_covered.clone(),
    }
}

fn decile(decile: &Decile) -> v1::Decile {
    v1::Decile {
        from_p_hit: decile.from,
        to_p_hit: decile.to,
        runs: numbers::to_wire(decile.runs),
        p_hit: decile.p_hit,
        hits: numbers::to_wire(decile.hits),
    }
}

fn miss(miss: &Miss) -> v1::Miss {
    v1::Miss {
        run: numbers::to_wire(miss.run),
        explanation: Some((&miss.explanation).into()),
    }
}

fn compound(compound: &CheckedAcidity) -> v1::CheckedAcidity {
    v1::CheckedAcidity {
        name: compound.name.clone(),
        smiles: compound.smiles.clone(),
        measured: compound.measured,
        measured_sigma: compound.measured_sigma,
        site: compound.site.as_ref().map(Into::into),
    }
}

impl TryFrom<v1::CheckMeasuredResponse> for Agreement {
    type Error = ConversionError;

    fn try_from(answer: v1::CheckMeasuredResponse) -> Result<Self, ConversionError> {
        let yields = answer.yields.unwrap_or_default();
        let acidities = answer.acidities.unwrap_or_default();
        let runs = yields.runs.into_iter().map(run_from);
        let deciles = yields.deciles.into_iter().map(decile_from);
        let misses = yields.misses.into_iter().map(miss_from);
        let compounds = acidities.compounds.into_iter().map(compound_from);
        let count = |field, value: i64| numbers::from_wire(field, value);
        Ok(Agreement {
            model: answer.model,
            yields: YieldAgreement {
                yield_at_least: yields.yield_at_least,
                runs: runs.collect::<Result<_, _>>()?,
                covered: count("YieldAgreement.covered", yields.covered)?,
                spearman: yields.spearman,
                mean_absolute_error: yields.mean_absolute_error,
                mean_error: yields.mean_error,
                hits_expected: yields.hits_expected,
                hits_measured: count("YieldAgreement.hits_measured", yields.hits_measured)?,
                deciles: deciles.collect::<Result<_, _>>()?,
                misses: misses.collect::<Result<_, _>>()?,
            },
            acidities: AcidityAgreement {
                compounds: compounds.collect::<Result<_, _>>()?,
                spearman: acidities.spearman,
                mean_absolute_error: acidities.mean_absolute_error,
                mean_absolute_error_of_estimates: acidities.mean_absolute_error_of_estimates,
                within_two_sigma: count(
                    "AcidityAgreement.within_two_sigma",
                    acidities.within_two_sigma,
                )?,
            },
        })
    }
}

fn run_from(run: v1::CheckedRun) -> Result<CheckedRun, ConversionError> {
    Ok(CheckedRun {
        cell: run.cell.unwrap_or_default().try_into()?,
        expected_yield: run.expected_yield,
        p_hit: run.p_hit,
        not_covered: run.not_covered,
    })
}

fn decile_from(decile: v1::Decile) -> Result<Decile, ConversionError> {
    Ok(Decile {
        from: decile.from_p_hit,
        to: decile.to_p_hit,
        runs: numbers::from_wire("Decile.runs", decile.runs)?,
        p_hit: decile.p_hit,
        hits: numbers::from_wire("Decile.hits", decile.hits)?,
    })
}

fn miss_from(miss: v1::Miss) -> Result<Miss, ConversionError> {
    Ok(Miss {
        run: numbers::from_wire("Miss.run", miss.run)?,
        explanation: miss.explanation.unwrap_or_default().try_into()?,
    })
}

fn compound_from(compound: v1::CheckedAcidity) -> Result<CheckedAcidity, ConversionError> {
    Ok(CheckedAcidity {
        name: compound.name,
        smiles: compound.smiles,
        measured: compound.measured,
        measured_sigma: compound.measured_sigma,
        site: compound.site.map(TryInto::try_into).transpose()?,
    })
}
