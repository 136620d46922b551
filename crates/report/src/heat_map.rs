//! A map of two axes: for each pair of values what its cells promise.

use maud::{Markup, html};

use crate::numbers::{bare_percent, count, percent};
use crate::page::{boxed, name};
use crate::palette;

/// Expected yield and p_hit over two axes.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct HeatMap {
    /// Name of the axis of the rows, e.g. `substrate`.
    pub row_axis: String,
    /// Name of the axis of the columns.
    pub column_axis: String,
    /// Values of the rows.
    pub rows: Vec<String>,
    /// Values of the columns.
    pub columns: Vec<String>,
    /// Expected yield of each pair, row by row; none where all its cells are unknown.
    pub expected_yield: Vec<Option<f64>>,
    /// p_hit of each pair.
    pub p_hit: Vec<Option<f64>>,
    /// What stands for a pair: `best cell`, say.
    pub stands_for: String,
    /// Rows and columns that there was no room for.
    pub left_out: [u64; 2],
}

impl HeatMap {
    /// Two tables, expected yield and p_hit, with a number in every field.
    pub(crate) fn tables(&self) -> Markup {
        html! {
            h3 { (self.row_axis) " × " (self.column_axis) }
            p.aside {
                "Each field shows the " strong { (self.stands_for) } " of its cells, cautions or not; "
                span.swatch.su { "?" } " is unknown."
                @if self.left_out != [0, 0] {
                    " The best rows and columns are shown; "
                    (count(self.left_out[0])) " rows and " (count(self.left_out[1])) " columns had no room."
                }
            }
            div.maps.(if self.columns.len() > 12 { "stacked" } else { "beside" }) {
                figure {
                    figcaption { "Expected yield, %" }
                    (self.table("expected yield", &self.expected_yield))
                }
                figure {
                    figcaption { "p_hit, %" }
                    (self.table("p_hit", &self.p_hit))
                }
            }
        }
    }

    fn table(&self, of: &str, values: &[Option<f64>]) -> Markup {
        let label = format!("{of} over {} and {}", self.row_axis, self.column_axis);
        let wide = if self.columns.len() > 12 {
            "dense"
        } else {
            "airy"
        };
        boxed(
            &label,
            html! {
                table.heat.(wide) {
                    thead {
                        tr {
                            td.corner { (self.row_axis) }
                            @for column in &self.columns {
                                th scope="col" { span { (name(column)) } }
                            }
                        }
                    }
                    tbody {
                        @for (row, values) in self.rows.iter().zip(values.chunks(self.columns.len().max(1))) {
                            tr {
                                th scope="row" { (name(row)) }
                                @for (value, column) in values.iter().zip(&self.columns) {
                                    td.(palette::class(*value)) title={ (row) " × " (column) ": " (percent(*value)) } {
                                        (bare_percent(*value))
                                    }
                                }
                            }
                        }
                    }
                }
            },
        )
    }
}

/// What the colours mean: the whole scale with its ends.
pub(crate) fn legend() -> Markup {
    html! {
        p.legend {
            span.label { "0 %" }
            @for step in 0..palette::STEPS {
                span.swatch.(palette::class(Some(step as f64 / (palette::STEPS - 1) as f64))) aria-hidden="true" {}
            }
            span.label { "100 %" }
            span.swatch.su { "?" } span.label { "unknown" }
        }
    }
}
