//! Cautions: their marks, and what has to be said on top.

use std::cmp::Reverse;
use std::collections::BTreeMap;

use maud::{Markup, html};

/// A shape and the word for a severity, so that neither needs colour.
pub(crate) fn mark(severity: Option<&str>) -> Markup {
    let (class, shape, word) = match severity {
        Some("stop") => ("stop", "■", "stop"),
        Some("warning") => ("warning", "▲", "warning"),
        Some("note") => ("note", "●", "note"),
        _ => ("none", "○", "none known"),
    };
    html! {
        span.severity.(class) { span aria-hidden="true" { (shape) } " " (word) }
    }
}

/// How grave: for sorting.
pub(crate) fn rank(severity: Option<&str>) -> u8 {
    match severity {
        Some("stop") => 3,
        Some("warning") => 2,
        Some("note") => 1,
        _ => 0,
    }
}

/// Mark and categories in a line.
pub(crate) fn line(cautions: &[(String, String)]) -> Markup {
    let severest = cautions.first().map(|(severity, _)| severity.as_str());
    let mut categories: Vec<&str> = Vec::new();
    for (_, category) in cautions {
        if !categories.contains(&category.as_str()) {
            categories.push(category);
        }
    }
    html! {
        (mark(severest))
        @if !categories.is_empty() {
            span.categories { ": " (categories.join(", ")) }
        }
    }
}

/// A caution with where it occurs.
pub(crate) struct Told<'a> {
    pub(crate) severity: &'a str,
    pub(crate) category: &'a str,
    pub(crate) text: &'a str,
    pub(crate) source: &'a str,
    /// Where it holds: the cell or the well.
    pub(crate) place: String,
}

/// Severest first, then by category and reason.
type Key<'a> = (Reverse<u8>, &'a str, &'a str);

/// Each caution once, severest first, with the places where it holds.
pub(crate) fn list<'a>(all: impl Iterator<Item = Told<'a>>, most: usize) -> Markup {
    let mut known: BTreeMap<Key<'a>, (Told<'a>, Vec<String>)> = BTreeMap::new();
    for told in all {
        let key = (Reverse(rank(Some(told.severity))), told.category, told.text);
        let place = told.place.clone();
        known
            .entry(key)
            .or_insert_with(|| (told, Vec::new()))
            .1
            .push(place);
    }
    let further = known.len().saturating_sub(most);
    html! {
        @if known.is_empty() {
            p { "No caution is known. That does not mean that there is no hazard." }
        } @else {
            ul.cautions {
                @for (told, places) in known.values().take(most) {
                    li {
                        (mark(Some(told.severity))) " " strong { (told.category) } " "
                        span dir="auto" { (told.text) } " "
                        span.of { "[" (told.source) "]" }
                        " " span.places { (at(places)) }
                    }
                }
            }
            @if further > 0 { p.aside { (further) " more, of lesser severity, stand with their cells." } }
        }
    }
}

/// Places that are written out.
const PLACES: usize = 12;

fn at(places: &[String]) -> String {
    let shown = places.iter().take(PLACES).cloned().collect::<Vec<_>>();
    match places.len().saturating_sub(PLACES) {
        0 => shown.join(", "),
        further => format!("{} and {further} more", shown.join(", ")),
    }
}
