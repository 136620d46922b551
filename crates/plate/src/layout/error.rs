//! What a layout is refused for.

use super::{LayoutItem, WellOrder};
use crate::{PlateFormat, Well};

/// Why no layout was made.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum LayoutError {
    /// More items than wells.
    #[error(
        "plate {plate} has {items} items for {wells} usable wells of {format}; \
         use more plates or a larger format, fewer replicates or controls, or allow the edge wells"
    )]
    TooManyItems {
        /// The plate.
        plate: u32,
        /// Items that belong to it.
        items: usize,
        /// Wells that may be used for them.
        wells: usize,
        /// The format.
        format: PlateFormat,
    },
    /// More items than wells, counting only those that are no controls.
    #[error(
        "plate {plate} has {items} items that are no controls for {wells} inner wells of {format}; \
         use more plates or a larger format, or allow all items at the edge"
    )]
    TooManyInnerItems {
        /// The plate.
        plate: u32,
        /// Items that are no controls and have no fixed well.
        items: usize,
        /// Inner wells that are free.
        wells: usize,
        /// The format.
        format: PlateFormat,
    },
    /// A fixed well that the plate does not have.
    #[error(
        "well {well} is not on a plate of {format} (plate {plate}); fix the item to a well of the plate"
    )]
    NoSuchWell {
        /// The plate.
        plate: u32,
        /// The well.
        well: Well,
        /// The format.
        format: PlateFormat,
    },
    /// Two items fixed to one well.
    #[error("two items of plate {plate} are fixed to well {well}; give one of them another well")]
    WellTaken {
        /// The plate.
        plate: u32,
        /// The well.
        well: Well,
    },
    /// An item fixed to the edge that may not be there.
    #[error(
        "well {well} of plate {plate} is at the edge, which is not to be used for it; \
         fix the item to an inner well or allow the edge"
    )]
    EdgeNotAllowed {
        /// The plate.
        plate: u32,
        /// The well.
        well: Well,
    },
    /// Items with different numbers of axes.
    #[error(
        "item {item} has {axes} axes where the first has {expected}; give all items the same axes"
    )]
    AxesDiffer {
        /// Index of the item.
        item: usize,
        /// Its axes.
        axes: usize,
        /// Those of the first.
        expected: usize,
    },
    /// An order by columns along an axis that there is not.
    #[error("there is no axis {axis} to order columns by; items have {axes}, counted from 0")]
    NoSuchAxis {
        /// The axis asked for.
        axis: usize,
        /// How many there are.
        axes: usize,
    },
}

pub(super) fn check_axes(items: &[LayoutItem], order: WellOrder) -> Result<(), LayoutError> {
    let Some(first) = items.first() else {
        return Ok(());
    };
    let expected = first.groups.len();
    let differs = |(_, item): &(usize, &LayoutItem)| item.groups.len() != expected;
    if let Some((item, other)) = items.iter().enumerate().find(differs) {
        return Err(LayoutError::AxesDiffer {
            item,
            axes: other.groups.len(),
            expected,
        });
    }
    match order {
        WellOrder::Columns { axis } if axis >= expected => Err(LayoutError::NoSuchAxis {
            axis,
            axes: expected,
        }),
        _ => Ok(()),
    }
}
