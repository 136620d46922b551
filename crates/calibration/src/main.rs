//! Fits, trade cases and published checks: prints the model's quality.
fn main() {}
