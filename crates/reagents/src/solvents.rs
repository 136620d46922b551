//! Reads the table of solvents.

use enolattice_molecule::AnionClass;

use crate::row::Row;
use crate::table::{Lined, Table, TableText};
use crate::{LibraryError, Solvent, SolventClass, Value};

pub(crate) const COLUMNS: [&str; 28] = [
    "name",
    "synonyms",
    "cas",
    "smiles",
    "formula",
    "class",
    "permittivity",
    "hydrogen_bond_donation",
    "hydrogen_bond_acceptance",
    "donor_number",
    "viscosity_mpa_s",
    "density_g_ml",
    "boiling_c",
    "melting_c",
    "flash_c",
    "grade",
    "water_ppm",
    "water_miscible",
    "peroxide_former",
    "acid_pka",
    "acid_pka_sigma",
    "acid_class",
    "acid_pka_source",
    "h_codes",
    "h_source",
    "h_date",
    "date",
    "source",
];

/// Words of the tables for the classes of solvents.
pub(crate) const CLASSES: [(&str, SolventClass); 6] = [
    (SolventClass::Ether.name(), SolventClass::Ether),
    (SolventClass::Hydrocarbon.name(), SolventClass::Hydrocarbon),
    (SolventClass::Halogenated.name(), SolventClass::Halogenated),
    (
        SolventClass::DipolarAprotic.name(),
        SolventClass::DipolarAprotic,
    ),
    (SolventClass::Alcohol.name(), SolventClass::Alcohol),
    (SolventClass::Water.name(), SolventClass::Water),
];

const ACID_CLASSES: [(&str, AnionClass); 12] = [
    ("ketone", AnionClass::Ketone),
    ("ester", AnionClass::Ester),
    ("amide", AnionClass::Amide),
    ("nitrile", AnionClass::Nitrile),
    ("nitronate", AnionClass::Nitronate),
    ("sulfone", AnionClass::Sulfone),
    ("carbanion", AnionClass::Carbanion),
    ("alkoxide", AnionClass::Alkoxide),
    ("hydroxide", AnionClass::Hydroxide),
    ("carboxylate", AnionClass::Carboxylate),
    ("amide nitrogen", AnionClass::AmideNitrogen),
    ("alkyl nitrogen", AnionClass::AlkylNitrogen),
];

/// All solvents of the table, or all its faults.
pub(crate) fn read(text: TableText<'_>) -> Result<Vec<Lined<Solvent>>, Vec<LibraryError>> {
    Table::cut(text, &COLUMNS)
        .map_err(|fault| vec![fault])?
        .read(solvent)
}

fn solvent(row: Row<'_>) -> Option<Solvent> {
    row.names_without('/');
    let acid = acid(row);
    let density_g_ml = row.number("density_g_ml", 0.5, 3.0);
    // The structure comes last: without one there is no molar mass, hence no record.
    let mut solvent = Solvent {
        name: row.text("name"),
        synonyms: row.list("synonyms"),
        cas: row.cas("cas"),
        smiles: row.text_or_empty("smiles"),
        formula: row.formula(),
        class: row.choice("class", &CLASSES),
        permittivity: row.number("permittivity", 1.5, 200.0),
        hydrogen_bond_donation: row.number("hydrogen_bond_donation", 0.0, 2.0),
        hydrogen_bond_acceptance: row.number("hydrogen_bond_acceptance", 0.0, 1.5),
        donor_number: row.optional_number("donor_number", 0.0, 80.0),
        viscosity_mpa_s: row.number("viscosity_mpa_s", 0.05, 100.0),
        density_g_ml,
        molar_mass_g_mol: 0.0,
        boiling_c: row.number("boiling_c", -50.0, 350.0),
        melting_c: row.number("melting_c", -190.0, 60.0),
        flash_c: row.optional_number("flash_c", -80.0, 200.0),
        grade: row.text("grade"),
        water_ppm: row.number("water_ppm", 0.0, 1e6),
        water_miscible: row.flag("water_miscible"),
        biphasic: false,
        peroxide_former: row.flag("peroxide_former"),
        acid_m: 0.0,
        acid,
        parts: Vec::new(),
        part_classes: Vec::new(),
        hazards: row.hazards(),
        date: row.month("date"),
        source: row.source("source"),
    };
    solvent.molar_mass_g_mol = row.molecule("smiles")?.molar_mass();
    if solvent.acid.is_some() {
        solvent.acid_m = solvent.concentration_m();
    }
    Some(solvent)
}

fn acid(row: Row<'_>) -> Option<(Value, AnionClass)> {
    row.optional("acid_pka")?;
    let class = row.choice("acid_class", &ACID_CLASSES);
    Some((row.value("acid_pka", 0.0, 60.0), class))
}
