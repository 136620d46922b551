//! A filter tied to a campaign: every test of an axis is a table of answers by value.

use std::collections::HashMap;

use enolattice_grid::{Campaign, CellDigits};
use enolattice_model::{Addition, Category, Channel, Score, Severity};

use super::fault::{Fault, fault};
use super::field::{Field, LEVELS, Operator};
use super::read::{Expression, Filter, Test};
use super::value::Value;
use crate::nearest::nearest;

type Digit = fn(&CellDigits) -> u32;

/// A filter that can be asked of the cells of one campaign.
#[derive(Clone, Debug)]
pub(crate) struct BoundFilter {
    question: Option<Question>,
}

#[derive(Clone, Debug)]
enum Question {
    All(Vec<Question>),
    Any(Vec<Question>),
    Not(Box<Question>),
    /// A table over one axis.
    Axis {
        digit: Digit,
        passes: Vec<bool>,
    },
    /// A table over two axes.
    Axes {
        digits: (Digit, Digit),
        passes: Vec<Vec<bool>>,
    },
    /// A comparison of a fraction; no value: it is known.
    Fraction {
        of: fn(&Score) -> Option<f64>,
        operator: Operator,
        with: Option<f64>,
    },
    /// The same of the yield that was measured.
    Measured {
        yields: HashMap<CellDigits, f64>,
        operator: Operator,
        with: Option<f64>,
    },
    /// A set of channels by number, bit 0 for none.
    LargestLoss {
        passes: u32,
    },
    /// Any of these bits of caution.
    Cautions {
        any_of: u32,
    },
    /// A comparison of the level of severity.
    Severity {
        operator: Operator,
        with: usize,
    },
}

impl Filter {
    /// Ties the filter to a campaign.
    ///
    /// # Errors
    /// A name that no value of the axis has.
    pub(crate) fn bind(&self, campaign: &Campaign) -> Result<BoundFilter, Fault> {
        let question = self
            .expression
            .as_ref()
            .map(|e| bind(e, campaign))
            .transpose()?;
        Ok(BoundFilter { question })
    }
}

impl BoundFilter {
    /// Whether every cell passes.
    pub(crate) fn passes_all(&self) -> bool {
        self.question.is_none()
    }

    /// Whether this cell passes.
    pub(crate) fn passes(&self, digits: &CellDigits, score: &Score) -> bool {
        self.question
            .as_ref()
            .is_none_or(|question| question.answer(digits, score))
    }
}

impl Question {
    fn answer(&self, digits: &CellDigits, score: &Score) -> bool {
        match self {
            Question::All(parts) => parts.iter().all(|part| part.answer(digits, score)),
            Question::Any(parts) => parts.iter().any(|part| part.answer(digits, score)),
            Question::Not(part) => !part.answer(digits, score),
            Question::Axis { digit, passes } => passes[digit(digits) as usize],
            Question::Axes {
                digits: (first, second),
                passes,
            } => passes[first(digits) as usize][second(digits) as usize],
            Question::Fraction { of, operator, with } => compares(of(score), *operator, *with),
            Question::Measured {
                yields,
                operator,
                with,
            } => compares(yields.get(digits).copied(), *operator, *with),
            Question::LargestLoss { passes } => {
                let number = score.largest_loss.map_or(0, |channel| channel as u32);
                passes >> number & 1 == 1
            }
            Question::Cautions { any_of } => score.cautions & any_of != 0,
            Question::Severity { operator, with } => {
                let severity = Severity::from_bits(score.cautions);
                let level = LEVELS.iter().position(|(_, level)| *level == severity);
                level.is_some_and(|level| operator.holds(level, *with))
            }
        }
    }
}

/// Whether a number that may be unknown compares so; without a value to compare with, whether it is known.
fn compares(value: Option<f64>, operator: Operator, with: Option<f64>) -> bool {
    match (value, with) {
        (Some(value), Some(with)) => operator.holds(value, with),
        (value, with) => value.is_some() && with.is_none(),
    }
}

fn bind(expression: &Expression, campaign: &Campaign) -> Result<Question, Fault> {
    let all = |parts: &[Expression]| {
        parts
            .iter()
            .map(|part| bind(part, campaign))
            .collect::<Result<_, Fault>>()
    };
    Ok(match expression {
        Expression::All(parts) => Question::All(all(parts)?),
        Expression::Any(parts) => Question::Any(all(parts)?),
        Expression::Not(part) => Question::Not(Box::new(bind(part, campaign)?)),
        Expression::Test(test) => bind_test(test, campaign)?,
    })
}

fn bind_test(test: &Test, campaign: &Campaign) -> Result<Question, Fault> {
    let numbers = |digit: Digit, values: &[f64]| Question::Axis {
        digit,
        passes: values
            .iter()
            .map(|value| number_passes(test, *value))
            .collect(),
    };
    Ok(match test.field {
        Field::Substrate => {
            let names = campaign
                .substrates
                .iter()
                .map(|s| molecule_names(&s.name, &s.molecule));
            axis(test, |d| d.substrate, names.collect())?
        }
        Field::Electrophile => {
            let names = campaign
                .electrophiles
                .iter()
                .map(|e| molecule_names(&e.name, &e.molecule));
            axis(test, |d| d.electrophile, names.collect())?
        }
        Field::Base => {
            let names = campaign
                .bases
                .iter()
                .map(|b| library_names(&b.record.name, &b.record.synonyms));
            axis(test, |d| d.base, names.collect())?
        }
        Field::Solvent => {
            let names = campaign
                .solvents
                .iter()
                .map(|s| library_names(&s.record.name, &s.record.synonyms));
            axis(test, |d| d.solvent, names.collect())?
        }
        Field::Additive => {
            let names = campaign.additives.iter().map(|dose| match dose {
                Some(dose) => {
                    library_names(&dose.additive.record.name, &dose.additive.record.synonyms)
                }
                None => vec!["none".to_owned()],
            });
            axis(test, |d| d.additive, names.collect())?
        }
        Field::AdditiveEquiv => Question::Axis {
            digit: |d| d.additive,
            passes: campaign
                .additives
                .iter()
                .map(|dose| {
                    dose.as_ref()
                        .is_some_and(|dose| number_passes(test, dose.equiv))
                })
                .collect(),
        },
        Field::TemperatureC => numbers(|d| d.temperature, &campaign.temperature_c),
        Field::BaseEquiv => numbers(|d| d.base_equiv, &campaign.base_equiv),
        Field::ElectrophileEquiv => numbers(|d| d.electrophile_equiv, &campaign.electrophile_equiv),
        Field::ConcentrationM => numbers(|d| d.concentration, &campaign.concentration_m),
        Field::TimeH => numbers(|d| d.time, &campaign.time_h),
        Field::DosingMin => numbers(|d| d.dosing, &campaign.dosing_min),
        Field::FormationTemperatureC => formation_temperature(test, campaign),
        Field::Addition => addition(test, campaign),
        Field::ExpectedYield => fraction(test, |score| score.expected_yield),
        Field::PHit => fraction(test, |score| score.p_hit),
        Field::Selectivity => fraction(test, |score| score.selectivity),
        Field::Feasibility => fraction(test, |score| score.feasibility),
        Field::MeasuredYield => {
            let measured = campaign.measured.iter();
            Question::Measured {
                yields: measured
                    .map(|(cell, known)| (*cell, known.yield_fraction))
                    .collect(),
                operator: test.operator,
                with: number(test),
            }
        }
        Field::LargestLoss => {
            let none = u32::from(test.operator == Operator::NotEqual);
            let passes = Channel::ALL
                .into_iter()
                .filter(|channel| name_passes(test, channel.name()));
            Question::LargestLoss {
                passes: passes.fold(none, |bits, channel| bits | 1 << channel as u32),
            }
        }
        Field::Cautions => {
            let any_of = Category::ALL
                .into_iter()
                .filter(|category| name_passes(test, category.name()));
            Question::Cautions {
                any_of: any_of.fold(0, |bits, category| bits | category.bit()),
            }
        }
        Field::Severity => severity(test),
    })
}

fn molecule_names(name: &str, molecule: &enolattice_molecule::Molecule) -> Vec<String> {
    vec![
        name.to_owned(),
        molecule.smiles().to_owned(),
        molecule.canonical().to_owned(),
    ]
}

fn library_names(name: &str, synonyms: &[String]) -> Vec<String> {
    std::iter::once(name.to_owned())
        .chain(synonyms.iter().cloned())
        .collect()
}

/// A test of the names of an axis. A value has several names and is meant by any of them; a
/// pattern is held only against the first, which is the one that rankings show.
fn axis(test: &Test, digit: Digit, names: Vec<Vec<String>>) -> Result<Question, Fault> {
    let is_pattern = test.operator == Operator::Has
        || matches!(&test.value, Value::Name(name) if name.contains('*'));
    let asked = |of_value: &Vec<String>| if is_pattern { 1 } else { of_value.len() };
    let matches: Vec<bool> = names
        .iter()
        .map(|of_value| {
            of_value
                .iter()
                .take(asked(of_value))
                .any(|name| name_matches(test, name))
        })
        .collect();
    match &test.value {
        Value::Name(name) if !is_pattern && !matches.contains(&true) => {
            let all = names.iter().flatten().map(String::as_str);
            let remedy = match nearest(name, all) {
                Some(known) => format!("did you mean \"{known}\"?"),
                None => format!(
                    "write a name that the campaign has, or `{} : \"…\"` for a part of it",
                    test.field.name()
                ),
            };
            let reason = format!("the campaign has no {} of this name", test.field.name());
            Err(fault(test.position, name.clone(), &reason, remedy))
        }
        _ => {
            let wanted = test.operator != Operator::NotEqual;
            Ok(Question::Axis {
                digit,
                passes: matches.into_iter().map(|m| m == wanted).collect(),
            })
        }
    }
}

fn formation_temperature(test: &Test, campaign: &Campaign) -> Question {
    let of_reaction = |reaction: &f64| {
        let formation = campaign.formation_temperature_c.iter();
        formation
            .map(|formation| number_passes(test, formation.unwrap_or(*reaction)))
            .collect()
    };
    Question::Axes {
        digits: (|d| d.temperature, |d| d.formation_temperature),
        passes: campaign.temperature_c.iter().map(of_reaction).collect(),
    }
}

fn addition(test: &Test, campaign: &Campaign) -> Question {
    let passes = |order: Addition| name_passes(test, order.name());
    let of_base = |base: &std::sync::Arc<enolattice_model::Base>| {
        let orders = campaign.addition.iter();
        orders
            .map(|order| passes(order.unwrap_or_else(|| base.usual_addition())))
            .collect()
    };
    Question::Axes {
        digits: (|d| d.base, |d| d.addition),
        passes: campaign.bases.iter().map(of_base).collect(),
    }
}

fn fraction(test: &Test, of: fn(&Score) -> Option<f64>) -> Question {
    Question::Fraction {
        of,
        operator: test.operator,
        with: number(test),
    }
}

/// The number that is compared with; none where it is only asked whether there is one.
fn number(test: &Test) -> Option<f64> {
    match test.value {
        Value::Number(number) => Some(number),
        _ => None,
    }
}

fn severity(test: &Test) -> Question {
    match test.value {
        Value::Level(with) => Question::Severity {
            operator: test.operator,
            with,
        },
        _ => Question::Severity {
            operator: Operator::Greater,
            with: 0,
        },
    }
}

fn number_passes(test: &Test, value: f64) -> bool {
    match test.value {
        Value::Number(with) => test.operator.holds(value, with),
        _ => true,
    }
}

/// Whether a name passes the test, with its operator.
fn name_passes(test: &Test, name: &str) -> bool {
    name_matches(test, name) == (test.operator != Operator::NotEqual)
}

/// Whether a name matches the pattern, whatever the case.
fn name_matches(test: &Test, name: &str) -> bool {
    let Value::Name(pattern) = &test.value else {
        return true;
    };
    let (name, pattern) = (name.to_lowercase(), pattern.to_lowercase());
    let contained = test.operator == Operator::Has && test.field != Field::Cautions;
    let (open_start, pattern) = match pattern.strip_prefix('*') {
        Some(rest) => (true, rest.to_owned()),
        None => (contained, pattern),
    };
    let (open_end, pattern) = match pattern.strip_suffix('*') {
        Some(rest) => (true, rest.to_owned()),
        None => (contained, pattern),
    };
    match (open_start, open_end) {
        (true, true) => name.contains(&pattern),
        (true, false) => name.ends_with(&pattern),
        (false, true) => name.starts_with(&pattern),
        (false, false) => name == pattern,
    }
}
