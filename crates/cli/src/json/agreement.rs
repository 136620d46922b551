//! What a laboratory has measured, beside what the model says.

use enolattice_engine::{
    AcidityAgreement, Agreement, CheckedAcidity, CheckedRun, Miss, YieldAgreement,
};
use enolattice_grid::{CampaignSpec, Decile, Place};
use serde::Serialize;

use super::SiteRecord;
use super::explanation::{CellRecord, ExplanationDocument};

/// The document of `check-measured --json`.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct AgreementDocument {
    model: String,
    yields: YieldsRecord,
    acidities: AciditiesRecord,
}

#[derive(Clone, Debug, Serialize)]
struct YieldsRecord {
    yield_at_least: f64,
    covered: u64,
    spearman: Option<f64>,
    mean_absolute_error: Option<f64>,
    mean_error: Option<f64>,
    hits_expected: f64,
    hits_measured: u64,
    deciles: Vec<DecileRecord>,
    runs: Vec<RunRecord>,
    misses: Vec<MissRecord>,
}

#[derive(Clone, Debug, Serialize)]
struct DecileRecord {
    from_p_hit: f64,
    to_p_hit: f64,
    runs: u64,
    p_hit: Option<f64>,
    hits: u64,
    share_of_hits: Option<f64>,
}

#[derive(Clone, Debug, Serialize)]
struct RunRecord {
    file: String,
    line: u32,
    measured_yield: Option<f64>,
    expected_yield: Option<f64>,
    p_hit: Option<f64>,
    not_covered: Option<String>,
    cell: CellRecord,
}

#[derive(Clone, Debug, Serialize)]
struct MissRecord {
    run: u64,
    explanation: ExplanationDocument,
}

#[derive(Clone, Debug, Serialize)]
struct AciditiesRecord {
    spearman: Option<f64>,
    mean_absolute_error: Option<f64>,
    mean_absolute_error_of_estimates: Option<f64>,
    within_two_sigma: u64,
    compounds: Vec<CompoundRecord>,
}

#[derive(Clone, Debug, Serialize)]
struct CompoundRecord {
    name: String,
    smiles: String,
    measured: f64,
    measured_sigma: f64,
    site: Option<SiteRecord>,
}

impl AgreementDocument {
    /// The document; the places of the rows are those of the specification that was asked about.
    pub(crate) fn new(agreement: Agreement, spec: &CampaignSpec) -> AgreementDocument {
        let places = spec.measured.iter().map(|row| row.place.clone());
        AgreementDocument {
            model: agreement.model,
            yields: yields(agreement.yields, places.collect()),
            acidities: acidities(agreement.acidities),
        }
    }
}

fn yields(yields: YieldAgreement, places: Vec<Place>) -> YieldsRecord {
    let miss = |miss: Miss| {
        let run = yields.runs.get(usize::try_from(miss.run).ok()?)?;
        Some(MissRecord {
            run: miss.run,
            explanation: ExplanationDocument::new(run.cell.clone(), miss.explanation),
        })
    };
    YieldsRecord {
        yield_at_least: yields.yield_at_least,
        covered: yields.covered,
        spearman: yields.spearman,
        mean_absolute_error: yields.mean_absolute_error,
        mean_error: yields.mean_error,
        hits_expected: yields.hits_expected,
        hits_measured: yields.hits_measured,
        deciles: yields.deciles.iter().map(decile).collect(),
        misses: yields.misses.into_iter().filter_map(miss).collect(),
        runs: places.into_iter().zip(yields.runs).map(run).collect(),
    }
}

fn decile(decile: &Decile) -> DecileRecord {
    DecileRecord {
        from_p_hit: decile.from,
        to_p_hit: decile.to,
        runs: decile.runs,
        p_hit: decile.p_hit,
        hits: decile.hits,
        share_of_hits: decile.observed(),
    }
}

fn run((place, run): (Place, CheckedRun)) -> RunRecord {
    RunRecord {
        file: place.file,
        line: place.line,
        measured_yield: run.cell.measured.as_ref().map(|known| known.yield_fraction),
        expected_yield: run.expected_yield,
        p_hit: run.p_hit,
        not_covered: Some(run.not_covered).filter(|reason| !reason.is_empty()),
        cell: run.cell.into(),
    }
}

fn acidities(acidities: AcidityAgreement) -> AciditiesRecord {
    let compound = |compound: CheckedAcidity| CompoundRecord {
        name: compound.name,
        smiles: compound.smiles,
        measured: compound.measured,
        measured_sigma: compound.measured_sigma,
        site: compound.site.map(SiteRecord::from),
    };
    AciditiesRecord {
        spearman: acidities.spearman,
        mean_absolute_error: acidities.mean_absolute_error,
        mean_absolute_error_of_estimates: acidities.mean_absolute_error_of_estimates,
        within_two_sigma: acidities.within_two_sigma,
        compounds: acidities.compounds.into_iter().map(compound).collect(),
    }
}
