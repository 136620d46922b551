//! Plates: choice of cells, layout, stocks, transfers, masses.
//!
//! Pure: takes cells with their numbers and gives plans; reads no disk and no clock.

mod candidate;
mod checks;
mod choice;
mod deck;
mod design;
mod files;
mod format;
mod layout;
mod masses;
mod plan;
mod planning;
mod random;
mod recipe;
mod request;
mod stocks;
mod transfers;
mod well;

pub use candidate::{Candidate, Setting};
pub use checks::Finding;
pub use choice::{
    Choice, ChoiceError, ChosenPlate, DesignKind, HitsOf, Quota, Task, Weights, Worth, choose,
};
pub use deck::Deck;
pub use design::{
    ChosenDesign, DOptimalOptions, DesignError, Factor, Fraction, MOST_SOBOL_AXES, Quality,
    ResponseModel, SpaceFilling, d_optimal, full_factorial, plackett_burman, sobol_candidates,
    sobol_cells, sobol_point, space_filling, two_level_fraction, two_level_fraction_by,
};
pub use files::{PlanFile, PlanFileError};
pub use format::{FormatError, Geometry, PlateFormat};
pub use layout::{
    AxisBalance, BalancedAxis, ColumnCost, EdgeWells, Layout, LayoutError, LayoutItem,
    LayoutOptions, PlateBalance, Spread, WellOrder, lay_out,
};
pub use masses::{
    ClashKind, Detection, Ion, IonKind, IsotopePeak, MassClash, MassError, SeenBy, SpeciesMasses,
    Strength, USUAL_TOLERANCE_PPM, WellMasses, WellSpecies, masses_of, well_masses,
};
pub use plan::{Gains, LeftOut, PRECEDENCE, Plan, PlannedWell, Plate, Reagent, WellCaution};
pub use planning::{Ground, plan};
pub use random::scattered;
pub use recipe::{Content, Recipe, Role};
pub use request::{
    Aim, AimWord, ChoiceRequest, ColumnsBy, Controls, Limit, LimitAxis, NamedCell, PlanRequest,
    Plates, WellRequest,
};
pub use stocks::{Dose, Form, Liquid, Source, Stock, Supply};
pub use transfers::{Movements, ProgramStep, Transfer};
pub use well::{Well, WellError};
