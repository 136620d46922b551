//! A cell in full: its way in words, its channels, its course, its free energies, how sure it is.

use enolattice_model::Explanation;
use maud::{Markup, html};

use crate::cards::scheme;
use crate::cell::ShownCell;
use crate::charts::{bar, bar_words, course, energy};
use crate::job::ExplainedCell;
use crate::numbers::{count, fixed, percent, short};
use crate::page::{boxed, name};
use crate::structure::Structures;

/// Quantities of doubt that are shown.
const DOUBTS: usize = 4;
/// Changes that are shown.
const CHANGES: usize = 5;

/// The cells, one after the other.
pub(crate) fn details(cells: &[ExplainedCell], structures: &mut Structures) -> Markup {
    html! {
        p.aside {
            "The surest and those most in doubt, of different substrates, as they are laid down or proposed above. "
            code { "explain" } " shows any other cell in this way."
        }
        @for explained in cells {
            @let cell = &explained.cell;
            article.detail {
                h3 {
                    (name(&cell.substrate)) " + " (name(&cell.electrophile))
                    span.n { " cell " (count(cell.cell)) @if !explained.place.is_empty() { ", " (explained.place) } }
                }
                p.conditions { (cell.conditions()) }
                p.fine { (cell.amounts()) }
                (scheme(cell, structures))
                p.summary { @for one in &explained.explanation.summary { (sentence(one)) " " } }
                div.pair {
                    figure { figcaption { "Course in time, parameters at their means" } (course(&explained.explanation)) }
                    figure { figcaption { "Free energies" } (energy(&explained.explanation, cell.temperature_c)) }
                }
                h4 { "Where the substrate ends" }
                (bar(&cell.shares))
                p.words { (bar_words(&cell.shares, 6)) }
                div.pair {
                    div { h4 { "How sure, and what it hangs on" } (doubts(cell, &explained.explanation)) }
                    div { h4 { "What a change would bring" } (changes(&explained.explanation)) }
                }
                @if !explained.explanation.limits.is_empty() {
                    h4 { "What limits it" }
                    ul { @for limit in &explained.explanation.limits { li { (limit) } } }
                }
            }
        }
    }
}

/// A sentence of the model with its capital and its point.
fn sentence(text: &str) -> String {
    let mut letters = text.chars();
    let first = letters.next().map(|first| first.to_uppercase().to_string());
    format!(
        "{}{}.",
        first.unwrap_or_default(),
        letters.as_str().trim_end_matches('.')
    )
}

fn doubts(cell: &ShownCell, explanation: &Explanation) -> Markup {
    let doubts = &explanation.doubts;
    html! {
        p {
            "Expected yield " strong { (percent(explanation.expected_yield)) }
            @if let Some(sigma) = explanation.yield_sigma { " ± " (percent(Some(sigma))) }
            ", p_hit " strong { (percent(cell.p_hit.or(explanation.p_hit))) }
            @if let Some(log10_k) = explanation.log10_k {
                "; log10 K of the deprotonation " (fixed(log10_k, 1))
                @if let Some(sigma) = explanation.log10_k_sigma { " ± " (fixed(sigma, 1)) }
            }
            "."
        }
        @if doubts.is_empty() {
            p.aside { "No single quantity moves the yield." }
        } @else {
            table.doubts {
                @for doubt in doubts.iter().take(DOUBTS) {
                    tr {
                        td { (doubt.quantity) span.of { " " (short(doubt.value)) " ± " (short(doubt.sigma)) @if doubt.unit != "1" { " " (doubt.unit) } } }
                        td.num { (percent(Some(doubt.share))) }
                        td.gauge {
                            svg.bar viewBox="0 0 100 10" preserveAspectRatio="none" aria-hidden="true" {
                                rect.w x="0" y="0" width=(format!("{:.1}", 100.0 * doubt.share.clamp(0.0, 1.0))) height="10" {}
                            }
                        }
                    }
                }
            }
            p.aside { "Share of the variance of the yield that the quantity explains over joint draws." }
        }
    }
}

fn changes(explanation: &Explanation) -> Markup {
    let advice = &explanation.advice;
    html! {
        @if advice.is_empty() {
            p.aside { "None was computed." }
        } @else {
            (boxed("What a change would bring", html! {
                table.changes {
                    @for change in advice.iter().take(CHANGES) {
                        tr {
                            td { (change.change.replace(" -", " \u{2212}")) }
                            td.num { (percent(Some(change.expected_yield))) }
                            td.num { "p_hit " (percent(change.p_hit)) }
                        }
                    }
                }
            }))
            p.aside { "Expected yield and p_hit after the change; each was computed." }
        }
    }
}
