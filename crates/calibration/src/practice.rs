//! Common reactions and what a practising chemist expects of them.

use std::fmt::Write;

use enolattice_model::{Cell, Conditions, Explanation, Model};
use serde::Deserialize;

use crate::cell::cell;
use crate::quality::Groups;
use crate::table::rows;

const PRACTICE: &str = include_str!("../data/practice.tsv");
const SECOND: &str = include_str!("../data/practice_second.tsv");

#[derive(Deserialize)]
struct Row {
    substrate: String,
    base: String,
    electrophile: String,
    solvent: String,
    temperature_c: f64,
    formation_temperature_c: f64,
    base_equiv: f64,
    electrophile_equiv: f64,
    concentration_m: f64,
    time_h: f64,
    expected: String,
    /// The yield when the model first saw the reaction; none where that was not written down or not covered.
    #[serde(default)]
    first_look: Option<f64>,
}

impl Row {
    fn cell(&self, model: &Model) -> Result<Cell, String> {
        let names = [
            &self.substrate,
            &self.base,
            &self.electrophile,
            &self.solvent,
        ];
        let conditions = Conditions {
            temperature_c: self.temperature_c,
            formation_temperature_c: self.formation_temperature_c,
            base_equiv: self.base_equiv,
            electrophile_equiv: self.electrophile_equiv,
            additive_equiv: 0.0,
            concentration_m: self.concentration_m,
            time_h: self.time_h,
            dosing_min: 10.0,
            addition: None,
        };
        cell(model, names.map(String::as_str), conditions)
    }

    fn is_met(&self, expected_yield: f64) -> Result<bool, String> {
        let bound = |text: &str| {
            text.parse::<f64>()
                .map_err(|error| format!("{text}: {error}"))
        };
        if let Some(least) = self.expected.strip_prefix("at least ") {
            Ok(expected_yield >= bound(least)?)
        } else if let Some(most) = self.expected.strip_prefix("at most ") {
            Ok(expected_yield <= bound(most)?)
        } else {
            Err(format!("{}: neither at least nor at most", self.expected))
        }
    }

    fn name(&self) -> String {
        let temperature = self.temperature_c.to_string().replace('-', "−");
        format!(
            "{} + {}, {} in {}, {temperature} °C",
            self.substrate, self.electrophile, self.base, self.solvent
        )
    }
}

/// A common reaction as the model sees it.
#[derive(Clone, Debug)]
pub struct Judged {
    /// Reagents and temperature.
    pub name: String,
    /// The yield that a chemist expects, `at least` or `at most`.
    pub expected: String,
    /// The model's yield; `None` where it does not cover the reaction.
    pub expected_yield: Option<f64>,
    /// Whether the two agree. What the model does not cover is not met.
    pub is_met: bool,
    /// Whether the yield that the model gave when it first saw the reaction agreed; none where that was not written down.
    pub was_met: Option<bool>,
    /// What the model gives as reason: the largest losses, or why it does not cover the reaction.
    pub reason: String,
    /// Where it is counted.
    pub groups: Groups,
}

/// All reactions of the first list.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn judge(model: &Model) -> Result<Vec<Judged>, String> {
    judged_all(model, PRACTICE)
}

/// All reactions of the second list, which was written down before the model saw any of them.
///
/// # Errors
/// As [`judge`].
pub fn judge_second(model: &Model) -> Result<Vec<Judged>, String> {
    judged_all(model, SECOND)
}

fn judged_all(model: &Model, table: &str) -> Result<Vec<Judged>, String> {
    let table: Vec<Row> = rows(table)?;
    table.iter().map(|row| judged(model, row)).collect()
}

fn judged(model: &Model, row: &Row) -> Result<Judged, String> {
    let cell = row.cell(model)?;
    let explanation = model
        .explain(&cell, 0.5)
        .map_err(|error| format!("{}: {error}", row.name()))?;
    Ok(Judged {
        name: row.name(),
        expected: row.expected.clone(),
        expected_yield: explanation.expected_yield,
        is_met: match explanation.expected_yield {
            Some(expected_yield) => row.is_met(expected_yield)?,
            None => false,
        },
        was_met: row.first_look.map(|found| row.is_met(found)).transpose()?,
        reason: reason(&explanation),
        groups: Groups::of(&cell),
    })
}

fn reason(explanation: &Explanation) -> String {
    if explanation.expected_yield.is_none() {
        return explanation.limits.join("; ");
    }
    let losses = explanation.losses.iter().take(3);
    let losses: Vec<_> = losses
        .map(|(channel, share)| format!("{} {share:.2}", channel.name()))
        .collect();
    losses.join(", ")
}

/// The comparison as sections of a page: how many of the first and of the second list are met, and those that are not.
pub fn section(first: &[Judged], second: &[Judged]) -> String {
    let count = |all: &[Judged]| all.iter().filter(|one| one.is_met).count();
    let mut text = format!(
        "\n## Common reactions\n\n\
         What texts and collections of checked procedures lead one to expect of {} common reactions, as generous bounds of the yield\n\
         (`crates/calibration/data/practice.tsv`, from memory, by the authors of this project). The model was developed with this\n\
         list at hand: it is no independent test. Met: {} of {}.\n",
        first.len(),
        count(first),
        first.len()
    );
    text.push_str(&not_met(first));
    let at_first = second
        .iter()
        .filter(|one| one.was_met == Some(true))
        .count();
    let _ = write!(
        text,
        "\n## Common reactions, second list\n\n\
         {} more, with failures and problems of selectivity on purpose (`crates/calibration/data/practice_second.tsv`, from memory, by the\n\
         authors of this project). They were written down before the model saw any of them: at first look it met {at_first}. After\n\
         what they showed was mended, mechanism by mechanism, it meets {} of {}, which is no independent test any more.\n",
        second.len(),
        count(second),
        second.len()
    );
    text.push_str(&not_met(second));
    text
}

fn not_met(all: &[Judged]) -> String {
    let mut text = String::new();
    if all.iter().all(|one| one.is_met) {
        return text;
    }
    text.push_str(
        "\nNot met:\n\n| reaction | expected | model | why, says the model |\n| --- | --- | --- | --- |\n",
    );
    for one in all.iter().filter(|one| !one.is_met) {
        let found = match one.expected_yield {
            Some(found) => format!("{found:.2}"),
            None => "unknown".to_owned(),
        };
        let _ = writeln!(
            text,
            "| {} | {} | {found} | {} |",
            one.name, one.expected, one.reason
        );
    }
    text
}
