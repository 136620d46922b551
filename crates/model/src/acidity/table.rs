//! The fitted tables, as they are compiled in.

use std::sync::LazyLock;

use enolattice_molecule::AnionClass;

use super::analogue::{Analogue, Analogues};
use super::contribution::{Form, Role};

const COEFFICIENTS: &str = include_str!("../../data/acidity_coefficients.tsv");
const ANALOGUES: &str = include_str!("../../data/acidity_analogues.tsv");
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
static KNOWN: LazyLock<Analogues> = LazyLock::new(|| {
    let sites = rows(ANALOGUES).filter_map(|row| analogue(&row)).collect();
    Analogues::new(sites, values())
});

/// The coefficients of the estimate, in a fixed order.
pub fn coefficients() -> &'static [Coefficient] {
    &TABLE
}

/// The values of the coefficients, in the order of [`coefficients`].
pub(crate) fn values() -> &'static [f64] {
    &VALUES
}

/// The estimate's form over [`coefficients`].
pub fn form() -> &'static Form {
    &FORM
}

/// The sites of the fit.
pub fn analogues() -> &'static Analogues {
    &KNOWN
}

/// Standard error of an estimate for an anion of this class, from cross-validation, pK units.
pub fn typical_error(class: AnionClass) -> f64 {
    let name = format!("{class:?}");
    let find = |wanted: &str| {
        rows(ERRORS)
            .find(|row| row.first() == Some(&wanted))
            .and_then(|row| row.get(3)?.parse().ok())
    };
    find(&name).or_else(|| find("any")).unwrap_or(2.0)
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

/// A row of measured site: SMILES, atom, pKa, residual, descriptors as `name:value; …`.
fn analogue(row: &[&'static str]) -> Option<Analogue> {
    let [_, _, _, residual, descriptors, ..] = row else {
        return None;
    };
    let descriptors: Option<Vec<(&'static str, f64)>> = descriptors
        .split("; ")
        .map(|entry| {
            let (name, value) = entry.rsplit_once(':')?;
            Some((name, value.parse().ok()?))
        })
        .collect();
    Some(Analogue {
        contribution: form().contribution(&descriptors?),
        residual: residual.parse().ok()?,
    })
}
