//! Which enolate, and which end of it: published distributions against the model, each left out in turn.

mod ambident;
mod enolates;

use std::fmt::Write;

use enolattice_model::{Addition, Conditions, Draw, Model};

pub use ambident::oxygen_against_carbon;
pub use enolates::{equilibrated_enolates, kinetic_enolates, lithium_at_equilibrium};

use crate::refit::{Changes, Fitted, Observations};

/// Shares are compared as logarithms of their ratio within these bounds, 0.5 and 99.5 per cent.
const BOUND: f64 = 2.3;
/// σ of an observed log10 ratio: a share of 80 per cent is known to about five points.
const OBSERVED_SIGMA: f64 = 0.15;

/// A table of shares and what it says of the parameters.
#[derive(Clone, Debug)]
pub struct Compared {
    /// Each share.
    pub shares: Vec<Comparison>,
    /// The parameters that fit all shares.
    pub fitted: Vec<(&'static str, f64)>,
}

impl Compared {
    /// Mean absolute error in points: of the shares left out, and of the model as it is.
    pub fn mean_errors(&self) -> (f64, f64) {
        let mean = |of: fn(&Comparison) -> f64| {
            let errors = self
                .shares
                .iter()
                .map(|one| (of(one) - one.published).abs());
            errors.sum::<f64>() / self.shares.len().max(1) as f64
        };
        (mean(|one| one.left_out), mean(|one| one.model))
    }
}

/// A share as published and as the model has it when it has not seen it, per cent.
#[derive(Clone, Debug)]
pub struct Comparison {
    /// Substance and conditions.
    pub name: String,
    /// Published.
    pub published: f64,
    /// The model's, its parameters fitted to the others.
    pub left_out: f64,
    /// The model's, as it is.
    pub model: f64,
}

/// Holds published shares, per cent, against predicted log10 ratios.
fn compare(
    model: &Model,
    published: Vec<(String, f64)>,
    fitted: &[Fitted],
    log10_ratio: impl Fn(&Draw, usize) -> f64,
) -> Compared {
    let observed: Vec<f64> = published
        .iter()
        .map(|(_, share)| log_ratio(*share))
        .collect();
    let observations = Observations {
        observed: &observed,
        sigma: OBSERVED_SIGMA,
        predict: |row: usize, changes: &Changes| {
            let ratio = log10_ratio(&model.draw_with(changes), row);
            ratio.clamp(-BOUND, BOUND)
        },
    };
    let left_out = observations.left_out(fitted);
    let shares = published.into_iter().enumerate();
    Compared {
        shares: shares
            .map(|(row, (name, published))| Comparison {
                name,
                published,
                left_out: percent(left_out[row]),
                model: percent((observations.predict)(row, &[])),
            })
            .collect(),
        fitted: observations.fit_all(fitted),
    }
}

fn log_ratio(percent: f64) -> f64 {
    let share = percent / 100.0;
    (share / (1.0 - share)).log10().clamp(-BOUND, BOUND)
}

fn percent(log10_ratio: f64) -> f64 {
    100.0 / (1.0 + 10_f64.powf(-log10_ratio))
}

/// A published reaction at one temperature; amounts and times as usual.
fn conditions(temperature_c: f64, base_equiv: f64, addition: Option<Addition>) -> Conditions {
    Conditions {
        temperature_c,
        formation_temperature_c: temperature_c,
        base_equiv,
        electrophile_equiv: 1.0,
        additive_equiv: 0.0,
        concentration_m: 0.2,
        time_h: 16.0,
        dosing_min: 10.0,
        addition,
    }
}

/// The comparisons as sections of a page.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn sections(model: &Model) -> Result<String, String> {
    let mut text = String::new();
    section(
        &mut text,
        "More substituted enolate, kinetic control",
        "Substrate into a little more base than it needs.",
        &kinetic_enolates(model)?,
    );
    section(
        &mut text,
        "More substituted enolate at equilibrium",
        "By the pKa of the sites in the medium. No parameter is fitted to these rows, so that none is left out; the model does not tell\n\
         lithium from potassium here.",
        &equilibrated_enolates(model)?,
    );
    text.push_str(&attempt_with_lithium(&lithium_at_equilibrium(model)?));
    section(
        &mut text,
        "Oxygen among C- and O-alkylation",
        "Few rows for many parameters: each rests on one or two of them and on what pulls it from memory. All rows but one are of\n\
         potassium: they cannot tell one counter-ion from another, and the model has none beside magnesium.",
        &oxygen_against_carbon(model)?,
    );
    Ok(text)
}

/// What one number for lithium would do to the equilibrium.
fn attempt_with_lithium(compared: &Compared) -> String {
    let (left_out, as_it_is) = compared.mean_errors();
    let (_, value) = compared.fitted[0];
    let residuals: Vec<_> = compared
        .shares
        .iter()
        .map(|one| {
            let name = one.name.split(',').next().unwrap_or_default();
            let error = |share: f64| format!("{:+.0}", share - one.published).replace('-', "−");
            let (without, with) = (error(one.model), error(one.left_out));
            format!("{name} {without} without and {with} with it")
        })
        .collect();
    format!(
        "\nTried: lithium holds the more substituted enolate more than potassium does, one number added to log10 of the ratio in the rows\n\
         with lithium, pulled to none (0 ± 0.4), comes out as {value:.2}. Errors in points, the row left out: {}.\n\
         Mean absolute error {as_it_is:.1} without, {left_out:.1} with it: so few rows that disagree do not carry it, and it is left out.\n",
        residuals.join("; ")
    )
}

fn section(text: &mut String, title: &str, remark: &str, compared: &Compared) {
    let _ = writeln!(text, "\n## {title}\n\n{remark}\n");
    let (left_out, as_it_is) = compared.mean_errors();
    if compared.fitted.is_empty() {
        text.push_str("| | published, % | model, % |\n| --- | --- | --- |\n");
        for one in &compared.shares {
            let (name, published, model) = (&one.name, one.published, one.model);
            let _ = writeln!(text, "| {name} | {published:.0} | {model:.0} |");
        }
        let _ = writeln!(text, "\nMean absolute error: {as_it_is:.1} points.");
        return;
    }
    text.push_str("| | published, % | left out, % | model, % |\n| --- | --- | --- | --- |\n");
    for one in &compared.shares {
        let (name, published) = (&one.name, one.published);
        let (left_out, model) = (one.left_out, one.model);
        let _ = writeln!(
            text,
            "| {name} | {published:.0} | {left_out:.0} | {model:.0} |"
        );
    }
    let fitted: Vec<_> = compared
        .fitted
        .iter()
        .map(|(name, value)| format!("{name} {value:.2}").replace('-', "−"))
        .collect();
    let _ = writeln!(
        text,
        "\nMean absolute error: {left_out:.1} points left out, {as_it_is:.1} points as the model is.\n\
         Fitted to all rows: {}.",
        fitted.join(", ")
    );
}
