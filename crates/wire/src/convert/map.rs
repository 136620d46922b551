//! Maps over two axes and distributions.

use enolattice_engine::{Axis, CellMap, Distribution, Histogram, MapAxis, MapField, MapQuery};
use enolattice_grid::InputError;

use super::{ConversionError, enums, numbers};
use crate::bad_field;
use crate::v1::{self, ErrorReason};

impl From<&MapQuery> for v1::MapCellsRequest {
    fn from(query: &MapQuery) -> Self {
        v1::MapCellsRequest {
            job_id: query.job.clone(),
            rows: v1::Axis::from(query.rows).into(),
            columns: v1::Axis::from(query.columns).into(),
            filter: query.filter.clone(),
        }
    }
}

impl TryFrom<v1::MapCellsRequest> for MapQuery {
    type Error = Vec<InputError>;

    fn try_from(request: v1::MapCellsRequest) -> Result<Self, Vec<InputError>> {
        match (axis("rows", request.rows), axis("columns", request.columns)) {
            (Ok(rows), Ok(columns)) => Ok(MapQuery {
                job: request.job_id,
                rows,
                columns,
                filter: request.filter,
            }),
            (rows, columns) => {
                let faults = [rows.err(), columns.err()].into_iter().flatten();
                Err(faults.map(|fault| *fault).collect())
            }
        }
    }
}

fn axis(field: &str, number: i32) -> Result<Axis, Box<InputError>> {
    enums::from_wire::<_, v1::Axis>("", &Axis::ALL, number).map_err(|_| {
        Box::new(bad_field(
            ErrorReason::ValueUnknown,
            field,
            number.to_string(),
            "there is no such axis",
            "use a value of `Axis`",
        ))
    })
}

impl From<&CellMap> for v1::MapCellsResponse {
    fn from(map: &CellMap) -> Self {
        v1::MapCellsResponse {
            rows: Some((&map.rows).into()),
            columns: Some((&map.columns).into()),
            fields: map.fields.iter().map(Into::into).collect(),
            total_size: numbers::to_wire(map.total),
            cells_done: numbers::to_wire(map.cells_done),
        }
    }
}

impl TryFrom<v1::MapCellsResponse> for CellMap {
    type Error = ConversionError;

    fn try_from(map: v1::MapCellsResponse) -> Result<Self, ConversionError> {
        let fields = map.fields.into_iter().map(TryInto::try_into);
        Ok(CellMap {
            rows: map.rows.unwrap_or_default().try_into()?,
            columns: map.columns.unwrap_or_default().try_into()?,
            fields: fields.collect::<Result<_, _>>()?,
            total: numbers::from_wire("MapCellsResponse.total_size", map.total_size)?,
            cells_done: numbers::from_wire("MapCellsResponse.cells_done", map.cells_done)?,
        })
    }
}

impl From<&MapAxis> for v1::MapAxis {
    fn from(axis: &MapAxis) -> Self {
        v1::MapAxis {
            axis: v1::Axis::from(axis.axis).into(),
            values: axis.values.clone(),
        }
    }
}

impl TryFrom<v1::MapAxis> for MapAxis {
    type Error = ConversionError;

    fn try_from(axis: v1::MapAxis) -> Result<Self, ConversionError> {
        Ok(MapAxis {
            axis: enums::from_wire::<_, v1::Axis>("MapAxis.axis", &Axis::ALL, axis.axis)?,
            values: axis.values,
        })
    }
}

impl From<&MapField> for v1::MapField {
    fn from(field: &MapField) -> Self {
        v1::MapField {
            cells: numbers::to_wire(field.cells),
            unknown: numbers::to_wire(field.unknown),
            best_expected_yield: field.best_expected_yield,
            mean_expected_yield: field.mean_expected_yield,
            best_p_hit: field.best_p_hit,
            mean_p_hit: field.mean_p_hit,
            best_cell: field.best_cell.map(numbers::to_wire),
        }
    }
}

impl TryFrom<v1::MapField> for MapField {
    type Error = ConversionError;

    fn try_from(field: v1::MapField) -> Result<Self, ConversionError> {
        let best_cell = field.best_cell;
        Ok(MapField {
            cells: numbers::from_wire("MapField.cells", field.cells)?,
            unknown: numbers::from_wire("MapField.unknown", field.unknown)?,
            best_expected_yield: field.best_expected_yield,
            mean_expected_yield: field.mean_expected_yield,
            best_p_hit: field.best_p_hit,
            mean_p_hit: field.mean_p_hit,
            best_cell: best_cell
                .map(|cell| numbers::from_wire("MapField.best_cell", cell))
                .transpose()?,
        })
    }
}

impl From<&Distribution> for v1::GetDistributionResponse {
    fn from(known: &Distribution) -> Self {
        v1::GetDistributionResponse {
            expected_yield: Some((&known.expected_yield).into()),
            p_hit: Some((&known.p_hit).into()),
            total_size: numbers::to_wire(known.total),
            cells_done: numbers::to_wire(known.cells_done),
        }
    }
}

impl TryFrom<v1::GetDistributionResponse> for Distribution {
    type Error = ConversionError;

    fn try_from(known: v1::GetDistributionResponse) -> Result<Self, ConversionError> {
        let field = "GetDistributionResponse.total_size";
        Ok(Distribution {
            expected_yield: known.expected_yield.unwrap_or_default().try_into()?,
            p_hit: known.p_hit.unwrap_or_default().try_into()?,
            total: numbers::from_wire(field, known.total_size)?,
            cells_done: numbers::from_wire("GetDistributionResponse.cells_done", known.cells_done)?,
        })
    }
}

impl From<&Histogram> for v1::Histogram {
    fn from(known: &Histogram) -> Self {
        v1::Histogram {
            bins: known.bins.iter().copied().map(numbers::to_wire).collect(),
            unknown: numbers::to_wire(known.unknown),
        }
    }
}

impl TryFrom<v1::Histogram> for Histogram {
    type Error = ConversionError;

    fn try_from(known: v1::Histogram) -> Result<Self, ConversionError> {
        let bins = known.bins.into_iter();
        Ok(Histogram {
            bins: bins
                .map(|cells| numbers::from_wire("Histogram.bins", cells))
                .collect::<Result<_, _>>()?,
            unknown: numbers::from_wire("Histogram.unknown", known.unknown)?,
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn maps_and_their_questions_come_back() {
        let query = MapQuery {
            job: "j".into(),
            rows: Axis::Substrate,
            columns: Axis::Dosing,
            filter: "p_hit > 0.5".into(),
        };
        let back = MapQuery::try_from(v1::MapCellsRequest::from(&query));
        assert_eq!(back, Ok(query));
        let known = MapField {
            cells: 7,
            unknown: 2,
            best_expected_yield: Some(0.9),
            mean_expected_yield: Some(0.4),
            best_p_hit: Some(1.0),
            mean_p_hit: Some(0.0),
            best_cell: Some(0),
        };
        let map = CellMap {
            rows: MapAxis {
                axis: Axis::Substrate,
                values: vec!["acetone".into()],
            },
            columns: MapAxis {
                axis: Axis::Dosing,
                values: vec!["0 min".into(), "10 min".into()],
            },
            fields: vec![known, MapField::default()],
            total: 7,
            cells_done: 9,
        };
        let back = CellMap::try_from(v1::MapCellsResponse::from(&map));
        assert_eq!(back, Ok(map));
    }

    #[test]
    fn distributions_come_back() {
        let histogram = |unknown| Histogram {
            bins: (0..20).collect(),
            unknown,
        };
        let known = Distribution {
            expected_yield: histogram(3),
            p_hit: histogram(4),
            total: 193,
            cells_done: 200,
        };
        let back = Distribution::try_from(v1::GetDistributionResponse::from(&known));
        assert_eq!(back, Ok(known));
    }

    #[test]
    fn both_axes_are_asked_for() {
        let request = v1::MapCellsRequest {
            columns: 99,
            ..Default::default()
        };
        let faults = MapQuery::try_from(request).expect_err("is refused");
        let fields: Vec<_> = faults
            .iter()
            .map(|fault| fault.place.field.as_str())
            .collect();
        assert_eq!(fields, ["rows", "columns"]);
    }
}
