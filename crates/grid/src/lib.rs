//! Campaigns, axes, cell numbers, tables and blocks scored in parallel.
//!
//! A campaign's way: bytes → [`read`] → [`CampaignSpec`] → [`Campaign::new`] → [`Grid::new`] →
//! [`Grid::score`], block by block → [`Columns`]. Nothing here reads a file or a clock.

mod agreement;
mod axes;
mod campaign;
mod caution_table;
mod columns;
mod conditions;
mod digits;
mod entries;
mod fault;
mod fault_code;
mod faults;
mod files;
mod fingerprint;
mod format;
mod grid;
mod heading;
mod keys;
mod lattice;
mod load;
mod measured;
mod overlap;
mod page;
mod pairs;
mod reader;
mod reading;
mod records;
mod resolve;
mod rows;
mod smiles_lines;
mod spec;
mod stock;
mod survey;
mod values;
mod warnings;

pub use agreement::{Decile, RankCorrelation, RankCounts, deciles, mean_absolute_error, spearman};
pub use campaign::{Campaign, Dose};
pub use columns::Columns;
pub use digits::{AXES, CellDigits};
pub use fault::{InputError, Located, value_of_row};
pub use fault_code::FaultCode;
pub use faults::{MAX_FAULTS, in_order};
pub use format::MAX_FILE_BYTES;
pub use grid::Grid;
pub use lattice::{BlockId, CELLS_PER_BLOCK, CellId, GridError, Lattice, MAX_CELLS, Segment};
pub use load::MAX_ATOMS;
pub use measured::{Measured, MeasuredAcidity, MeasuredCell, MeasuredYield};
pub use overlap::{AxisOverlap, Overlap};
pub use reading::{Reading, files_named, read};
pub use spec::{
    AxisSpec, CampaignSpec, ConditionsSpec, Entry, LibraryTable, MeasuredEntry, Place, Sources,
    Stock, SubstrateEntry, TargetSpec,
};
pub use survey::{CautionCount, NotCovered, PairsNotCovered};
