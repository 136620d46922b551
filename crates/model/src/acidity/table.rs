//! The fitted tables, as they are compiled in.

use std::collections::HashMap;
use std::sync::LazyLock;

use enolattice_molecule::AnionClass;

use super::contribution::{Contribution, Form, Role};
use super::coverage::Coverage;

const COEFFICIENTS: &str = include_str!("../../data/acidity_coefficients.tsv");
const SEEN: &str = include_str!("../../data/acidity_seen.tsv");
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
static COVERAGE: LazyLock<Coverage> = LazyLock::new(|| {
    let sites = rows(SEEN).filter_map(|row| seen(&row)).collect();
    Coverage::new(sites, form(), values())
});
static TYPICAL_ERRORS: LazyLock<HashMap<&'static str, f64>> = LazyLock::new(|| {
    rows(ERRORS)
        .filter_map(|row| Some((*row.first()?, row.get(3)?.parse().ok()?)))
        .collect()
});

/// The text of the tables that the estimate rests on, for a fingerprint of the model.
pub(crate) fn texts() -> [&'static str; 3] {
    [COEFFICIENTS, SEEN, ERRORS]
}

/// The coefficients of the estimate, in a fixed order.
pub fn coefficients() -> &'static [Coefficient] {
    &TABLE
}

/// The values of the coefficients, in the order of [`coefficients`].
pub(super) fn values() -> &'static [f64] {
    &VALUES
}

/// The estimate's form over [`coefficients`].
pub(super) fn form() -> &'static Form {
    &FORM
}

/// What the fit has seen.
pub(super) fn coverage() -> &'static Coverage {
    &COVERAGE
}

/// Standard error of an estimate for an anion of this class, from cross-validation, pK units.
pub(super) fn typical_error(class: AnionClass) -> f64 {
    /// Where the table has not even a line for all classes together; it always has.
    const UNKNOWN: f64 = 2.0;
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

/// A site of the fit: compound, atom, pKa, residual, descriptors as `name:value; …`.
fn seen(row: &[&'static str]) -> Option<Contribution> {
    let descriptors: Option<Vec<(&'static str, f64)>> = row
        .get(4)?
        .split("; ")
        .map(|entry| {
            let (name, value) = entry.rsplit_once(':')?;
            Some((name, value.parse().ok()?))
        })
        .collect();
    Some(form().contribution(&descriptors?))
}
