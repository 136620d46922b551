//! The queue on a store in a directory, with synthetic scores.

mod common;
mod interleavings;
mod runs;
mod terms;
