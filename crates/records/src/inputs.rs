//! What goes into a well, stock by stock.

use std::collections::BTreeMap;

use enolattice_model::Addition;
use enolattice_plate::{Dose, Form, Plan, PlannedWell, Plate, Reagent, Role, Stock};

use crate::Structures;
use crate::ord::reaction_input::{AdditionSpeed, addition_speed::AdditionSpeedType};
use crate::ord::reaction_role::ReactionRoleType;
use crate::ord::{Compound, ReactionInput};
use crate::quantities::{microliters, micromoles, milligrams, minutes};
use crate::structures::named;

/// The inputs of a well by name: `substrate S1`, `base B2`, …
///
/// What is added after the reaction, quench and diluent, is none.
pub(crate) fn inputs(
    plan: &Plan,
    plate: &Plate,
    well: &PlannedWell,
    structures: &Structures,
) -> BTreeMap<String, ReactionInput> {
    let doses = well.doses.iter().filter_map(|dose| {
        let stock = plan.stocks.get(dose.stock)?;
        let input = of_dose(well, plate, stock, dose, structures)?;
        Some((format!("{} {}", stock.role.name(), stock.label), input))
    });
    doses.collect()
}

fn of_dose(
    well: &PlannedWell,
    plate: &Plate,
    stock: &Stock,
    dose: &Dose,
    structures: &Structures,
) -> Option<ReactionInput> {
    let volume_ul = dose.volume_nl / 1000.0;
    let components = match stock.role {
        Role::Quench | Role::Diluent => return None,
        Role::Solvent => vec![solvent(&stock.reagent, volume_ul, false, structures)],
        role => {
            let reagent = reagent(well, role)?;
            let mut components = vec![solute(reagent, role, stock, dose)];
            let is_dissolved =
                matches!(stock.form, Form::Solution | Form::Suspension | Form::Bought);
            if is_dissolved && volume_ul > 0.0 {
                components.push(solvent(&stock.solvent, volume_ul, true, structures));
            }
            components
        }
    };
    let is_dosed = stock.role == Role::Electrophile && plate.dosing_min > 0.0;
    Some(ReactionInput {
        components,
        addition_order: Addition::from_name(&well.addition)
            .map_or(0, |addition| stock.role.order_group(addition) as i32),
        addition_duration: is_dosed.then(|| minutes(plate.dosing_min)),
        addition_speed: is_dosed.then(|| AdditionSpeed {
            r#type: AdditionSpeedType::Slow.into(),
            details: String::new(),
        }),
        ..ReactionInput::default()
    })
}

fn reagent(well: &PlannedWell, role: Role) -> Option<&Reagent> {
    match role {
        Role::Substrate => well.substrate.as_ref(),
        Role::Base => well.base.as_ref(),
        Role::Electrophile => well.electrophile.as_ref(),
        Role::Additive => well.additive.as_ref(),
        Role::Solvent | Role::Quench | Role::Diluent => None,
    }
}

fn solute(reagent: &Reagent, role: Role, stock: &Stock, dose: &Dose) -> Compound {
    let role_in_schema = match role {
        Role::Substrate | Role::Electrophile => ReactionRoleType::Reactant,
        _ => ReactionRoleType::Reagent,
    };
    let amount = match stock.form {
        Form::Solid if dose.mass_mg > 0.0 => milligrams(dose.mass_mg),
        _ => micromoles(reagent.amount_umol),
    };
    Compound {
        identifiers: named(&reagent.name, &reagent.smiles),
        amount: Some(amount),
        reaction_role: role_in_schema.into(),
        is_limiting: (role == Role::Substrate).then_some(true),
        ..Compound::default()
    }
}

fn solvent(name: &str, volume_ul: f64, has_solutes: bool, structures: &Structures) -> Compound {
    Compound {
        identifiers: structures.solvent(name),
        amount: Some(microliters(volume_ul, has_solutes)),
        reaction_role: ReactionRoleType::Solvent.into(),
        ..Compound::default()
    }
}
