//! What a field is compared with, checked against what the field can be.

use super::fault::{Fault, fault};
use super::field::{Field, Kind, LEVELS, Operator};
use crate::nearest::nearest;

/// What a field is compared with.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Value {
    /// `*`: the field has a value.
    Present,
    /// A name; `*` at an end stands for anything.
    Name(String),
    /// A number.
    Number(f64),
    /// A level of severity, counted from none.
    Level(usize),
}

/// Reads the value of a comparison.
///
/// # Errors
/// A value that the field can never have.
pub(super) fn read(
    field: Field,
    operator: Operator,
    text: &str,
    position: usize,
) -> Result<Value, Fault> {
    match field.kind() {
        Kind::Number => number(field, text, position),
        Kind::Fraction => fraction(field, text, position),
        Kind::Level => level(text, position),
        Kind::Name if operator == Operator::Has => pattern(text, position),
        Kind::Name | Kind::Set => name(field, text, position),
    }
}

fn number(field: Field, text: &str, position: usize) -> Result<Value, Fault> {
    match text.parse::<f64>() {
        Ok(number) if number.is_finite() => Ok(Value::Number(number)),
        _ => {
            let reason = format!("`{}` is compared with a number", field.name());
            Err(fault(
                position,
                text.to_owned(),
                &reason,
                "write a number such as -78 or 0.5".to_owned(),
            ))
        }
    }
}

fn fraction(field: Field, text: &str, position: usize) -> Result<Value, Fault> {
    match number(field, text, position)? {
        Value::Number(number) if !(0.0..=1.0).contains(&number) => {
            let reason = format!("`{}` runs from 0 to 1", field.name());
            Err(fault(
                position,
                text.to_owned(),
                &reason,
                "write 0.5 for 50 %".to_owned(),
            ))
        }
        value => Ok(value),
    }
}

fn level(text: &str, position: usize) -> Result<Value, Fault> {
    let wanted = text.to_lowercase();
    match LEVELS.iter().position(|(name, _)| *name == wanted) {
        Some(level) => Ok(Value::Level(level)),
        None => {
            let remedy = "write none, note, warning or stop".to_owned();
            Err(fault(
                position,
                text.to_owned(),
                "there is no such severity",
                remedy,
            ))
        }
    }
}

/// A name or a part of one, with `*` only at its ends.
fn pattern(text: &str, position: usize) -> Result<Value, Fault> {
    let inner = text.strip_prefix('*').unwrap_or(text);
    let inner = inner.strip_suffix('*').unwrap_or(inner);
    if inner.contains('*') {
        let remedy = "put * at the beginning or the end of the name".to_owned();
        return Err(fault(
            position,
            text.to_owned(),
            "a * stands inside the name",
            remedy,
        ));
    }
    Ok(Value::Name(text.to_owned()))
}

fn name(field: Field, text: &str, position: usize) -> Result<Value, Fault> {
    let given = pattern(text, position)?;
    let vocabulary = field.vocabulary();
    let plain = !text.contains('*');
    if plain
        && !vocabulary.is_empty()
        && !vocabulary
            .iter()
            .any(|known| known.eq_ignore_ascii_case(text))
    {
        let reason = format!("`{}` never has this value", field.name());
        let remedy = match nearest(text, vocabulary.iter().copied()) {
            Some(known) => format!("did you mean \"{known}\"?"),
            None => format!("write one of {}", vocabulary.join(", ")),
        };
        return Err(fault(position, text.to_owned(), &reason, remedy));
    }
    Ok(given)
}
