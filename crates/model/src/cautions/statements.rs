//! Cautions that follow from the hazard statements of one substance.

use enolattice_reagents::Hazards;

use super::{Category, Caution, Severity};

/// GHS statements that make a caution (UN GHS, annex 3).
const STATEMENTS: [(&str, Category, Severity); 21] = [
    ("H200", Category::Explosive, Severity::Warning),
    ("H201", Category::Explosive, Severity::Warning),
    ("H240", Category::Explosive, Severity::Warning),
    ("H241", Category::Explosive, Severity::Warning),
    ("H250", Category::Pyrophoric, Severity::Warning),
    ("H228", Category::Flammable, Severity::Note),
    ("H251", Category::Flammable, Severity::Note),
    ("H252", Category::Flammable, Severity::Note),
    ("H260", Category::Flammable, Severity::Note),
    ("H260", Category::Gas, Severity::Note),
    ("H261", Category::Gas, Severity::Note),
    ("H300", Category::AcutelyToxic, Severity::Warning),
    ("H310", Category::AcutelyToxic, Severity::Warning),
    ("H330", Category::AcutelyToxic, Severity::Warning),
    ("H301", Category::AcutelyToxic, Severity::Note),
    ("H311", Category::AcutelyToxic, Severity::Note),
    ("H331", Category::AcutelyToxic, Severity::Note),
    ("H340", Category::Carcinogen, Severity::Warning),
    ("H350", Category::Carcinogen, Severity::Warning),
    ("H341", Category::Carcinogen, Severity::Note),
    ("H351", Category::Carcinogen, Severity::Note),
];

/// The cautions of a substance's statements, one a category, at the highest severity.
pub(super) fn of_statements(name: &str, hazards: &Hazards) -> Vec<Caution> {
    let stated = STATEMENTS.iter().filter(|(code, ..)| hazards.has(code));
    let mut found: Vec<(Category, Severity, Vec<&str>)> = Vec::new();
    for &(code, category, severity) in stated {
        match found.iter_mut().find(|(known, ..)| *known == category) {
            Some((_, highest, codes)) => {
                *highest = severity.max(*highest);
                codes.push(code);
            }
            None => found.push((category, severity, vec![code])),
        }
    }
    let caution = |(category, severity, codes): (Category, Severity, Vec<&str>)| Caution {
        category,
        severity,
        text: format!("{name}: {} ({})", codes.join(", "), hazards.source),
    };
    found.into_iter().map(caution).collect()
}

/// What is known of a substance's hazards, as a sentence; says so where nothing is.
pub fn hazard_statements(name: &str, hazards: Option<&Hazards>) -> String {
    match hazards {
        Some(known) if !known.h_codes.is_empty() => {
            let codes = known.h_codes.join(", ");
            format!(
                "hazards of {name}: {codes} ({}, {})",
                known.source, known.date
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
