//! How scores are distributed.

use enolattice_engine::{Distribution, Histogram};
use serde::Serialize;

/// What `rank --distribution --json` prints.
#[derive(Clone, Debug, Serialize)]
pub(crate) struct DistributionDocument {
    cells: u64,
    cells_done: u64,
    expected_yield: Bins,
    p_hit: Bins,
}

#[derive(Clone, Debug, Serialize)]
struct Bins {
    bins: Vec<u64>,
    unknown: u64,
}

impl From<Distribution> for DistributionDocument {
    fn from(known: Distribution) -> DistributionDocument {
        let bins = |histogram: Histogram| Bins {
            bins: histogram.bins,
            unknown: histogram.unknown,
        };
        DistributionDocument {
            cells: known.total,
            cells_done: known.cells_done,
            expected_yield: bins(known.expected_yield),
            p_hit: bins(known.p_hit),
        }
    }
}
