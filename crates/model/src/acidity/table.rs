//! The fitted tables, as they are compiled in.

use std::collections::HashMap;
use std::sync::LazyLock;

use enolattice_molecule::AnionClass;

use super::contribution::{Contribution, Form, Role};
use super::coverage::Coverage;

const COEFFICIENTS: &str = include_str!("../../data/acidity_coefficients.tsv");
const CURVATURE: &str = include_str!("../../data/acidity_curvature.tsv");
const SEEN: &str = include_str!("../../data/acidity_seen.tsv");
const HELD_OUT: &str = include_str!("../../data/acidity_held_out.tsv");
const ERRORS: &str = include_str!("../../data/acidity_errors.tsv");

/// A coefficient of the estimate.
#[derive(Clone, Debug, PartialEq)]
pub struct Coefficient {
    /// What it belongs to, in chemical words.
    pub name: &'static str,
    /// What it does in the estimate.
    pub role: Role,
    /// Fitted value, in `unit`.
    pub value: f64,
    /// Standard error, in `unit`.
    pub standard_error: f64,
    /// Measured sites that it rests on.
    pub training_sites: usize,
    /// Unit.
    pub unit: &'static str,
}

/// A site of the fit.
#[derive(Clone, Debug)]
pub(super) struct SeenSite {
    pub(super) compound: &'static str,
    pub(super) atom: usize,
    pub(super) pka_dmso: f64,
    /// Measured minus estimated.
    pub(super) residual: f64,
    /// Predicted minus measured with its scaffold group held out; `None` for a derived value.
    pub(super) held_out_error: Option<f64>,
    pub(super) contribution: Contribution,
}

static TABLE: LazyLock<Vec<Coefficient>> = LazyLock::new(|| {
    rows(COEFFICIENTS)
        .filter_map(|row| coefficient(&row))
        .collect()
});
static VALUES: LazyLock<Vec<f64>> =
    LazyLock::new(|| TABLE.iter().map(|coefficient| coefficient.value).collect());
static FORM: LazyLock<Form> = LazyLock::new(|| {
    Form::new(
        TABLE
            .iter()
            .map(|coefficient| (coefficient.name, coefficient.role)),
    )
});
static STANDARD_ERRORS: LazyLock<Vec<f64>> = LazyLock::new(|| {
    let errors = TABLE.iter().map(|coefficient| coefficient.standard_error);
    errors.collect()
});
static TRAINING_SITES: LazyLock<Vec<usize>> = LazyLock::new(|| {
    let sites = TABLE.iter().map(|coefficient| coefficient.training_sites);
    sites.collect()
});
static SEEN_SITES: LazyLock<Vec<SeenSite>> = LazyLock::new(|| {
    let errors: HashMap<(&str, usize), f64> = rows(HELD_OUT)
        .filter_map(|row| {
            let site = (*row.first()?, row.get(1)?.parse().ok()?);
            Some((site, row.get(3)?.parse().ok()?))
        })
        .collect();
    rows(SEEN).filter_map(|row| seen(&row, &errors)).collect()
});
static COVERAGE: LazyLock<Coverage> = LazyLock::new(|| {
    let sites = seen_sites().iter().map(|site| site.contribution.clone());
    Coverage::new(sites.collect(), form(), values())
});
static TYPICAL_ERRORS: LazyLock<HashMap<&'static str, f64>> = LazyLock::new(|| {
    rows(ERRORS)
        .filter_map(|row| Some((*row.first()?, row.get(3)?.parse().ok()?)))
        .collect()
});

/// The text of the tables that the estimate rests on, for a fingerprint of the model.
pub(crate) fn texts() -> [&'static str; 5] {
    [COEFFICIENTS, CURVATURE, SEEN, HELD_OUT, ERRORS]
}

/// The coefficients of the estimate, in a fixed order.
pub fn coefficients() -> &'static [Coefficient] {
    &TABLE
}

/// The values of the coefficients, in the order of [`coefficients`].
pub(super) fn values() -> &'static [f64] {
    &VALUES
}

/// The inverse of the coefficients' covariance, by row and column of its lower triangle; zeros are left out.
pub(super) fn curvature() -> impl Iterator<Item = (usize, usize, f64)> {
    rows(CURVATURE).filter_map(|row| {
        let [row, column, value] = row[..] else {
            return None;
        };
        let (row, column) = (row.parse().ok()?, column.parse().ok()?);
        Some((row, column, value.parse().ok()?))
    })
}

/// The estimate's form over [`coefficients`].
pub(super) fn form() -> &'static Form {
    &FORM
}

/// What the fit has seen.
pub(super) fn coverage() -> &'static Coverage {
    &COVERAGE
}

/// The sites of the fit, in the order of [`coverage`].
pub(super) fn seen_sites() -> &'static [SeenSite] {
    &SEEN_SITES
}

/// Standard error that thinly supported coefficients bring into an estimate, pK units.
pub(super) fn error_of_thin_terms(contribution: &Contribution) -> f64 {
    contribution.error_of_thin_terms(values(), &STANDARD_ERRORS, &TRAINING_SITES)
}

/// Mean absolute error of estimates for an anion of this class, from cross-validation, pK units.
pub(super) fn typical_error(class: AnionClass) -> f64 {
    /// Where the table has not even a line for all classes together; it always has.
    const UNKNOWN: f64 = 1.6;
    let errors = &*TYPICAL_ERRORS;
    let name = format!("{class:?}");
    errors
        .get(name.as_str())
        .or_else(|| errors.get("any"))
        .copied()
        .unwrap_or(UNKNOWN)
}

/// Rows of a table without comments and heading, split at tabs.
fn rows(text: &'static str) -> impl Iterator<Item = Vec<&'static str>> {
    text.lines()
        .filter(|line| !line.starts_with('#'))
        .skip(1)
        .map(|line| line.split('\t').collect())
}

fn coefficient(row: &[&'static str]) -> Option<Coefficient> {
    let [name, role, value, standard_error, training_sites, unit, ..] = row else {
        return None;
    };
    Some(Coefficient {
        name,
        role: Role::parse(role)?,
        value: value.parse().ok()?,
        standard_error: standard_error.parse().ok()?,
        training_sites: training_sites.parse().ok()?,
        unit,
    })
}

/// A row of `acidity_seen.tsv`: compound, atom, pKa, residual, descriptors as `name:value; …`.
fn seen(row: &[&'static str], errors: &HashMap<(&str, usize), f64>) -> Option<SeenSite> {
    let descriptors: Option<Vec<(&'static str, f64)>> = row
        .get(4)?
        .split("; ")
        .map(|entry| {
            let (name, value) = entry.rsplit_once(':')?;
            Some((name, value.parse().ok()?))
        })
        .collect();
    let (compound, atom) = (*row.first()?, row.get(1)?.parse().ok()?);
    Some(SeenSite {
        compound,
        atom,
        pka_dmso: row.get(2)?.parse().ok()?,
        residual: row.get(3)?.parse().ok()?,
        held_out_error: errors.get(&(compound, atom)).copied(),
        contribution: form().contribution(&descriptors?),
    })
}
