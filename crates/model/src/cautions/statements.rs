//! Cautions that follow from the hazard statements of one substance.
//!
//! The list of categories is closed and has none for toxicity to reproduction, to organs, to skin
//! and eyes or to the environment. Such statements make no caution, since that would misname
//! them; [`hazard_statements`] says them in words beside the cautions.

use enolattice_reagents::Hazards;

use super::phrases::phrase;
use super::{Category, Caution, Severity};

/// GHS statements that make a caution (UN GHS, annex 3; EUH statements: Regulation (EC)
/// 1272/2008, annex III). The severity is ours.
pub(super) const STATEMENTS: &[(&str, Category, Severity)] = &[
    ("H200", Category::Explosive, Severity::Warning),
    ("H201", Category::Explosive, Severity::Warning),
    ("H202", Category::Explosive, Severity::Warning),
    ("H203", Category::Explosive, Severity::Warning),
    ("H204", Category::Explosive, Severity::Note),
    ("H205", Category::Explosive, Severity::Warning),
    ("H206", Category::Explosive, Severity::Warning),
    ("H207", Category::Explosive, Severity::Warning),
    ("H208", Category::Explosive, Severity::Warning),
    ("H209", Category::Explosive, Severity::Warning),
    ("H210", Category::Explosive, Severity::Warning),
    ("H211", Category::Explosive, Severity::Note),
    ("H220", Category::Flammable, Severity::Warning),
    ("H221", Category::Flammable, Severity::Note),
    ("H222", Category::Flammable, Severity::Note),
    ("H223", Category::Flammable, Severity::Note),
    ("H224", Category::Flammable, Severity::Note),
    ("H225", Category::Flammable, Severity::Note),
    ("H226", Category::Flammable, Severity::Note),
    ("H228", Category::Flammable, Severity::Note),
    ("H230", Category::Explosive, Severity::Warning),
    ("H231", Category::Explosive, Severity::Warning),
    ("H232", Category::Pyrophoric, Severity::Warning),
    ("H240", Category::Explosive, Severity::Warning),
    ("H241", Category::Explosive, Severity::Warning),
    ("H242", Category::Runaway, Severity::Note),
    ("H250", Category::Pyrophoric, Severity::Warning),
    ("H251", Category::Flammable, Severity::Note),
    ("H252", Category::Flammable, Severity::Note),
    ("H260", Category::Flammable, Severity::Note),
    ("H260", Category::Gas, Severity::Note),
    ("H261", Category::Flammable, Severity::Note),
    ("H261", Category::Gas, Severity::Note),
    ("H270", Category::Runaway, Severity::Warning),
    ("H271", Category::Runaway, Severity::Warning),
    ("H272", Category::Runaway, Severity::Note),
    ("H280", Category::Gas, Severity::Note),
    ("H281", Category::Gas, Severity::Note),
    ("H300", Category::AcutelyToxic, Severity::Warning),
    ("H310", Category::AcutelyToxic, Severity::Warning),
    ("H330", Category::AcutelyToxic, Severity::Warning),
    ("H301", Category::AcutelyToxic, Severity::Note),
    ("H311", Category::AcutelyToxic, Severity::Note),
    ("H331", Category::AcutelyToxic, Severity::Note),
    ("H340", Category::Carcinogen, Severity::Warning),
    ("H341", Category::Carcinogen, Severity::Note),
    ("H350", Category::Carcinogen, Severity::Warning),
    ("H351", Category::Carcinogen, Severity::Note),
    ("EUH001", Category::Explosive, Severity::Warning),
    ("EUH006", Category::Explosive, Severity::Warning),
    ("EUH014", Category::Violent, Severity::Note),
    ("EUH018", Category::Flammable, Severity::Note),
    ("EUH019", Category::PeroxideFormer, Severity::Note),
    ("EUH029", Category::AcutelyToxic, Severity::Note),
    ("EUH031", Category::AcutelyToxic, Severity::Note),
    ("EUH032", Category::AcutelyToxic, Severity::Warning),
    ("EUH044", Category::Explosive, Severity::Warning),
    ("EUH070", Category::AcutelyToxic, Severity::Note),
];

/// The cautions of a substance's statements, one a category, at the highest severity.
pub(super) fn of_statements(name: &str, hazards: &Hazards) -> Vec<Caution> {
    let stated = STATEMENTS.iter().filter(|(code, ..)| hazards.has(code));
    let mut found: Vec<(Category, Severity, Vec<String>)> = Vec::new();
    for &(code, category, severity) in stated {
        let words = in_words(code);
        match found.iter_mut().find(|(known, ..)| *known == category) {
            Some((_, highest, stated)) => {
                *highest = severity.max(*highest);
                stated.push(words);
            }
            None => found.push((category, severity, vec![words])),
        }
    }
    let caution = |(category, severity, stated): (Category, Severity, Vec<String>)| Caution {
        category,
        severity,
        text: format!("{name}: {}", stated.join("; ")),
        source: sourced(hazards),
    };
    found.into_iter().map(caution).collect()
}

/// Whether a hazard statement calls the substance a flammable liquid or gas.
pub(super) fn states_flammable(hazards: &Hazards) -> bool {
    ["H220", "H221", "H224", "H225", "H226"]
        .iter()
        .any(|code| hazards.has(code))
}

fn in_words(code: &str) -> String {
    match phrase(code) {
        Some(words) => format!("{code} {words}"),
        None => code.to_owned(),
    }
}

fn sourced(hazards: &Hazards) -> String {
    match hazards.date.as_str() {
        "" => format!("hazard statements: {}", hazards.source),
        date => format!("hazard statements: {}, {date}", hazards.source),
    }
}

/// What is known of a substance's hazards, as a sentence; says so where nothing is.
///
/// All statements stand there in words, those too for which there is no category of caution
/// (toxicity to reproduction, sensitisation, corrosion, the environment).
pub fn hazard_statements(name: &str, hazards: Option<&Hazards>) -> String {
    match hazards {
        Some(known) if !known.h_codes.is_empty() => {
            let codes: Vec<String> = known.h_codes.iter().map(|code| in_words(code)).collect();
            format!(
                "hazards of {name}: {} ({}, {})",
                codes.join("; "),
                known.source,
                known.date
            )
        }
        Some(known) if !known.is_unknown() => {
            format!(
                "hazards of {name}: no statement known ({}, {})",
                known.source, known.date
            )
        }
        _ => format!("hazards of {name}: unknown, consult the supplier's safety data sheet"),
    }
}
