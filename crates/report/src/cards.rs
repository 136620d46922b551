//! The best conditions of each substrate, as cards with structures and as a table.

use maud::{Markup, html};

use crate::cautions;
use crate::cell::ShownCell;
use crate::charts::{bar, bar_words};
use crate::numbers::{count, percent};
use crate::page::{boxed, name};
use crate::palette;
use crate::structure::Structures;

/// One card for each cell.
pub(crate) fn cards(cells: &[ShownCell], structures: &mut Structures) -> Markup {
    html! {
        div.cards {
            @for cell in cells {
                article.card {
                    h3 { (name(&cell.substrate)) " + " (name(&cell.electrophile)) }
                    (scheme(cell, structures))
                    p.conditions { (cell.conditions()) }
                    div.numbers {
                        p.big.(palette::class(cell.expected_yield)) {
                            span.value { (percent(cell.expected_yield)) } span.unit { "expected yield" }
                        }
                        p.small { "p_hit " strong { (percent(cell.p_hit)) } }
                        p.small { (cautions::line(&cell.cautions)) }
                    }
                    (bar(&cell.shares))
                    p.words { (bar_words(&cell.shares, 3)) }
                    @if let Some(measured) = cell.measured_yield {
                        p.words { "measured " strong { (percent(Some(measured))) } }
                    }
                    p.fine { "cell " (count(cell.cell)) " · " (cell.amounts()) }
                }
            }
        }
    }
}

/// Substrate, arrow, product.
pub(crate) fn scheme(cell: &ShownCell, structures: &mut Structures) -> Markup {
    html! {
        div.scheme {
            (structures.show(&cell.substrate_smiles, &cell.substrate))
            @if let Some(product) = &cell.product_smiles {
                span.arrow aria-label="gives" { "→" }
                (structures.show(product, "wanted product"))
            }
        }
    }
}

/// A table of cells that can be sorted and filtered.
pub(crate) fn table(label: &str, cells: &[ShownCell]) -> Markup {
    let measured = cells.iter().any(|cell| cell.measured_yield.is_some());
    boxed(
        label,
        html! {
            table.data.ranked data-tools="" {
                thead {
                    tr {
                        th scope="col" { "substrate" } th scope="col" { "electrophile" } th scope="col" { "base" }
                        th scope="col" { "solvent" } th scope="col" { "temperature" }
                        th.num scope="col" { "expected yield" } th.num scope="col" { "p_hit" }
                        @if measured { th.num scope="col" { "measured" } }
                        th.wide scope="col" { "where the substrate ends" } th scope="col" { "cautions" }
                        th.num scope="col" { "cell" }
                    }
                }
                tbody {
                    @for cell in cells {
                        tr {
                            td { (name(&cell.substrate)) } td { (name(&cell.electrophile)) }
                            td { (name(&cell.base)) }
                            td { (name(&cell.solvent)) @if let Some((additive, _)) = &cell.additive { " + " (name(additive)) } }
                            td data-v=(cell.temperature_c) {
                                (crate::numbers::temperatures(cell.formation_temperature_c, cell.temperature_c))
                            }
                            (share(cell.expected_yield)) (share(cell.p_hit))
                            @if measured { (share(cell.measured_yield)) }
                            td.wide { (bar(&cell.shares)) span.words { (bar_words(&cell.shares, 2)) } }
                            td.cautions data-v=(cautions::rank(cell.severest())) { (cautions::line(&cell.cautions)) }
                            td.num data-v=(cell.cell) { (count(cell.cell)) }
                        }
                    }
                }
            }
        },
    )
}

/// A field with a share on its colour.
pub(crate) fn share(share: Option<f64>) -> Markup {
    html! {
        td.num data-v=(share.unwrap_or(-1.0)) { span.chip.(palette::class(share)) { (percent(share)) } }
    }
}
