//! A plan that is put together from its head and its parts.

use enolattice_plate::Plan;

use super::head::headed;
use super::transfers::rows;
use crate::convert::{ConversionError, numbers};
use crate::v1;

/// A plan of which parts may be missing.
#[derive(Debug)]
pub(crate) struct Assembly {
    plan: Plan,
    /// Wells of each plate, as the head says.
    wells: Vec<usize>,
    /// Stocks, as the head says.
    stocks: usize,
}

impl Assembly {
    pub(crate) fn new(head: v1::Plan) -> Result<Assembly, ConversionError> {
        let count = |plate: &v1::PlannedPlate| {
            numbers::from_wire("PlannedPlate.well_count", plate.well_count)
        };
        Ok(Assembly {
            wells: head.plates.iter().map(count).collect::<Result<_, _>>()?,
            stocks: numbers::from_wire("Plan.stock_count", head.stock_count)?,
            plan: headed(head)?,
        })
    }

    /// Id of the plan.
    pub(crate) fn id(&self) -> &str {
        &self.plan.id
    }

    pub(crate) fn add_wells(
        &mut self,
        part: v1::StreamWellsResponse,
    ) -> Result<(), ConversionError> {
        let field = "StreamWellsResponse.plate_index";
        let index: usize = numbers::from_wire(field, part.plate_index)?;
        let plate = self.plan.plates.get_mut(index);
        let plate = plate.ok_or(ConversionError::OutOfRange {
            field,
            value: part.plate_index.into(),
        })?;
        for well in part.wells {
            plate.wells.push(well.try_into()?);
        }
        Ok(())
    }

    pub(crate) fn add_stocks(
        &mut self,
        part: v1::StreamStocksResponse,
    ) -> Result<(), ConversionError> {
        for stock in part.stocks {
            self.plan.stocks.push(stock.try_into()?);
        }
        Ok(())
    }

    pub(crate) fn add_transfers(
        &mut self,
        part: &v1::StreamTransfersResponse,
    ) -> Result<(), ConversionError> {
        self.plan.transfers.extend(rows(part)?);
        Ok(())
    }

    /// The whole plan.
    pub(crate) fn finish(self) -> Result<Plan, ConversionError> {
        let whole = |field, found: usize, told: usize| match found == told {
            true => Ok(()),
            false => Err(ConversionError::Missing { field }),
        };
        for (plate, told) in self.plan.plates.iter().zip(&self.wells) {
            whole("StreamWellsResponse.wells", plate.wells.len(), *told)?;
        }
        whole(
            "StreamStocksResponse.stocks",
            self.plan.stocks.len(),
            self.stocks,
        )?;
        let told = self.plan.movements.transfers;
        whole(
            "StreamTransfersResponse.groups",
            self.plan.transfers.len(),
            told,
        )?;
        Ok(self.plan)
    }
}
