//! The proton balance of whole pots keeps mass and charge.

use std::collections::BTreeSet;
use std::sync::Arc;

use enolattice_calibration::balance;
use enolattice_model::Model;
use enolattice_reagents::Library;

/// Least number of whole pots, and of those with complexes AHA⁻.
const POTS: usize = 50;

#[test]
fn mass_and_charge_are_kept_in_every_pot() {
    let model = Model::new(Arc::new(Library::builtin().expect("the library reads")));
    let pots = balance::pots(&model).expect("every pot can be made");
    assert!(pots.len() >= POTS);
    for pot in &pots {
        let (mass, charge) = (pot.mass_deviation_m(), pot.charge_deviation_m());
        assert!(mass <= 1e-9, "{}: mass {mass:e}", pot.name);
        assert!(charge <= 1e-9, "{}: charge {charge:e}", pot.name);
    }
    let cations: BTreeSet<String> = pots.iter().map(|p| format!("{:?}", p.cation)).collect();
    for metal in [
        "Lithium",
        "Sodium",
        "Potassium",
        "Caesium",
        "Ammonium",
        "Magnesium",
        "Zinc",
        "None",
    ] {
        assert!(cations.contains(metal), "{metal}");
    }
    let names: BTreeSet<&str> = pots
        .iter()
        .flat_map(|pot| pot.acids.iter().map(|acid| acid.name.as_str()))
        .collect();
    for kind in [
        "substrate",
        "base",
        "solvent",
        "water",
        "electrophile",
        "product",
        "leaving group",
        "solvent as base",
        "additive",
    ] {
        assert!(names.contains(kind), "{kind}");
    }
    assert!(
        pots.iter()
            .any(|pot| pot.acids.iter().any(|acid| acid.pkas.len() == 3))
    );
    assert!(
        pots.iter()
            .any(|pot| pot.forms.iter().any(|forms| forms.complex_m > 1e-3))
    );
}

/// A strong acid in water is all hydronium ion: 0.1 mol/L less the 0.04 that acetate takes.
#[test]
fn water_levels_a_strong_acid() {
    let model = Model::new(Arc::new(Library::builtin().expect("the library reads")));
    let pots = balance::pots(&model).expect("every pot can be made");
    let levelled = pots.iter().find(|pot| pot.name.contains("levelled"));
    let pot = levelled.expect("the pot is there");
    let water = pot.acids.iter().position(|acid| acid.name == "water");
    let hydronium_m = pot.forms[water.expect("it holds water")].free_m[0];
    assert!((hydronium_m - 0.06).abs() < 1e-3, "{hydronium_m}");
}

/// Hydrogensulfate in DMSO: 14.5 (Kolthoff and Chantooni, from memory), not the 1.4 of sulfuric acid; a tertiary amine is a base.
#[test]
fn additives_give_and_take_protons() {
    let model = Model::new(Arc::new(Library::builtin().expect("the library reads")));
    let pots = balance::pots(&model).expect("every pot can be made");
    let additive = |base_and_solvent: &str| {
        let mut those = pots
            .iter()
            .filter(|pot| pot.name.contains(base_and_solvent));
        let mut acids = those.by_ref().flat_map(|pot| &pot.acids);
        acids.find(|acid| acid.name == "additive").cloned()
    };
    let hydrogensulfate = additive("in DMF").expect("hydrogensulfate is in it");
    assert_eq!(hydrogensulfate.charge, -1);
    let tmeda = additive("LDA + ").expect("TMEDA is in it");
    assert_eq!((tmeda.charge, tmeda.charged_m[0]), (1, 0.0));
    assert!(tmeda.charged_m[1] > 0.0);
    let pka = hydrogensulfate.pkas[0];
    assert!(pka > 10.0, "{pka}");
}
