//! Transfers as columns.

use std::collections::HashMap;

use enolattice_plate::{Transfer, Well};

use crate::convert::{ConversionError, numbers};
use crate::v1;

/// Names, each once, in the order in which they came.
#[derive(Default)]
struct Names<'a> {
    places: HashMap<&'a str, i32>,
    names: Vec<String>,
}

impl<'a> Names<'a> {
    fn place(&mut self, name: &'a str) -> i32 {
        let next = numbers::index_to_wire(self.names.len());
        *self.places.entry(name).or_insert_with(|| {
            self.names.push(name.to_owned());
            next
        })
    }
}

/// Transfers in one message.
pub(super) fn columns(transfers: &[Transfer]) -> v1::StreamTransfersResponse {
    let (mut plates, mut liquids) = (Names::default(), Names::default());
    let mut part = v1::StreamTransfersResponse::default();
    for transfer in transfers {
        let index = |index: usize| numbers::index_to_wire(index);
        part.groups.push(index(transfer.group as usize));
        let source = plates.place(&transfer.source_plate);
        part.source_plate_indices.push(source);
        part.source_rows
            .push(i32::from(transfer.source_well.row) + 1);
        part.source_columns
            .push(i32::from(transfer.source_well.column) + 1);
        part.plate_indices.push(plates.place(&transfer.plate));
        part.rows.push(i32::from(transfer.well.row) + 1);
        part.columns.push(i32::from(transfer.well.column) + 1);
        part.volumes_nl.push(transfer.volume_nl);
        part.stock_indices.push(transfer.stock.map_or(-1, index));
        part.liquid_indices.push(liquids.place(&transfer.liquid));
    }
    part.plates = plates.names;
    part.liquids = liquids.names;
    part
}

/// The transfers of a message.
pub(super) fn rows(part: &v1::StreamTransfersResponse) -> Result<Vec<Transfer>, ConversionError> {
    let name = |field, names: &[String], index: i32| -> Result<String, ConversionError> {
        let index: usize = numbers::from_wire(field, index)?;
        names
            .get(index)
            .cloned()
            .ok_or(ConversionError::Missing { field })
    };
    let row = |i: usize| -> Result<Transfer, ConversionError> {
        let plate = |field, column| name(field, &part.plates, at(field, column, i)?);
        let well = |field, rows: &[i32], columns: &[i32]| {
            let place = |column: &[i32]| -> Result<u8, ConversionError> {
                numbers::from_wire(field, at(field, column, i)?.saturating_sub(1))
            };
            Ok(Well::new(place(rows)?, place(columns)?))
        };
        let stock = at("stock_indices", &part.stock_indices, i)?;
        let liquid = at("liquid_indices", &part.liquid_indices, i)?;
        Ok(Transfer {
            group: numbers::from_wire("groups", part.groups[i])?,
            source_plate: plate("source_plate_indices", &part.source_plate_indices)?,
            source_well: well("source_rows", &part.source_rows, &part.source_columns)?,
            plate: plate("plate_indices", &part.plate_indices)?,
            well: well("rows", &part.rows, &part.columns)?,
            volume_nl: at("volumes_nl", &part.volumes_nl, i)?,
            liquid: name("liquid_indices", &part.liquids, liquid)?,
            stock: match stock {
                -1 => None,
                stock => Some(numbers::from_wire("stock_indices", stock)?),
            },
        })
    };
    (0..part.groups.len()).map(row).collect()
}

fn at<T: Copy>(field: &'static str, column: &[T], i: usize) -> Result<T, ConversionError> {
    column
        .get(i)
        .copied()
        .ok_or(ConversionError::Missing { field })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn transfer(i: usize) -> Transfer {
        Transfer {
            group: (i / 3) as u32,
            source_plate: format!("source {}", i % 2 + 1),
            source_well: Well::new((i % 8) as u8, (i % 12) as u8),
            plate: "plate 1".into(),
            well: Well::new((i % 32) as u8, (i % 48) as u8),
            volume_nl: 0.1 + i as f64,
            liquid: ["THF", "sample"][i % 2].into(),
            stock: i.is_multiple_of(2).then_some(i),
        }
    }

    #[test]
    fn transfers_come_back_and_names_are_sent_once() {
        let transfers: Vec<Transfer> = (0..300).map(transfer).collect();
        let part = columns(&transfers);
        assert_eq!((part.plates.len(), part.liquids.len()), (3, 2));
        assert_eq!(rows(&part), Ok(transfers));
    }

    #[test]
    fn columns_that_do_not_fit_are_refused() {
        let sound = columns(&[transfer(0), transfer(1)]);
        let mut short = sound.clone();
        short.volumes_nl.pop();
        assert_eq!(
            rows(&short),
            Err(ConversionError::Missing {
                field: "volumes_nl"
            })
        );
        let mut unnamed = sound.clone();
        unnamed.plates.truncate(1);
        assert_eq!(
            rows(&unnamed),
            Err(ConversionError::Missing {
                field: "plate_indices"
            })
        );
        let mut nowhere = sound;
        nowhere.rows[0] = 0;
        let field = "rows";
        assert_eq!(
            rows(&nowhere),
            Err(ConversionError::OutOfRange { field, value: -1 })
        );
    }
}
