//! What a cell is made of.

use enolattice_engine::CellDescription;
use enolattice_grid::MeasuredYield;
use enolattice_model::{Conditions, Explanation};

use super::{ConversionError, conditions, media, numbers};
use crate::v1;

/// A cell with its explanation, as an answer.
pub fn explained(cell: &CellDescription, explanation: &Explanation) -> v1::ExplainCellResponse {
    v1::ExplainCellResponse {
        cell: Some(cell.into()),
        explanation: Some(explanation.into()),
    }
}

impl TryFrom<v1::ExplainCellResponse> for (CellDescription, Explanation) {
    type Error = ConversionError;

    fn try_from(answer: v1::ExplainCellResponse) -> Result<Self, ConversionError> {
        let missing = |field| ConversionError::Missing { field };
        let cell = answer.cell.ok_or(missing("ExplainCellResponse.cell"))?;
        let explanation = answer
            .explanation
            .ok_or(missing("ExplainCellResponse.explanation"))?;
        Ok((cell.try_into()?, explanation.try_into()?))
    }
}

impl From<&CellDescription> for v1::CellDescription {
    fn from(cell: &CellDescription) -> Self {
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
        v1::CellDescription {
            cell: cell.cell.map(numbers::to_wire),
            substrate: Some(v1::Substrate {
                name: cell.substrate.clone(),
                smiles: cell.substrate_smiles.clone(),
                ..Default::default()
            }),
            base: cell.base.clone(),
            electrophile: Some(v1::Reagent {
                name: cell.electrophile.clone(),
                smiles: cell.electrophile_smiles.clone(),
                ..Default::default()
            }),
            solvent: cell.solvent.clone(),
            additives: media::additive_names(cell.additive.as_ref()),
            conditions: Some(conditions::to_wire(
                &conditions,
                cell.additive_equiv,
                &cell.addition,
            )),
            measured: cell.measured.as_ref().map(|known| v1::CellMeasurement {
                yield_fraction: known.yield_fraction,
                sigma: known.sigma,
                note: known.note.clone(),
            }),
        }
    }
}

impl TryFrom<v1::CellDescription> for CellDescription {
    type Error = ConversionError;

    fn try_from(cell: v1::CellDescription) -> Result<Self, ConversionError> {
        let additive = media::additive_name(cell.additives)?;
        let (conditions, addition) = conditions::from_wire(cell.conditions)?;
        let number = |cell| numbers::from_wire("CellDescription.cell", cell);
        let substrate = cell.substrate.unwrap_or_default();
        let electrophile = cell.electrophile.unwrap_or_default();
        Ok(CellDescription {
            cell: cell.cell.map(number).transpose()?,
            substrate: substrate.name,
            substrate_smiles: substrate.smiles,
            base: cell.base,
            electrophile: electrophile.name,
            electrophile_smiles: electrophile.smiles,
            solvent: cell.solvent,
            additive_equiv: additive.as_ref().map(|_| conditions.additive_equiv),
            additive,
            temperature_c: conditions.temperature_c,
            formation_temperature_c: conditions.formation_temperature_c,
            base_equiv: conditions.base_equiv,
            electrophile_equiv: conditions.electrophile_equiv,
            concentration_m: conditions.concentration_m,
            time_h: conditions.time_h,
            dosing_min: conditions.dosing_min,
            addition,
            measured: cell.measured.map(|known| MeasuredYield {
                yield_fraction: known.yield_fraction,
                sigma: known.sigma,
                note: known.note,
            }),
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn descriptions_come_back() {
        let cell = CellDescription {
            cell: Some(7),
            substrate: "ethyl acetate".into(),
            substrate_smiles: "CCOC(C)=O".into(),
            base: "LDA".into(),
            electrophile: "BnBr".into(),
            electrophile_smiles: "BrCc1ccccc1".into(),
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
            addition: "all together".into(),
            measured: Some(MeasuredYield {
                yield_fraction: 0.62,
                sigma: Some(0.03),
                note: "by NMR".into(),
            }),
        };
        for cell in [
            CellDescription {
                cell: None,
                additive: None,
                additive_equiv: None,
                measured: None,
                ..cell.clone()
            },
            cell,
        ] {
            assert_eq!(
                CellDescription::try_from(v1::CellDescription::from(&cell)),
                Ok(cell)
            );
        }
    }
}
