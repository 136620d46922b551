//! Quantities, physical constants and portable arithmetic.
//!
//! Every number that leaves a public function of enolattice carries its unit in
//! its name (`temperature_c`, `delta_g_kj_mol`). This crate holds the constants
//! and conversions behind those names, and the [`math`] functions whose results
//! are the same bits on every machine.

mod constants;
mod convert;
pub mod math;

pub use constants::{C_STANDARD, H, K_B, KCAL_IN_KJ, LN_10, R_KJ, ZERO_CELSIUS_K};
pub use convert::{delta_g_kj_mol, eyring_rate, kelvin, log10_k_at, product_fraction};
