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
