//! Relations between K, ΔG°, temperature and rate.

use crate::constants::{H, K_B, LN_10, R_KJ, ZERO_CELSIUS_K};
use crate::math::{exp, exp10};

/// Temperature in kelvin from degrees Celsius.
#[inline]
pub fn kelvin(temperature_c: f64) -> f64 {
    temperature_c + ZERO_CELSIUS_K
}

/// Standard free energy of a reaction from its equilibrium constant.
///
/// `ΔG° = −R·T·ln 10·log10 K`
///
/// | symbol   | argument        | unit |
/// |----------|-----------------|------|
/// | log10 K  | `log10_k`       | 1    |
/// | T        | `temperature_c` | °C   |
///
/// Scalar → scalar, kJ/mol. At 298.15 K: −1.36 kcal/mol for each unit of log10 K.
#[inline]
pub fn delta_g_kj_mol(log10_k: f64, temperature_c: f64) -> f64 {
    -R_KJ * kelvin(temperature_c) * LN_10 * log10_k
}

/// Fraction of products at equilibrium of a reaction A ⇌ B, `K / (1 + K)`.
#[inline]
pub fn product_fraction(log10_k: f64) -> f64 {
    1.0 / (1.0 + exp10(-log10_k))
}

/// log10 K at another temperature for ΔS° ≈ 0: `log K(T) = log K(298.15 K) · 298.15 K / T`.
#[inline]
pub fn log10_k_at(log10_k_298: f64, temperature_c: f64) -> f64 {
    log10_k_298 * 298.15 / kelvin(temperature_c)
}

/// Rate constant of the Eyring equation with transmission coefficient 1 and c° = 1 mol/L.
///
/// `k = k_B·T/h · exp(−ΔG‡/(R·T))`
///
/// | symbol | argument         | unit   |
/// |--------|------------------|--------|
/// | ΔG‡    | `barrier_kj_mol` | kJ/mol |
/// | T      | `temperature_c`  | °C     |
///
/// Scalar → scalar, s⁻¹ (first order) or L mol⁻¹ s⁻¹ (second order).
///
/// # Source
/// H. Eyring, J. Chem. Phys. 1935, 3, 107, doi:10.1063/1.1749604.
#[inline]
pub fn eyring_rate(barrier_kj_mol: f64, temperature_c: f64) -> f64 {
    let t = kelvin(temperature_c);
    K_B * t / H * exp(-barrier_kj_mol / (R_KJ * t))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::constants::KCAL_IN_KJ;

    #[test]
    fn one_unit_of_log_k_is_1_36_kcal_at_298_k() {
        // common practice
        assert!((delta_g_kj_mol(1.0, 25.0) / KCAL_IN_KJ + 1.364).abs() < 1e-3);
    }

    #[test]
    fn minus_three_kcal_gives_99_4_percent_products() {
        // common practice: ΔG° −3 kcal/mol → 99.4 %, 0 → 50 %
        let log10_k = -(-3.0 * KCAL_IN_KJ) / (R_KJ * kelvin(25.0) * LN_10);
        assert!((product_fraction(log10_k) - 0.994).abs() < 5e-4);
        assert_eq!(product_fraction(0.0), 0.5);
    }

    #[test]
    fn a_thousandfold_k_decides() {
        // common practice: K > 10^3 products, < 10^-3 reactants
        assert!(product_fraction(3.0) > 0.999 - 1e-5);
        assert!(product_fraction(-3.0) < 0.001);
    }

    #[test]
    fn eyring_at_85_kj_mol() {
        // 6.2124e12 s^-1 · exp(−85 000 / (8.31446 · 298.15)), by hand
        assert!((eyring_rate(85.0, 25.0) / 7.978e-3 - 1.0).abs() < 1e-3);
    }
}
