//! Atoms are kept: reactants = product + what leaves, for substrates of all kinds and every class of electrophile.

use std::collections::BTreeMap;

use enolattice_molecule::{
    ElectrophilicGroup, Molecule, alcohol_of_ester, alkenes, c_product, carbonyl_product,
    dehalogenated, dehydrated, disproportionated, double_product, glycol_esters, o_product,
    recognise, self_condensation_product, sites, substitution_product,
};

/// Mass of ¹H, Da (AME2020).
const HYDROGEN_DA: f64 = 1.007_825_032;

const SUBSTRATES: [&str; 12] = [
    "CC(=O)c1ccccc1",
    "CC1CCCCC1=O",
    "CCOC(=O)Cc1ccccc1",
    "O=C1CCCCO1",
    "CC(=O)N(C)C",
    "CCCC#N",
    "CCOC(=O)CC(C)=O",
    "CCOC(=O)CC(=O)OCC",
    "CC[N+](=O)[O-]",
    "CS(=O)(=O)c1ccccc1",
    "CC(C)C=O",
    "CC(=O)Cc1ccc(O)cc1",
];

/// Electrophile and what leaves it with a hydrogen, by class.
const ELECTROPHILES: [(&str, &str); 22] = [
    ("CI", "I"),
    ("CC(C)Br", "Br"),
    ("BrCc1ccccc1", "Br"),
    ("COS(=O)(=O)OC", "COS(=O)(=O)O"),
    ("CCCCOS(=O)(=O)c1ccc(C)cc1", "OS(=O)(=O)c1ccc(C)cc1"),
    ("CC(=O)Cl", "Cl"),
    ("CC(=O)OC(C)=O", "CC(=O)O"),
    ("COC(=O)OC", "CO"),
    ("CCOC=O", "CCO"),
    ("CON(C)C(=O)c1ccccc1", "CONC"),
    ("C=CC(=O)OC", ""),
    ("O=[N+]([O-])/C=C/c1ccccc1", ""),
    ("O=Cc1ccccc1", ""),
    ("CC(C)=O", ""),
    ("CN=Cc1ccccc1", ""),
    ("C[Si](C)(C)Cl", "Cl"),
    ("CC1CO1", ""),
    ("O=C=Nc1ccccc1", ""),
    ("O=[N+]([O-])c1ccc(F)cc1", "F"),
    ("O=C1CCC(=O)N1Br", "O=C1CCC(=O)N1"),
    ("CSSC", "CS"),
    ("O=C1CCCCO1", ""),
];

/// Nucleophiles with the attacking atom, and the acid that an anion stands for.
const NUCLEOPHILES: [(&str, usize, &str); 6] = [
    ("CC[O-]", 2, "CCO"),
    ("[OH-]", 0, "O"),
    ("CC(C)[N-]C(C)C", 3, "CC(C)NC(C)C"),
    ("[CH2-]CCC", 0, "CCCC"),
    ("C1CCNCC1", 3, "C1CCNCC1"),
    ("CO", 1, "CO"),
];

fn molecule(smiles: &str) -> Molecule {
    Molecule::parse(smiles).unwrap()
}

fn electrophile(smiles: &str) -> (Molecule, ElectrophilicGroup) {
    let molecule = molecule(smiles);
    let group = recognise(&molecule).unwrap();
    (molecule, group)
}

/// Atoms of a formula by symbol.
fn atoms(formula: &str) -> BTreeMap<String, i64> {
    let mut counted = BTreeMap::new();
    let mut rest = formula.trim_end_matches(['+', '-']);
    while !rest.is_empty() {
        let letters = rest[1..].find(|c: char| !c.is_ascii_lowercase());
        let (symbol, after) = rest.split_at(letters.map_or(rest.len(), |at| at + 1));
        let digits = after.find(|c: char| !c.is_ascii_digit());
        let (number, after) = after.split_at(digits.unwrap_or(after.len()));
        *counted.entry(symbol.to_owned()).or_insert(0) += number.parse().unwrap_or(1);
        rest = after;
    }
    counted
}

/// Atoms and mass on both sides are the same.
fn assert_balanced(reactants: &[&Molecule], products: &[&Molecule], what: &str) {
    let sum = |side: &[&Molecule]| {
        let mut all = BTreeMap::new();
        for (symbol, count) in side.iter().flat_map(|m| atoms(m.formula())) {
            *all.entry(symbol).or_insert(0) += count;
        }
        all
    };
    assert_eq!(sum(reactants), sum(products), "{what}");
    let mass = |side: &[&Molecule]| side.iter().map(|m| m.exact_mass()).sum::<f64>();
    let change = mass(reactants) - mass(products);
    assert!(change.abs() < 1e-6, "{what}: {change} Da");
}

/// What leaves, as many times.
fn left(smiles: &str, times: usize) -> Vec<Molecule> {
    let one = (!smiles.is_empty()).then(|| molecule(smiles));
    one.into_iter().cycle().take(times).collect()
}

fn all<'a>(product: &'a Molecule, leaving: &'a [Molecule]) -> Vec<&'a Molecule> {
    std::iter::once(product).chain(leaving).collect()
}

#[test]
fn products_of_the_substrate_keep_their_atoms() {
    let (mut by_oxygen, mut twice, mut dry) = (0, 0, 0);
    let water = molecule("O");
    for substrate in SUBSTRATES {
        let s = molecule(substrate);
        let site = sites(&s).into_iter().find(|site| site.activated).unwrap();
        for (smiles, leaving) in ELECTROPHILES {
            let what = format!("{substrate} + {smiles}");
            let (e, group) = electrophile(smiles);
            let leaves = |times| left(leaving, times);
            let carbon = c_product(&s, site.atom, &e, &group).unwrap();
            assert_balanced(&[&s, &e], &all(&carbon.molecule, &leaves(1)), &what);
            if let Some(oxygen) = o_product(&s, site.atom, &e, &group).unwrap() {
                by_oxygen += 1;
                assert_balanced(&[&s, &e], &all(&oxygen.molecule, &leaves(1)), &what);
            }
            if let Some(double) = double_product(&carbon, &e, &group).unwrap() {
                twice += 1;
                assert_balanced(&[&s, &e, &e], &all(&double.molecule, &leaves(2)), &what);
            }
            if let Some(enone) = dehydrated(&carbon).unwrap() {
                dry += 1;
                assert_balanced(&[&s, &e], &[&enone, &water], &what);
            }
        }
    }
    assert!(
        by_oxygen > 80 && twice > 180 && dry > 15,
        "{by_oxygen} {twice} {dry}"
    );
}

#[test]
fn products_of_base_and_solvent_keep_their_atoms() {
    for (nucleophile, atom, acid) in NUCLEOPHILES {
        for (smiles, leaving) in ELECTROPHILES {
            let (e, group) = electrophile(smiles);
            let product = substitution_product(&molecule(nucleophile), atom, &e, &group).unwrap();
            let leaves = left(leaving, 1);
            let what = format!("{nucleophile} + {smiles}");
            let products = all(&product.molecule, &leaves);
            assert_balanced(&[&molecule(acid), &e], &products, &what);
        }
    }
}

#[test]
fn eliminations_keep_their_atoms() {
    let mut made = 0;
    for (smiles, leaving) in ELECTROPHILES {
        let (e, group) = electrophile(smiles);
        for alkene in alkenes(&e, &group).unwrap() {
            made += 1;
            assert_balanced(&[&e], &all(&alkene, &left(leaving, 1)), smiles);
        }
    }
    assert_eq!(made, 2, "propene and 1-butene");
}

/// Both alkenes of a secondary bromide, none at a bridgehead, in a small ring or without a β hydrogen.
#[test]
fn alkenes_are_those_that_can_be() {
    for (smiles, expected) in [
        ("CCC(C)Br", vec!["C=CCC", "CC=CC"]),
        ("CCC(Br)C(=O)OC", vec!["CC=CC(=O)OC"]),
        ("BrC1CCCC1", vec!["C1=CCCC1"]),
        ("BrC1CC1", vec![]),
        ("BrCC12CC3CC(CC(C3)C1)C2", vec![]),
        ("BrC1CC2CCC1C2", vec!["C1=CC2CCC1C2"]),
        ("CI", vec![]),
        ("CC(=O)Cl", vec![]),
    ] {
        let (e, group) = electrophile(smiles);
        let mut found: Vec<String> = alkenes(&e, &group)
            .unwrap()
            .iter()
            .map(|alkene| alkene.canonical().to_owned())
            .collect();
        found.sort();
        assert_eq!(found, expected, "{smiles}");
    }
}

#[test]
fn products_at_carbonyl_groups_keep_their_atoms() {
    let (water, hydrogen_bromide) = (molecule("O"), molecule("Br"));
    // carbonyl carbon, site, what an ester loses
    for (smiles, carbonyl, site, alcohol) in [
        ("CC(=O)c1ccccc1", 1, 0, None),
        ("CC(C)C=O", 3, 1, None),
        ("CCOC(=O)Cc1ccccc1", 3, 5, Some("CCO")),
        ("O=C1CCCCO1", 1, 2, None),
        ("CC(C)(C)OC(C)=O", 5, 6, Some("CC(C)(C)O")),
    ] {
        let s = molecule(smiles);
        let lost: Vec<Molecule> = alcohol.into_iter().map(molecule).collect();
        let dimer = self_condensation_product(&s, site, carbonyl).unwrap();
        assert_balanced(&[&s, &s], &all(&dimer.molecule, &lost), smiles);
        let butane = molecule("CCCC");
        let adduct = carbonyl_product(&molecule("[CH2-]CCC"), 0, &s, carbonyl).unwrap();
        assert_balanced(&[&s, &butane], &all(&adduct.molecule, &lost), smiles);
        if let Some(expected) = alcohol {
            let found = alcohol_of_ester(&s, carbonyl).unwrap().unwrap();
            assert_eq!(found.canonical(), expected);
            let acid = carbonyl_product(&water, 0, &s, carbonyl).unwrap();
            assert_balanced(&[&s, &water], &[&acid.molecule, &found], smiles);
        }
    }
    let lactone = molecule("O=C1CCCCO1");
    assert!(alcohol_of_ester(&lactone, 1).unwrap().is_none());

    let aldehyde = molecule("O=Cc1ccco1");
    let (acid, alcohol) = disproportionated(&aldehyde, 1).unwrap();
    let reactants = [&aldehyde, &aldehyde, &water];
    assert_balanced(&reactants, &[&acid, &alcohol], "furfural");

    let butanal = molecule("CC(C)C=O");
    let aldol = self_condensation_product(&butanal, 1, 3).unwrap();
    let [primary, secondary] = glycol_esters(&butanal, 3, &aldol).unwrap().unwrap();
    assert_eq!(
        primary.canonical(),
        molecule("CC(C)C(=O)OCC(C)(C)C(O)C(C)C").canonical()
    );
    assert_eq!(
        secondary.canonical(),
        molecule("CC(C)C(=O)OC(C(C)C)C(C)(C)CO").canonical()
    );
    assert_balanced(&[&butanal; 3], &[&primary], "2-methylpropanal");

    let bromide = molecule("COC(=O)Cc1ccc(Br)cc1");
    let bare = dehalogenated(&bromide, 9).unwrap();
    let change = bromide.exact_mass() + 2.0 * HYDROGEN_DA - bare.exact_mass();
    assert!((change - hydrogen_bromide.exact_mass()).abs() < 1e-5);
}

#[test]
fn wrong_atoms_are_errors() {
    let (e, group) = electrophile("CI");
    let ester = molecule("CCOC(C)=O");
    for found in [
        substitution_product(&molecule("CC(C)(C)C"), 1, &e, &group).err(),
        substitution_product(&molecule("CO"), 7, &e, &group).err(),
        carbonyl_product(&molecule("O"), 0, &ester, 0).err(),
        carbonyl_product(&molecule("O"), 0, &ester, 99).err(),
        alcohol_of_ester(&ester, 0).err(),
        disproportionated(&ester, 3).err(),
        dehalogenated(&ester, 0).err(),
        dehalogenated(&ester, 99).err(),
    ] {
        let error = found.expect("refused");
        assert!(!error.remedy.is_empty(), "{error}");
    }
}
