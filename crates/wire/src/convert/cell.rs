//! Cells given by their reagents, and what they share with campaigns.

use enolattice_engine::{CellQuery, ExplainTarget};
use enolattice_grid::{Entry, InputError};
use enolattice_model::Addition;

use super::{enums, media, numbers};
use crate::bad_field;
use crate::v1::explain_cell_request::Target;
use crate::v1::{self, ErrorReason};

impl TryFrom<&ExplainTarget> for v1::ExplainCellRequest {
    type Error = Vec<InputError>;

    fn try_from(target: &ExplainTarget) -> Result<Self, Vec<InputError>> {
        let target = match target {
            ExplainTarget::OfJob { job, cell } => Target::JobCell(v1::JobCell {
                job_id: job.clone(),
                cell: numbers::to_wire(*cell),
            }),
            ExplainTarget::Given(query) => Target::GivenCell(given_cell_message(query)?),
        };
        Ok(v1::ExplainCellRequest {
            target: Some(target),
        })
    }
}

impl TryFrom<v1::ExplainCellRequest> for ExplainTarget {
    type Error = Vec<InputError>;

    fn try_from(request: v1::ExplainCellRequest) -> Result<Self, Vec<InputError>> {
        match request.target {
            Some(Target::JobCell(v1::JobCell { job_id, cell })) => {
                let cell = u64::try_from(cell).map_err(|_| vec![negative_cell(cell)])?;
                Ok(ExplainTarget::OfJob { job: job_id, cell })
            }
            Some(Target::GivenCell(cell)) => given_cell(cell).map(ExplainTarget::Given),
            None => Err(vec![missing("target", "give `job_cell` or `given_cell`")]),
        }
    }
}

fn negative_cell(cell: i64) -> InputError {
    bad_field(
        ErrorReason::ValueOutOfRange,
        "job_cell.cell",
        cell.to_string(),
        "cells are numbered from 0",
        "give the number that the ranking shows",
    )
}

fn given_cell_message(query: &CellQuery) -> Result<v1::GivenCell, Vec<InputError>> {
    let addition = match &query.addition {
        Some(name) => addition_from_name(name, "addition")?.into(),
        None => v1::AdditionOrder::Unspecified.into(),
    };
    let named = |name: &String| v1::Reagent {
        name: name.clone(),
        ..Default::default()
    };
    let additive = query.additive.as_ref().map(|name| v1::AdditiveSet {
        additives: vec![v1::Additive {
            reagent: Some(named(name)),
            equiv: query.additive_equiv,
        }],
    });
    let solvent = v1::SolventComponent {
        solvent: Some(named(&query.solvent)),
        volume_fraction: None,
    };
    Ok(v1::GivenCell {
        substrate: Some(v1::Substrate {
            smiles: query.substrate.clone(),
            ..Default::default()
        }),
        base: Some(named(&query.base)),
        electrophile: Some(named(&query.electrophile)),
        solvent: Some(v1::Medium {
            components: vec![solvent],
        }),
        additives: additive,
        conditions: Some(v1::CellConditions {
            temperature_c: Some(query.temperature_c),
            formation_temperature_c: query.formation_temperature_c,
            base_equiv: Some(query.base_equiv),
            electrophile_equiv: Some(query.electrophile_equiv),
            concentration_m: Some(query.concentration_m),
            time_h: Some(query.time_h),
            dosing_min: Some(query.dosing_min),
            addition,
            additive_equiv: None,
        }),
        yield_at_least: Some(query.yield_at_least),
    })
}

fn given_cell(cell: v1::GivenCell) -> Result<CellQuery, Vec<InputError>> {
    let mut faults = Vec::new();
    let conditions = cell.conditions.unwrap_or_default();
    let addition = addition_from_wire(conditions.addition, "given_cell.conditions.addition")
        .unwrap_or_else(|found| {
            faults.extend(found);
            None
        });
    if conditions.temperature_c.is_none() {
        let field = "given_cell.conditions.temperature_c";
        faults.push(missing(field, "give the temperature of the reaction"));
    }
    let mut entry = |read: Result<Entry, Vec<InputError>>| {
        read.unwrap_or_else(|found| {
            faults.extend(found);
            Entry::default()
        })
    };
    let set = cell.additives.unwrap_or_default();
    let has_additive = !set.additives.is_empty();
    let additive = entry(media::additive(set, "given_cell.additives"));
    let solvent = entry(media::solvent(
        cell.solvent.unwrap_or_default(),
        "given_cell.solvent",
    ));
    let substrate = cell.substrate.unwrap_or_default();
    if substrate.pka_dmso.is_some() || substrate.pka_sigma.is_some() {
        faults.push(own_pka_fault());
    }
    if !faults.is_empty() {
        return Err(faults);
    }
    Ok(CellQuery {
        substrate: substrate.smiles,
        base: name_or_smiles(&cell.base.unwrap_or_default()),
        electrophile: name_or_smiles(&cell.electrophile.unwrap_or_default()),
        solvent: if solvent.smiles.is_empty() {
            solvent.name
        } else {
            solvent.smiles
        },
        additive_equiv: additive.equiv,
        additive: has_additive.then_some(if additive.smiles.is_empty() {
            additive.name
        } else {
            additive.smiles
        }),
        temperature_c: conditions.temperature_c.unwrap_or_default(),
        formation_temperature_c: conditions.formation_temperature_c,
        base_equiv: conditions.base_equiv.unwrap_or(1.1),
        electrophile_equiv: conditions.electrophile_equiv.unwrap_or(1.2),
        time_h: conditions.time_h.unwrap_or(16.0),
        dosing_min: conditions.dosing_min.unwrap_or(10.0),
        concentration_m: conditions.concentration_m.unwrap_or(0.2),
        addition: addition.map(|order| order.name().to_owned()),
        yield_at_least: cell.yield_at_least.unwrap_or(0.5),
    })
}

fn own_pka_fault() -> InputError {
    bad_field(
        ErrorReason::NotYetAllowed,
        "given_cell.substrate",
        "pka_dmso",
        "a pKa of your own is taken only in campaigns so far",
        "leave `pka_dmso` and `pka_sigma` out, or submit a campaign",
    )
}

/// What the engine looks a reagent up by.
pub(crate) fn name_or_smiles(reagent: &v1::Reagent) -> String {
    if reagent.smiles.is_empty() {
        reagent.name.clone()
    } else {
        reagent.smiles.clone()
    }
}

/// The order of addition of this name.
pub(crate) fn addition_from_name(
    name: &str,
    field: &str,
) -> Result<v1::AdditionOrder, Vec<InputError>> {
    let names = Addition::ALL
        .map(|order| format!("`{}`", order.name()))
        .join(", ");
    Addition::from_name(name).map(Into::into).ok_or_else(|| {
        vec![bad_field(
            ErrorReason::ValueUnknown,
            field,
            name,
            "there is no such order of addition",
            format!("use one of {names}"),
        )]
    })
}

/// The order of addition of this number; `None`: the usual one of the base.
pub(crate) fn addition_from_wire(
    number: i32,
    field: &str,
) -> Result<Option<Addition>, Vec<InputError>> {
    enums::optional_from_wire::<_, v1::AdditionOrder>("addition", &Addition::ALL, number).map_err(
        |_| {
            vec![bad_field(
                ErrorReason::ValueUnknown,
                field,
                number.to_string(),
                "there is no such order of addition",
                "use a value of `AdditionOrder`",
            )]
        },
    )
}

fn missing(field: &str, remedy: &str) -> InputError {
    bad_field(
        ErrorReason::ValueMissing,
        field,
        "",
        "it is missing",
        remedy,
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    fn query() -> CellQuery {
        CellQuery {
            substrate: "CCOC(C)=O".into(),
            base: "LDA".into(),
            electrophile: "BrCc1ccccc1".into(),
            solvent: "THF".into(),
            additive: Some("HMPA".into()),
            additive_equiv: Some(2.0),
            temperature_c: -20.0,
            formation_temperature_c: Some(-78.0),
            base_equiv: 1.05,
            electrophile_equiv: 1.3,
            time_h: 4.0,
            dosing_min: 5.0,
            concentration_m: 0.3,
            addition: Some("substrate into base".into()),
            yield_at_least: 0.7,
        }
    }

    fn comes_back(target: &ExplainTarget) {
        let message = v1::ExplainCellRequest::try_from(target).expect("to wire");
        assert_eq!(ExplainTarget::try_from(message).as_ref(), Ok(target));
    }

    #[test]
    fn targets_come_back() {
        comes_back(&ExplainTarget::OfJob {
            job: "j".into(),
            cell: 77,
        });
        comes_back(&ExplainTarget::Given(query()));
        comes_back(&ExplainTarget::Given(CellQuery {
            formation_temperature_c: None,
            addition: None,
            additive: None,
            additive_equiv: None,
            ..query()
        }));
    }

    #[test]
    fn numbers_left_out_take_the_documented_defaults() {
        let mut cell = given_cell_message(&query()).expect("to wire");
        cell.conditions = Some(v1::CellConditions {
            temperature_c: Some(25.0),
            ..Default::default()
        });
        cell.yield_at_least = None;
        let query = given_cell(cell).expect("from wire");
        let numbers = [
            query.base_equiv,
            query.electrophile_equiv,
            query.time_h,
            query.dosing_min,
            query.concentration_m,
            query.yield_at_least,
        ];
        assert_eq!(numbers, [1.1, 1.2, 16.0, 10.0, 0.2, 0.5]);
        assert_eq!(
            (query.formation_temperature_c, query.addition),
            (None, None)
        );
    }

    #[test]
    fn an_empty_cell_has_all_its_faults_told() {
        let cell = v1::GivenCell {
            substrate: Some(v1::Substrate {
                pka_dmso: Some(20.0),
                ..Default::default()
            }),
            additives: Some(v1::AdditiveSet {
                additives: vec![v1::Additive::default(), v1::Additive::default()],
            }),
            ..Default::default()
        };
        let faults = given_cell(cell).expect_err("is refused");
        let codes: Vec<_> = faults.iter().map(|fault| fault.code).collect();
        assert_eq!(
            codes,
            [
                "VALUE_MISSING",
                "NOT_YET_ALLOWED",
                "VALUE_MISSING",
                "NOT_YET_ALLOWED"
            ]
        );
    }
}
