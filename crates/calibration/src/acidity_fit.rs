//! The fit of the acidity estimate: group contributions on measured acidities.
//!
//! Reads the terms with their chemically expected starts, the measured acidities
//! of the library, a few anchors and enolate equilibria; writes the tables that the
//! model compiles in and a page on how good they are.

mod observations;
mod page;
mod solver;
mod validation;

use std::path::Path;

use enolattice_reagents::Library;

pub(crate) use observations::{Observation, Observations};
pub(crate) use solver::{Fit, Term};
pub(crate) use validation::Validation;

/// Why the fit could not be made or written.
#[derive(Debug, thiserror::Error)]
pub enum FitError {
    /// A table of the library.
    #[error(transparent)]
    Library(#[from] enolattice_reagents::LibraryError),
    /// A table of the fit.
    #[error("{table}, line {line}: {reason}")]
    Table {
        /// File.
        table: &'static str,
        /// Line, from 1.
        line: usize,
        /// What is wrong.
        reason: String,
    },
    /// The normal equations have no solution.
    #[error("the normal equations are not positive definite: every term needs a spread above zero")]
    Singular,
    /// A file could not be written.
    #[error("{path}: {source}")]
    Write {
        /// Path.
        path: String,
        /// Cause.
        source: std::io::Error,
    },
}

/// All that the fit yields, as the text of the files it is kept in.
pub struct FittedTables {
    /// `acidity_coefficients.tsv`.
    pub coefficients: String,
    /// `acidity_analogues.tsv`.
    pub analogues: String,
}

/// Fits on everything there is.
///
/// # Errors
/// Faulty tables; terms that make the equations singular.
pub fn fit() -> Result<FittedTables, FitError> {
    let (terms, observations) = load()?;
    let fit = Fit::new(&terms, &observations.rows)?;
    Ok(FittedTables {
        coefficients: page::coefficients(&terms, &fit),
        analogues: page::analogues(&fit, &observations.rows),
    })
}

/// Fits, cross-validates and writes the model's tables and the page on their quality.
///
/// # Errors
/// As [`fit`]; files that cannot be written.
pub fn run(model_data: &Path, docs: &Path) -> Result<String, FitError> {
    let (terms, observations) = load()?;
    let fit = Fit::new(&terms, &observations.rows)?;
    let validation = Validation::run(&terms, &observations.rows)?;
    let report = page::page(&terms, &fit, &observations.rows, &validation);
    write(&model_data.join("acidity_coefficients.tsv"), &page::coefficients(&terms, &fit))?;
    write(&model_data.join("acidity_analogues.tsv"), &page::analogues(&fit, &observations.rows))?;
    write(&model_data.join("acidity_errors.tsv"), &page::errors(&observations.rows, &validation))?;
    write(&docs.join("acidity.md"), &report)?;
    Ok(report)
}

fn load() -> Result<(Vec<Term>, Observations), FitError> {
    let library = Library::builtin()?;
    let terms = solver::terms()?;
    let observations = Observations::load(&library, &terms)?;
    Ok((terms, observations))
}

fn write(path: &Path, text: &str) -> Result<(), FitError> {
    std::fs::write(path, text)
        .map_err(|source| FitError::Write { path: path.display().to_string(), source })
}
