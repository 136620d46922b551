//! Requests for reports.

use enolattice_engine::{Axis, ReportQuery};
use enolattice_grid::InputError;

use super::enums;
use crate::bad_field;
use crate::v1::{self, ErrorReason};

impl From<&ReportQuery> for v1::RenderReportRequest {
    fn from(query: &ReportQuery) -> Self {
        let maps = query.maps.iter().map(|[rows, columns]| v1::ReportMap {
            rows: v1::Axis::from(*rows).into(),
            columns: v1::Axis::from(*columns).into(),
        });
        v1::RenderReportRequest {
            id: query.id.clone(),
            maps: maps.collect(),
        }
    }
}

impl TryFrom<v1::RenderReportRequest> for ReportQuery {
    type Error = Vec<InputError>;

    fn try_from(request: v1::RenderReportRequest) -> Result<Self, Vec<InputError>> {
        let mut faults = Vec::new();
        let mut maps = Vec::new();
        for (i, map) in request.maps.iter().enumerate() {
            let rows = axis(format!("maps[{i}].rows"), map.rows);
            let columns = axis(format!("maps[{i}].columns"), map.columns);
            match (rows, columns) {
                (Ok(rows), Ok(columns)) => maps.push([rows, columns]),
                (rows, columns) => faults.extend(
                    rows.err()
                        .into_iter()
                        .chain(columns.err())
                        .map(|fault| *fault),
                ),
            }
        }
        match faults.is_empty() {
            true => Ok(ReportQuery {
                id: request.id,
                maps,
            }),
            false => Err(faults),
        }
    }
}

fn axis(field: String, number: i32) -> Result<Axis, Box<InputError>> {
    let known = enums::optional_from_wire::<_, v1::Axis>("maps", &Axis::ALL, number);
    known.ok().flatten().ok_or_else(|| {
        Box::new(bad_field(
            ErrorReason::ValueUnknown,
            field,
            number.to_string(),
            "there is no such axis",
            "use a value of `Axis`",
        ))
    })
}
