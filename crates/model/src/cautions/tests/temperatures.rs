//! Boiling, melting and flash points against the temperatures of a cell.

use super::super::temperature::{of_electrophile, of_solvent};
use super::super::{Category, CautionShare, Severity};
use super::{LIBRARY, found, severity};

/// Solvent, coldest and hottest °C, category, whether it is there. Boiling and melting points:
/// dioxane 101 and 11.8 °C, DMSO 18.4 °C, THF 66 °C; flash points: DMF 58 °C, THF −14 °C.
const SOLVENTS: &[(&str, f64, f64, Category, bool)] = &[
    ("THF", 25.0, 70.0, Category::AboveBoilingPoint, true),
    ("THF", 25.0, 60.0, Category::AboveBoilingPoint, false),
    ("DMSO", 0.0, 25.0, Category::BelowMeltingPoint, true),
    ("DMSO", 25.0, 60.0, Category::BelowMeltingPoint, false),
    ("dioxane", 0.0, 25.0, Category::BelowMeltingPoint, true),
    ("dioxane", 20.0, 25.0, Category::BelowMeltingPoint, false),
    ("DMF", 0.0, 80.0, Category::Flammable, true),
    ("DMF", 0.0, 25.0, Category::Flammable, false),
    ("water", 5.0, 95.0, Category::Flammable, false),
];

#[test]
fn solvents_boil_freeze_and_burn_at_their_temperatures() {
    for &(name, coldest, hottest, category, expected) in SOLVENTS {
        let solvent = LIBRARY.solvent(name).unwrap();
        let found = of_solvent(solvent, coldest, hottest);
        let has = found.iter().any(|c| c.category == category);
        assert_eq!(has, expected, "{name} {coldest} {hottest}: {found:#?}");
    }
}

#[test]
fn the_deprotonation_counts_for_solvents() {
    let solvent = LIBRARY.solvent("DMSO").unwrap();
    let nothing = CautionShare::of_additive(None);
    let shares = CautionShare::of_solvent(solvent, &[(25.0, 0.0), (25.0, 25.0)]);
    let freezes = |share| {
        let bits = CautionShare::joined([share, nothing, nothing, nothing, nothing]);
        bits & Category::BelowMeltingPoint.bit() != 0
    };
    assert!(freezes(shares[0]) && !freezes(shares[1]));
}

#[test]
fn a_mixture_boils_with_its_most_volatile_part() {
    let mut mixture = LIBRARY.solvent("toluene").unwrap().clone();
    mixture.name = "toluene/Et2O".to_owned();
    mixture.parts = vec![("toluene".to_owned(), 0.5), ("Et2O".to_owned(), 0.5)];
    mixture.boiling_c = 34.5;
    let found = of_solvent(&mixture, 25.0, 60.0);
    let boiling = found
        .iter()
        .find(|c| c.category == Category::AboveBoilingPoint);
    let text = &boiling.unwrap().text;
    assert!(text.starts_with("the lowest-boiling part of toluene/Et2O boils at 34.5 °C"));
}

#[test]
fn electrophiles_boil_away_and_poisons_do_worse() {
    let boiling = |t: f64, codes: &[&str]| {
        let mut named = LIBRARY.electrophiles()[0].clone();
        named.boiling_c = Some(40.0);
        named.hazards.h_codes = codes.iter().map(|code| (*code).to_owned()).collect();
        of_electrophile(&named, t).map(|caution| caution.severity)
    };
    assert_eq!(boiling(25.0, &["H331"]), None);
    assert_eq!(boiling(60.0, &["H225"]), Some(Severity::Note));
    assert_eq!(boiling(60.0, &["H331"]), Some(Severity::Warning));
}

#[test]
fn a_warm_solvent_over_its_flash_point_is_a_note_and_with_hydrogen_a_warning() {
    let malonate = super::MALONATE;
    let with = |base| {
        severity(
            &found(base, "CCCCBr", "toluene", 80.0, malonate),
            Category::Flammable,
        )
    };
    assert_eq!(with("K3PO4"), Some(Severity::Note));
    assert_eq!(with("NaH"), Some(Severity::Warning));
}
