//! Wells of a plan.

use enolattice_model::{Addition, Category};
use enolattice_plate::{Dose, PlannedWell, Reagent, WellCaution};

use super::head::{severity, severity_message};
use super::lists::CONTENTS;
use super::{given, well_from_wire};
use crate::convert::{ConversionError, enums, numbers};
use crate::v1;

impl From<&PlannedWell> for v1::PlannedWell {
    fn from(planned: &PlannedWell) -> Self {
        let PlannedWell {
            well,
            content,
            cell,
            replicate,
            substrate,
            base,
            electrophile,
            additive,
            solvent,
            addition,
            doses,
            medium,
            expected_yield,
            p_hit,
            yield_as_dosed,
            reference_yield,
            water_per_base,
            cautions,
            masses,
            note,
        } = planned;
        let share = |(solvent, volume_fraction): &(String, f64)| v1::SolventShare {
            solvent: solvent.clone(),
            volume_fraction: *volume_fraction,
        };
        v1::PlannedWell {
            well: well.to_string(),
            content: v1::WellContent::from(*content).into(),
            cell: numbers::to_wire(*cell),
            replicate: numbers::index_to_wire(*replicate as usize),
            substrate: substrate.as_ref().map(reagent_message),
            base: base.as_ref().map(reagent_message),
            electrophile: electrophile.as_ref().map(reagent_message),
            additive: additive.as_ref().map(reagent_message),
            solvent: solvent.clone(),
            addition: Addition::from_name(addition)
                .map_or(v1::AdditionOrder::Unspecified, Into::into)
                .into(),
            doses: doses.iter().map(dose_message).collect(),
            medium: medium.iter().map(share).collect(),
            expected_yield: *expected_yield,
            p_hit: *p_hit,
            yield_as_dosed: *yield_as_dosed,
            reference_yield: *reference_yield,
            water_per_base: *water_per_base,
            cautions: cautions.iter().map(caution_message).collect(),
            masses: Some(masses.into()),
            note: note.clone(),
        }
    }
}

impl TryFrom<v1::PlannedWell> for PlannedWell {
    type Error = ConversionError;

    fn try_from(planned: v1::PlannedWell) -> Result<Self, ConversionError> {
        let content = enums::from_wire::<_, v1::WellContent>(
            "PlannedWell.content",
            &CONTENTS,
            planned.content,
        )?;
        let addition = enums::from_wire::<_, v1::AdditionOrder>(
            "PlannedWell.addition",
            &Addition::ALL,
            planned.addition,
        )?;
        let doses = planned.doses.into_iter().map(dose);
        let medium = planned.medium.into_iter();
        let cautions = planned.cautions.into_iter().map(caution);
        Ok(PlannedWell {
            well: well_from_wire("PlannedWell.well", planned.well)?,
            content,
            cell: numbers::from_wire("PlannedWell.cell", planned.cell)?,
            replicate: numbers::from_wire("PlannedWell.replicate", planned.replicate)?,
            substrate: planned.substrate.map(reagent),
            base: planned.base.map(reagent),
            electrophile: planned.electrophile.map(reagent),
            additive: planned.additive.map(reagent),
            solvent: planned.solvent,
            addition: addition.name().to_owned(),
            doses: doses.collect::<Result<_, _>>()?,
            medium: medium
                .map(|share| (share.solvent, share.volume_fraction))
                .collect(),
            expected_yield: planned.expected_yield,
            p_hit: planned.p_hit,
            yield_as_dosed: planned.yield_as_dosed,
            reference_yield: planned.reference_yield,
            water_per_base: planned.water_per_base,
            cautions: cautions.collect::<Result<_, _>>()?,
            masses: given("PlannedWell.masses", planned.masses)?.try_into()?,
            note: planned.note,
        })
    }
}

fn reagent_message(reagent: &Reagent) -> v1::PlannedReagent {
    v1::PlannedReagent {
        name: reagent.name.clone(),
        smiles: reagent.smiles.clone(),
        amount_umol: reagent.amount_umol,
        equiv: reagent.equiv,
    }
}

fn reagent(reagent: v1::PlannedReagent) -> Reagent {
    Reagent {
        name: reagent.name,
        smiles: reagent.smiles,
        amount_umol: reagent.amount_umol,
        equiv: reagent.equiv,
    }
}

fn dose_message(dose: &Dose) -> v1::Dose {
    v1::Dose {
        stock_index: numbers::index_to_wire(dose.stock),
        volume_nl: dose.volume_nl,
        mass_mg: dose.mass_mg,
    }
}

fn dose(dose: v1::Dose) -> Result<Dose, ConversionError> {
    Ok(Dose {
        stock: numbers::from_wire("Dose.stock_index", dose.stock_index)?,
        volume_nl: dose.volume_nl,
        mass_mg: dose.mass_mg,
    })
}

fn caution_message(caution: &WellCaution) -> v1::Caution {
    let category = Category::ALL
        .into_iter()
        .find(|known| known.name() == caution.category);
    v1::Caution {
        category: category
            .map_or(v1::CautionCategory::Unspecified, Into::into)
            .into(),
        severity: severity_message(&caution.severity),
        text: caution.text.clone(),
        source: caution.source.clone(),
    }
}

fn caution(caution: v1::Caution) -> Result<WellCaution, ConversionError> {
    let category = enums::from_wire::<_, v1::CautionCategory>(
        "Caution.category",
        &Category::ALL,
        caution.category,
    )?;
    Ok(WellCaution {
        severity: severity("Caution.severity", caution.severity)?,
        category: category.name().to_owned(),
        text: caution.text,
        source: caution.source,
    })
}
