//! Hostile text neither panics nor exceeds the caps.

use enolattice_molecule::{
    Molecule, alcohol_of_ester, alkenes, c_product, carbonyl_product, dehalogenated, dehydrated,
    disproportionated, double_product, heteroatom_product, o_product, recognise,
    substitution_product,
};
use proptest::prelude::*;

/// Everything that can be done with a text, on a stack as small as a worker thread's.
fn exercise(text: &str) {
    exercise_salt(text);
    let Ok(molecule) = Molecule::parse(text) else {
        return;
    };
    assert!(text.trim().len() <= Molecule::MAX_BYTES);
    let atoms = molecule.atoms().len();
    assert!((1..=Molecule::MAX_ATOMS).contains(&atoms));
    assert_eq!(molecule.symmetry_classes().len(), atoms);
    let bonds: usize = (0..atoms).map(|a| molecule.neighbours(a).len()).sum();
    assert!(bonds / 2 <= Molecule::MAX_BONDS);
    assert!(molecule.exact_mass() > 0.0 && molecule.molar_mass() > 0.0);
    let again = Molecule::parse(molecule.canonical());
    assert_eq!(again.unwrap().formula(), molecule.formula(), "{text}");
    for atom in 0..atoms.min(12) {
        let _ = carbonyl_product(&molecule, atom / 2, &molecule, atom);
        let _ = alcohol_of_ester(&molecule, atom);
        let _ = disproportionated(&molecule, atom);
        let _ = dehalogenated(&molecule, atom);
    }
    if let Ok(group) = recognise(&molecule) {
        let _ = alkenes(&molecule, &group);
        for atom in 0..atoms.min(12) {
            let product = c_product(&molecule, atom, &molecule, &group);
            let _ = o_product(&molecule, atom, &molecule, &group);
            let _ = heteroatom_product(&molecule, atom, &molecule, &group);
            let _ = substitution_product(&molecule, atom, &molecule, &group);
            if let Ok(product) = product {
                let _ = dehydrated(&product);
                let _ = double_product(&product, &molecule, &group);
            }
        }
    }
}

fn exercise_salt(text: &str) {
    let Ok(salt) = Molecule::parse_salt(text) else {
        return;
    };
    assert!(text.trim().len() <= Molecule::MAX_BYTES);
    assert!(salt.acid_equivalents.is_finite() && salt.deprotonated >= 0.0);
    assert!(
        salt.molar_mass_g_mol + 1e-6 >= salt.molecule.molar_mass() - 3.0,
        "{text}"
    );
    let again = Molecule::parse(salt.molecule.smiles());
    assert_eq!(
        again.unwrap().canonical(),
        salt.molecule.canonical(),
        "{text}"
    );
    assert!(text.contains('.') || salt.note().is_none(), "{text}");
    let _ = recognise(&salt.molecule);
}

/// What the random SMILES are strung together from.
const TOKENS: &str = "C C C c N n O o S s F Cl Br I P B = # - : / \\ ( ) 1 2 3 %10 %99 [nH] [C@H] [C@@H] \
    [C@] [N+] [O-] [NH4+] [2H] [H] [13C] [Si] [CH2-] [C:1] [Na+] . * C(=O) C#N \
    [N+](=O)[O-] S(=O)(=O) c1ccccc1 C1CC1 C=C CBr C=O $ ~ [ ] @ 0 [SH6] [C@SP1] \
    [CH3:12345] N(=O)=O N=[N]=N [se] [as] [IH2] ->";

/// The same cases in every run; more were tried when the test was written.
fn cases(cases: u32) -> ProptestConfig {
    ProptestConfig {
        cases,
        failure_persistence: None,
        rng_seed: proptest::test_runner::RngSeed::Fixed(20),
        ..ProptestConfig::default()
    }
}

proptest! {
    #![proptest_config(cases(300))]

    #[test]
    fn any_bytes(bytes in proptest::collection::vec(any::<u8>(), 0..200)) {
        exercise(&String::from_utf8_lossy(&bytes));
    }

    #[test]
    fn any_tokens(picks in proptest::collection::vec(any::<proptest::sample::Index>(), 0..40)) {
        let tokens: Vec<&str> = TOKENS.split(' ').collect();
        exercise(&picks.iter().map(|pick| *pick.get(&tokens)).collect::<String>());
    }

    #[test]
    fn any_salt_of_sound_fragments(picks in proptest::collection::vec(any::<proptest::sample::Index>(), 1..8)) {
        let fragments = ["CC[NH3+]", "[nH+]1ccccc1", "C[NH+](C)C", "CCN", "[O-]C(=O)CC", "[H][N+]([H])([H])C",
            "C[N+](C)(C)C", "C=[N+](C)C", "N#[N+]c1ccccc1", "CC(=O)[CH-]C(C)=O", "[Na+]", "[K+]", "[Mg++]",
            "[Cl-]", "Cl", "O", "F[P-](F)(F)(F)(F)F", "F[B-](F)(F)F", "OC(=O)C(=O)O", "[O-]S(=O)(=O)[O-]",
            "CCO", "", "[NH4+]", "[S-]C", "[C@@H]([NH3+])(C)C(=O)[O-]"];
        let text: Vec<&str> = picks.iter().map(|pick| *pick.get(&fragments)).collect();
        exercise_salt(&text.join("."));
    }

    #[test]
    fn any_reagent_of_sound_pieces(picks in proptest::collection::vec(0usize..40, 1..8)) {
        let pieces = ["C", "C(=O)", "C(=O)Cl", "OC(=O)", "N(Br)", "S", "SS", "[Se]", "N=N", "N=C=O", "C1OC1", "C1NC1",
            "C1SC1", "S(=O)(=O)", "N=[N+]=[N-]", "[N+]#N", "C=N", "N=O", "ON=O", "C#C", "C=C", "Cl", "Br", "I", "F",
            "[Si](C)(C)", "P(=O)(O)O", "[O+](C)", "[N+](C)(F)", "c1ccc(F)cc1", "c1ncc(Cl)nc1", "C(F)(F)F", "C(Cl)(Cl)Cl",
            "C1=CC(=O)C=CC1=O", "C1=CC(=C)C=CC1=O", "N1OC1", "O", "N", "C#N", "[N+](=O)[O-]"];
        exercise(&picks.iter().map(|i| pieces[*i]).collect::<String>());
    }

    #[test]
    fn any_chain_of_sound_pieces(picks in proptest::collection::vec(0usize..14, 1..30)) {
        let pieces = ["C", "C(C)", "C(=O)", "O", "N", "C=C", "/C=C/", "C(Br)", "C(C#N)", "[C@H](O)",
            "c1ccc(cc1)", "C1CCC(CC1)", "C(C=O)", "S(=O)(=O)"];
        let chain: String = picks.iter().map(|i| pieces[*i]).collect();
        exercise(&format!("C{chain}C"));
    }
}

proptest! {
    #![proptest_config(cases(16))]

    #[test]
    fn deep_nesting_long_chains_and_rings(depth in 0usize..700, length in 0usize..2_100, rings in 0usize..99) {
        exercise(&format!("{}C{}", "C(".repeat(depth), ")".repeat(depth)));
        exercise(&format!("{}C{}", "(".repeat(depth), ")C".repeat(depth)));
        exercise(&format!("C{}", "(C".repeat(depth) + &")".repeat(depth)));
        exercise(&"C".repeat(length));
        exercise(&"c".repeat(length));
        exercise(&"C=".repeat(length));
        exercise(&"[".repeat(length));
        exercise(&"C%".repeat(length));
        let labels: Vec<String> = (1..=rings).map(|i| if i < 10 { i.to_string() } else { format!("%{i}") }).collect();
        let open: String = labels.iter().map(|l| format!("C{l}")).collect();
        exercise(&format!("{open}{open}"));
        let closed: String = labels.iter().rev().map(|l| format!("C{l}")).collect();
        exercise(&format!("{open}{closed}"));
    }
}
