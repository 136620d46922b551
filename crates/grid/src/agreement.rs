//! How well two columns of numbers agree: order, size, and probabilities against what came true.

/// Spearman's rank correlation of pairs; ties share their mean rank.
///
/// None where it does not exist: fewer than two pairs, or a column whose values are all the same.
///
/// # Source
/// Spearman 1904, doi:10.2307/1412159; ties as is common practice.
///
/// ```
/// use enolattice_grid::spearman;
/// let pairs = [(1.0, 1.0), (2.0, 3.0), (3.0, 2.0), (4.0, 4.0)];
/// assert!((spearman(&pairs).expect("exists") - 0.8).abs() < 1e-12);
/// ```
pub fn spearman(pairs: &[(f64, f64)]) -> Option<f64> {
    let (left, right) = (codes(pairs, |pair| pair.0), codes(pairs, |pair| pair.1));
    let mut counts = RankCounts::new(pairs.len());
    for (left, right) in left.iter().zip(&right) {
        counts.add(*left, *right);
    }
    let mut correlation = counts.ranks();
    for (left, right) in left.iter().zip(&right) {
        correlation.add(*left, *right);
    }
    correlation.value()
}

/// The place of each value among the different ones.
fn codes(pairs: &[(f64, f64)], of: impl Fn(&(f64, f64)) -> f64) -> Vec<usize> {
    let values: Vec<f64> = pairs.iter().map(of).collect();
    let mut different = values.clone();
    different.sort_by(f64::total_cmp);
    different.dedup();
    let place = |value: &f64| different.partition_point(|known| known < value);
    values.iter().map(place).collect()
}

/// How often each code stands in each of two columns: the first look of a rank correlation that holds
/// no rows in memory. A code is a small number that grows with the value.
#[derive(Clone, Debug)]
pub struct RankCounts {
    left: Vec<u64>,
    right: Vec<u64>,
}

impl RankCounts {
    /// Nothing counted; codes are below `codes`.
    pub fn new(codes: usize) -> RankCounts {
        RankCounts {
            left: vec![0; codes],
            right: vec![0; codes],
        }
    }

    /// Counts a pair.
    ///
    /// # Panics
    /// Where a code is not below the number of codes.
    pub fn add(&mut self, left: usize, right: usize) {
        self.left[left] += 1;
        self.right[right] += 1;
    }

    /// The ranks, for the second look.
    pub fn ranks(&self) -> RankCorrelation {
        RankCorrelation {
            left: centred_ranks(&self.left),
            right: centred_ranks(&self.right),
            together: 0,
            squares: [sum_of_squares(&self.left), sum_of_squares(&self.right)],
        }
    }
}

/// Twice the distance of each code's mean rank from the middle: a whole number.
fn centred_ranks(counts: &[u64]) -> Vec<i64> {
    let all: u64 = counts.iter().sum();
    let mut before = 0;
    let ranks = counts.iter().map(|count| {
        let doubled = (2 * before + count) as i64 - all as i64;
        before += count;
        doubled
    });
    ranks.collect()
}

fn sum_of_squares(counts: &[u64]) -> i128 {
    let ranks = centred_ranks(counts);
    let one = |(rank, count): (&i64, &u64)| i128::from(*rank).pow(2) * i128::from(*count);
    ranks.iter().zip(counts).map(one).sum()
}

/// Spearman's correlation from ranks: the second look. Its sums are whole numbers, so that the order of
/// the pairs does not count.
#[derive(Clone, Debug)]
pub struct RankCorrelation {
    left: Vec<i64>,
    right: Vec<i64>,
    together: i128,
    squares: [i128; 2],
}

impl RankCorrelation {
    /// Adds a pair that was counted.
    ///
    /// # Panics
    /// Where a code is not below the number of codes.
    pub fn add(&mut self, left: usize, right: usize) {
        self.together += i128::from(self.left[left]) * i128::from(self.right[right]);
    }

    /// The correlation; none where it does not exist.
    pub fn value(&self) -> Option<f64> {
        let [left, right] = self.squares.map(|sum| sum as f64);
        (left > 0.0 && right > 0.0).then(|| self.together as f64 / (left.sqrt() * right.sqrt()))
    }
}

/// Mean of the differences' sizes; none without pairs.
pub fn mean_absolute_error(pairs: &[(f64, f64)]) -> Option<f64> {
    mean(pairs.iter().map(|(left, right)| (left - right).abs()))
}

fn mean(values: impl ExactSizeIterator<Item = f64>) -> Option<f64> {
    let count = values.len();
    (count > 0).then(|| values.sum::<f64>() / count as f64)
}

/// Runs whose probability of a hit lies in one tenth of the scale, and how many were hits.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Decile {
    /// Lower end of the probability; it belongs to the tenth.
    pub from: f64,
    /// Upper end; it belongs to the last tenth only.
    pub to: f64,
    /// How many.
    pub runs: u64,
    /// Mean of their probabilities; none where there are no runs.
    pub p_hit: Option<f64>,
    /// How many of them were hits.
    pub hits: u64,
}

impl Decile {
    /// Observed share of hits; none where there are no runs.
    pub fn observed(&self) -> Option<f64> {
        (self.runs > 0).then(|| self.hits as f64 / self.runs as f64)
    }
}

/// Calibration of probabilities by the tenths of their scale: of what is given 0.7, about 0.7 should come true.
pub fn deciles(predicted: &[(f64, bool)]) -> [Decile; 10] {
    let tenth_of = |p_hit: f64| ((p_hit * 10.0) as usize).min(9);
    std::array::from_fn(|tenth| {
        let inside = predicted.iter().filter(|(p, _)| tenth_of(*p) == tenth);
        let p_hits: Vec<f64> = inside.clone().map(|(p, _)| *p).collect();
        Decile {
            from: tenth as f64 / 10.0,
            to: (tenth + 1) as f64 / 10.0,
            runs: p_hits.len() as u64,
            hits: inside.filter(|(_, hit)| *hit).count() as u64,
            p_hit: mean(p_hits.into_iter()),
        }
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    /// `scipy.stats.spearmanr` of the same numbers, ties and all.
    #[test]
    fn rank_correlations_are_those_of_scipy() {
        let left = [0.1, 0.4, 0.4, 0.9, 0.0, 0.0, 0.7];
        let right = [0.2, 0.2, 0.5, 0.8, 0.1, 0.3, 0.3];
        let pairs: Vec<(f64, f64)> = left.into_iter().zip(right).collect();
        let rho = spearman(&pairs).expect("exists");
        assert!((rho - 0.666_666_666_666_666_7).abs() < 1e-12, "{rho}");
    }

    #[test]
    fn a_correlation_knows_order_alone_and_where_there_is_none() {
        let rising: Vec<(f64, f64)> = (0..50).map(|i| (f64::from(i), f64::from(i * i))).collect();
        let falling: Vec<(f64, f64)> = rising.iter().map(|(a, b)| (*a, -b)).collect();
        assert_eq!(spearman(&rising), Some(1.0));
        assert_eq!(spearman(&falling), Some(-1.0));
        for nothing in [&[][..], &[(1.0, 2.0)], &[(1.0, 2.0), (1.0, 3.0)]] {
            assert_eq!(spearman(nothing), None);
        }
    }

    #[test]
    fn each_probability_falls_into_one_tenth() {
        let predicted = [
            (0.0, false),
            (0.05, true),
            (0.1, false),
            (0.95, true),
            (1.0, true),
        ];
        let deciles = deciles(&predicted);
        let counts = deciles.map(|decile| (decile.runs, decile.hits));
        assert_eq!(counts[0], (2, 1));
        assert_eq!(counts[1], (1, 0));
        assert_eq!(counts[9], (2, 2));
        assert_eq!(counts.iter().map(|(runs, _)| runs).sum::<u64>(), 5);
        assert_eq!(deciles[0].p_hit, Some(0.025));
        assert_eq!(deciles[0].observed(), Some(0.5));
        assert_eq!(deciles[5].observed(), None);
    }
}
