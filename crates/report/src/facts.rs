//! Versions for the notebook, the axes of a campaign, sources: what stands at the end of a page.

use std::collections::BTreeMap;

use maud::{Markup, html};

use crate::numbers::count;

/// What made the numbers, for the notebook.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Versions {
    /// Version of the program.
    pub program: String,
    /// Version of what a score means beside data and parameters.
    pub arithmetic: u32,
    /// Fingerprint of the model that scored the cells, hexadecimal.
    pub model: String,
    /// Fingerprint of the model of the explanations, where it is another.
    pub explained_by: Option<String>,
    /// Fingerprint of the campaign, hexadecimal; empty where it is not known.
    pub campaign: String,
}

/// An axis of a campaign with its values.
#[derive(Clone, Debug, PartialEq)]
pub struct AxisValues {
    /// Name of the axis.
    pub axis: String,
    /// Its values in their order.
    pub values: Vec<String>,
}

/// A source and what was taken from it.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Source {
    /// The publication or table, `from memory`, or `common practice`.
    pub text: String,
    /// What was taken from it.
    pub of: String,
}

/// Values of an axis that are listed.
const LISTED: usize = 120;

pub(crate) fn axes(axes: &[AxisValues]) -> Markup {
    html! {
        dl.axes {
            @for axis in axes {
                dt { (axis.axis) " " span.n { (count(axis.values.len() as u64)) } }
                dd {
                    @for (i, value) in axis.values.iter().take(LISTED).enumerate() {
                        @if i > 0 { " · " }
                        bdi { (value) }
                    }
                    @if axis.values.len() > LISTED {
                        " · and " (count((axis.values.len() - LISTED) as u64)) " more"
                    }
                }
            }
        }
    }
}

/// A table of what a notebook wants to keep.
pub(crate) fn notebook(rows: &[(&str, String)]) -> Markup {
    html! {
        table.facts {
            tbody {
                @for (name, value) in rows {
                    @if !value.is_empty() {
                        tr { th scope="row" { (name) } td { span.mono { (value) } } }
                    }
                }
            }
        }
    }
}

impl Versions {
    /// The rows of the table.
    pub(crate) fn rows(&self) -> Vec<(&'static str, String)> {
        vec![
            ("program", format!("enolattice {}", self.program)),
            ("arithmetic", format!("version {}", self.arithmetic)),
            ("model that scored the cells", self.model.clone()),
            (
                "model of the explanations",
                self.explained_by.clone().unwrap_or_default(),
            ),
            ("campaign", self.campaign.clone()),
        ]
    }
}

/// Sources, each once, with what was taken from it.
pub(crate) fn sources(sources: &[Source]) -> Markup {
    let mut by_text: BTreeMap<&str, Vec<&str>> = BTreeMap::new();
    for source in sources {
        let of = by_text.entry(source.text.as_str()).or_default();
        if !of.contains(&source.of.as_str()) {
            of.push(&source.of);
        }
    }
    html! {
        p.aside {
            "Those of the values that occur on this page. A value " q { "from memory" }
            " was not looked up; " q { "common practice" } " is known to the trade."
        }
        ul.sources {
            @for (text, mut of) in by_text {
                @let further = of.len().saturating_sub(OF_LISTED);
                @let () = of.truncate(OF_LISTED);
                li {
                    (text)
                    span.of {
                        " for "
                        @for (i, one) in of.iter().enumerate() {
                            @if i > 0 { ", " }
                            bdi { (one) }
                        }
                        @if further > 0 { " and " (further) " more" }
                    }
                }
            }
        }
    }
}

/// Things that are listed of those that come from one source.
const OF_LISTED: usize = 8;
