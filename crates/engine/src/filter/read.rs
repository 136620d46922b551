//! Reads a filter into an expression. `OR` binds tighter than `AND`, as in AIP-160.
//!
//! ```text
//! filter  = [ all ]
//! all     = any { "AND" any }
//! any     = term { "OR" term }
//! term    = [ "NOT" | "-" ] ( "(" all ")" | test )
//! test    = field operator value
//! ```

use super::fault::{Fault, fault};
use super::field::{Field, Operator};
use super::token::{Token, What, tokens};
use super::value::{self, Value};
use crate::nearest::nearest;

/// Most comparisons of a filter.
pub(super) const MOST_TERMS: usize = 50;
/// Longest filter, bytes.
pub(super) const MOST_BYTES: usize = 4096;
/// Deepest nesting of parentheses and NOTs.
const DEEPEST: usize = 50;

/// What a filter says.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Expression {
    All(Vec<Expression>),
    Any(Vec<Expression>),
    Not(Box<Expression>),
    Test(Test),
}

/// One comparison.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Test {
    pub(super) field: Field,
    pub(super) operator: Operator,
    pub(super) value: Value,
    pub(super) position: usize,
}

/// A filter that has been read; `None`: all cells.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct Filter {
    pub(super) expression: Option<Expression>,
}

impl Filter {
    /// Reads a filter.
    ///
    /// # Errors
    /// The first fault, with its position and a remedy.
    pub(crate) fn read(text: &str) -> Result<Filter, Fault> {
        if text.len() > MOST_BYTES {
            let reason = format!(
                "the filter has {} bytes, more than {MOST_BYTES}",
                text.len()
            );
            return Err(fault(1, String::new(), &reason, "shorten it".to_owned()));
        }
        let tokens = tokens(text)?;
        if tokens.is_empty() {
            return Ok(Filter::default());
        }
        let mut reader = Reader {
            tokens: &tokens,
            at: 0,
            terms: 0,
            depth: 0,
            end: text.chars().count() + 1,
        };
        let expression = reader.all()?;
        match reader.next() {
            None => Ok(Filter {
                expression: Some(expression),
            }),
            Some(token) if token.what == What::Close => Err(fault(
                token.position,
                ")".into(),
                "no parenthesis is open here",
                "remove it".into(),
            )),
            Some(token) => {
                let remedy =
                    "write AND or OR between two comparisons, and names with blanks in quotes"
                        .to_owned();
                Err(fault(
                    token.position,
                    token.what.shown(),
                    "a second comparison begins here",
                    remedy,
                ))
            }
        }
    }
}

struct Reader<'a> {
    tokens: &'a [Token],
    at: usize,
    terms: usize,
    depth: usize,
    end: usize,
}

impl<'a> Reader<'a> {
    fn peek(&self) -> Option<&'a What> {
        self.tokens.get(self.at).map(|token| &token.what)
    }

    fn next(&mut self) -> Option<&'a Token> {
        let token = self.tokens.get(self.at);
        self.at += 1;
        token
    }

    /// Takes the keyword if it is next.
    fn takes(&mut self, keyword: &str) -> bool {
        let is_next = matches!(self.peek(), Some(What::Word(word)) if word == keyword);
        self.at += usize::from(is_next);
        is_next
    }

    fn all(&mut self) -> Result<Expression, Fault> {
        let mut parts = vec![self.any()?];
        while self.takes("AND") {
            parts.push(self.any()?);
        }
        Ok(one_or(parts, Expression::All))
    }

    fn any(&mut self) -> Result<Expression, Fault> {
        let mut parts = vec![self.term()?];
        while self.takes("OR") {
            parts.push(self.term()?);
        }
        Ok(one_or(parts, Expression::Any))
    }

    fn term(&mut self) -> Result<Expression, Fault> {
        self.depth += 1;
        let position = self
            .tokens
            .get(self.at)
            .map_or(self.end, |token| token.position);
        if self.depth > DEEPEST {
            let reason = format!("parentheses and NOTs are nested more than {DEEPEST} deep");
            return Err(fault(
                position,
                String::new(),
                &reason,
                "write the filter flatter".to_owned(),
            ));
        }
        let term = if self.takes("NOT") || self.takes("-") {
            Expression::Not(Box::new(self.term()?))
        } else if self.peek() == Some(&What::Open) {
            self.at += 1;
            let inner = self.all()?;
            match self.next() {
                Some(Token {
                    what: What::Close, ..
                }) => inner,
                Some(token) => {
                    let remedy = "write AND, OR or ) here".to_owned();
                    return Err(fault(
                        token.position,
                        token.what.shown(),
                        "a ) is missing before this",
                        remedy,
                    ));
                }
                None => {
                    return Err(fault(
                        self.end,
                        String::new(),
                        "a ( is never closed",
                        "add a )".to_owned(),
                    ));
                }
            }
        } else {
            self.test()?
        };
        self.depth -= 1;
        Ok(term)
    }

    fn test(&mut self) -> Result<Expression, Fault> {
        self.terms += 1;
        let (name, position) = match self.next() {
            Some(Token {
                what: What::Word(name),
                position,
            }) => (name.as_str(), *position),
            Some(token) => {
                let remedy = "begin a comparison with a field, e.g. base = \"LDA\"".to_owned();
                return Err(fault(
                    token.position,
                    token.what.shown(),
                    "a field is missing here",
                    remedy,
                ));
            }
            None => {
                let remedy = "add a comparison, e.g. expected_yield >= 0.5".to_owned();
                return Err(fault(
                    self.end,
                    String::new(),
                    "a comparison is missing at the end",
                    remedy,
                ));
            }
        };
        if self.terms > MOST_TERMS {
            let reason = format!("the filter has more than {MOST_TERMS} comparisons");
            return Err(fault(
                position,
                name.to_owned(),
                &reason,
                "use * in names, or ask in parts".to_owned(),
            ));
        }
        let negated = name.len() > 1 && name.starts_with('-');
        let test = self.comparison(name.trim_start_matches('-'), position)?;
        Ok(if negated {
            Expression::Not(Box::new(Expression::Test(test)))
        } else {
            Expression::Test(test)
        })
    }

    fn comparison(&mut self, name: &str, position: usize) -> Result<Test, Fault> {
        let field = Field::from_name(name).ok_or_else(|| unknown_field(name, position))?;
        let operator = self.operator(field)?;
        let (value, position) = self.value(field, operator)?;
        Ok(Test {
            field,
            operator,
            value,
            position,
        })
    }

    fn operator(&mut self, field: Field) -> Result<Operator, Fault> {
        let allowed = field.kind().operators();
        let signs = allowed
            .iter()
            .map(|operator| operator.sign())
            .collect::<Vec<_>>()
            .join(" ");
        match self.next() {
            Some(Token {
                what: What::Operator(operator),
                ..
            }) if allowed.contains(operator) => Ok(*operator),
            Some(Token {
                what: What::Operator(operator),
                position,
            }) => {
                let reason = format!(
                    "`{}` cannot be compared with {}",
                    field.name(),
                    operator.sign()
                );
                Err(fault(
                    *position,
                    operator.sign().to_owned(),
                    &reason,
                    format!("use one of {signs}"),
                ))
            }
            other => {
                let reason = format!("an operator is missing after `{}`", field.name());
                let (position, shown) = other.map_or((self.end, String::new()), |token| {
                    (token.position, token.what.shown())
                });
                Err(fault(
                    position,
                    shown,
                    &reason,
                    format!("write one of {signs}"),
                ))
            }
        }
    }

    fn value(&mut self, field: Field, operator: Operator) -> Result<(Value, usize), Fault> {
        let (text, quoted, position) = match self.next() {
            Some(Token {
                what: What::Word(text),
                position,
            }) => (text, false, *position),
            Some(Token {
                what: What::Quoted(text),
                position,
            }) => (text, true, *position),
            other => {
                let reason = format!(
                    "a value is missing after `{} {}`",
                    field.name(),
                    operator.sign()
                );
                let (position, shown) = other.map_or((self.end, String::new()), |token| {
                    (token.position, token.what.shown())
                });
                return Err(fault(
                    position,
                    shown,
                    &reason,
                    "write a number or a name in quotes".to_owned(),
                ));
            }
        };
        if operator == Operator::Has && text == "*" && !quoted {
            return Ok((Value::Present, position));
        }
        let value = value::read(field, operator, text, position)?;
        Ok((value, position))
    }
}

fn one_or(mut parts: Vec<Expression>, several: fn(Vec<Expression>) -> Expression) -> Expression {
    match parts.pop() {
        Some(only) if parts.is_empty() => only,
        last => {
            parts.extend(last);
            several(parts)
        }
    }
}

fn unknown_field(name: &str, position: usize) -> Fault {
    let remedy = match nearest(name, Field::ALL.iter().map(|(_, known, _)| *known)) {
        Some(known) => format!("did you mean `{known}`?"),
        None => {
            let names: Vec<_> = Field::ALL.iter().map(|(_, known, _)| *known).collect();
            format!("fields are {}", names.join(", "))
        }
    };
    fault(position, name.to_owned(), "there is no such field", remedy)
}
