//! Which item goes into which well.
//!
//! A plate is laid out by a random arrangement that is then made more even by swaps: the values of
//! every axis are spread over rows, columns, quadrants and the outer ring, so that a gradient over the
//! plate is not taken for an effect of the chemistry. The page `docs/plates.md` has the formulas.

mod arrangement;
mod balance;
mod closeness;
mod columns;
mod error;
mod improve;
mod slots;

use std::collections::BTreeMap;

use serde::{Deserialize, Serialize};

pub use balance::{AxisBalance, BalancedAxis, Spread};
pub use error::LayoutError;

use crate::random::Random;
use crate::{PlateFormat, Well};
use arrangement::Arrangement;
use balance::Balances;
use closeness::Closeness;
use improve::Moves;

/// One thing that needs a well.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct LayoutItem {
    /// The plate it belongs to.
    pub plate: u32,
    /// Its value on each axis (substrate, base …); none where it has no value, as a control without
    /// base. All items of a layout have the same axes.
    pub groups: Vec<Option<u32>>,
    /// The kind of control, if it is one.
    pub control: Option<u32>,
    /// Items with the same number are replicates of one another.
    pub replicates: Option<u32>,
    /// The well it must be in.
    pub fixed: Option<Well>,
}

/// What the wells at the edge of a plate are used for.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum EdgeWells {
    /// Like all others.
    #[default]
    Use,
    /// For nothing.
    Empty,
    /// For controls alone. Controls take the edge first and inner wells when it is full.
    #[serde(rename = "controls only")]
    ControlsOnly,
}

/// How items are ordered on a plate.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub enum WellOrder {
    /// As evenly as possible over rows, columns, quadrants and ring.
    #[default]
    Randomised,
    /// Items that share a value of one axis stand in one column as far as possible, so that a
    /// multichannel head fills the column from one source; the rest as evenly as that allows.
    Columns {
        /// Index of the axis in the groups of the items.
        axis: usize,
    },
}

/// How plates are laid out.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct LayoutOptions {
    /// The plates, all of one format.
    pub format: PlateFormat,
    /// The same seed gives the same layout on every machine.
    pub seed: u64,
    /// Use of the edge.
    pub edges: EdgeWells,
    /// Order of the items.
    pub order: WellOrder,
}

/// Where everything is, and how even that is.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Layout {
    /// The well of each item, in the order of the items.
    pub wells: Vec<Well>,
    /// One entry a plate, in the order of their numbers.
    pub plates: Vec<PlateBalance>,
}

/// How even a plate is.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct PlateBalance {
    /// The plate.
    pub plate: u32,
    /// Mean of [`Spread::evenness`] over all axes and zones: 1 the most even that can be, 0 as even as
    /// random arrangements are on average, below 0 less even than that.
    pub balance: f64,
    /// The same for the random arrangement that was improved.
    pub balance_at_start: f64,
    /// Axis by axis; replicates and controls count as axes.
    pub axes: Vec<AxisBalance>,
    /// What an order by columns gains and costs.
    pub columns: Option<ColumnCost>,
}

/// What an order by columns gains and costs against a randomised one of the same seed.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct ColumnCost {
    /// Pairs of column and source, each at least one movement of the head.
    pub column_fills: u32,
    /// The same when randomised.
    pub column_fills_randomised: u32,
    /// Columns with more than one source.
    pub mixed_columns: u32,
    /// [`PlateBalance::balance`] when randomised; the difference is the cost.
    pub balance_randomised: f64,
}

/// Puts every item into a well of its plate.
///
/// A plate that is not full is filled from the left, column by column.
///
/// # Errors
/// [`LayoutError`]: too many items, a fixed well that cannot be, items that differ in their axes.
pub fn lay_out(items: &[LayoutItem], options: &LayoutOptions) -> Result<Layout, LayoutError> {
    error::check_axes(items, options.order)?;
    let mut by_plate: BTreeMap<u32, Vec<usize>> = BTreeMap::new();
    for (index, item) in items.iter().enumerate() {
        by_plate.entry(item.plate).or_default().push(index);
    }
    let mut wells = vec![Well::new(0, 0); items.len()];
    let mut plates = Vec::with_capacity(by_plate.len());
    for (plate, indices) in by_plate {
        let on_plate: Vec<&LayoutItem> = indices.iter().map(|index| &items[*index]).collect();
        let (places, balance) = one_plate(plate, &on_plate, options)?;
        for (index, well) in indices.into_iter().zip(places) {
            wells[index] = well;
        }
        plates.push(balance);
    }
    Ok(Layout { wells, plates })
}

fn one_plate(
    plate: u32,
    items: &[&LayoutItem],
    options: &LayoutOptions,
) -> Result<(Vec<Well>, PlateBalance), LayoutError> {
    let mut random = Random::stream(options.seed, plate.into());
    let start = slots::random_start(plate, items, options, &mut random)?;
    let (randomised, balance) = improved(plate, items, options, start, Moves::Any, &mut random);
    let WellOrder::Columns { axis } = options.order else {
        return Ok((randomised.wells_of_items(), balance));
    };
    let start = columns::packed(plate, items, options, axis, &mut random)?;
    let moves = Moves::keeping_columns(items, axis);
    let (packed, mut cost) = improved(plate, items, options, start, moves, &mut random);
    cost.columns = Some(ColumnCost {
        column_fills: columns::fills(items, &packed, axis).fills,
        column_fills_randomised: columns::fills(items, &randomised, axis).fills,
        mixed_columns: columns::fills(items, &packed, axis).mixed,
        balance_randomised: balance.balance,
    });
    Ok((packed.wells_of_items(), cost))
}

fn improved(
    plate: u32,
    items: &[&LayoutItem],
    options: &LayoutOptions,
    start: Arrangement,
    moves: Moves,
    random: &mut Random,
) -> (Arrangement, PlateBalance) {
    let mut balances = Balances::new(options.format, items, &start);
    let closeness = Closeness::new(items, &start);
    let balance_at_start = balances.evenness();
    let arrangement = improve::improve(start, &mut balances, &closeness, &moves, random);
    let balance = PlateBalance {
        plate,
        balance: balances.evenness(),
        balance_at_start,
        axes: balances.by_axis(),
        columns: None,
    };
    (arrangement, balance)
}
