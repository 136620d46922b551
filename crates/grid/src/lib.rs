//! Campaigns, axes, cell numbers, tables and blocks scored in parallel.
//!
//! A campaign's way: bytes → [`read`] → [`CampaignSpec`] → [`Campaign::new`] → [`Grid::new`] →
//! [`Grid::score`], block by block → [`Columns`]. Nothing here reads a file or a clock.

mod campaign;
mod caution_table;
mod columns;
mod conditions;
mod digits;
mod entries;
mod fault;
mod files;
mod fingerprint;
mod grid;
mod keys;
mod lattice;
mod page;
mod pairs;
mod reader;
mod reading;
mod resolve;
mod rows;
mod spec;
mod values;
mod warnings;

pub use campaign::Campaign;
pub use columns::Columns;
pub use digits::{AXES, CellDigits};
pub use fault::{FaultCode, InputError, Located, value_of_row};
pub use grid::Grid;
pub use lattice::{BlockId, CELLS_PER_BLOCK, CellId, GridError, Lattice, MAX_CELLS, Segment};
pub use reading::{files_named, read, read_against};
pub use spec::{
    AxisSpec, CampaignSpec, ConditionsSpec, Entry, Place, Sources, SubstrateEntry, TargetSpec,
};
