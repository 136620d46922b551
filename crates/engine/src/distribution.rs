//! How the scores of a job are distributed.

use crate::engine::blocking;
use crate::screened::{Kept, STEPS};
use crate::{Engine, EngineError};

/// Bins of a histogram: each is a twentieth wide.
const BINS: usize = 20;

/// How the scores of a job's cells are distributed.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Distribution {
    /// Of the expected yields.
    pub expected_yield: Histogram,
    /// Of the probabilities of a hit.
    pub p_hit: Histogram,
    /// Cells that pass the filter in this snapshot.
    pub total: u64,
    /// Cells screened in this snapshot.
    pub cells_done: u64,
}

/// Numbers of cells in bins of equal width from 0 to 1.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Histogram {
    /// Cells of each of twenty bins: 0 to below 0.05, 0.05 to below 0.10, … , 0.95 to 1.
    pub bins: Vec<u64>,
    /// Cells of which the number is unknown.
    pub unknown: u64,
}

impl Engine {
    /// How the scores of a job's cells are distributed, also while it runs. Reads every stored score once.
    ///
    /// # Errors
    /// [`EngineError::JobUnknown`], [`EngineError::Input`] where the filter cannot be read, [`EngineError::Store`].
    pub async fn distribution(
        &self,
        job: String,
        filter: String,
    ) -> Result<Distribution, EngineError> {
        let shelf = self.queue()?.shelf();
        blocking(move || {
            let screened = shelf.screened(&job, &filter)?;
            let take = |[yields, p_hits]: &mut [Histogram; 2], kept: &Kept<'_>| {
                yields.take(kept.expected_yield);
                p_hits.take(kept.p_hit);
            };
            let merge = |all: [Histogram; 2], more: [Histogram; 2]| {
                let [yields, p_hits] = all;
                let [more_yields, more_p_hits] = more;
                [yields.with(&more_yields), p_hits.with(&more_p_hits)]
            };
            let empty = || [Histogram::empty(), Histogram::empty()];
            let ([expected_yield, p_hit], cells_done) = screened.fold(empty, take, merge)?;
            Ok(Distribution {
                total: expected_yield.unknown + expected_yield.bins.iter().sum::<u64>(),
                expected_yield,
                p_hit,
                cells_done,
            })
        })
        .await
    }
}

impl Histogram {
    fn empty() -> Histogram {
        Histogram {
            bins: vec![0; BINS],
            unknown: 0,
        }
    }

    fn take(&mut self, code: u16) {
        match code <= STEPS {
            true => self.bins[bin(code)] += 1,
            false => self.unknown += 1,
        }
    }

    fn with(mut self, more: &Histogram) -> Histogram {
        self.unknown += more.unknown;
        let bins = self.bins.iter_mut().zip(&more.bins);
        bins.for_each(|(bin, more)| *bin += more);
        self
    }
}

/// Bin of a stored code; whole 1 belongs to the last.
fn bin(code: u16) -> usize {
    (usize::from(code) * BINS / usize::from(STEPS)).min(BINS - 1)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bins_are_twentieths_and_the_last_has_whole_one() {
        let code = |fraction: f64| (fraction * f64::from(STEPS)).round() as u16;
        for (fraction, expected) in [
            (0.0, 0),
            (0.0499, 0),
            (0.0501, 1),
            (0.5001, 10),
            (0.9499, 18),
            (0.9501, 19),
            (1.0, 19),
        ] {
            assert_eq!(bin(code(fraction)), expected, "{fraction}");
        }
    }
}
