//! An electrophile alone, in a solvent, and with a base.

use enolattice_molecule::Molecule;
use enolattice_reagents::{Base, BaseKind, Hazards, NamedElectrophile, Solvent, SolventClass};

use super::groups::{
    Leaving, alkylators, enolisable_aldehyde, explosive_group, has_strained_heterocycle,
    polymerisable,
};
use super::{Category, Caution, is_strong, statements, temperature};

/// Cautions of an electrophile and a solvent at the temperature of the reaction.
pub fn electrophile_solvent_cautions(
    electrophile: &Molecule,
    named: Option<&NamedElectrophile>,
    solvent: &Solvent,
    temperature_c: f64,
) -> Vec<Caution> {
    let name = named.map_or("the electrophile", |named| named.name.as_str());
    let mut found = Vec::new();
    if let Some(named) = named {
        found.extend(statements::of_statements(name, &named.hazards));
        found.extend(temperature::of_electrophile(named, temperature_c));
        if temperature::states_flammable(&named.hazards) {
            found.push(Caution::note(
                Category::Flammable,
                format!("{name} is flammable"),
            ));
        }
    }
    found.extend(explosive_group(electrophile, name));
    found.extend(alkylating(
        electrophile,
        name,
        named.map(|named| &named.hazards),
    ));
    found.extend(in_solvent(electrophile, name, solvent));
    found
}

/// What alkylates bench reagents alkylates DNA (common practice), whether or not it is listed.
fn alkylating(electrophile: &Molecule, name: &str, hazards: Option<&Hazards>) -> Vec<Caution> {
    let groups = alkylators(electrophile);
    let mut found = Vec::new();
    let listed = |codes: &[&str]| hazards.is_some_and(|h| codes.iter().any(|code| h.has(code)));
    let alkylates =
        has_strained_heterocycle(electrophile) || groups.iter().any(|group| group.is_reactive());
    if alkylates && !listed(&["H340", "H341", "H350", "H351"]) {
        let text = format!("{name} is an alkylating agent: treat as a suspected carcinogen");
        found.push(Caution::note(Category::Carcinogen, text));
    }
    if groups.iter().any(|group| group.is_fierce()) && !listed(&["H300", "H310", "H330"]) {
        let text = format!("{name}: reactive sulfates and triflates of small alkyls are poisons");
        found.push(Caution::warning(Category::AcutelyToxic, text));
    }
    if groups.iter().any(|group| group.propargyl) {
        let text = format!("{name}: propargyl halides detonate by shock or heat when undiluted");
        found.push(Caution::warning(Category::Explosive, text));
    }
    found
}

/// Solvents that the electrophile attacks (common practice).
fn in_solvent(electrophile: &Molecule, name: &str, solvent: &Solvent) -> Option<Caution> {
    let groups = alkylators(electrophile);
    let fierce = groups.iter().any(|group| group.is_fierce());
    let triflate = groups
        .iter()
        .any(|group| group.leaving == Leaving::Triflate);
    let runaway = |text: String| Some(Caution::warning(Category::Runaway, text));
    let solvent_name = &solvent.name;
    match solvent.class {
        _ if solvent_name == "DMSO" && (fierce || groups.iter().any(|g| g.alpha_acceptor)) => {
            runaway(format!("{name} oxidises or alkylates DMSO, with heat"))
        }
        _ if solvent_name == "DMSO" && groups.iter().any(|group| group.is_reactive()) => {
            Some(Caution::note(
                Category::Runaway,
                format!("{name} alkylates DMSO slowly, with heat"),
            ))
        }
        SolventClass::DipolarAprotic if triflate => {
            runaway(format!("{name} alkylates {solvent_name}, with heat"))
        }
        SolventClass::Ether if triflate => runaway(format!(
            "{name} opens cyclic ethers and may polymerise them"
        )),
        SolventClass::Alcohol | SolventClass::Water if triflate => Some(Caution::warning(
            Category::Violent,
            format!("{name} reacts violently with {solvent_name}"),
        )),
        _ => None,
    }
}

/// Cautions of a base and an electrophile, in whatever solvent.
pub fn base_electrophile_cautions(base: &Base, electrophile: &Molecule) -> Vec<Caution> {
    let mut found = Vec::new();
    found.extend(polymerisation(base, electrophile));
    found.extend(alkylated_base(base, electrophile));
    if is_strong(base) && enolisable_aldehyde(electrophile) {
        let text = format!(
            "{} makes an aldehyde with an α-hydrogen condense, with heat",
            base.name
        );
        found.push(Caution::note(Category::Runaway, text));
    }
    found
}

/// Acrylates, acrylonitrile, vinyl ketones and their kin polymerise with base (common practice).
fn polymerisation(base: &Base, electrophile: &Molecule) -> Option<Caution> {
    let acceptor = polymerisable(electrophile)?;
    let text = format!("{acceptor} polymerises with {}, with much heat", base.name);
    // Vinyl aldehydes and ketones go with amines too.
    let with_any_base = matches!(acceptor, "a vinyl aldehyde" | "a vinyl ketone");
    Some(if is_strong(base) || with_any_base {
        Caution::warning(Category::Runaway, text)
    } else {
        Caution::note(Category::Runaway, text)
    })
}

/// Bases that the electrophile consumes with heat.
fn alkylated_base(base: &Base, electrophile: &Molecule) -> Option<Caution> {
    let groups = alkylators(electrophile);
    let fierce = groups.iter().any(|group| group.is_fierce());
    let reactive = groups.iter().any(|group| group.is_reactive());
    match base.kind {
        // A crowded amine or amidine is alkylated too slowly to be dangerous, but by a triflate.
        BaseKind::Amine if fierce => Some(Caution::warning(
            Category::Violent,
            format!("{} is alkylated at once, with much heat", base.name),
        )),
        BaseKind::Amine if reactive => Some(Caution::note(
            Category::Violent,
            format!("{} is alkylated, with heat when concentrated", base.name),
        )),
        BaseKind::Hydroxide | BaseKind::Alkoxide | BaseKind::Hydride if fierce => {
            Some(Caution::warning(
                Category::Violent,
                format!("{} reacts violently with sulfates and triflates", base.name),
            ))
        }
        BaseKind::Organolithium if !groups.is_empty() => Some(Caution::note(
            Category::Violent,
            format!(
                "{} exchanges or couples with alkyl halides, with heat",
                base.name
            ),
        )),
        _ => None,
    }
}
