//! What the measured neighbours of a site say about the error of its estimate.

use super::contribution::Contribution;

/// A site of the fit with what the estimate leaves unexplained.
#[derive(Clone, Debug, PartialEq)]
pub struct Analogue {
    /// The site's estimate.
    pub contribution: Contribution,
    /// Measured minus estimated pKa.
    pub residual: f64,
}

/// The sites of the fit, with a measure of likeness.
///
/// A site borrows the residuals of like sites: `Δ = Σ w·r / (λ + Σ w)`, `w = exp(−d/ℓ)`, where
/// `d = Σ min(|c·Δx|, cap)` counts by how much two estimates differ term by term, in pK units.
/// So a substrate and its product, or two homologues, err by nearly the same amount.
#[derive(Clone, Debug, Default)]
pub struct Analogues {
    sites: Vec<Analogue>,
    /// pK units by which a difference in one unit of a descriptor counts.
    weights: Vec<f64>,
}

impl Analogues {
    /// Distance ℓ over which residuals resemble each other, pK units; from cross-validation.
    pub const REACH: f64 = 2.0;
    /// Weight λ of "no correction"; from cross-validation.
    pub const DOUBT: f64 = 1.0;
    /// Most that one descriptor counts, pK units.
    const CAP: f64 = 8.0;
    /// Distance to the nearest site of the fit beyond which an estimate is outside, pK units.
    const EDGE: f64 = 6.0;
    /// Least weight of a descriptor, so that a term with a small coefficient still counts.
    const LEAST: f64 = 0.5;

    /// Takes the sites of a fit and its coefficients.
    pub fn new(sites: Vec<Analogue>, coefficients: &[f64]) -> Analogues {
        let weights = coefficients
            .iter()
            .map(|c| c.abs().clamp(Self::LEAST, Self::CAP))
            .collect();
        Analogues { sites, weights }
    }

    /// Correction to the estimate of a site, pK units.
    pub fn correction(&self, site: &Contribution) -> f64 {
        let mut weighted = 0.0;
        let mut weights = Self::DOUBT;
        for known in &self.sites {
            let distance = self.distance(site, &known.contribution);
            if distance < 8.0 * Self::REACH {
                let weight = (-distance / Self::REACH).exp();
                weighted += weight * known.residual;
                weights += weight;
            }
        }
        weighted / weights
    }

    /// Whether the fit has seen a site like this one, and every descriptor of it.
    pub fn cover(&self, site: &Contribution) -> bool {
        site.unknown() == 0
            && self
                .sites
                .iter()
                .any(|known| self.distance(site, &known.contribution) <= Self::EDGE)
    }

    /// Distance between two sites, pK units; infinite between sites of different classes.
    fn distance(&self, first: &Contribution, second: &Contribution) -> f64 {
        let (a, b) = (first.linear(), second.linear());
        let (mut i, mut j, mut distance) = (0, 0, 0.0);
        while i < a.len() || j < b.len() {
            let left = a.get(i).map_or(usize::MAX, |(index, _)| *index);
            let right = b.get(j).map_or(usize::MAX, |(index, _)| *index);
            let index = left.min(right);
            let mut difference = 0.0;
            if left == index {
                difference += a[i].1;
                i += 1;
            }
            if right == index {
                difference -= b[j].1;
                j += 1;
            }
            distance += self.weights[index] * difference.abs();
        }
        distance
    }
}
