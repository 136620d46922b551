//! Reads the table of bases.

use enolattice_molecule::AnionClass;

use crate::row::Row;
use crate::solvents::CLASSES as SOLVENT_CLASSES;
use crate::table::{Lined, Table, TableText};
use crate::{Base, BaseKind, Cation, Decay, LibraryError, SolventClass, Supply};

pub(crate) const COLUMNS: [&str; 34] = [
    "name",
    "synonyms",
    "cas",
    "smiles",
    "formula",
    "conjugate_acid",
    "kind",
    "cation",
    "class",
    "pka_dmso",
    "pka_dmso_sigma",
    "pka_dmso_source",
    "bulk",
    "bulk_sigma",
    "bulk_source",
    "nucleophilicity",
    "nucleophilicity_sigma",
    "nucleophilicity_source",
    "log_solubility",
    "log_solubility_in",
    "dissolution_per_s",
    "supply",
    "supplied",
    "supply_m",
    "supply_solvent",
    "water_equiv",
    "water_source",
    "decay",
    "decay_source",
    "h_codes",
    "h_source",
    "h_date",
    "date",
    "source",
];

const KINDS: [(&str, BaseKind); 10] = [
    ("amide", BaseKind::Amide),
    ("alkoxide", BaseKind::Alkoxide),
    ("hydroxide", BaseKind::Hydroxide),
    ("hydride", BaseKind::Hydride),
    ("carbonate", BaseKind::Carbonate),
    ("fluoride", BaseKind::Fluoride),
    ("carboxylate", BaseKind::Carboxylate),
    ("amine", BaseKind::Amine),
    ("organolithium", BaseKind::Organolithium),
    ("Grignard", BaseKind::Grignard),
];

/// Words of the tables for counter-ions.
pub(crate) const CATIONS: [(&str, Cation); 10] = [
    ("Li", Cation::Lithium),
    ("Na", Cation::Sodium),
    ("K", Cation::Potassium),
    ("Cs", Cation::Caesium),
    ("R4N", Cation::Ammonium),
    ("Mg", Cation::Magnesium),
    ("Ca", Cation::Calcium),
    ("Ba", Cation::Barium),
    ("Zn", Cation::Zinc),
    ("none", Cation::None),
];

const CLASSES: [(&str, AnionClass); 11] = [
    ("alkyl nitrogen", AnionClass::AlkylNitrogen),
    ("silyl nitrogen", AnionClass::SilylNitrogen),
    ("alkoxide", AnionClass::Alkoxide),
    ("phenoxide", AnionClass::Phenoxide),
    ("hydroxide", AnionClass::Hydroxide),
    ("hydride", AnionClass::Hydride),
    ("carbonate", AnionClass::Carbonate),
    ("carboxylate", AnionClass::Carboxylate),
    ("fluoride", AnionClass::Fluoride),
    ("carbanion", AnionClass::Carbanion),
    ("neutral", AnionClass::Neutral),
];

const SUPPLIES: [(&str, Supply); 5] = [
    ("solid", Supply::Solid),
    ("liquid", Supply::Liquid),
    ("dispersion", Supply::Dispersion),
    ("solution", Supply::Solution),
    ("made in the pot", Supply::MadeInThePot),
];

/// All bases of the table, or all its faults.
pub(crate) fn read(text: TableText<'_>) -> Result<Vec<Lined<Base>>, Vec<LibraryError>> {
    Table::cut(text, &COLUMNS)
        .map_err(|fault| vec![fault])?
        .read(|row| Some(base(row)))
}

fn base(row: Row<'_>) -> Base {
    let log_solubility = solubilities_by_class(row);
    let dissolution = row.optional_number("dissolution_per_s", 1e-6, 1e3);
    if dissolution.is_some() == log_solubility.is_empty() {
        row.fault(
            "dissolution_per_s",
            "goes with `log_solubility`, and only with it",
        );
    }
    let decay = decays(row);
    let decay_source = if decay.is_empty() {
        row.text_or_empty("decay_source")
    } else {
        row.source("decay_source")
    };
    if decay.is_empty() && !decay_source.is_empty() {
        row.fault("decay_source", "goes with `decay`, and only with it");
    }
    Base {
        name: row.text("name"),
        synonyms: row.list("synonyms"),
        cas: row.cas("cas"),
        smiles: row.salt("smiles"),
        formula: row.formula(),
        conjugate_acid: row.salt("conjugate_acid"),
        kind: row.choice("kind", &KINDS),
        cation: row.choice("cation", &CATIONS),
        class: row.choice("class", &CLASSES),
        pka_dmso: row.value("pka_dmso", -5.0, 60.0),
        bulk: row.value("bulk", 0.0, 2.0),
        nucleophilicity: row.value("nucleophilicity", -15.0, 10.0),
        log_solubility,
        log_solubility_in: solubilities_by_solvent(row),
        dissolution_per_s: dissolution.unwrap_or(0.0),
        supply: row.choice("supply", &SUPPLIES),
        supplied: row.text("supplied"),
        supply_m: row.optional_number("supply_m", 0.01, 20.0),
        supply_solvent: solution_solvent(row),
        water_equiv: row.number("water_equiv", 0.0, 100.0),
        water_source: row.source("water_source"),
        decay,
        decay_source,
        hazards: row.hazards(),
        date: row.month("date"),
        source: row.source("source"),
    }
}

/// The solvent of a solution, which has a concentration too; nothing else has either.
fn solution_solvent(row: Row<'_>) -> Option<String> {
    let is_solution = row.optional("supply") == Some("solution");
    for column in ["supply_m", "supply_solvent"] {
        if row.optional(column).is_some() != is_solution {
            row.fault(column, "goes with the supply `solution`, and only with it");
        }
    }
    row.optional("supply_solvent").map(str::to_owned)
}

/// Cells of the form `ether -4.2; alcohol -2`.
fn solubilities_by_class(row: Row<'_>) -> Vec<(SolventClass, f64)> {
    let column = "log_solubility";
    let entries = row.list(column);
    let named = entries
        .iter()
        .filter_map(|entry| named_log(row, column, entry));
    named
        .map(|(name, log)| (row.chosen(column, name, &SOLVENT_CLASSES), log))
        .collect()
}

/// Cells of the form `acetone -3; MeCN -3`.
fn solubilities_by_solvent(row: Row<'_>) -> Vec<(String, f64)> {
    let column = "log_solubility_in";
    let entries = row.list(column);
    let named = entries
        .iter()
        .filter_map(|entry| named_log(row, column, entry));
    named.map(|(name, log)| (name.to_owned(), log)).collect()
}

fn named_log<'a>(row: Row<'_>, column: &str, entry: &'a str) -> Option<(&'a str, f64)> {
    let Some((name, number)) = entry.rsplit_once(' ') else {
        row.fault(column, format!("`{entry}` is not a name and a number"));
        return None;
    };
    Some((name.trim(), row.bounded(column, number, -12.0, 2.0)))
}

/// Cells of the form `THF 20 1.8; Et2O 20 153`: solvent, °C, half-life in hours.
fn decays(row: Row<'_>) -> Vec<Decay> {
    let entry = |entry: String| {
        let mut words = entry.rsplitn(3, ' ');
        let (hours, celsius, name) = (words.next(), words.next(), words.next());
        let (Some(hours), Some(celsius), Some(name)) = (hours, celsius, name) else {
            row.fault(
                "decay",
                format!("`{entry}` is not a solvent, a temperature and a half-life"),
            );
            return None;
        };
        Some(Decay {
            solvent: name.trim().to_owned(),
            temperature_c: row.bounded("decay", celsius, -120.0, 300.0),
            half_life_h: row.bounded("decay", hours, 1e-4, 1e5),
        })
    };
    row.list("decay").into_iter().filter_map(entry).collect()
}
