//! Reads the table of solvents.

use enolattice_molecule::{AnionClass, Molecule};

use crate::table::{Row, Table, TableText};
use crate::{LibraryError, Solvent, SolventClass, Value};

const COLUMNS: [&str; 24] = [
    "name",
    "synonyms",
    "cas",
    "smiles",
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
    "water_ppm",
    "peroxide_former",
    "acid_pka",
    "acid_pka_sigma",
    "acid_class",
    "acid_pka_source",
    "h_codes",
    "h_source",
    "h_date",
    "source",
];

/// Words of the tables for the classes of solvents.
pub(crate) const CLASSES: [(&str, SolventClass); 6] = [
    ("ether", SolventClass::Ether),
    ("hydrocarbon", SolventClass::Hydrocarbon),
    ("halogenated", SolventClass::Halogenated),
    ("dipolar aprotic", SolventClass::DipolarAprotic),
    ("alcohol", SolventClass::Alcohol),
    ("water", SolventClass::Water),
];

const ACID_CLASSES: [(&str, AnionClass); 8] = [
    ("ketone", AnionClass::Ketone),
    ("ester", AnionClass::Ester),
    ("amide", AnionClass::Amide),
    ("nitrile", AnionClass::Nitrile),
    ("sulfone", AnionClass::Sulfone),
    ("carbanion", AnionClass::Carbanion),
    ("alkoxide", AnionClass::Alkoxide),
    ("hydroxide", AnionClass::Hydroxide),
];

/// All solvents of the table.
pub(crate) fn read(text: TableText) -> Result<Vec<Solvent>, LibraryError> {
    Table::read(text, &COLUMNS)?.rows().map(solvent).collect()
}

fn solvent(row: Row<'_>) -> Result<Solvent, LibraryError> {
    let smiles = row.text("smiles")?;
    let molecule = Molecule::parse(smiles).map_err(|e| row.fault("smiles", e.to_string()))?;
    Ok(Solvent {
        name: row.text("name")?.to_owned(),
        synonyms: row.list("synonyms"),
        cas: row.cas("cas")?,
        smiles: smiles.to_owned(),
        class: row.choice("class", &CLASSES)?,
        permittivity: row.number("permittivity", 1.5, 200.0)?,
        hydrogen_bond_donation: row.number("hydrogen_bond_donation", 0.0, 2.0)?,
        hydrogen_bond_acceptance: row.number("hydrogen_bond_acceptance", 0.0, 1.5)?,
        donor_number: row.optional_number("donor_number", 0.0, 80.0)?,
        viscosity_mpa_s: row.number("viscosity_mpa_s", 0.1, 100.0)?,
        density_g_ml: row.number("density_g_ml", 0.5, 3.0)?,
        molar_mass_g_mol: molecule.molar_mass(),
        boiling_c: row.number("boiling_c", -50.0, 350.0)?,
        melting_c: row.number("melting_c", -190.0, 60.0)?,
        flash_c: row.optional_number("flash_c", -80.0, 200.0)?,
        water_ppm: row.number("water_ppm", 0.0, 1e6)?,
        peroxide_former: row.flag("peroxide_former")?,
        acid: acid(row)?,
        hazards: row.hazards()?,
        source: row.source("source")?,
    })
}

fn acid(row: Row<'_>) -> Result<Option<(Value, AnionClass)>, LibraryError> {
    if row.optional("acid_pka").is_none() {
        return Ok(None);
    }
    let class = row.choice("acid_class", &ACID_CLASSES)?;
    Ok(Some((row.value("acid_pka", 0.0, 60.0)?, class)))
}
