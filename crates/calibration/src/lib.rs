//! Fits, trade cases and published checks: prints the model's quality. Not shipped.

pub mod acidity_fit;
pub mod balance;
pub mod cases;
mod cell;
pub mod conditions;
pub mod dianions;
pub mod figures;
pub mod medium;
pub mod networks;
pub mod nucleophilicity;
pub mod practice;
pub mod quality;
mod random_cells;
pub mod rates;
pub mod reactions;
mod refit;
pub mod selectivity;
pub mod solvers;
pub mod substitution;
mod table;
pub mod uncertainty;
