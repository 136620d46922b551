//! Campaigns, axes, cell numbers, tables and blocks scored in parallel.

mod campaign;
mod columns;
mod conditions;
mod fault;
mod fingerprint;
mod grid;
mod lattice;
mod pairs;
mod spec;

pub use campaign::Campaign;
pub use columns::Columns;
pub use fault::{FaultCode, InputError, Located};
pub use grid::Grid;
pub use lattice::{
    AXES, BlockId, CELLS_PER_BLOCK, CellDigits, CellId, GridError, Lattice, MAX_CELLS, Segment,
};
pub use spec::{
    AxisSpec, CampaignSpec, ConditionsSpec, Entry, Place, Sources, SubstrateEntry, TargetSpec, read,
};
