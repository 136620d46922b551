//! Orders of a ranking and the keys they sort by.

use enolattice_grid::Columns;

/// Order of a ranking: best first; ties by cell, ascending; unknown last.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash)]
pub enum Order {
    /// Expected yield, descending.
    #[default]
    ExpectedYield,
    /// Probability of a hit, descending.
    PHit,
    /// Selectivity, descending.
    Selectivity,
    /// Feasibility, descending.
    Feasibility,
}
