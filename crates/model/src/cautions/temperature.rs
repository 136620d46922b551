//! Temperatures against boiling, melting and flash points.

use enolattice_reagents::{Hazards, NamedElectrophile, Solvent};

use super::statements::states_flammable;
use super::{Category, Caution};

/// Flammable by the GHS: a flash point of at most 60 °C (UN GHS, chapter 2.6).
const FLAMMABLE_FLASH_C: f64 = 60.0;

/// Statements that make a vapour worse than a loss of reagent.
const HARMFUL_VAPOUR: [&str; 8] = [
    "H300", "H310", "H330", "H331", "H340", "H341", "H350", "H351",
];

/// Boiling, freezing and burning of the solvent between the two temperatures of a cell.
pub(super) fn of_solvent(solvent: &Solvent, coldest_c: f64, hottest_c: f64) -> Vec<Caution> {
    let Solvent {
        name,
        boiling_c,
        melting_c,
        ..
    } = solvent;
    let what = if solvent.parts.is_empty() {
        name.clone()
    } else {
        format!("the lowest-boiling part of {name}")
    };
    let mut found = Vec::new();
    if hottest_c > *boiling_c {
        let text = format!(
            "{what} boils at {boiling_c} °C, below {hottest_c} °C: pressure in a closed well"
        );
        found.push(Caution::warning(
            Category::AboveBoilingPoint,
            text,
            &solvent.source,
        ));
    }
    if coldest_c < *melting_c {
        let text = format!("{name} melts at {melting_c} °C, above {coldest_c} °C: it freezes");
        found.push(Caution::warning(
            Category::BelowMeltingPoint,
            text,
            &solvent.source,
        ));
    }
    found.extend(flammability(solvent, hottest_c));
    found
}

fn flammability(solvent: &Solvent, hottest_c: f64) -> Option<Caution> {
    let name = &solvent.name;
    let text = match solvent.flash_c {
        Some(flash) if hottest_c >= flash => {
            format!("{name} at {hottest_c} °C is at or above its flash point of {flash} °C")
        }
        Some(flash) if flash <= FLAMMABLE_FLASH_C && !states_flammable(&solvent.hazards) => {
            format!("{name} is flammable, flash point {flash} °C")
        }
        _ => return None,
    };
    Some(Caution::note(Category::Flammable, text, &solvent.source))
}

/// Boiling of the electrophile; worse where its vapour is a poison or a carcinogen.
pub(super) fn of_electrophile(named: &NamedElectrophile, temperature_c: f64) -> Option<Caution> {
    let boiling_c = named.boiling_c.filter(|boiling| temperature_c > *boiling)?;
    let text = format!(
        "{} boils at {boiling_c} °C, below {temperature_c} °C: it escapes from an open well",
        named.name
    );
    let caution = if is_harmful_vapour(&named.hazards) {
        Caution::warning
    } else {
        Caution::note
    };
    Some(caution(Category::AboveBoilingPoint, text, &named.source))
}

fn is_harmful_vapour(hazards: &Hazards) -> bool {
    HARMFUL_VAPOUR.iter().any(|code| hazards.has(code))
}
