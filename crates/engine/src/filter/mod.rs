//! Filters of a ranking: a subset of AIP-160 (see `docs/filter.md`).
//!
//! A filter is read once ([`Filter::read`]), tied to a campaign
//! ([`Filter::bind`]), where every test of an axis becomes a table of answers
//! by value, and then asked of each cell.

mod bind;
mod fault;
mod field;
mod read;
mod token;
mod value;

pub(crate) use bind::BoundFilter;
pub(crate) use read::Filter;

#[cfg(test)]
mod tests;
