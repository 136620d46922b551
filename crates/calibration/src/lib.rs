//! Fits, trade cases and published checks: prints the model's quality. Not shipped.

pub mod acidity_fit;
pub mod balance;
pub mod cases;
pub mod dianions;
pub mod figures;
pub mod medium;
pub mod nucleophilicity;
pub mod practice;
pub mod reactions;
mod refit;
pub mod selectivity;
pub mod solvers;
