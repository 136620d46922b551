//! How far an estimate is to be trusted, from the errors at measured sites like it.

use enolattice_units::math;

/// Distance over which the likeness of two sites falls by e, pK units of [`super::Coverage`].
const REACH: f64 = 2.0;
/// Weight of the class of anion against a neighbour at distance 0.
const CLASS_WEIGHT: f64 = 2.0;
/// How σ grows with the distance to the nearest measured site: by this share at distance
/// [`FAR`], and no further than at twice that.
const GROWTH: f64 = 0.1;
const FAR: f64 = 6.0;
/// σ of a normal distribution for each unit of mean absolute error, √(π/2).
const NORMAL: f64 = 1.2533;
/// Neighbours that are asked.
pub(super) const NEIGHBOURS: usize = 25;

/// Likeness of two sites at this distance, from 1 (same descriptors) to 0: `exp(−d/2)`.
pub fn similarity(distance: f64) -> f64 {
    math::exp(-distance / REACH)
}

/// Standard uncertainty of an estimate, pK units.
///
/// `√(π/2)·(2·m + Σ s·|e|)/(2 + Σ s)·(1 + 0.1·d/6)` with m the mean absolute error of the class of
/// anion, e the errors at measured sites when these were held out, s their likeness and d ≤ 12 the
/// distance of the nearest. Reach, weight and growth were set on the cross-validation
/// (`calibration/docs/acidity.md` has the coverage).
pub fn local_sigma(typical_error: f64, nearby: &[(f64, f64)]) -> f64 {
    let mut errors = CLASS_WEIGHT * typical_error;
    let mut weights = CLASS_WEIGHT;
    let mut nearest = 2.0 * FAR;
    for (distance, error) in nearby {
        let weight = similarity(*distance);
        errors += weight * error.abs();
        weights += weight;
        nearest = f64::min(nearest, *distance);
    }
    NORMAL * errors / weights * (1.0 + GROWTH * nearest / FAR)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Good and near neighbours sharpen the estimate, bad ones and none at all blunt it.
    #[test]
    fn sigma_follows_the_neighbours() {
        let none = local_sigma(1.0, &[]);
        let good = local_sigma(1.0, &[(0.0, 0.1), (0.5, 0.2)]);
        let bad = local_sigma(1.0, &[(0.0, 4.0), (0.5, 5.0)]);
        assert!(
            good < NORMAL && NORMAL < none && none < bad,
            "{good} {none} {bad}"
        );
        assert!((none - NORMAL * 1.2).abs() < 1e-12);
        assert_eq!(similarity(0.0), 1.0);
    }
}
