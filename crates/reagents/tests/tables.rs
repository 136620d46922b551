//! One look over all tables: typos look like chemistry.

use std::collections::{BTreeMap, HashSet};
use std::path::PathBuf;

use enolattice_molecule::{Molecule, recognise};
use enolattice_reagents::{Cation, Library, Reagent};

/// A table as it lies on disk, independent of the reader under test.
struct Sheet {
    file: String,
    heading: Vec<String>,
    columns: Vec<String>,
    rows: Vec<Vec<String>>,
}

impl Sheet {
    fn column(&self, name: &str) -> Option<usize> {
        self.columns.iter().position(|c| c == name)
    }
}

fn sheets() -> Vec<Sheet> {
    let folder = PathBuf::from(env!("CARGO_MANIFEST_DIR")).join("data");
    let files = std::fs::read_dir(folder)
        .unwrap()
        .map(|entry| entry.unwrap().path());
    let mut sheets: Vec<Sheet> = files.map(sheet).collect();
    sheets.sort_by(|a, b| a.file.cmp(&b.file));
    sheets
}

fn sheet(path: PathBuf) -> Sheet {
    let text = std::fs::read_to_string(&path).unwrap();
    let (heading, body): (Vec<&str>, Vec<&str>) = text.lines().partition(|l| l.starts_with('#'));
    let cells = |line: &str| line.split('\t').map(str::to_owned).collect::<Vec<_>>();
    Sheet {
        file: path.file_name().unwrap().to_string_lossy().into_owned(),
        heading: heading.into_iter().map(str::to_owned).collect(),
        columns: cells(body[0]),
        rows: body[1..].iter().map(|line| cells(line)).collect(),
    }
}

fn library() -> Library {
    Library::builtin().unwrap_or_else(|fault| panic!("{fault}"))
}

#[test]
fn tables_have_the_expected_number_of_rows() {
    let counts: BTreeMap<String, usize> = sheets()
        .into_iter()
        .map(|s| (s.file, s.rows.len()))
        .collect();
    let expected = [
        ("acidities_ch.tsv", 316),
        ("acidities_remembered.tsv", 33),
        ("acidities_xh.tsv", 156),
        ("bases.tsv", 25),
        ("electrophiles.tsv", 59),
        ("electrophilicities.tsv", 42),
        ("solvents.tsv", 25),
    ];
    assert_eq!(
        counts,
        expected.map(|(file, rows)| (file.to_owned(), rows)).into()
    );
    let library = library();
    assert_eq!(library.acidities().len(), 316 + 156 + 33);
    assert_eq!(library.electrophilicities().len(), 42);
}

#[test]
fn every_table_states_title_units_and_licence_and_is_rectangular() {
    for sheet in sheets() {
        for key in ["# title: ", "# units: ", "# licence: "] {
            let stated = sheet
                .heading
                .iter()
                .any(|line| line.len() > key.len() && line.starts_with(key));
            assert!(stated, "{} has no `{key}`", sheet.file);
        }
        for row in &sheet.rows {
            assert_eq!(row.len(), sheet.columns.len(), "{}: {row:?}", sheet.file);
        }
    }
}

#[test]
fn every_source_is_given_and_every_declared_source_is_used() {
    for sheet in sheets() {
        let declared: HashSet<&str> = sheet
            .heading
            .iter()
            .filter_map(|line| line.strip_prefix("# source ")?.split_once(": "))
            .map(|(key, _)| key)
            .collect();
        let mut used = HashSet::new();
        for (index, _) in sheet
            .columns
            .iter()
            .enumerate()
            .filter(|(_, c)| c.ends_with("source"))
        {
            for row in &sheet.rows {
                // Only what is optional altogether (a solvent's own acidity) may have none.
                let optional = sheet.columns[index] == "acid_pka_source";
                assert!(
                    optional || !row[index].is_empty(),
                    "{}: {row:?}",
                    sheet.file
                );
                used.insert(row[index].as_str());
            }
        }
        let unused: Vec<_> = declared.difference(&used).collect();
        assert!(
            unused.is_empty(),
            "{} declares but does not use {unused:?}",
            sheet.file
        );
    }
}

#[test]
fn names_synonyms_and_cas_numbers_find_their_own_row() {
    let library = library();
    for reagent in library.search("") {
        let names = reagent.synonyms().iter().map(String::as_str);
        for name in names.chain([reagent.name(), reagent.cas()]) {
            let found = match reagent {
                Reagent::Base(_) => library.base(&name.to_uppercase()).map(|b| &b.name),
                Reagent::Solvent(_) => library.solvent(&name.to_uppercase()).map(|s| &s.name),
                Reagent::Electrophile(_) => {
                    library.electrophile(&name.to_uppercase()).map(|e| &e.name)
                }
            };
            assert_eq!(found.map(String::as_str), Some(reagent.name()), "{name}");
        }
    }
}

#[test]
fn a_cas_number_belongs_to_one_substance_only() {
    let library = library();
    let mut owners: BTreeMap<&str, &str> = BTreeMap::new();
    for reagent in library.search("") {
        let owner = owners.entry(reagent.cas()).or_insert(reagent.smiles());
        assert_eq!(*owner, reagent.smiles(), "{} is shared", reagent.cas());
    }
}

#[test]
fn every_structure_of_every_table_parses() {
    for sheet in sheets() {
        for name in ["smiles", "conjugate_acid"] {
            let Some(column) = sheet.column(name) else {
                continue;
            };
            for smiles in sheet.rows.iter().map(|row| &row[column]) {
                for fragment in organic_fragments(smiles) {
                    if let Err(fault) = Molecule::parse(fragment) {
                        panic!("{}: {smiles}: {fault}", sheet.file);
                    }
                }
            }
        }
    }
}

/// Counter-ions and hydrogen as salts and hydrides write them; the rest goes to the parser.
const INORGANIC: [(&str, i32, i32); 6] = [
    ("[Li+]", 1, 0),
    ("[Na+]", 1, 0),
    ("[K+]", 1, 0),
    ("[Cs+]", 1, 0),
    ("[H-]", -1, 1),
    ("[H][H]", 0, 2),
];

fn organic_fragments(smiles: &str) -> impl Iterator<Item = &str> {
    smiles
        .split('.')
        .filter(|fragment| INORGANIC.iter().all(|(ion, ..)| ion != fragment))
}

/// Charge, hydrogens and heavy atoms other than counter-ions.
fn composition(smiles: &str) -> (i32, i32, usize) {
    let mut sum = (0, 0, 0);
    for (_, charge, hydrogens) in smiles
        .split('.')
        .filter_map(|f| INORGANIC.iter().find(|(ion, ..)| *ion == f))
    {
        sum = (sum.0 + charge, sum.1 + hydrogens, sum.2);
    }
    for atom in organic_fragments(smiles).flat_map(|f| Molecule::parse(f).unwrap().atoms().to_vec())
    {
        sum = (
            sum.0 + i32::from(atom.charge),
            sum.1 + i32::from(atom.hydrogens),
            sum.2 + 1,
        );
    }
    sum
}

#[test]
fn a_base_is_neutral_and_its_conjugate_acid_has_one_hydrogen_more() {
    for base in library().bases() {
        let (charge, hydrogens, heavy) = composition(&base.smiles);
        let (acid_charge, acid_hydrogens, acid_heavy) = composition(&base.conjugate_acid);
        assert_eq!(charge, 0, "{} is not neutral as supplied", base.name);
        assert_eq!(heavy, acid_heavy, "{}", base.name);
        assert_eq!(acid_hydrogens - hydrogens, 1, "{}", base.name);
        // A neutral base gives a cation; an anion leaves its counter-ion behind.
        let expected = if base.cation == Cation::None { 1 } else { 0 };
        assert_eq!(acid_charge, expected, "{}", base.name);
    }
}

#[test]
fn single_solvents_named_by_a_base_are_in_the_table_of_solvents() {
    let library = library();
    for base in library.bases() {
        for (name, _) in &base.log_solubility_in {
            let solvent = library.solvent(name).map(|s| s.name.as_str());
            assert_eq!(solvent, Some(name.as_str()), "{}", base.name);
        }
    }
}

#[test]
fn the_reacting_group_of_every_named_electrophile_is_recognised() {
    for electrophile in library().electrophiles() {
        let molecule = Molecule::parse(&electrophile.smiles).unwrap();
        if let Err(reason) = recognise(&molecule) {
            panic!("{}: {reason}", electrophile.name);
        }
    }
}

/// Average molar masses by the IUPAC atomic weights of 2021, as handbooks print them.
#[test]
fn molar_masses_of_solvents_are_those_of_the_handbook() {
    let library = library();
    for (name, handbook) in [
        ("THF", 72.11),
        ("DMSO", 78.13),
        ("water", 18.015),
        ("DCM", 84.93),
        ("HMPA", 179.20),
    ] {
        let mass = library.solvent(name).unwrap().molar_mass_g_mol;
        assert!((mass - handbook).abs() < 0.01, "{name}: {mass}");
    }
}

/// The order of base strength that every bench chemist knows (common practice).
#[test]
fn bases_stand_in_the_known_order_of_strength() {
    let library = library();
    let order = [
        "nBuLi", "LDA", "KOtBu", "NaOEt", "Cs2CO3", "DBU", "Et3N", "pyridine",
    ];
    let strengths = order.map(|name| library.base(name).unwrap().pka_dmso.value);
    assert!(
        strengths.is_sorted_by(|stronger, weaker| stronger > weaker),
        "{strengths:?}"
    );
}

#[test]
fn a_measured_solvent_has_the_same_acidity_in_both_tables() {
    let library = library();
    for name in ["acetone", "DMSO", "toluene", "MeOH", "tBuOH", "EtOAc"] {
        let solvent = library.solvent(name).unwrap();
        let canonical = Molecule::parse(&solvent.smiles)
            .unwrap()
            .canonical()
            .to_owned();
        let measured = library.acidities_of(&canonical)[0].pka_dmso.value;
        let (own, _) = solvent.acid.as_ref().unwrap();
        assert_eq!(own.value, measured, "{name}");
    }
}

#[test]
fn a_structure_drawn_without_stereo_finds_the_measured_isomer() {
    let library = library();
    let canonical = |smiles: &str| Molecule::parse(smiles).unwrap().canonical().to_owned();
    let drawn = canonical("[O-][N+](=O)C=Cc1ccccc1");
    assert_eq!(library.electrophilicity(&drawn).unwrap().e.value, -13.85);
    assert_eq!(
        library.electrophile_by_structure(&drawn).unwrap().name,
        "nitrostyrene"
    );
    let other = canonical("[O-][N+](=O)/C=C\\c1ccccc1");
    assert!(library.electrophilicity(&other).is_none());
}

#[test]
fn solubility_of_a_single_solvent_comes_before_its_class() {
    let library = library();
    let carbonate = library.base("K2CO3").unwrap();
    let log = |name: &str| carbonate.log_solubility_for(library.solvent(name).unwrap());
    assert_eq!(log("DMF"), Some(-2.0));
    assert_eq!(log("acetone"), Some(-3.0));
    assert_eq!(
        library
            .base("LDA")
            .unwrap()
            .log_solubility_for(library.solvent("THF").unwrap()),
        None
    );
}
