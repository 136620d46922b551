//! Physical constants: the exact values of the SI of 2019 (BIPM, SI brochure, 9th edition).

/// Boltzmann constant, J/K (exact).
pub const K_B: f64 = 1.380_649e-23;
/// Planck constant, J s (exact).
pub const H: f64 = 6.626_070_15e-34;
/// Gas constant, kJ/(mol K): the product of the exact Avogadro and Boltzmann constants.
pub const R_KJ: f64 = 8.314_462_618_153_24e-3;
/// The thermochemical calorie: kJ in one kcal (exact by definition).
pub const KCAL_IN_KJ: f64 = 4.184;
/// 0 °C in kelvin (exact by definition).
pub const ZERO_CELSIUS_K: f64 = 273.15;
/// Natural logarithm of ten.
pub const LN_10: f64 = std::f64::consts::LN_10;
/// Standard concentration of a solute, mol/L.
pub const C_STANDARD: f64 = 1.0;
