//! Exponentials and logarithms with the same bits on every machine.
//!
//! `f64::exp` and its kin call the platform's mathematics library, whose last
//! bits differ from system to system. These call `libm`, one implementation in
//! Rust, so that a screened campaign has the same bytes everywhere. The four
//! basic operations and the square root are exact by IEEE 754 and need no wrapper.

/// e to the power `x`.
#[inline]
pub fn exp(x: f64) -> f64 {
    libm::exp(x)
}

/// Ten to the power `x`.
#[inline]
pub fn exp10(x: f64) -> f64 {
    libm::exp(x * std::f64::consts::LN_10)
}

/// Natural logarithm.
#[inline]
pub fn ln(x: f64) -> f64 {
    libm::log(x)
}

/// Decadic logarithm.
#[inline]
pub fn log10(x: f64) -> f64 {
    libm::log10(x)
}

/// Cosine of `x` turns.
#[inline]
pub fn cos_turn(x: f64) -> f64 {
    libm::cos(x * std::f64::consts::TAU)
}

/// Cumulative distribution of the standard normal, Φ(z).
#[inline]
pub fn normal_cdf(z: f64) -> f64 {
    0.5 * libm::erfc(-z * std::f64::consts::FRAC_1_SQRT_2)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn agrees_with_the_platform_to_a_few_ulps() {
        for i in -3000..=3000 {
            let x = f64::from(i) * 0.1;
            assert!((exp(x) / x.exp() - 1.0).abs() < 1e-14, "exp {x}");
            assert!((exp10(x) / 10f64.powf(x) - 1.0).abs() < 1e-12, "exp10 {x}");
        }
    }

    #[test]
    fn normal_cdf_at_tabulated_points() {
        // Abramowitz & Stegun 1964, table 26.1
        for (z, p) in [
            (0.0, 0.5),
            (1.0, 0.841_344_746),
            (1.96, 0.975_002_105),
            (-3.0, 0.001_349_898),
        ] {
            assert!((normal_cdf(z) - p).abs() < 1e-9, "{z}");
        }
    }
}
