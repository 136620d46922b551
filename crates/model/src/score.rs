//! What the screen keeps of a cell.

use crate::Channel;

/// The screened numbers of one cell; `None` where the model does not cover the cell.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Score {
    /// Wanted product per substrate charged, averaged over the uncertainty, 0–1.
    pub expected_yield: Option<f64>,
    /// Probability that the yield reaches the campaign's target, 0–1.
    pub p_hit: Option<f64>,
    /// Wanted product per substrate converted, 0–1.
    pub selectivity: Option<f64>,
    /// Thermodynamic ceiling of the wanted product, 0–1.
    pub feasibility: Option<f64>,
    /// The largest loss.
    pub largest_loss: Option<Channel>,
    /// Bits of the categories of caution ([`crate::Category::bit`]) and, above
    /// them, the highest severity ([`crate::Severity`]).
    pub cautions: u32,
}
