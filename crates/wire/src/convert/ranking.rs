//! Rankings.

use enolattice_engine::{Axis, Order, RankPage, RankQuery, RankedCell};
use enolattice_grid::InputError;
use enolattice_model::{Category, Channel, Conditions, Severity};

use super::{ConversionError, conditions, enums, media, numbers};
use crate::v1::{self, ErrorReason};
use crate::{DEFAULT_PAGE_SIZE, MAX_PAGE_SIZE, bad_field};

/// Orders as AIP-132 writes them.
const ORDERS: [(&str, Order); 4] = [
    ("expected_yield desc", Order::ExpectedYield),
    ("p_hit desc", Order::PHit),
    ("selectivity desc", Order::Selectivity),
    ("feasibility desc", Order::Feasibility),
];

impl From<&RankQuery> for v1::RankCellsRequest {
    fn from(query: &RankQuery) -> Self {
        let order = ORDERS.iter().find(|(_, order)| *order == query.order);
        v1::RankCellsRequest {
            job_id: query.job.clone(),
            page_size: query.page_size.min(MAX_PAGE_SIZE) as i32,
            page_token: query.page_token.clone(),
            skip: numbers::to_wire(query.skip),
            order_by: order
                .map(|(text, _)| (*text).to_owned())
                .unwrap_or_default(),
            filter: query.filter.clone(),
            best_per: query
                .best_per
                .map_or(v1::Axis::Unspecified, Into::into)
                .into(),
        }
    }
}

impl TryFrom<v1::RankCellsRequest> for RankQuery {
    type Error = Vec<InputError>;

    fn try_from(request: v1::RankCellsRequest) -> Result<Self, Vec<InputError>> {
        let mut faults = Vec::new();
        let mut told = |found: Vec<InputError>| faults.extend(found);
        let page_size = page_size(request.page_size)
            .map_err(&mut told)
            .unwrap_or_default();
        let skip = skip(request.skip).map_err(&mut told).unwrap_or_default();
        let order = order(&request.order_by)
            .map_err(&mut told)
            .unwrap_or_default();
        let best_per = best_per(request.best_per)
            .map_err(&mut told)
            .unwrap_or_default();
        if !faults.is_empty() {
            return Err(faults);
        }
        Ok(RankQuery {
            job: request.job_id,
            order,
            filter: request.filter,
            page_size,
            page_token: request.page_token,
            skip,
            best_per,
        })
    }
}

/// Rows of a page: the default for 0, at most [`MAX_PAGE_SIZE`] (AIP-158).
///
/// # Errors
/// A negative number.
pub fn page_size(page_size: i32) -> Result<u32, Vec<InputError>> {
    match u32::try_from(page_size) {
        Ok(0) => Ok(DEFAULT_PAGE_SIZE),
        Ok(rows) => Ok(rows.min(MAX_PAGE_SIZE)),
        Err(_) => Err(vec![negative("page_size", page_size.into())]),
    }
}

fn skip(skip: i64) -> Result<u64, Vec<InputError>> {
    u64::try_from(skip).map_err(|_| vec![negative("skip", skip)])
}

fn negative(field: &str, value: i64) -> InputError {
    bad_field(
        ErrorReason::ValueOutOfRange,
        field,
        value.to_string(),
        "it is negative",
        "use 0 or more",
    )
}

fn order(order_by: &str) -> Result<Order, Vec<InputError>> {
    let words = order_by.split_whitespace().collect::<Vec<_>>().join(" ");
    if words.is_empty() {
        return Ok(Order::default());
    }
    let known = ORDERS.iter().find(|(text, _)| *text == words);
    known.map(|(_, order)| *order).ok_or_else(|| {
        vec![bad_field(
            ErrorReason::OrderInvalid,
            "order_by",
            order_by,
            "there is no such order",
            format!(
                "use one of {}",
                ORDERS.map(|(text, _)| format!("`{text}`")).join(", ")
            ),
        )]
    })
}

fn best_per(number: i32) -> Result<Option<Axis>, Vec<InputError>> {
    enums::optional_from_wire::<_, v1::Axis>("best_per", &Axis::ALL, number).map_err(|_| {
        vec![bad_field(
            ErrorReason::ValueUnknown,
            "best_per",
            number.to_string(),
            "there is no such axis",
            "use a value of `Axis`",
        )]
    })
}

impl From<&RankPage> for v1::RankCellsResponse {
    fn from(page: &RankPage) -> Self {
        v1::RankCellsResponse {
            cells: page.rows.iter().map(Into::into).collect(),
            next_page_token: page.next_page_token.clone(),
            total_size: numbers::to_wire(page.total),
            cells_done: numbers::to_wire(page.cells_done),
        }
    }
}

impl TryFrom<v1::RankCellsResponse> for RankPage {
    type Error = ConversionError;

    fn try_from(page: v1::RankCellsResponse) -> Result<Self, ConversionError> {
        Ok(RankPage {
            rows: page
                .cells
                .into_iter()
                .map(TryInto::try_into)
                .collect::<Result<_, _>>()?,
            next_page_token: page.next_page_token,
            total: numbers::from_wire("RankCellsResponse.total_size", page.total_size)?,
            cells_done: numbers::from_wire("RankCellsResponse.cells_done", page.cells_done)?,
        })
    }
}

impl From<&RankedCell> for v1::RankedCell {
    fn from(cell: &RankedCell) -> Self {
        v1::RankedCell {
            rank: numbers::to_wire(cell.rank),
            cell: numbers::to_wire(cell.cell),
            substrate: cell.substrate.clone(),
            base: cell.base.clone(),
            electrophile: cell.electrophile.clone(),
            solvent: cell.solvent.clone(),
            additives: media::additive_names(cell.additive.as_ref()),
            conditions: Some(conditions_of(cell)),
            expected_yield: cell.expected_yield,
            p_hit: cell.p_hit,
            feasibility: cell.feasibility,
            selectivity: cell.selectivity,
            largest_loss: cell
                .largest_loss
                .map_or(v1::Channel::Unspecified, Into::into)
                .into(),
            cautions: cell
                .cautions
                .iter()
                .map(|name| category(name).into())
                .collect(),
            severity: severity(cell.severity.as_deref()).into(),
            measured_yield: cell.measured_yield,
        }
    }
}

fn conditions_of(cell: &RankedCell) -> v1::CellConditions {
    let conditions = Conditions {
        temperature_c: cell.temperature_c,
        formation_temperature_c: cell.formation_temperature_c,
        base_equiv: cell.base_equiv,
        electrophile_equiv: cell.electrophile_equiv,
        additive_equiv: cell.additive_equiv.unwrap_or_default(),
        concentration_m: cell.concentration_m,
        time_h: cell.time_h,
        dosing_min: cell.dosing_min,
        addition: None,
    };
    conditions::to_wire(&conditions, cell.additive_equiv, &cell.addition)
}

fn category(name: &str) -> v1::CautionCategory {
    let known = Category::ALL
        .into_iter()
        .find(|category| category.name() == name);
    known.map_or(v1::CautionCategory::Unspecified, Into::into)
}

fn severity(name: Option<&str>) -> v1::CautionSeverity {
    let known = Severity::ALL
        .into_iter()
        .find(|severity| Some(severity.name()) == name);
    known.map_or(v1::CautionSeverity::Unspecified, Into::into)
}

impl TryFrom<v1::RankedCell> for RankedCell {
    type Error = ConversionError;

    fn try_from(cell: v1::RankedCell) -> Result<Self, ConversionError> {
        let additive = media::additive_name(cell.additives)?;
        let (conditions, addition) = conditions::from_wire(cell.conditions)?;
        let cautions = cell.cautions.iter().map(|number| {
            enums::from_wire::<_, v1::CautionCategory>(
                "RankedCell.cautions",
                &Category::ALL,
                *number,
            )
        });
        Ok(RankedCell {
            rank: numbers::from_wire("RankedCell.rank", cell.rank)?,
            cell: numbers::from_wire("RankedCell.cell", cell.cell)?,
            temperature_c: conditions.temperature_c,
            formation_temperature_c: conditions.formation_temperature_c,
            base_equiv: conditions.base_equiv,
            electrophile_equiv: conditions.electrophile_equiv,
            concentration_m: conditions.concentration_m,
            time_h: conditions.time_h,
            dosing_min: conditions.dosing_min,
            addition,
            largest_loss: enums::optional_from_wire::<_, v1::Channel>(
                "RankedCell.largest_loss",
                &Channel::ALL,
                cell.largest_loss,
            )?,
            cautions: cautions
                .map(|category| category.map(|category| category.name().to_owned()))
                .collect::<Result<_, _>>()?,
            severity: enums::optional_from_wire::<_, v1::CautionSeverity>(
                "RankedCell.severity",
                &Severity::ALL,
                cell.severity,
            )?
            .map(|severity| severity.name().to_owned()),
            substrate: cell.substrate,
            base: cell.base,
            electrophile: cell.electrophile,
            solvent: cell.solvent,
            additive_equiv: additive.as_ref().map(|_| conditions.additive_equiv),
            additive,
            expected_yield: cell.expected_yield,
            p_hit: cell.p_hit,
            feasibility: cell.feasibility,
            selectivity: cell.selectivity,
            measured_yield: cell.measured_yield,
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn cell() -> RankedCell {
        RankedCell {
            rank: 3,
            cell: 1 << 40,
            substrate: "ethyl acetate".into(),
            base: "LDA".into(),
            electrophile: "BnBr".into(),
            solvent: "THF".into(),
            additive: Some("HMPA".into()),
            additive_equiv: Some(2.0),
            temperature_c: -20.0,
            formation_temperature_c: -78.0,
            base_equiv: 1.05,
            electrophile_equiv: 1.3,
            concentration_m: 0.25,
            time_h: 12.0,
            dosing_min: 5.0,
            addition: "substrate into base".into(),
            expected_yield: Some(0.81),
            p_hit: Some(0.92),
            feasibility: Some(0.99),
            selectivity: Some(0.88),
            largest_loss: Some(Channel::OverAlkylation),
            cautions: vec!["pyrophoric".into(), "flammable".into()],
            severity: Some("warning".into()),
            measured_yield: Some(0.77),
        }
    }

    #[test]
    fn pages_come_back() {
        let unknown = RankedCell {
            additive: None,
            additive_equiv: None,
            expected_yield: None,
            p_hit: None,
            largest_loss: None,
            cautions: vec![],
            severity: None,
            measured_yield: None,
            ..cell()
        };
        let page = RankPage {
            rows: vec![cell(), unknown],
            next_page_token: "next".into(),
            total: 99,
            cells_done: 120,
        };
        assert_eq!(
            RankPage::try_from(v1::RankCellsResponse::from(&page)),
            Ok(page)
        );
    }

    #[test]
    fn queries_come_back() {
        for (_, order) in ORDERS {
            let query = RankQuery {
                job: "j".into(),
                order,
                filter: "p_hit > 0.5".into(),
                page_size: 7,
                page_token: "t".into(),
                skip: 11,
                best_per: Some(Axis::Solvent),
            };
            assert_eq!(
                RankQuery::try_from(v1::RankCellsRequest::from(&query)),
                Ok(query)
            );
        }
    }

    #[test]
    fn page_sizes_follow_aip_158() {
        assert_eq!(page_size(0), Ok(100));
        assert_eq!(page_size(1_000_000), Ok(1000));
        assert!(page_size(-1).is_err());
    }

    #[test]
    fn every_fault_is_told_at_once() {
        let request = v1::RankCellsRequest {
            page_size: -1,
            skip: -2,
            order_by: "expected_yield".into(),
            best_per: 99,
            ..Default::default()
        };
        let faults = RankQuery::try_from(request).expect_err("is refused");
        let fields: Vec<_> = faults
            .iter()
            .map(|fault| fault.place.field.as_str())
            .collect();
        assert_eq!(fields, ["page_size", "skip", "order_by", "best_per"]);
    }
}
