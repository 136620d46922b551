//! Hazard statements of single substances.

use enolattice_reagents::Hazards;

use super::super::statements::{STATEMENTS, of_statements};
use super::super::{Category, Contents, Severity, hazard_statements};
use super::{LIBRARY, MALONATE};
use enolattice_molecule::Molecule;

fn stated(codes: &[&str]) -> Hazards {
    Hazards {
        h_codes: codes.iter().map(|code| (*code).to_owned()).collect(),
        source: "from memory".to_owned(),
        date: "2026-12".to_owned(),
    }
}

#[test]
fn each_statement_makes_its_caution_and_no_other() {
    for &(code, category, severity) in STATEMENTS {
        let found = of_statements("X", &stated(&[code]));
        let own: Vec<_> = found.iter().map(|c| (c.category, c.severity)).collect();
        assert!(own.contains(&(category, severity)), "{code}: {own:?}");
        let mut expected = STATEMENTS.iter().filter(|(other, ..)| *other == code);
        assert!(own.iter().all(|(of, _)| expected.any(|(_, c, _)| c == of)));
        assert!(
            found
                .iter()
                .all(|c| c.source == "hazard statements: from memory, 2026-12")
        );
    }
    assert!(of_statements("X", &stated(&["H302", "H315", "H411"])).is_empty());
}

/// There is no category for them; they are said in words and never under another name.
#[test]
fn toxicity_to_reproduction_is_said_in_words_and_makes_no_caution() {
    for (code, words) in [
        ("H360D", "may damage the unborn child"),
        ("H361f", "suspected of damaging fertility"),
        (
            "H372",
            "causes damage to organs through prolonged or repeated exposure",
        ),
        ("H334", "may cause allergy or asthma"),
    ] {
        let hazards = stated(&[code]);
        assert!(of_statements("X", &hazards).is_empty(), "{code}");
        let said = hazard_statements("X", Some(&hazards));
        assert!(said.contains(&format!("{code} {words}")), "{said}");
    }
}

#[test]
fn the_highest_statement_decides_a_category() {
    let found = of_statements("X", &stated(&["H301", "H330", "H351"]));
    let severities: Vec<_> = found.iter().map(|c| (c.category, c.severity)).collect();
    assert!(severities.contains(&(Category::AcutelyToxic, Severity::Warning)));
    assert!(severities.contains(&(Category::Carcinogen, Severity::Note)));
    assert_eq!(severities.len(), 2);
}

/// Every statement of the library is known in words.
#[test]
fn the_library_states_nothing_that_has_no_words() {
    for reagent in LIBRARY.search("") {
        for code in &reagent.hazards().h_codes {
            let said = hazard_statements("X", Some(&stated(&[code])));
            let bare = format!("hazards of X: {code} (from memory, 2026-12)");
            assert_ne!(said, bare, "{}", reagent.name());
        }
    }
}

#[test]
fn unknown_hazards_are_said_to_be_unknown() {
    let unknown = "unknown, consult the supplier's safety data sheet";
    let nobody_looked = Hazards {
        source: "unknown".to_owned(),
        ..Hazards::default()
    };
    assert!(hazard_statements("X", Some(&nobody_looked)).ends_with(unknown));
    assert!(hazard_statements("X", None).ends_with(unknown));
    assert_eq!(
        hazard_statements("hexanal", Some(&stated(&["H226", "H319"]))),
        "hazards of hexanal: H226 flammable liquid and vapour; H319 causes serious eye \
         irritation (from memory, 2026-12)"
    );
    assert_eq!(
        hazard_statements("water", Some(&stated(&[]))),
        "hazards of water: no statement known (from memory, 2026-12)"
    );
}

#[test]
fn a_cell_tells_of_the_hazards_of_each_reagent_and_of_what_is_unknown() {
    let electrophile = Molecule::parse("BrCc1ccc(F)cc1").unwrap();
    let contents = Contents {
        base: LIBRARY.base("NaH").unwrap(),
        solvent: LIBRARY.solvent("DMF").unwrap(),
        electrophile: &electrophile,
        named: None,
        substrate: &Molecule::parse(MALONATE).unwrap(),
        additive: None,
        temperature_c: 25.0,
        formation_temperature_c: 25.0,
    };
    let said = contents.hazards();
    assert_eq!(said.len(), 4, "{said:#?}");
    assert!(said[0].starts_with("hazards of NaH: H260 in contact with water"));
    assert!(
        said[1].contains("H360D may damage the unborn child"),
        "{}",
        said[1]
    );
    assert!(said[2].starts_with("hazards of the electrophile: unknown"));
    assert!(said[3].starts_with("hazards of the substrate: unknown"));
}
