//! The text of a campaign file with its lines: where a value stands and how it was written.

use std::ops::Range;

use toml::Spanned;
use toml::de::DeValue;

use crate::Place;

/// The text of a campaign file.
pub(crate) struct Page<'a> {
    name: &'a str,
    text: &'a str,
    line_starts: Vec<usize>,
}

impl<'a> Page<'a> {
    pub(crate) fn new(name: &'a str, text: &'a str) -> Page<'a> {
        let after_breaks = text.match_indices('\n').map(|(at, _)| at + 1);
        Page {
            name,
            text,
            line_starts: std::iter::once(0).chain(after_breaks).collect(),
        }
    }

    /// The place of a value.
    pub(crate) fn place(&self, span: &Range<usize>, field: impl Into<String>) -> Place {
        let line = self
            .line_starts
            .partition_point(|start| *start <= span.start) as u32;
        Place {
            file: self.name.to_owned(),
            line,
            field: field.into(),
        }
    }

    /// The place of what is not in the file.
    pub(crate) fn nowhere(&self, field: impl Into<String>) -> Place {
        Place {
            file: self.name.to_owned(),
            line: 0,
            field: field.into(),
        }
    }

    /// The text between two positions.
    pub(crate) fn written(&self, span: &Range<usize>) -> &'a str {
        self.text.get(span.clone()).unwrap_or_default()
    }

    /// The line on which a position is.
    pub(crate) fn line_at(&self, position: usize) -> &'a str {
        let after = self.line_starts.partition_point(|start| *start <= position);
        let start = self.line_starts[after - 1];
        self.text[start..].lines().next().unwrap_or_default()
    }
}

/// A value or the values of a list, each with its key path: scalars and lists are both allowed.
pub(crate) fn items<'v, 'i>(
    path: &str,
    value: &'v Spanned<DeValue<'i>>,
) -> Vec<(String, &'v Spanned<DeValue<'i>>)> {
    match value.get_ref() {
        DeValue::Array(list) => list
            .iter()
            .enumerate()
            .map(|(i, item)| (format!("{path}[{i}]"), item))
            .collect(),
        _ => vec![(path.to_owned(), value)],
    }
}

/// A number, whole or not.
pub(crate) fn number(value: &DeValue<'_>) -> Option<f64> {
    match value {
        DeValue::Integer(whole) => i64::from_str_radix(whole.as_str(), whole.radix())
            .ok()
            .map(|whole| whole as f64),
        DeValue::Float(float) => float.as_str().parse().ok(),
        _ => None,
    }
}

/// What a value is, in words.
pub(crate) fn kind(value: &DeValue<'_>) -> &'static str {
    match value {
        DeValue::String(_) => "a text",
        DeValue::Integer(_) | DeValue::Float(_) => "a number",
        DeValue::Boolean(_) => "true or false",
        DeValue::Datetime(_) => "a date",
        DeValue::Array(_) => "a list",
        DeValue::Table(_) => "a table",
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lines_count_from_one() {
        let page = Page::new("c.toml", "a = 1\nb = 2\r\nc = 3");
        for (position, line, text) in [(0, 1, "a = 1"), (6, 2, "b = 2"), (13, 3, "c = 3")] {
            assert_eq!(page.place(&(position..position + 1), "x").line, line);
            assert_eq!(page.line_at(position), text);
        }
        assert_eq!(page.line_at(18), "c = 3");
        assert_eq!(page.written(&(4..5)), "1");
    }

    #[test]
    fn whole_numbers_of_any_base_are_numbers() {
        let table =
            toml::de::DeTable::parse("a = -78\nb = 0x10\nc = 1_000.5\nd = 'x'").expect("TOML");
        let read: Vec<_> = table
            .get_ref()
            .values()
            .map(|v| number(v.get_ref()))
            .collect();
        assert_eq!(read, [Some(-78.0), Some(16.0), Some(1000.5), None]);
    }
}
