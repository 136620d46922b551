//! Temperatures against boiling, melting and flash points.

use enolattice_reagents::{Hazards, NamedElectrophile, Solvent};

use super::{Category, Caution};

/// Flammable by the GHS: a flash point of at most 60 °C (UN GHS, chapter 2.6).
const FLAMMABLE_FLASH_C: f64 = 60.0;

/// Statements for flammable liquids; H227 (combustible, up to 93 °C) is left to the flash point.
const FLAMMABLE_STATEMENTS: [&str; 3] = ["H224", "H225", "H226"];

/// Boiling, freezing and burning of the solvent between the two temperatures of a cell.
pub(super) fn of_solvent(solvent: &Solvent, coldest_c: f64, hottest_c: f64) -> Vec<Caution> {
    let Solvent {
        name,
        boiling_c,
        melting_c,
        ..
    } = solvent;
    let mut found = Vec::new();
    if hottest_c > *boiling_c {
        found.push(Caution::warning(
            Category::AboveBoilingPoint,
            format!(
                "{name} boils at {boiling_c} °C, below {hottest_c} °C: pressure in a closed well"
            ),
        ));
    }
    if coldest_c < *melting_c {
        found.push(Caution::warning(
            Category::BelowMeltingPoint,
            format!("{name} melts at {melting_c} °C, above {coldest_c} °C: it freezes"),
        ));
    }
    found.extend(flammability(solvent, hottest_c));
    found
}

fn flammability(solvent: &Solvent, hottest_c: f64) -> Option<Caution> {
    let name = &solvent.name;
    let text = match solvent.flash_c {
        Some(flash) if hottest_c >= flash => {
            format!("{name} is at or above its flash point of {flash} °C")
        }
        Some(flash) if flash <= FLAMMABLE_FLASH_C => {
            format!("{name} is flammable, flash point {flash} °C")
        }
        _ if states_flammable(&solvent.hazards) => format!("{name} is flammable"),
        _ => return None,
    };
    Some(Caution::note(Category::Flammable, text))
}

/// Whether a hazard statement calls the substance a flammable liquid.
pub(super) fn states_flammable(hazards: &Hazards) -> bool {
    FLAMMABLE_STATEMENTS.iter().any(|code| hazards.has(code))
}

/// Boiling of the electrophile; worse where its vapour is a poison or a carcinogen.
pub(super) fn of_electrophile(named: &NamedElectrophile, temperature_c: f64) -> Option<Caution> {
    let boiling_c = named.boiling_c.filter(|boiling| temperature_c > *boiling)?;
    let text = format!(
        "{} boils at {boiling_c} °C, below {temperature_c} °C: it escapes from an open well",
        named.name
    );
    let harmful = ["H330", "H331", "H340", "H341", "H350", "H351"];
    Some(if harmful.iter().any(|code| named.hazards.has(code)) {
        Caution::warning(Category::AboveBoilingPoint, text)
    } else {
        Caution::note(Category::AboveBoilingPoint, text)
    })
}
