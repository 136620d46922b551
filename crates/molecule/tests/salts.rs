//! Salts and solvates, as bottles and vendors' files write them.

use enolattice_molecule::{CompanionRole, Molecule, Salt};

fn salt(smiles: &str) -> Salt {
    Molecule::parse_salt(smiles).unwrap_or_else(|fault| panic!("{smiles}: {fault}"))
}

#[test]
fn counter_ions_leave_the_molecule_that_reacts() {
    // salt, molecule, companions, acid and lost protons per molecule
    let cases = [
        ("CCOC(=O)CC(C)=O", "CCOC(=O)CC(C)=O", "", 0.0, 0.0),
        ("Cl.NCC(=O)OCC", "CCOC(=O)CN", "hydrogen chloride", 1.0, 0.0),
        ("[Cl-].CCOC(=O)C[NH3+]", "CCOC(=O)CN", "chloride", 1.0, 0.0),
        (
            "CN1CCC(=O)CC1.Br",
            "CN1CCC(=O)CC1",
            "hydrogen bromide",
            1.0,
            0.0,
        ),
        (
            "O=C1CCNCC1.O.Cl",
            "O=C1CCNCC1",
            "water, hydrogen chloride",
            1.0,
            0.0,
        ),
        (
            "NCc1cc[nH]c1.OC(=O)C(F)(F)F.OC(=O)C(F)(F)F",
            "NCc1cc[nH]c1",
            "trifluoroacetic acid*2",
            2.0,
            0.0,
        ),
        (
            "C[NH2+]CC(C)=O.C[NH2+]CC(C)=O.[O-]S(=O)(=O)[O-]",
            "CNCC(C)=O",
            "sulfate",
            1.0,
            0.0,
        ),
        (
            "CNCC(C)=O.OC(=O)C(=O)O",
            "CNCC(C)=O",
            "oxalic acid",
            2.0,
            0.0,
        ),
        (
            "CC(=O)c1cc[nH+]cc1.[Cl-]",
            "CC(=O)c1ccncc1",
            "chloride",
            1.0,
            0.0,
        ),
        (
            "[Na+].[O-]C(=O)Cc1ccccc1",
            "O=C(O)Cc1ccccc1",
            "sodium",
            0.0,
            1.0,
        ),
        (
            "[K+].[K+].[O-]C(=O)CC([O-])=O",
            "O=C(O)CC(=O)O",
            "potassium*2",
            0.0,
            2.0,
        ),
        (
            "[K+].CCOC(=O)CC([O-])=O",
            "CCOC(=O)CC(=O)O",
            "potassium",
            0.0,
            1.0,
        ),
        (
            "[Na+].CCOC(=O)[CH-]C(=O)OCC",
            "CCOC(=O)CC(=O)OCC",
            "sodium",
            0.0,
            1.0,
        ),
        ("[Na+].CC(=O)[O-]", "CC(=O)O", "sodium", 0.0, 1.0),
        (
            "[Mg+2].CCOC(=O)CC([O-])=O.CCOC(=O)CC([O-])=O",
            "CCOC(=O)CC(=O)O",
            "magnesium",
            0.0,
            1.0,
        ),
        ("C=[N+](C)C.[I-]", "C=[N+](C)C", "iodide", 0.0, 0.0),
        (
            "N#[N+]c1ccccc1.F[B-](F)(F)F",
            "N#[N+]c1ccccc1",
            "tetrafluoroborate",
            0.0,
            0.0,
        ),
        (
            "F[P-](F)(F)(F)(F)F.CC[O+](CC)CC",
            "CC[O+](CC)CC",
            "hexafluorophosphate",
            0.0,
            0.0,
        ),
        (
            "[NH4+].[O-]C(=O)CC(C)=O",
            "CC(=O)CC(=O)O",
            "ammonium",
            1.0,
            1.0,
        ),
        ("O.O=CC(O)=O", "O=CC(=O)O", "water", 0.0, 0.0),
        (
            "O=C1CCC(=O)C1.CCOCC",
            "O=C1CCC(=O)C1",
            "diethyl ether",
            0.0,
            0.0,
        ),
    ];
    for (smiles, molecule, companions, acid, lost) in cases {
        let salt = salt(smiles);
        assert_eq!(salt.molecule.canonical(), molecule, "{smiles}");
        let names: Vec<String> = salt
            .companions
            .iter()
            .map(|c| match c.count {
                1 => c.name.to_owned(),
                n => format!("{}*{n}", c.name),
            })
            .collect();
        assert_eq!(names.join(", "), companions, "{smiles}");
        assert_eq!(salt.acid_equivalents, acid, "{smiles}");
        assert_eq!(salt.deprotonated, lost, "{smiles}");
        assert_eq!(salt.note().is_none(), companions.is_empty(), "{smiles}");
    }
}

/// Molar masses as bottles print them, g/mol.
#[test]
fn what_is_weighed_is_the_salt() {
    for (smiles, bottle) in [
        ("Cl.CCOC(=O)CN", 139.58),
        ("[I-].C=[N+](C)C", 185.01),
        ("F[B-](F)(F)F.C[O+](C)C", 147.91),
        (
            "F[N+]12CC[N+](CCl)(CC1)CC2.F[B-](F)(F)F.F[B-](F)(F)F",
            354.26,
        ),
        ("[K+].CCOC(=O)CC([O-])=O", 170.20),
        ("[Mg+2].CCOC(=O)CC([O-])=O.CCOC(=O)CC([O-])=O", 286.52 / 2.0),
    ] {
        let mass = salt(smiles).molar_mass_g_mol;
        assert!((mass - bottle).abs() < 0.02, "{smiles}: {mass}");
    }
}

/// The index of an atom counts within its fragment, whatever stands before it and whatever was
/// neutralised.
#[test]
fn atoms_keep_their_order() {
    let salt = salt("[Cl-].[NH3+]CC(=O)C[13CH3]");
    let elements: Vec<u8> = salt.molecule.atoms().iter().map(|a| a.element).collect();
    assert_eq!(elements, [7, 6, 6, 8, 6, 6]);
    assert_eq!(salt.molecule.atoms()[0].hydrogens, 2);
    let again = Molecule::parse(salt.molecule.smiles()).unwrap();
    assert_eq!(again.canonical(), salt.molecule.canonical());
    let alanine = self::salt("Cl.COC(=O)[C@H](C)[NH3+].[Cl-]");
    assert_eq!(alanine.molecule.canonical(), "COC(=O)[C@H](C)N");
    assert_eq!(alanine.acid_equivalents, 2.0);
}

#[test]
fn roles_tell_ions_acids_and_solvents_apart() {
    let roles: Vec<CompanionRole> = salt("CC(=O)C[NH3+].[Cl-].Cl.O.[Na+].[Cl-]")
        .companions
        .iter()
        .map(|companion| companion.role)
        .collect();
    use CompanionRole::*;
    assert_eq!(roles, [Anion, Acid, Solvent, Cation]);
}

#[test]
fn mixtures_and_unbalanced_salts_are_refused() {
    let many = vec!["O"; 13].join(".");
    let cases = [
        ("CC(=O)CC.CCOC(=O)CC", "mixture"),
        ("CC(C)=O.CC#N", "mixture"),
        ("C=[N+](C)C", ""),
        ("C=[N+](C)C.[Na+]", "add up to +2"),
        ("CC(=O)CC.[Cl-]", "add up to -1"),
        ("[Na+].[Cl-]", "no organic molecule"),
        ("[Na+].[H-]", "no organic molecule"),
        ("CCO.", "empty fragment"),
        (".", "empty fragment"),
        (many.as_str(), "13 fragments"),
        ("C1.C1", "ring label 1"),
        ("C[Li].Cl", "Li"),
        (
            "CC(=O)C.[H][N+]([H])([H])CC(=O)OC.[Cl-]",
            "atoms of their own",
        ),
        ("CCO.X", "cannot be read"),
    ];
    for (smiles, word) in cases {
        match Molecule::parse_salt(smiles) {
            Ok(_) => assert_eq!(word, "", "{smiles}"),
            Err(fault) => {
                assert!(
                    fault.reason.contains(word) && !word.is_empty(),
                    "{smiles}: {fault}"
                );
                assert!(!fault.remedy.is_empty(), "{smiles}");
            }
        }
    }
}
