//! Dianions react at the more basic site.

use std::sync::Arc;

use enolattice_model::{Cell, Conditions, Explanation, Model};
use enolattice_molecule::Molecule;
use enolattice_reagents::Library;

/// Two equivalents and a little more of LDA in THF, then one of iodomethane.
fn explained(smiles: &str, base: &str) -> Explanation {
    let model = Model::new(Arc::new(Library::builtin().unwrap()));
    let library = model.library();
    let molecule = |smiles: &str| Molecule::parse(smiles).unwrap();
    let substrate = Arc::new(model.substrate("substrate", molecule(smiles), None));
    let electrophile = Arc::new(model.electrophile("MeI", molecule("CI")));
    let cell = Cell {
        pair: Arc::new(model.pair(&substrate, &electrophile)),
        substrate,
        electrophile,
        base: Arc::new(model.base(library.base(base).unwrap())),
        solvent: Arc::new(model.solvent(library.solvent("THF").unwrap())),
        additive: None,
        conditions: Conditions {
            temperature_c: -20.0,
            formation_temperature_c: 0.0,
            base_equiv: 2.2,
            electrophile_equiv: 1.05,
            additive_equiv: 0.0,
            concentration_m: 0.2,
            time_h: 4.0,
            dosing_min: 10.0,
            addition: None,
        },
    };
    model.explain(&cell, 0.5).unwrap()
}

/// Huckin and Weiler, J. Am. Chem. Soc. 1974, 96, 1082 (1,3-dicarbonyl compounds at the terminal carbon); carboxylic acids
/// at carbon (Creger, J. Am. Chem. Soc. 1967, 89, 2500); both from memory.
#[test]
fn the_last_proton_taken_is_the_place_of_attack() {
    for (substrate, product) in [
        ("COC(=O)CC(C)=O", "CCC(=O)CC(=O)OC"),
        ("CC(=O)CC(C)=O", "CCC(=O)CC(C)=O"),
        ("CC(=O)CC(=O)c1ccccc1", "CCC(=O)CC(=O)c1ccccc1"),
        ("O=C(O)Cc1ccccc1", "CC(C(=O)O)c1ccccc1"),
    ] {
        let told = explained(substrate, "LDA");
        let expected = Molecule::parse(product).unwrap();
        let found = told.product_smiles.expect("a product");
        assert_eq!(found, expected.canonical(), "{substrate}");
        assert!(told.expected_yield.expect("covered") > 0.3, "{substrate}");
    }
}

/// Where the charge sits decides: the second pKa of the site is above its first, below LDA's acid, and named.
#[test]
fn the_second_proton_is_shown_with_its_pka() {
    let told = explained("CC(=O)CC(C)=O", "LDA");
    let of = |molecule: &str| told.sites.iter().find(|site| site.molecule == molecule);
    let second = of("substrate anion").expect("a second proton");
    let first = of("substrate").expect("a first proton");
    assert_eq!((first.atom, second.atom), (3, 0));
    assert!(second.pka_dmso > first.pka_dmso + 10.0 && second.pka_dmso < 36.0);
    let sum: f64 = second.reasons.terms.iter().map(|t| t.contribution).sum();
    assert!((sum - second.pka_dmso).abs() < 1e-9);
    let sigma = told.log10_k_sigma.expect("an uncertainty");
    assert!(sigma > 0.3 && sigma < 5.0, "{sigma}");
}
