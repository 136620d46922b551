//! The words and signs of a filter.

use super::fault::{Fault, fault};
use super::field::Operator;

/// A word or sign with the position of its first character, from 1.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Token {
    pub(super) what: What,
    pub(super) position: usize,
}

#[derive(Clone, Debug, PartialEq)]
pub(super) enum What {
    Word(String),
    Quoted(String),
    Operator(Operator),
    Open,
    Close,
}

impl What {
    /// The token as it is quoted in an error.
    pub(super) fn shown(&self) -> String {
        match self {
            What::Word(text) => text.clone(),
            What::Quoted(text) => format!("\"{text}\""),
            What::Operator(operator) => operator.sign().to_owned(),
            What::Open => "(".to_owned(),
            What::Close => ")".to_owned(),
        }
    }
}

/// Cuts a filter into tokens.
pub(super) fn tokens(text: &str) -> Result<Vec<Token>, Fault> {
    let characters: Vec<char> = text.chars().collect();
    let mut found = Vec::new();
    let mut at = 0;
    while let Some(&first) = characters.get(at) {
        let position = at + 1;
        let what = match first {
            c if c.is_whitespace() => {
                at += 1;
                continue;
            }
            '(' => single(&mut at, What::Open),
            ')' => single(&mut at, What::Close),
            '"' | '\'' => quoted(&characters, &mut at, first)?,
            '=' | '!' | '<' | '>' | ':' => operator(&characters, &mut at)?,
            _ => word(&characters, &mut at),
        };
        found.push(Token { what, position });
    }
    Ok(found)
}

fn single(at: &mut usize, what: What) -> What {
    *at += 1;
    what
}

fn quoted(characters: &[char], at: &mut usize, mark: char) -> Result<What, Fault> {
    let start = *at;
    let mut text = String::new();
    *at += 1;
    while let Some(&c) = characters.get(*at) {
        *at += 1;
        match c {
            c if c == mark => return Ok(What::Quoted(text)),
            '\\' if characters
                .get(*at)
                .is_some_and(|next| matches!(next, '\\' | '"' | '\'')) =>
            {
                text.push(characters[*at]);
                *at += 1;
            }
            c => text.push(c),
        }
    }
    Err(fault(
        start + 1,
        mark.to_string(),
        "the quotation never ends",
        format!("close it with {mark}"),
    ))
}

fn operator(characters: &[char], at: &mut usize) -> Result<What, Fault> {
    let position = *at + 1;
    let first = characters[*at];
    let equals = characters.get(*at + 1) == Some(&'=');
    let (operator, length) = match (first, equals) {
        ('!', true) => (Operator::NotEqual, 2),
        ('<', true) => (Operator::LessOrEqual, 2),
        ('>', true) => (Operator::GreaterOrEqual, 2),
        ('<', false) => (Operator::Less, 1),
        ('>', false) => (Operator::Greater, 1),
        (':', _) => (Operator::Has, 1),
        ('=', false) => (Operator::Equal, 1),
        ('=', true) => {
            return Err(fault(
                position,
                "==".into(),
                "there is no such operator",
                "write =".into(),
            ));
        }
        _ => {
            let remedy = "write != for `is not`, or NOT before a comparison".to_owned();
            return Err(fault(
                position,
                "!".into(),
                "`!` alone means nothing",
                remedy,
            ));
        }
    };
    *at += length;
    Ok(What::Operator(operator))
}

fn word(characters: &[char], at: &mut usize) -> What {
    let ends = |c: &char| c.is_whitespace() || "()\"'=!<>:".contains(*c);
    let rest = &characters[*at..];
    let length = rest.iter().position(ends).unwrap_or(rest.len());
    *at += length;
    What::Word(rest[..length].iter().collect())
}
