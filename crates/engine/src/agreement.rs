//! How the model agrees with what a laboratory has measured.

use enolattice_grid::{
    CampaignSpec, Decile, FaultCode, InputError, Measured, MeasuredAcidity, MeasuredCell, deciles,
    mean_absolute_error, spearman,
};
use enolattice_model::{Explanation, Model, Origin, SiteReasons, acid_sites, reasons};
use rayon::prelude::*;

use crate::dry_run::pool;
use crate::engine::blocking;
use crate::{CellDescription, Engine, EngineError, ReasonedSite};

/// Most yields that are looked at in one call: their answer fits into one message.
const MOST_YIELDS: usize = 10_000;
/// Most pKa.
const MOST_ACIDITIES: usize = 10_000;
/// Most of the worst that are explained: each takes up to a second.
const MOST_EXPLAINED: u32 = 50;

/// How the model agrees with what a laboratory has measured. The yields are those that a screen would
/// give, mean and p_hit over the uncertain parameters.
#[derive(Clone, Debug)]
pub struct Agreement {
    /// Fingerprint of the model, hexadecimal.
    pub model: String,
    /// Yields against yields.
    pub yields: YieldAgreement,
    /// pKa against pKa.
    pub acidities: AcidityAgreement,
}

/// Measured yields against expected ones. The figures are over the runs that the model covers.
#[derive(Clone, Debug)]
pub struct YieldAgreement {
    /// Yield that makes a hit.
    pub yield_at_least: f64,
    /// The runs, in the order of the rows.
    pub runs: Vec<CheckedRun>,
    /// Runs that the model covers.
    pub covered: u64,
    /// Spearman's rank correlation of expected and measured yield; none where it does not exist.
    pub spearman: Option<f64>,
    /// Mean size of expected minus measured yield; none without runs.
    pub mean_absolute_error: Option<f64>,
    /// Mean of expected minus measured yield; none without runs.
    pub mean_error: Option<f64>,
    /// Hits that the p_hit of the runs add up to.
    pub hits_expected: f64,
    /// Runs whose measured yield is a hit.
    pub hits_measured: u64,
    /// Calibration of p_hit by the tenths of its scale.
    pub deciles: Vec<Decile>,
    /// The runs with the greatest differences, worst first.
    pub misses: Vec<Miss>,
}

/// A measured yield beside the expected one.
#[derive(Clone, Debug, PartialEq)]
pub struct CheckedRun {
    /// What was run and what was measured of it.
    pub cell: CellDescription,
    /// Expected yield; unknown where the model does not cover the cell.
    pub expected_yield: Option<f64>,
    /// Probability of a hit; unknown likewise.
    pub p_hit: Option<f64>,
    /// Why the model does not cover the cell; empty where it does.
    pub not_covered: String,
}

/// A run whose yield the model expected otherwise, with everything it has to say about it.
#[derive(Clone, Debug)]
pub struct Miss {
    /// Index of the run, from 0.
    pub run: u64,
    /// Everything about its cell.
    pub explanation: Explanation,
}

/// Measured pKa against those of the model, which does not see the laboratory's here.
#[derive(Clone, Debug)]
pub struct AcidityAgreement {
    /// The compounds, in the order of the rows.
    pub compounds: Vec<CheckedAcidity>,
    /// Spearman's rank correlation; none where it does not exist.
    pub spearman: Option<f64>,
    /// Mean size of the model's minus the measured pKa; none without compounds.
    pub mean_absolute_error: Option<f64>,
    /// The same over the compounds whose pKa the model estimates; none without such.
    pub mean_absolute_error_of_estimates: Option<f64>,
    /// Compounds that differ by no more than twice the standard uncertainty of both values together.
    pub within_two_sigma: u64,
}

/// A measured pKa beside the model's.
#[derive(Clone, Debug)]
pub struct CheckedAcidity {
    /// Name.
    pub name: String,
    /// SMILES without counter-ions; the site counts its atoms.
    pub smiles: String,
    /// What was measured.
    pub measured: f64,
    /// Its standard uncertainty.
    pub measured_sigma: f64,
    /// The model's most acidic C–H; none where it knows none.
    pub site: Option<ReasonedSite>,
}

impl Engine {
    /// Holds the measured yields of a specification and the pKa of its substrates against the model, and
    /// explains the `misses` worst yields, at most 50. Needs no data directory; the axes may be empty.
    ///
    /// # Errors
    /// [`EngineError::Input`] with every fault, or where nothing was measured; [`EngineError::Model`].
    pub async fn check_measured(
        &self,
        spec: CampaignSpec,
        misses: u32,
    ) -> Result<Agreement, EngineError> {
        let (models, threads) = (self.models.clone(), self.threads);
        blocking(move || {
            let (model, measured) = models.measured(&spec)?;
            refuse_wrong_number(&measured)?;
            pool(threads)?.install(|| agreement(&model, &measured, misses))
        })
        .await
    }

    /// Every fault in what a specification says that was measured; none where it is sound.
    ///
    /// For those who have found faults of form already and want to tell all in one answer.
    ///
    /// # Errors
    /// [`EngineError::Stopping`].
    pub async fn faults_measured(
        &self,
        spec: CampaignSpec,
    ) -> Result<Vec<InputError>, EngineError> {
        let models = self.models.clone();
        blocking(move || match models.measured(&spec) {
            Ok(_) => Ok(Vec::new()),
            Err(EngineError::Input(faults)) => Ok(faults),
            Err(error) => Err(error),
        })
        .await
    }
}

fn refuse_wrong_number(measured: &Measured) -> Result<(), EngineError> {
    let fault = |field, value: usize, code: FaultCode, reason: &str, remedy: &str| {
        let value = value.to_string();
        Err(EngineError::field(
            field,
            &value,
            code.name(),
            reason,
            remedy,
        ))
    };
    let (yields, acidities) = (measured.yields.len(), measured.acidities.len());
    if yields == 0 && acidities == 0 {
        let reason = "there is no measured yield and no measured pKa";
        let remedy = "give rows with `yield_fraction`, or substrates with `pka_dmso`";
        return fault("measured", 0, FaultCode::ValueMissing, reason, remedy);
    }
    let remedy = "ask for them in several parts";
    if yields > MOST_YIELDS {
        let reason = format!("there are more than {MOST_YIELDS} yields");
        return fault(
            "measured",
            yields,
            FaultCode::ValueOutOfRange,
            &reason,
            remedy,
        );
    }
    if acidities > MOST_ACIDITIES {
        let reason = format!("there are more than {MOST_ACIDITIES} pKa");
        return fault(
            "substrates",
            acidities,
            FaultCode::ValueOutOfRange,
            &reason,
            remedy,
        );
    }
    Ok(())
}

fn agreement(model: &Model, measured: &Measured, misses: u32) -> Result<Agreement, EngineError> {
    let misses = misses.min(MOST_EXPLAINED) as usize;
    Ok(Agreement {
        model: model.fingerprint().to_string(),
        yields: of_yields(model, measured, misses)?,
        acidities: of_acidities(model, &measured.acidities, misses),
    })
}

fn of_yields(
    model: &Model,
    measured: &Measured,
    misses: usize,
) -> Result<YieldAgreement, EngineError> {
    let yield_at_least = measured.yield_at_least;
    let runs = measured.yields.par_iter();
    let runs: Vec<CheckedRun> = runs
        .map(|run| checked_run(model, run, yield_at_least))
        .collect::<Result<_, _>>()?;
    let known = |run: &CheckedRun| {
        Some((
            run.expected_yield?,
            run.cell.measured.as_ref()?.yield_fraction,
        ))
    };
    let pairs: Vec<(f64, f64)> = runs.iter().filter_map(known).collect();
    let is_hit = |run: &CheckedRun| {
        let measured = run.cell.measured.as_ref();
        measured.is_some_and(|known| known.yield_fraction >= yield_at_least)
    };
    let predicted: Vec<(f64, bool)> = runs
        .iter()
        .filter_map(|run| Some((run.p_hit?, is_hit(run))))
        .collect();
    let worst = worst(&runs, known, misses);
    let explained = worst.into_par_iter().map(|at| {
        Ok(Miss {
            run: at as u64,
            explanation: model.explain(&measured.yields[at].cell, yield_at_least)?,
        })
    });
    Ok(YieldAgreement {
        yield_at_least,
        covered: pairs.len() as u64,
        spearman: spearman(&pairs),
        mean_absolute_error: mean_absolute_error(&pairs),
        mean_error: mean_error(&pairs),
        hits_expected: predicted.iter().map(|(p_hit, _)| p_hit).sum(),
        hits_measured: predicted.iter().filter(|(_, hit)| *hit).count() as u64,
        deciles: deciles(&predicted).to_vec(),
        misses: explained.collect::<Result<_, EngineError>>()?,
        runs,
    })
}

/// Mean of expected minus measured.
fn mean_error(pairs: &[(f64, f64)]) -> Option<f64> {
    let sum: f64 = pairs.iter().map(|(model, measured)| model - measured).sum();
    (!pairs.is_empty()).then(|| sum / pairs.len() as f64)
}

/// Indices of what differs most, worst first; of equal ones the first row comes first.
fn worst<T>(rows: &[T], known: impl Fn(&T) -> Option<(f64, f64)>, count: usize) -> Vec<usize> {
    let differing = rows.iter().enumerate();
    let mut differing: Vec<(f64, usize)> = differing
        .filter_map(|(at, row)| known(row).map(|(model, measured)| ((model - measured).abs(), at)))
        .collect();
    differing.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(&b.1)));
    differing
        .into_iter()
        .take(count)
        .map(|(_, at)| at)
        .collect()
}

fn checked_run(
    model: &Model,
    run: &MeasuredCell,
    yield_at_least: f64,
) -> Result<CheckedRun, EngineError> {
    let score = model.score(&run.cell, yield_at_least, 0);
    let not_covered = match score.expected_yield {
        Some(_) => String::new(),
        // of a cell that is not covered nothing is computed but this
        None => model.explain(&run.cell, yield_at_least)?.limits.join(" "),
    };
    Ok(CheckedRun {
        cell: CellDescription {
            measured: Some(run.measured.clone()),
            ..CellDescription::of(None, &run.cell)
        },
        expected_yield: score.expected_yield,
        p_hit: score.p_hit,
        not_covered,
    })
}

fn of_acidities(model: &Model, measured: &[MeasuredAcidity], reasoned: usize) -> AcidityAgreement {
    let mut compounds: Vec<CheckedAcidity> = measured
        .par_iter()
        .map(|compound| checked_acidity(model, compound))
        .collect();
    let known = |compound: &CheckedAcidity| {
        let site = &compound.site.as_ref()?.site;
        Some((site.pka_dmso, compound.measured))
    };
    for at in worst(&compounds, known, reasoned) {
        if let Some(known) = &mut compounds[at].site {
            known.reasons = reasons(&known.site, model.library());
        }
    }
    let pairs: Vec<(f64, f64)> = compounds.iter().filter_map(known).collect();
    let is_estimate = |compound: &&CheckedAcidity| {
        let site = compound.site.as_ref();
        site.is_some_and(|known| known.site.origin == Origin::Estimated)
    };
    let estimates = compounds.iter().filter(is_estimate).filter_map(known);
    let estimates: Vec<(f64, f64)> = estimates.collect();
    let is_within = |compound: &&CheckedAcidity| {
        let site = compound.site.as_ref().map(|known| &known.site);
        site.is_some_and(|site| {
            let sigma = (site.sigma.powi(2) + compound.measured_sigma.powi(2)).sqrt();
            (site.pka_dmso - compound.measured).abs() <= 2.0 * sigma
        })
    };
    AcidityAgreement {
        spearman: spearman(&pairs),
        mean_absolute_error: mean_absolute_error(&pairs),
        mean_absolute_error_of_estimates: mean_absolute_error(&estimates),
        within_two_sigma: compounds.iter().filter(is_within).count() as u64,
        compounds,
    }
}

fn checked_acidity(model: &Model, compound: &MeasuredAcidity) -> CheckedAcidity {
    // the site whose pKa a campaign would take from the laboratory
    let sites = acid_sites(&compound.molecule, model.library()).into_iter();
    let site = sites.into_iter().find(|site| site.element == 6);
    CheckedAcidity {
        name: compound.name.clone(),
        smiles: compound.molecule.smiles().to_owned(),
        measured: compound.pka.pka_dmso,
        measured_sigma: compound.pka.sigma,
        site: site.map(|site| ReasonedSite {
            site,
            reasons: SiteReasons::default(),
        }),
    }
}
