//! A base, a solvent, and the two together.

use enolattice_reagents::{Base, BaseKind, Solvent, SolventClass};

use super::{
    Category, Caution, Severity, is_destroyed_by_protic_media, is_strong, statements, temperature,
};

/// Solvents in which sodium hydride has run away: Yang and others, Org. Process Res. Dev. 2019,
/// 23, 2210 (DMSO, DMF, DMAc; from memory). NMP stands with them as an amide.
const RUNAWAY_WITH_HYDRIDE: [&str; 4] = ["DMSO", "DMF", "DMAc", "NMP"];

/// Above this the mixtures decompose by themselves in reach of a working day (from memory of
/// the same paper and of the accidents that it collects).
const HYDRIDE_STOP_C: f64 = 50.0;

/// DMSO decomposes by itself at lower temperature where halides, acids or bases are in it
/// (Yang and others, Org. Process Res. Dev. 2020, 24, 916; from memory).
const DMSO_WARM_C: f64 = 100.0;

/// Hydrogencarbonates give off carbon dioxide from about here (common practice).
const HYDROGENCARBONATE_C: f64 = 60.0;

/// Cautions of a base and a solvent at the temperatures of a cell.
pub fn base_solvent_cautions(
    base: &Base,
    solvent: &Solvent,
    temperature_c: f64,
    formation_temperature_c: f64,
) -> Vec<Caution> {
    let coldest_c = temperature_c.min(formation_temperature_c);
    let hottest_c = temperature_c.max(formation_temperature_c);
    let mut found = of_base(base, hottest_c);
    found.extend(of_solvent(solvent));
    found.extend(temperature::of_solvent(solvent, coldest_c, hottest_c));
    found.extend(protic(base, solvent));
    found.extend(hydride(base, solvent, hottest_c));
    found.extend(chlorinated(base, solvent));
    found.extend(condensing(base, solvent));
    if solvent.name == "DMSO" && hottest_c > DMSO_WARM_C {
        let text = format!(
            "DMSO with {} at {hottest_c} °C may decompose by itself",
            base.name
        );
        found.push(Caution::warning(Category::Runaway, text));
    }
    found
}

fn of_base(base: &Base, hottest_c: f64) -> Vec<Caution> {
    let name = &base.name;
    let mut found = statements::of_statements(name, &base.hazards);
    if temperature::states_flammable(&base.hazards) {
        let text = format!("{name} as supplied ({}) is flammable", base.supplied);
        found.push(Caution::note(Category::Flammable, text));
    }
    match base.kind {
        BaseKind::Organolithium => found.push(Caution::warning(
            Category::Pyrophoric,
            format!("{name} catches fire in air: inert gas, no open transfer"),
        )),
        BaseKind::Amide => found.push(Caution::note(
            Category::Pyrophoric,
            format!("{name} may catch fire in moist air: handle as pyrophoric"),
        )),
        BaseKind::Hydride => {
            let text = format!("{name} gives off hydrogen, one mole for each mole of acid");
            found.push(Caution::note(Category::Gas, text));
        }
        BaseKind::Carbonate if base.smiles.contains('C') && hottest_c >= HYDROGENCARBONATE_C => {
            let text = format!("hydrogencarbonate from {name} gives off carbon dioxide when warm");
            found.push(Caution::note(Category::Gas, text));
        }
        _ => {}
    }
    if name == "KH" {
        let text = "KH catches fire in air once the oil is washed off";
        found.push(Caution::warning(Category::Pyrophoric, text));
    }
    if name == "NaNH2" {
        let text = "NaNH2 grows explosive on storage in air: discard what is yellow or brown";
        found.push(Caution::note(Category::Explosive, text));
        found.push(Caution::note(
            Category::Gas,
            "NaNH2 gives off ammonia with acids",
        ));
    }
    found
}

fn of_solvent(solvent: &Solvent) -> Vec<Caution> {
    let mut found = statements::of_statements(&solvent.name, &solvent.hazards);
    if solvent.peroxide_former {
        let text = format!(
            "{} forms peroxides on storage: test before use",
            solvent.name
        );
        found.push(Caution::note(Category::PeroxideFormer, text));
    }
    found
}

/// Water and alcohols on bases that they destroy.
fn protic(base: &Base, solvent: &Solvent) -> Vec<Caution> {
    let is_water = solvent.class == SolventClass::Water;
    let is_protic = is_water || solvent.class == SolventClass::Alcohol;
    if !is_protic || !is_destroyed_by_protic_media(base) {
        return Vec::new();
    }
    let severity = match base.kind {
        _ if is_water => Severity::Stop,
        BaseKind::Organolithium => Severity::Stop,
        _ => Severity::Warning,
    };
    let mut found = vec![Caution {
        category: Category::Violent,
        severity,
        text: format!("{} reacts violently with {}", base.name, solvent.name),
    }];
    let gas = match base.kind {
        BaseKind::Hydride => Some("hydrogen"),
        BaseKind::Organolithium => Some("a flammable hydrocarbon"),
        _ => None,
    };
    if let Some(gas) = gas {
        let text = format!("{} gives off {gas} in {}", base.name, solvent.name);
        found.push(Caution::warning(Category::Gas, text));
    }
    found
}

/// Saline hydrides in solvents that they attack, or over whose vapour they give hydrogen.
fn hydride(base: &Base, solvent: &Solvent, hottest_c: f64) -> Vec<Caution> {
    if base.kind != BaseKind::Hydride {
        return Vec::new();
    }
    let mut found = Vec::new();
    if RUNAWAY_WITH_HYDRIDE.contains(&solvent.name.as_str()) {
        let severity = if hottest_c > HYDRIDE_STOP_C {
            Severity::Stop
        } else {
            Severity::Warning
        };
        found.push(Caution {
            category: Category::Runaway,
            severity,
            text: format!(
                "{} in {} decomposes with heat and gas; runaways are published",
                base.name, solvent.name
            ),
        });
    }
    if solvent.flash_c.is_some_and(|flash| hottest_c >= flash) {
        let text = format!(
            "hydrogen from {} over {} above its flash point: vent, no source of ignition",
            base.name, solvent.name
        );
        found.push(Caution::warning(Category::Flammable, text));
    }
    found
}

/// Strong bases in chlorinated solvents: carbenes, carbenoids, elimination.
fn chlorinated(base: &Base, solvent: &Solvent) -> Vec<Caution> {
    if solvent.class != SolventClass::Halogenated || !is_strong(base) {
        return Vec::new();
    }
    let (base_name, name) = (&base.name, &solvent.name);
    // Chloroform is attacked at once; a lithiated haloalkane decomposes by itself when it warms.
    let at_once = name == "CHCl3" || base.kind == BaseKind::Organolithium;
    let severity = if at_once {
        Severity::Stop
    } else {
        Severity::Warning
    };
    let caution = |category, text| Caution {
        category,
        severity,
        text,
    };
    let mut found = vec![
        caution(
            Category::Violent,
            format!("{base_name} may react violently with {name}"),
        ),
        caution(
            Category::Runaway,
            format!("{base_name} in {name} may run away after a delay"),
        ),
    ];
    if name == "DCE" {
        let text = format!("{base_name} makes vinyl chloride of DCE: a gas and a carcinogen");
        found.push(Caution::warning(Category::Gas, text.clone()));
        found.push(Caution::warning(Category::Carcinogen, text));
    }
    found
}

/// Strong bases in solvents that condense with themselves.
fn condensing(base: &Base, solvent: &Solvent) -> Option<Caution> {
    if !matches!(solvent.name.as_str(), "acetone" | "MeCN" | "EtOAc") || !is_strong(base) {
        return None;
    }
    let text = format!(
        "{} makes {} condense with itself, with heat",
        base.name, solvent.name
    );
    Some(if is_destroyed_by_protic_media(base) {
        Caution::warning(Category::Runaway, text)
    } else {
        Caution::note(Category::Runaway, text)
    })
}
