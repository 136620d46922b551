//! Fits, trade cases and published checks: prints the model's quality. Not shipped.

pub mod cases;
