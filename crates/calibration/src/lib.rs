//! Fits, trade cases and published checks: prints the model's quality. Not shipped.

pub mod acidity_fit;
pub mod balance;
pub mod cases;
pub mod medium;
pub mod reactions;
pub mod solvers;
