//! Small pictures of a cell: where its substrate ends, its course in time, its free energies.

mod bar;
mod course;
mod energy;

pub(crate) use bar::{bar, bar_patterns, bar_words};
pub(crate) use course::course;
pub(crate) use energy::energy;

/// A coordinate with one decimal.
fn at(number: f64) -> String {
    let text = format!("{number:.1}");
    text.strip_suffix(".0").map_or(text.clone(), str::to_owned)
}
