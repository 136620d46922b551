//! One look over all tables: typos look like chemistry.

use std::collections::{BTreeMap, HashSet};
use std::path::PathBuf;

use enolattice_molecule::{Molecule, recognise};
use enolattice_reagents::{Base, BaseKind, Cation, Library, Reagent, ReagentKind, Supply};

/// A table as it lies on disk, independent of the reader under test.
struct Sheet {
    file: String,
    heading: Vec<String>,
    columns: Vec<String>,
    rows: Vec<Vec<String>>,
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
        ("acidities_remembered.tsv", 99),
        ("acidities_xh.tsv", 156),
        ("additives.tsv", 17),
        ("bases.tsv", 109),
        ("electrophiles.tsv", 252),
        ("electrophilicities.tsv", 80),
        ("solvents.tsv", 72),
    ];
    assert_eq!(
        counts,
        expected.map(|(file, rows)| (file.to_owned(), rows)).into()
    );
    let library = library();
    assert_eq!(library.acidities().len(), 316 + 156 + 99);
    assert_eq!(library.electrophilicities().len(), 80);
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

/// Columns of numbers that count or name and are no measured values.
const NO_VALUES: [&str; 1] = ["atom"];

#[test]
fn every_value_has_its_uncertainty() {
    for sheet in sheets() {
        let stated = |column: &str| {
            let lines = sheet.heading.iter();
            lines
                .filter(|line| line.starts_with("# sigma:"))
                .any(|line| line.split([' ', ',', ';', ':']).any(|word| word == column))
        };
        for (index, column) in sheet.columns.iter().enumerate() {
            let mut cells = sheet.rows.iter().map(|row| row[index].as_str());
            let is_number = cells.all(|cell| cell.is_empty() || cell.parse::<f64>().is_ok());
            let is_filled = sheet.rows.iter().any(|row| !row[index].is_empty());
            let is_value = is_number && is_filled && !column.ends_with("sigma");
            let of_its_own = format!("{column}_sigma");
            let has_column = sheet.columns.contains(&of_its_own)
                || sheet.columns.iter().any(|other| other == "sigma");
            assert!(
                !is_value || has_column || stated(column) || NO_VALUES.contains(&column.as_str()),
                "{}: {column} has no uncertainty",
                sheet.file
            );
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
                // Only what is optional altogether may have none; the reader holds it to its value.
                let optional = ["acid_pka_source", "decay_source", "frees_source"]
                    .contains(&sheet.columns[index].as_str());
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
        let cas = Some(reagent.cas()).filter(|cas| !cas.is_empty());
        for name in names.chain([reagent.name()]).chain(cas) {
            let found = match reagent {
                Reagent::Base(_) => library.base(&name.to_uppercase()).map(|b| &b.name),
                Reagent::Solvent(_) => library.solvent(&name.to_uppercase()).map(|s| &s.name),
                Reagent::Electrophile(_) => {
                    library.electrophile(&name.to_uppercase()).map(|e| &e.name)
                }
                Reagent::Additive(_) => library.additive(&name.to_uppercase()).map(|a| &a.name),
            };
            assert_eq!(found.map(String::as_str), Some(reagent.name()), "{name}");
        }
    }
}

#[test]
fn a_cas_number_belongs_to_one_substance_only() {
    let library = library();
    let mut owners: BTreeMap<&str, &str> = BTreeMap::new();
    for reagent in library
        .search("")
        .into_iter()
        .filter(|r| !r.cas().is_empty())
    {
        let owner = owners.entry(reagent.cas()).or_insert(reagent.smiles());
        assert_eq!(*owner, reagent.smiles(), "{} is shared", reagent.cas());
    }
}

#[test]
fn solvents_named_by_a_base_are_in_the_table_of_solvents_or_classes() {
    let library = library();
    let classes = [
        "ether",
        "hydrocarbon",
        "halogenated",
        "dipolar aprotic",
        "alcohol",
        "water",
    ];
    for base in library.bases() {
        let single = base.log_solubility_in.iter().map(|(name, _)| name);
        let decays = base.decay.iter().map(|row| &row.solvent);
        let decays = decays.filter(|name| !classes.contains(&name.as_str()));
        for name in single.chain(decays).chain(&base.supply_solvent) {
            let solvent = library.solvent(name).map(|s| s.name.as_str());
            assert_eq!(solvent, Some(name.as_str()), "{}", base.name);
        }
    }
}

/// Densities and percentages on the labels of the bottles (common practice).
#[test]
fn solutions_have_the_concentration_of_their_percentage() {
    let library = library();
    let molar = |name: &str| library.base(name).unwrap().supply_m.unwrap();
    // per cent by mass, g/mL, g/mol
    for (name, percent, density, mass) in [
        ("NaOMe", 25.0, 0.945, 54.02),
        ("NaOEt", 21.0, 0.868, 68.05),
        ("Bu4NOH", 40.0, 0.99, 259.47),
        ("nBuLi", 23.0, 0.693, 64.06),
        ("NH4OH", 28.0, 0.900, 17.03),
    ] {
        let expected = percent * 10.0 * density / mass;
        assert!((molar(name) - expected).abs() < 0.1, "{name}: {expected}");
    }
}

/// Water as the composition of the bottle gives it: 85 % KOH, trihydrate, 40 % in water.
#[test]
fn water_of_hydrates_and_solutions_follows_from_their_composition() {
    let library = library();
    let equiv = |name: &str| library.base(name).unwrap().water_equiv;
    assert!((equiv("KOH") - (15.0 / 18.015) / (85.0 / 56.11)).abs() < 0.02);
    assert!((equiv("Bu4NOH") - (60.0 / 18.015) / (40.0 / 259.47)).abs() < 0.7);
    assert_eq!(equiv("TBAF trihydrate"), 3.0);
    assert_eq!(equiv("CsOH"), 1.0);
    assert_eq!(equiv("LiOH.H2O"), 1.0);
    assert_eq!(equiv("barium hydroxide octahydrate"), 8.0);
    assert!((equiv("NH4OH") - (72.0 / 18.015) / (28.0 / 17.03)).abs() < 0.1);
}

/// Half-lives of butyllithiums in ethers: tertiary before secondary before primary, DME before
/// THF before diethyl ether (Stanetty and Mihovilovic, J. Org. Chem. 1997, 62, 1514).
#[test]
fn butyllithiums_decay_in_the_published_order() {
    let library = library();
    let hours = |base: &str, solvent: &str, celsius: f64| {
        let solvent = library.solvent(solvent).unwrap();
        let part = solvent.components().next().unwrap();
        let rows = library.base(base).unwrap().decay_in(&part);
        let row = rows.iter().find(|row| row.temperature_c == celsius);
        row.unwrap_or_else(|| panic!("{base} at {celsius}"))
            .half_life_h
    };
    assert!(hours("tBuLi", "THF", -20.0) < hours("sBuLi", "THF", -20.0));
    assert!(hours("sBuLi", "DME", -20.0) < hours("nBuLi", "DME", -20.0));
    assert!(hours("nBuLi", "THF", 20.0) < hours("nBuLi", "Et2O", 20.0));
    assert!(hours("tBuLi", "THF", -20.0) < hours("tBuLi", "Et2O", -20.0));
    // what has no row of its own has that of its class
    assert_eq!(hours("nBuLi", "MeCN", -78.0), hours("nBuLi", "DMF", -78.0));
    assert!(hours("nBuLi", "HMPA", -78.0) > hours("nBuLi", "DMF", -78.0));
}

#[test]
fn every_kind_of_base_and_counter_ion_is_there() {
    let library = library();
    let count = |of: &dyn Fn(&Base) -> bool| library.bases().iter().filter(|b| of(b)).count();
    for (kind, least) in [
        (BaseKind::Organolithium, 6),
        (BaseKind::Grignard, 3),
        (BaseKind::Amide, 15),
        (BaseKind::Hydride, 3),
        (BaseKind::Alkoxide, 12),
        (BaseKind::Hydroxide, 6),
        (BaseKind::Carbonate, 8),
        (BaseKind::Fluoride, 3),
        (BaseKind::Carboxylate, 3),
        (BaseKind::Amine, 20),
    ] {
        assert!(count(&|b| b.kind == kind) >= least, "{kind:?}");
    }
    for cation in [
        Cation::Ammonium,
        Cation::Magnesium,
        Cation::Calcium,
        Cation::Barium,
        Cation::Zinc,
        Cation::Caesium,
    ] {
        assert!(count(&|b| b.cation == cation) > 0, "{cation:?}");
    }
    assert!(count(&|b| b.supply == Supply::Solution) >= 15);
}

#[test]
#[expect(clippy::print_stdout, reason = "coverage is counted to be read")]
fn coverage_of_hazards_and_sources_is_counted() {
    let library = library();
    let reagents = library.search("");
    let unknown: Vec<&str> = reagents
        .iter()
        .filter(|r| r.hazards().is_unknown())
        .map(|r| r.name())
        .collect();
    let mut sources = (0, 0);
    for sheet in sheets() {
        for (index, _) in sheet
            .columns
            .iter()
            .enumerate()
            .filter(|(_, c)| c.ends_with("source"))
        {
            let cells = sheet.rows.iter().map(|row| row[index].as_str());
            for cell in cells.filter(|cell| !matches!(*cell, "" | "unknown")) {
                sources.0 += 1;
                sources.1 += usize::from(cell == "from memory");
            }
        }
    }
    println!(
        "{} reagents, {} with unknown hazards: {}\n{} sources, {} of them `from memory`",
        reagents.len(),
        unknown.len(),
        unknown.join(", "),
        sources.0,
        sources.1
    );
    // Of bases, solvents and additives in a bottle the hazards are known; of the rest they say `unknown`.
    let is_electrophile = |r: &&Reagent<'_>| r.kind() == ReagentKind::Electrophile;
    let bottled = reagents.iter().filter(|r| !is_electrophile(r));
    let unknown = bottled.clone().filter(|r| r.hazards().is_unknown()).count();
    assert!(unknown * 10 < bottled.count());
}

#[test]
fn the_reacting_group_of_every_named_electrophile_is_recognised() {
    for electrophile in library().electrophiles() {
        let molecule = Molecule::parse_salt(&electrophile.smiles).unwrap().molecule;
        if let Err(reason) = recognise(&molecule) {
            panic!("{}: {reason}", electrophile.name);
        }
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

/// Handbook solubilities in water at 20 to 25 °C, g of the anhydrous substance in 100 mL (CRC Handbook, from memory).
#[test]
fn solubilities_in_water_are_those_of_the_handbook() {
    let library = library();
    let water = library.solvent("water").unwrap();
    for (name, grams, mass) in [
        ("Ca(OH)2", 0.17, 74.09),
        ("Ba(OH)2", 4.7, 171.34),
        ("Li2CO3", 1.3, 73.89),
        ("Na2CO3", 29.0, 105.99),
        ("NaHCO3", 10.0, 84.01),
        ("K2CO3", 111.0, 138.21),
        ("LiOH", 12.5, 23.95),
        ("proline", 150.0, 115.13),
        ("beta-alanine", 55.0, 89.09),
    ] {
        let log = library.base(name).unwrap().log_solubility_for(water);
        let expected = f64::log10(grams * 10.0 / mass);
        assert!((log.unwrap() - expected).abs() < 0.2, "{name}: {expected}");
    }
}

/// Sodium in an alcohol is its alkoxide; sodium as such stands for no base.
#[test]
fn metals_are_found_as_the_alkoxides_that_they_make() {
    let library = library();
    let name = |text: &str| library.base(text).map(|base| base.name.as_str());
    assert_eq!(name("sodium in ethanol"), Some("NaOEt"));
    assert_eq!(name("magnesium in ethanol"), Some("Mg(OEt)2"));
    assert_eq!(name("Na tert-amylate"), Some("NaOtAm"));
    assert_eq!(name("Na"), None);
    assert_eq!(name("Mg"), None);
}
