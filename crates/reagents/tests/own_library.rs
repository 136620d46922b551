//! A laboratory's own tables over the library.

use enolattice_reagents::{Conflict, Library, LibraryError, OwnTable, ReagentKind, Supply};

/// The example of the page on the library.
const OWN_BASES: &str = include_str!("../testdata/own_bases.tsv");

fn library() -> Library {
    Library::builtin().unwrap_or_else(|fault| panic!("{fault}"))
}

fn own(text: impl Into<String>) -> OwnTable {
    OwnTable {
        name: "own.tsv".to_owned(),
        text: text.into(),
    }
}

fn faults(tables: &[OwnTable]) -> Vec<LibraryError> {
    library().with_own(tables).err().unwrap_or_default()
}

#[test]
fn the_example_adds_and_replaces_without_code() {
    let (library, conflicts) = library().with_own(&[own(OWN_BASES)]).unwrap();
    // a known name: in place of ours, with what the row does not state
    let solution = library.base("potassium tert-butoxide").unwrap();
    assert_eq!(solution.name, "KOtBu");
    assert_eq!(solution.cas, "865-47-4");
    assert_eq!(solution.supply, Supply::Solution);
    assert_eq!(solution.supply_solvent.as_deref(), Some("THF"));
    assert!(
        solution
            .log_solubility_for(library.solvent("hexane").unwrap())
            .is_none()
    );
    // a name of its own: beside ours, and the CAS number means it
    assert_eq!(library.base("584-08-7").unwrap().name, "K2CO3 325 mesh");
    assert_eq!(library.base("K2CO3").unwrap().dissolution_per_s, 0.01);
    let milled = library.base("K2CO3 325 mesh").unwrap();
    let acetonitrile = library.solvent("MeCN").unwrap();
    assert_eq!(milled.log_solubility_for(acetonitrile), Some(-3.0));
    // a substance that was not there
    assert_eq!(
        library.base("lithium tert-pentoxide").unwrap().name,
        "LiOtAm"
    );
    assert!(library.base("LiOtAm").unwrap().hazards.is_unknown());
    let texts: Vec<String> = conflicts.iter().map(ToString::to_string).collect();
    assert_eq!(
        texts,
        [
            "own.tsv, line 8: base `KOtBu` replaces that of the library: \
             log_solubility `` for `hydrocarbon -0.8; halogenated -0.8`, log_solubility_in `` for \
             `Et2O -0.6; hexane -1.8`, dissolution_per_s `` for `0.05`, supply `solution` for `solid`, \
             supplied `1.0 M in THF` for `solid`, supply_m `1.0` for ``, supply_solvent \
             `tetrahydrofuran` for ``, water_equiv `0.005` for `0.01`, h_codes \
             `H225; H314; H335; H351` for `H228; H251; H314`",
            "own.tsv, line 9: `584-08-7` now means the base `K2CO3 325 mesh`, no longer `K2CO3`",
        ]
    );
}

#[test]
fn the_digest_covers_own_tables() {
    let builtin = library();
    let (with_own, _) = builtin.with_own(&[own(OWN_BASES)]).unwrap();
    let (with_none, _) = builtin.with_own(&[]).unwrap();
    assert_ne!(with_own.digest(), builtin.digest());
    assert_eq!(with_none.digest(), builtin.digest());
    let changed = OWN_BASES.replace("\t0.05\t", "\t0.06\t");
    let (changed, _) = builtin.with_own(&[own(changed)]).unwrap();
    assert_ne!(changed.digest(), with_own.digest());
}

#[test]
fn a_later_table_goes_over_an_earlier_one() {
    let later = OWN_BASES.replace("1.0 M in THF\t1.0\t", "2.0 M in THF\t2.0\t");
    let (library, conflicts) = library().with_own(&[own(OWN_BASES), own(later)]).unwrap();
    assert_eq!(library.base("KOtBu").unwrap().supply_m, Some(2.0));
    // all three rows replace those of the first table, and only one differs
    let replaced: Vec<(&str, usize)> = conflicts[2..]
        .iter()
        .map(|conflict| match conflict {
            Conflict::Replaced { name, values, .. } => (name.as_str(), values.len()),
            other => panic!("{other}"),
        })
        .collect();
    assert_eq!(
        replaced,
        [("KOtBu", 2), ("K2CO3 325 mesh", 0), ("LiOtAm", 0)]
    );
}

#[test]
fn all_faults_of_all_rows_of_all_tables_come_at_once() {
    let broken = OWN_BASES
        .replace("584-08-7", "584-08-8")
        .replace("\t32.2\t0.8\t", "\t92.2\t\t")
        .replace("\tnotebook\n", "\tdiary\n")
        .replace(
            "[Li+].CCC(C)(C)[O-]\tC5H11LiO\tCCC(C)(C)O",
            "[Li+].CCC(C)(C)[O-]\tC4H9LiO\tCCC(C)(",
        );
    let empty = own("name\nx\n");
    let found = faults(&[own(broken), empty]);
    let places: Vec<(usize, &str, &str)> = found
        .iter()
        .map(|fault| (fault.row, fault.column.as_str(), fault.value.as_str()))
        .collect();
    assert_eq!(
        places,
        [
            (9, "cas", "584-08-8"),
            (10, "formula", "C4H9LiO"),
            (10, "conjugate_acid", "CCC(C)("),
            (10, "pka_dmso", "92.2"),
            (10, "pka_dmso_sigma", ""),
            (10, "source", "diary"),
            (0, "", ""),
        ]
    );
    assert!(found[6].reason.contains("# table: bases"), "{}", found[6]);
}

#[test]
fn names_that_stand_for_two_things_are_refused() {
    let twice = format!("{OWN_BASES}{}\n", OWN_BASES.lines().last().unwrap());
    let found = faults(&[own(twice)]);
    assert!(
        found[0]
            .to_string()
            .starts_with("own.tsv, line 11, column `name`, `LiOtAm`")
    );
    let both = OWN_BASES.replace("LiOtAm\tlithium tert-pentoxide", "NaOtBu\tKOtAm");
    let fault = faults(&[own(both)])[0].clone();
    assert_eq!((fault.row, fault.value.as_str()), (10, "NaOtBu"));
    for name in ["`NaOtBu`", "`KOtAm`", "leave one out"] {
        assert!(fault.reason.contains(name), "{fault}");
    }
}

#[test]
fn a_solvent_that_nobody_knows_is_a_fault_of_the_base_that_names_it() {
    let unknown = OWN_BASES.replace("CHCl3 25 2", "chlorofrom 25 2");
    assert_eq!(
        faults(&[own(unknown)])[0].to_string(),
        "own.tsv, line 10, column `decay`, `chlorofrom`: no such solvent in the library; did you mean `chloroform`?"
    );
}

#[test]
fn a_structure_that_is_too_long_or_not_drawn_as_ions_is_refused() {
    let with = |smiles: &str| OWN_BASES.replace("[Li+].CCC(C)(C)[O-]\t", &format!("{smiles}\t"));
    let reason = |smiles: &str| faults(&[own(with(smiles))])[0].to_string();
    let long = "C".repeat(151);
    assert!(reason(&long).ends_with("a structure has at most 150 characters here"));
    assert!(reason("C[Mg]Br").starts_with("own.tsv, line 10, column `smiles`, `C[Mg]Br`: "));
}

#[test]
fn own_solvents_electrophiles_and_additives_are_read_too() {
    let solvents = include_str!("../data/solvents.tsv");
    let electrophiles = include_str!("../data/electrophiles.tsv");
    let additives = include_str!("../data/additives.tsv");
    let tables = [own(solvents), own(electrophiles), own(additives)];
    let (library, conflicts) = library().with_own(&tables).unwrap();
    // a table laid over itself replaces every row by one that differs in nothing
    assert!(conflicts.iter().all(|conflict| match conflict {
        Conflict::Replaced { values, .. } => values.is_empty(),
        Conflict::Renamed { .. } | Conflict::Measured { .. } => false,
    }));
    let count = |wanted: ReagentKind| {
        let kinds = conflicts.iter().filter_map(|conflict| match conflict {
            Conflict::Replaced { kind, .. } | Conflict::Renamed { kind, .. } => Some(*kind),
            Conflict::Measured { .. } => None,
        });
        kinds.filter(|kind| *kind == wanted).count()
    };
    assert_eq!(count(ReagentKind::Solvent), library.solvents().len());
    assert_eq!(
        count(ReagentKind::Electrophile),
        library.electrophiles().len()
    );
    assert_eq!(count(ReagentKind::Additive), library.additives().len());
    assert_eq!(library.electrophile_by_structure("CI").unwrap().name, "MeI");
}

#[test]
fn an_own_electrophile_is_found_by_its_structure() {
    let heading = include_str!("../data/electrophiles.tsv");
    let heading: Vec<&str> = heading
        .lines()
        .filter(|line| line.starts_with("name\t"))
        .collect();
    let row = "my iodide\t\t\tCI\tCH3I\t42\t\tunknown\t\t2026-12\tfrom memory";
    let cells = heading[0].split('\t').count();
    assert_eq!(
        row.split('\t').count(),
        cells,
        "columns of electrophiles have changed"
    );
    let table = own(format!("# table: electrophiles\n{}\n{row}\n", heading[0]));
    let (library, conflicts) = library().with_own(&[table]).unwrap();
    assert!(conflicts.is_empty());
    assert_eq!(
        library.electrophile_by_structure("CI").unwrap().name,
        "my iodide"
    );
    assert!(library.electrophile("MeI").is_some());
}

#[test]
fn text_cut_anywhere_is_refused_or_read_but_never_panics() {
    let library = library();
    let ends = (0..OWN_BASES.len()).step_by(61);
    for end in ends.filter(|end| OWN_BASES.is_char_boundary(*end)) {
        if let Err(faults) = library.with_own(&[own(&OWN_BASES[..end])]) {
            assert!(!faults.is_empty(), "refused without a reason at {end}");
        }
    }
}

/// The example of the page on the library.
const OWN_ACIDITIES: &str = include_str!("../testdata/own_acidities.tsv");

/// The measured values of a structure: element and pKa.
fn measured(library: &Library, smiles: &str) -> Vec<(u8, f64)> {
    let molecule = enolattice_molecule::Molecule::parse(smiles).unwrap();
    let known = library.acidities_of(molecule.canonical());
    known
        .iter()
        .map(|known| (known.element, known.pka_dmso.value))
        .collect()
}

#[test]
fn own_acidities_go_over_those_of_the_library() {
    let builtin = library();
    assert_eq!(measured(&builtin, "C1CCCCC1=O"), [(6, 26.4)]);
    let (library, conflicts) = builtin.with_own(&[own(OWN_ACIDITIES)]).unwrap();
    // one in place of ours, whatever the order of the atoms; three that were not there
    assert_eq!(measured(&library, "C1CCCCC1=O"), [(6, 26.1)]);
    let amide = "O=C(Nc1ccccc1)CC(=O)OCC";
    assert_eq!(measured(&library, amide), [(6, 15.1), (7, 18.9)]);
    assert_eq!(library.acidities().len(), builtin.acidities().len() + 3);
    let texts: Vec<String> = conflicts.iter().map(ToString::to_string).collect();
    assert_eq!(
        texts,
        ["own.tsv, line 7: pKa of `O=C1CCCCC1` is 26.1, in place of 26.4 of the library"]
    );
    assert_ne!(library.digest(), builtin.digest());
    // a later table goes over an earlier one
    let later = OWN_ACIDITIES.replace("\t26.1\t", "\t26.9\t");
    let (library, conflicts) = builtin.with_own(&[own(OWN_ACIDITIES), own(later)]).unwrap();
    assert_eq!(measured(&library, "O=C1CCCCC1"), [(6, 26.9)]);
    assert_eq!(conflicts.len(), 5);
}

#[test]
fn an_own_acidity_drawn_without_stereo_stands_for_all_isomers() {
    let isomer = "h1\tOC(=O)/C=C/C\t0\tO\t12.7\t0.3\tno\town\tnotebook\n";
    let heading = &OWN_ACIDITIES[..OWN_ACIDITIES.find("own1").unwrap()];
    let drawn = own(format!("{heading}{isomer}"));
    let flat = own(format!(
        "{heading}h2\tCC=CC(O)=O\t4\tO\t12.9\t0.3\tno\town\tnotebook\n"
    ));
    let (both, conflicts) = library().with_own(&[drawn, flat]).unwrap();
    assert_eq!(conflicts.len(), 1);
    assert_eq!(measured(&both, "CC=CC(O)=O"), [(8, 12.9)]);
    assert!(measured(&both, "C/C=C/C(O)=O").is_empty());
}

#[test]
fn a_site_with_two_values_and_an_atom_that_is_none_are_faults() {
    let twice = OWN_ACIDITIES
        .replace("own4", "own3b")
        .replace("\t8\tN\t18.9\t", "\t5\tC\t15.9\t");
    assert_eq!(
        faults(&[own(twice)])[0].to_string(),
        "own.tsv, line 10, column `smiles`, `CCOC(=O)CC(=O)Nc1ccccc1`: the row of line 9 has a value for \
         this site: give one, or name another `atom` in the same SMILES"
    );
    let wrong = OWN_ACIDITIES
        .replace("O=C1CCCCC1\t2\t", "O=C1CCCCC1\t0\t")
        .replace("\t30.1\t0.4\t", "\t130.1\t\t");
    let places: Vec<(usize, String)> = faults(&[own(wrong)])
        .into_iter()
        .map(|fault| (fault.row, fault.column))
        .collect();
    let expected = [(7, "atom"), (8, "pka_dmso"), (8, "sigma")];
    assert_eq!(
        places,
        expected.map(|(row, column)| (row, column.to_owned()))
    );
}
