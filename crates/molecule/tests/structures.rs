//! Reading structures and keeping stereo.

use enolattice_molecule::{Bond, Molecule, c_product, o_product, recognise};

fn parse(smiles: &str) -> Molecule {
    Molecule::parse(smiles).unwrap()
}

#[test]
fn a_molecule_may_cross_threads() {
    fn shareable<T: Send + Sync + Clone>() {}
    shareable::<Molecule>();
}

#[test]
fn atoms_keep_the_order_of_the_smiles() {
    let acetone = parse("[H]C([H])([H])C(=O)C");
    let elements: Vec<u8> = acetone.atoms().iter().map(|a| a.element).collect();
    let hydrogens: Vec<u8> = acetone.atoms().iter().map(|a| a.hydrogens).collect();
    assert_eq!(elements, [6, 6, 8, 6]);
    assert_eq!(hydrogens, [3, 0, 0, 3]);
    assert_eq!(acetone.bond(1, 2), Some(Bond::Double));
    assert_eq!(acetone.bond(0, 3), None);
    assert_eq!(acetone.symmetry_classes(), [0, 1, 2, 0]);
    let mapped = parse("[CH3:1][C:2](=[O:3])[CH3:4]");
    assert_eq!(mapped.canonical(), acetone.canonical());
    assert_eq!(mapped.smiles(), "[CH3:1][C:2](=[O:3])[CH3:4]");
}

#[test]
fn symmetry_ignores_stereo_and_sees_the_ring() {
    let ketone = parse("C[C@H]1CCC(=O)CC1");
    assert_eq!(ketone.symmetry_classes(), [0, 1, 2, 3, 4, 5, 3, 2]);
    let anisole = parse("COC1=CC=CC=C1");
    assert_eq!(anisole.symmetry_classes(), [0, 1, 2, 3, 4, 5, 4, 3]);
    assert!(anisole.in_ring(2) && !anisole.in_ring(1));
    assert!(anisole.bond_in_ring(2, 7) && !anisole.bond_in_ring(1, 2));
}

#[test]
fn refusals_name_the_fault() {
    let long = "C".repeat(2_001);
    let many = "C".repeat(301);
    let cases = [
        ("", "empty"),
        ("   ", "empty"),
        (".", "fragment"),
        ("CCO.Cl", "fragment"),
        ("[Na+].[H-]", "fragment"),
        (long.as_str(), "2001 bytes"),
        (many.as_str(), "301 atoms"),
        ("C11", "bound to itself"),
        ("C12CC1", "ring label 2"),
        ("C%10CC", "ring label 10"),
        ("C(C", "cannot be read"),
        ("CC)C", "cannot be read"),
        ("[Qq]", "Qq"),
        ("C(C)(C)(C)(C)C", "no possible molecule"),
        ("cc", "no possible molecule"),
        ("c1cccc1", "no possible molecule"),
        ("CC*", "wildcard"),
        ("C[Li]", "Li"),
        ("[CH3]", "unpaired electron"),
        ("[C]", "unpaired electron"),
        ("C[CH]C", "unpaired electron"),
        ("C[O]", "unpaired electron"),
        ("CC$C", "bond"),
        ("CCO ethanol", "position 3"),
        ("CCµ", "position 2"),
    ];
    for (smiles, word) in cases {
        let error = Molecule::parse(smiles).unwrap_err();
        assert!(error.reason.contains(word), "{smiles}: {error}");
        assert!(!error.remedy.is_empty(), "{smiles}");
    }
}

/// The first bromide is S and its product R, the others R and S (CIP labels by RDKit).
#[test]
fn substitution_inverts_and_clears_the_site() {
    let malonate = parse("CCOC(=O)CC(=O)OCC");
    for (bromide, product) in [
        ("C[C@H](Br)CC", "CCOC(=O)C(C(=O)OCC)[C@H](C)CC"),
        ("C[C@@H](Br)CC", "CCOC(=O)C(C(=O)OCC)[C@@H](C)CC"),
        ("CC[C@](C)([H])Br", "CCOC(=O)C(C(=O)OCC)[C@@H](C)CC"),
    ] {
        let electrophile = parse(bromide);
        let group = recognise(&electrophile).unwrap();
        let made = c_product(&malonate, 5, &electrophile, &group).unwrap();
        assert_eq!(
            made.molecule.canonical(),
            parse(product).canonical(),
            "{bromide}"
        );
    }
    let iodide = parse("CI");
    let group = recognise(&iodide).unwrap();
    let ketone = parse("C[C@@H]1CCC[C@H](C)C1=O");
    let made = c_product(&ketone, 1, &iodide, &group).unwrap();
    assert_eq!(
        made.molecule.canonical(),
        parse("CC1(C)CCC[C@H](C)C1=O").canonical()
    );
}

#[test]
fn no_oxygen_product_without_an_enolate_oxygen() {
    let iodide = parse("CI");
    let group = recognise(&iodide).unwrap();
    for (substrate, site) in [("CC#N", 0), ("CS(C)(=O)=O", 0), ("Cc1ccccc1", 0)] {
        assert!(
            o_product(&parse(substrate), site, &iodide, &group)
                .unwrap()
                .is_none()
        );
    }
    let enone = parse("C=CC(C)=O");
    let group = recognise(&enone).unwrap();
    assert!(
        o_product(&parse("CC(C)=O"), 0, &enone, &group)
            .unwrap()
            .is_none()
    );
}

#[test]
fn impossible_requests_are_errors() {
    let iodide = parse("CI");
    let group = recognise(&iodide).unwrap();
    let pivalate = parse("CC(C)(C)C(=O)OC");
    assert!(
        c_product(&pivalate, 1, &iodide, &group)
            .unwrap_err()
            .reason
            .contains("no hydrogen")
    );
    assert!(
        c_product(&pivalate, 99, &iodide, &group)
            .unwrap_err()
            .reason
            .contains("atom 99")
    );
    assert!(
        c_product(&pivalate, 5, &iodide, &group)
            .unwrap_err()
            .reason
            .contains("no carbon")
    );
    let azide = parse("Cc1ccc(S(=O)(=O)N=[N+]=[N-])cc1");
    let transfer = recognise(&azide).unwrap();
    assert!(
        c_product(&parse("CC(C)C#N"), 1, &azide, &transfer)
            .unwrap_err()
            .reason
            .contains("two hydrogens")
    );
    let bromobenzene = parse("Brc1ccccc1");
    let inert = recognise(&bromobenzene).unwrap();
    assert!(c_product(&parse("CC(C)=O"), 0, &bromobenzene, &inert).is_err());
}

/// The ring of an epoxide is opened from behind: cis epoxides give trans products, and the carbon that
/// keeps the oxygen keeps its configuration (CIP labels by RDKit: S where attacked, R at oxygen).
#[test]
fn a_strained_ring_opens_with_inversion() {
    for (epoxide, product) in [
        (
            "C1CC[C@@H]2O[C@@H]2C1",
            "CCOC(=O)C(C(=O)OCC)[C@@H]1CCCC[C@H]1O",
        ),
        ("C[C@@H]1O[C@@H]1C", "CCOC(=O)C(C(=O)OCC)[C@H](C)[C@@H](C)O"),
    ] {
        let electrophile = parse(epoxide);
        let group = recognise(&electrophile).unwrap();
        let made = c_product(&parse("CCOC(=O)CC(=O)OCC"), 5, &electrophile, &group).unwrap();
        assert_eq!(
            made.molecule.canonical(),
            parse(product).canonical(),
            "{epoxide}"
        );
    }
}
