//! The fit of the acidity estimate: group contributions on measured acidities.
//!
//! Reads the terms with their chemically expected starts, the measured acidities
//! of the library, a few derived anchors and enolate equilibria; writes the tables
//! that the model compiles in and a page on how good they are.

mod observations;
mod page;
mod solver;
mod together;
mod validation;

use std::path::{Path, PathBuf};

use enolattice_reagents::Library;

pub(crate) use observations::{Observation, Observations};
pub(crate) use solver::{Fit, Term, cholesky, solve};
pub(crate) use validation::Validation;

/// Why the fit could not be made or written.
#[derive(Debug, thiserror::Error)]
pub enum FitError {
    /// A table of the library.
    #[error(transparent)]
    Library(#[from] enolattice_reagents::LibraryError),
    /// A table of the fit.
    #[error("{table}, line {line}: a field is missing or cannot be read")]
    Table {
        /// File.
        table: &'static str,
        /// Line, from 1.
        line: usize,
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

/// What the fit yields, as the text of the files it is kept in.
pub struct Tables {
    /// `acidity_coefficients.tsv`.
    pub coefficients: String,
    /// `acidity_curvature.tsv`.
    pub curvature: String,
    /// `acidity_seen.tsv`.
    pub seen: String,
}

/// Directories that the fit writes to.
pub struct Places {
    /// The model's tables.
    pub model_data: PathBuf,
    /// The page.
    pub docs: PathBuf,
}

impl Places {
    /// Where the program was built.
    pub fn in_the_source_tree() -> Places {
        let here = Path::new(env!("CARGO_MANIFEST_DIR"));
        Places {
            model_data: here.join("../model/data"),
            docs: here.join("docs"),
        }
    }
}

/// Fits on everything there is.
///
/// # Errors
/// Faulty tables; terms that make the equations singular.
pub fn fit() -> Result<Tables, FitError> {
    let (terms, observations) = load()?;
    let fit = Fit::new(&terms, &observations.rows)?;
    Ok(tables(&terms, &observations, &fit))
}

/// Fits, cross-validates and writes the model's tables and the page on their quality.
///
/// # Errors
/// As [`fit`]; files that cannot be written.
pub fn run(places: &Places) -> Result<String, FitError> {
    let (terms, observations) = load()?;
    let fit = Fit::new(&terms, &observations.rows)?;
    let validation = Validation::run(&terms, &observations.rows)?;
    let tables = tables(&terms, &observations, &fit);
    let report = page::page(&terms, &fit, &observations, &validation)?;
    let errors = page::errors(&observations.rows, &validation);
    let held_out = page::held_out(&fit, &observations.rows, &validation);
    write(
        &places.model_data.join("acidity_coefficients.tsv"),
        &tables.coefficients,
    )?;
    write(
        &places.model_data.join("acidity_curvature.tsv"),
        &tables.curvature,
    )?;
    write(&places.model_data.join("acidity_seen.tsv"), &tables.seen)?;
    write(&places.model_data.join("acidity_errors.tsv"), &errors)?;
    write(&places.model_data.join("acidity_held_out.tsv"), &held_out)?;
    write(&places.docs.join("acidity.md"), &report)?;
    Ok(report)
}

fn tables(terms: &[Term], observations: &Observations, fit: &Fit) -> Tables {
    Tables {
        coefficients: page::coefficients(terms, fit),
        curvature: page::curvature(fit),
        seen: page::seen(fit, &observations.rows),
    }
}

fn load() -> Result<(Vec<Term>, Observations), FitError> {
    let library = Library::builtin()?;
    let terms = solver::terms()?;
    let observations = Observations::load(&library, &terms)?;
    Ok((terms, observations))
}

fn write(path: &Path, text: &str) -> Result<(), FitError> {
    std::fs::write(path, text).map_err(|source| FitError::Write {
        path: path.display().to_string(),
        source,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Mean absolute errors of held-out compounds in scope, pK units: one in five held out, and one scaffold group.
    fn errors_in_scope(observations: &Observations, validation: &Validation) -> (f64, f64) {
        let in_scope = |held: &[validation::Held]| {
            let chosen = held
                .iter()
                .filter(|one| observations.rows[one.row].in_scope);
            page::summary(chosen.map(|one| one.error)).mean_absolute
        };
        (
            in_scope(&validation.five_fold),
            in_scope(&validation.leave_group_out),
        )
    }

    fn numbers(text: &str) -> Vec<f64> {
        text.split(['\t', '\n', ':', ';'])
            .filter_map(|cell| cell.trim().parse().ok())
            .collect()
    }

    /// The stored tables are those that the fit makes of the data as they stand.
    #[test]
    fn stored_tables_are_those_of_the_fit() {
        let made = fit().unwrap();
        let stored = |name: &str| {
            std::fs::read_to_string(Places::in_the_source_tree().model_data.join(name)).unwrap()
        };
        for (name, text) in [
            ("acidity_coefficients.tsv", &made.coefficients),
            ("acidity_curvature.tsv", &made.curvature),
            ("acidity_seen.tsv", &made.seen),
        ] {
            let (kept, fresh) = (numbers(&stored(name)), numbers(text));
            assert_eq!(
                kept.len(),
                fresh.len(),
                "{name}: run `enolattice-calibration acidity`"
            );
            for (a, b) in kept.iter().zip(&fresh) {
                // Four decimals are written; the last may round either way.
                assert!((a - b).abs() < 1.5e-4, "{name}: {a} stored, {b} fitted");
            }
        }
    }

    /// Marks to beat: 1.48 and 1.63 of an independent fit of the same form on the same rows. No
    /// compound inside what the fit has seen may be off by more than 6.
    #[test]
    fn held_out_compounds_are_estimated_within_the_mark() {
        let (terms, observations) = load().unwrap();
        let fit = Fit::new(&terms, &observations.rows).unwrap();
        let validation = Validation::run(&terms, &observations.rows).unwrap();
        let (one_in_five, scaffold_group) = errors_in_scope(&observations, &validation);
        assert!(one_in_five < 0.9, "{one_in_five}");
        assert!(scaffold_group < 1.0, "{scaffold_group}");
        // the stored errors, of which the page of figures is made, are those of this validation
        let place = Places::in_the_source_tree().model_data;
        let stored = std::fs::read_to_string(place.join("acidity_held_out.tsv")).unwrap();
        let made = page::held_out(&fit, &observations.rows, &validation);
        let (kept, fresh) = (numbers(&stored), numbers(&made));
        assert_eq!(kept.len(), fresh.len());
        // two decimals are written; the last may round either way
        assert!(kept.iter().zip(&fresh).all(|(a, b)| (a - b).abs() < 0.015));
    }

    /// The page, the errors and the σ that the model reads are those of this validation, and as many
    /// values as a normal distribution has lie within one and two σ, a few in a hundred apart.
    #[test]
    fn sigma_covers_what_was_held_out() {
        let stored = Places::in_the_source_tree().model_data;
        let text = std::fs::read_to_string(stored.join("acidity_held_out.tsv")).unwrap();
        let rows: Vec<(f64, f64)> = text
            .lines()
            .filter_map(|line| {
                let mut cells = line.split('\t').skip(3);
                Some((cells.next()?.parse().ok()?, cells.next()?.parse().ok()?))
            })
            .collect();
        assert!(rows.len() > 400);
        let within = |k: f64| {
            let inside = rows
                .iter()
                .filter(|(error, sigma)| error.abs() <= k * sigma);
            inside.count() as f64 / rows.len() as f64
        };
        assert!((0.62..0.82).contains(&within(1.0)), "{}", within(1.0));
        assert!((0.92..0.98).contains(&within(2.0)), "{}", within(2.0));
        // all but the tenth that the model itself flags by its σ
        let mut sigmas: Vec<f64> = rows.iter().map(|(_, sigma)| *sigma).collect();
        sigmas.sort_by(f64::total_cmp);
        let flagged = sigmas[sigmas.len() * 9 / 10];
        let far = |(error, sigma): &&(f64, f64)| error.abs() > 6.0 && *sigma < flagged;
        assert_eq!(rows.iter().find(far), None);
    }

    /// Physical signs: acceptors acidify, saturation takes back, σ acidifies.
    #[test]
    fn coefficients_have_the_sign_that_chemistry_asks_for() {
        let (terms, observations) = load().unwrap();
        let fit = Fit::new(&terms, &observations.rows).unwrap();
        for (term, value) in terms.iter().zip(&fit.values) {
            let sign = match (term.role_text, term.name) {
                ("saturation", _) => 1.0,
                (text, _) if text.starts_with("group") => 1.0,
                (_, name) if name.starts_with('σ') => -1.0,
                (_, name) if name.starts_with("nitro or acyl through") => -1.0,
                (_, name) if name.starts_with("cyclopropane beside") => 1.0,
                (_, "cyclopentadienide ring" | "lactone" | "azolium C–H" | "aza in azole") => {
                    -1.0
                }
                (_, "antiaromatic enolate" | "at bridgehead") => 1.0,
                (_, "two groups at each end of azaallyl") => 1.0,
                _ => continue,
            };
            assert!(sign * value > 0.0, "{}: {value}", term.name);
        }
    }
}
