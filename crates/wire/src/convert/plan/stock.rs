//! Stocks of a plan.

use enolattice_plate::{Liquid, Source, Stock};

use super::lists::{FORMS, ROLES};
use super::well_from_wire;
use crate::convert::{ConversionError, enums, numbers};
use crate::v1;

impl From<&Stock> for v1::PlanStock {
    fn from(stock: &Stock) -> Self {
        let Stock {
            label,
            role,
            reagent,
            solvent,
            form,
            concentration_m,
            made_ul,
            weigh_mg,
            molar_mass_g_mol,
            purity,
            take,
            wells,
            sources,
            liquid,
            lasts_h,
            keep,
            hazards,
            notes,
        } = stock;
        v1::PlanStock {
            label: label.clone(),
            role: v1::LiquidRole::from(*role).into(),
            reagent: reagent.clone(),
            solvent: solvent.clone(),
            form: v1::StockForm::from(*form).into(),
            concentration_m: *concentration_m,
            made_ul: *made_ul,
            weigh_mg: *weigh_mg,
            molar_mass_g_mol: *molar_mass_g_mol,
            purity: *purity,
            take: take.map(|(volume_ul, concentration_m)| v1::BoughtSolution {
                volume_ul,
                concentration_m,
            }),
            wells: numbers::index_to_wire(*wells),
            sources: sources.iter().map(source_message).collect(),
            liquid: liquid.as_ref().map(liquid_message),
            lasts_h: *lasts_h,
            keep: keep.clone(),
            hazards: hazards.clone(),
            notes: notes.clone(),
        }
    }
}

impl TryFrom<v1::PlanStock> for Stock {
    type Error = ConversionError;

    fn try_from(stock: v1::PlanStock) -> Result<Self, ConversionError> {
        let role = enums::from_wire::<_, v1::LiquidRole>("PlanStock.role", &ROLES, stock.role)?;
        let form = enums::from_wire::<_, v1::StockForm>("PlanStock.form", &FORMS, stock.form)?;
        let sources = stock.sources.into_iter().map(source);
        Ok(Stock {
            label: stock.label,
            role,
            reagent: stock.reagent,
            solvent: stock.solvent,
            form,
            concentration_m: stock.concentration_m,
            made_ul: stock.made_ul,
            weigh_mg: stock.weigh_mg,
            molar_mass_g_mol: stock.molar_mass_g_mol,
            purity: stock.purity,
            take: stock
                .take
                .map(|bought| (bought.volume_ul, bought.concentration_m)),
            wells: numbers::from_wire("PlanStock.wells", stock.wells)?,
            sources: sources.collect::<Result<_, _>>()?,
            liquid: stock.liquid.map(liquid),
            lasts_h: stock.lasts_h,
            keep: stock.keep,
            hazards: stock.hazards,
            notes: stock.notes,
        })
    }
}

fn source_message(source: &Source) -> v1::SourceWell {
    v1::SourceWell {
        plate: source.plate.clone(),
        well: source.well.to_string(),
        filled_ul: source.filled_ul,
        taken_ul: source.taken_ul,
    }
}

fn source(source: v1::SourceWell) -> Result<Source, ConversionError> {
    Ok(Source {
        plate: source.plate,
        well: well_from_wire("SourceWell.well", source.well)?,
        filled_ul: source.filled_ul,
        taken_ul: source.taken_ul,
    })
}

fn liquid_message(liquid: &Liquid) -> v1::LiquidProperties {
    let Liquid {
        viscosity_mpa_s,
        density_g_ml,
        vapour_pressure_kpa,
        boiling_c,
    } = *liquid;
    v1::LiquidProperties {
        viscosity_mpa_s,
        density_g_ml,
        vapour_pressure_kpa,
        boiling_c,
    }
}

fn liquid(liquid: v1::LiquidProperties) -> Liquid {
    Liquid {
        viscosity_mpa_s: liquid.viscosity_mpa_s,
        density_g_ml: liquid.density_g_ml,
        vapour_pressure_kpa: liquid.vapour_pressure_kpa,
        boiling_c: liquid.boiling_c,
    }
}
