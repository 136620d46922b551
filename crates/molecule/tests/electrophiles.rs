//! What is recognised as an electrophile: facts of the trade, one a line.

use enolattice_molecule::{
    Acceptor, AlkylGroup, ElectrophileKind, ElectrophilicGroup, LeavingGroup, Molecule, recognise,
};

fn recognised(smiles: &str) -> Result<ElectrophilicGroup, String> {
    recognise(&Molecule::parse(smiles).unwrap())
}

#[test]
fn alkylating_agents() {
    use AlkylGroup as G;
    use LeavingGroup as L;
    // SMILES, group, leaving group, β hydrogens, one of them activated, further positions, carbon
    let cases = [
        ("CI", G::Methyl, L::Iodide, 0, false, 0, 0),
        ("[2H]C([2H])([2H])I", G::Methyl, L::Iodide, 0, false, 0, 1),
        ("COS(=O)(=O)OC", G::Methyl, L::Sulfate, 0, false, 0, 0),
        (
            "COS(=O)(=O)C(F)(F)F",
            G::Methyl,
            L::Triflate,
            0,
            false,
            0,
            0,
        ),
        ("CCBr", G::Ethyl, L::Bromide, 3, false, 0, 1),
        ("CCF", G::Ethyl, L::Fluoride, 3, false, 0, 1),
        (
            "CCCCOS(=O)(=O)c1ccc(C)cc1",
            G::Primary,
            L::Tosylate,
            2,
            false,
            0,
            3,
        ),
        ("CCCOS(C)(=O)=O", G::Primary, L::Mesylate, 2, false, 0, 2),
        ("BrCCc1ccccc1", G::Primary, L::Bromide, 2, true, 0, 1),
        ("BrCCC(=O)OCC", G::Primary, L::Bromide, 2, true, 0, 1),
        ("BrCCCCBr", G::Primary, L::Bromide, 2, false, 1, 1),
        ("ClCCCBr", G::Primary, L::Bromide, 2, false, 0, 3),
        ("CC(C)CI", G::Isobutyl, L::Iodide, 1, false, 0, 3),
        ("CC(C)(C)CBr", G::Neopentyl, L::Bromide, 0, false, 0, 4),
        ("CC(C)Br", G::Secondary, L::Bromide, 6, false, 0, 1),
        ("BrC1CC1", G::Secondary, L::Bromide, 4, false, 0, 1),
        ("BrC1CCCC1", G::Secondary, L::Bromide, 4, false, 0, 1),
        ("BrC1CCCCC1", G::Cyclohexyl, L::Bromide, 4, false, 0, 1),
        ("CC(C)(C)Cl", G::Tertiary, L::Chloride, 9, false, 0, 1),
        ("C=CCBr", G::Allyl, L::Bromide, 0, false, 0, 2),
        ("C#CCBr", G::Propargyl, L::Bromide, 0, false, 0, 2),
        ("BrCc1ccccc1", G::Benzyl, L::Bromide, 0, false, 0, 1),
        (
            "COC(=O)c1ccc(CBr)cc1",
            G::Benzyl,
            L::Bromide,
            0,
            false,
            0,
            8,
        ),
        ("Brc1ccc(CBr)cc1", G::Benzyl, L::Bromide, 0, false, 0, 5),
        (
            "O=[N+]([O-])c1ccc(CCl)cc1",
            G::Benzyl,
            L::Chloride,
            0,
            false,
            0,
            7,
        ),
        ("BrCc1cccc(CBr)c1", G::Benzyl, L::Bromide, 0, false, 1, 1),
        (
            "CC(Br)c1ccccc1",
            G::SecondaryActivated,
            L::Bromide,
            3,
            false,
            0,
            1,
        ),
        (
            "CC(Br)C(=O)OCC",
            G::SecondaryActivated,
            L::Bromide,
            3,
            false,
            0,
            1,
        ),
        ("BrCC(=O)OCC", G::AlphaCarbonyl, L::Bromide, 0, false, 0, 1),
        (
            "O=C(CBr)c1ccccc1",
            G::AlphaCarbonyl,
            L::Bromide,
            0,
            false,
            0,
            2,
        ),
        ("ClCC#N", G::AlphaCarbonyl, L::Chloride, 0, false, 0, 1),
        ("OCCCBr", G::Primary, L::Bromide, 2, false, 0, 3),
        ("FCCCBr", G::Primary, L::Bromide, 2, false, 0, 3),
    ];
    for (smiles, group, leaving, beta_hydrogens, activated_beta_hydrogen, further, carbon) in cases
    {
        let found = recognised(smiles).unwrap();
        let expected = ElectrophileKind::Alkyl {
            group,
            leaving,
            beta_hydrogens,
            activated_beta_hydrogen,
        };
        assert_eq!(found.kind, expected, "{smiles}");
        assert_eq!(found.further_positions, further, "{smiles}");
        assert_eq!(found.atom, carbon, "{smiles}");
        assert!(found.leaving_atom.is_some(), "{smiles}");
    }
}

#[test]
fn michael_acceptors() {
    use Acceptor as A;
    // SMILES, acceptor, further and β acceptors, β alkyl and aryl, α alkyl, further positions, α, β
    let cases = [
        ("C=C[N+](=O)[O-]", A::Nitro, 0, 0, 0, 0, 0, 0, 1, 0),
        ("O=N(=O)C=Cc1ccccc1", A::Nitro, 0, 0, 0, 1, 0, 0, 3, 4),
        ("C=CC=O", A::Aldehyde, 0, 0, 0, 0, 0, 0, 1, 0),
        ("C=CC(C)=O", A::Ketone, 0, 0, 0, 0, 0, 0, 1, 0),
        ("O=C1C=CCCC1", A::Ketone, 0, 0, 1, 0, 0, 0, 2, 3),
        (
            "O=C(/C=C/c1ccccc1)/C=C/c1ccccc1",
            A::Ketone,
            0,
            0,
            0,
            1,
            0,
            1,
            2,
            3,
        ),
        ("C=C1CCCC1=O", A::Ketone, 0, 0, 0, 0, 1, 0, 1, 0),
        ("COC(=O)CC(=O)C=C", A::Ketone, 0, 0, 0, 0, 0, 0, 7, 8),
        ("C=CS(=O)(=O)c1ccccc1", A::Sulfone, 0, 0, 0, 0, 0, 0, 1, 0),
        ("C=CC(=O)OC", A::Ester, 0, 0, 0, 0, 0, 0, 1, 0),
        ("C=C(C)C(=O)OC", A::Ester, 0, 0, 0, 0, 1, 0, 1, 0),
        ("C/C=C/C(=O)OC", A::Ester, 0, 0, 1, 0, 0, 0, 2, 1),
        ("CCOC(=O)/C=C/c1ccccc1", A::Ester, 0, 0, 0, 1, 0, 0, 5, 6),
        ("CCOC(=O)/C=C\\C(=O)OCC", A::Ester, 0, 1, 0, 0, 0, 0, 6, 5),
        (
            "CCOC(=O)C(=Cc1ccccc1)C(=O)OCC",
            A::Ester,
            1,
            0,
            0,
            1,
            0,
            0,
            5,
            6,
        ),
        ("C=CC#N", A::Nitrile, 0, 0, 0, 0, 0, 0, 1, 0),
        ("N#CC(C#N)=Cc1ccccc1", A::Nitrile, 1, 0, 0, 1, 0, 0, 2, 5),
        ("C=CC(=O)N(C)C", A::Amide, 0, 0, 0, 0, 0, 0, 1, 0),
        ("CN1C(=O)C=CC1=O", A::Imide, 0, 1, 0, 0, 0, 0, 5, 4),
    ];
    for (smiles, acceptor, more, on_beta, alkyl, aryl, alpha_alkyl, further, alpha, beta) in cases {
        let found = recognised(smiles).unwrap();
        let expected = ElectrophileKind::Michael {
            alpha,
            acceptor,
            further_acceptors: more,
            beta_acceptors: on_beta,
            beta_alkyl: alkyl,
            beta_aryl: aryl,
            alpha_alkyl,
        };
        assert_eq!(found.kind, expected, "{smiles}");
        assert_eq!((found.atom, found.leaving_atom), (beta, None), "{smiles}");
        assert_eq!(found.further_positions, further, "{smiles}");
    }
}

#[test]
fn aldehydes() {
    // σ by Hansch, Leo, Taft, Chem. Rev. 1991, 91, 165 (from memory), summed by hand.
    let cases = [
        ("O=Cc1ccccc1", true, 0, 0.0, 0),
        ("O=Cc1ccc([N+](=O)[O-])cc1", true, 0, 0.78, 0),
        ("O=Cc1cccc([N+](=O)[O-])c1", true, 0, 0.71, 0),
        ("COc1ccc(C=O)cc1", true, 0, -0.27, 0),
        ("CN(C)c1ccc(C=O)cc1", true, 0, -0.83, 0),
        ("O=Cc1cc(Cl)cc(Cl)c1", true, 0, 0.74, 0),
        ("O=Cc1ccc(C(F)(F)F)cc1", true, 0, 0.54, 0),
        ("O=Cc1ccc(C#N)cc1", true, 0, 0.66, 0),
        ("O=Cc1ccc(C=O)cc1", true, 0, 0.42, 1),
        ("O=CC1=CC=CO1", true, 0, 0.0, 0),
        ("CC(C)C=O", false, 1, 0.0, 0),
        ("CC(C)(C)C=O", false, 0, 0.0, 0),
        ("C=O", false, 0, 0.0, 0),
        ("O=CCCC=C", false, 2, 0.0, 0),
    ];
    for (smiles, is_aromatic, hydrogens, sigma, further) in cases {
        let found = recognised(smiles).unwrap();
        let ElectrophileKind::Aldehyde {
            aromatic,
            alpha_hydrogens,
            hammett_sigma,
            activated,
        } = found.kind
        else {
            panic!("{smiles}: {found:?}");
        };
        assert_eq!(
            (aromatic, alpha_hydrogens),
            (is_aromatic, hydrogens),
            "{smiles}"
        );
        assert!(!activated, "{smiles}");
        assert!(
            (hammett_sigma - sigma).abs() < 1e-12,
            "{smiles} {hammett_sigma}"
        );
        assert_eq!(found.further_positions, further, "{smiles}");
    }
}

#[test]
fn inert_halides_are_known_not_to_react() {
    for smiles in [
        "C=CBr",
        "CC=CCl",
        "Brc1ccccc1",
        "Clc1ccc(OC)cc1",
        "Ic1ccc2ccccc2c1",
        "BrC12CC3CC(CC(C3)C1)C2",
    ] {
        let found = recognised(smiles).unwrap();
        assert!(
            matches!(found.kind, ElectrophileKind::Inert { .. }),
            "{smiles}: {found:?}"
        );
    }
}

#[test]
fn the_rest_is_refused_with_a_reason() {
    let cases = [
        ("O=C(Cl)Cl", "phosgene"),
        ("ClC(=O)C(=O)Cl", "oxalyl chloride"),
        ("ClC(Cl)(Cl)OC(=O)OC(Cl)(Cl)Cl", "triphosgene"),
        ("O=C1C=CC(=O)O1", "maleic anhydride"),
        ("CC1C(=O)OC(=O)N1", "N-carboxyanhydride"),
        ("C=C1CC(=O)O1", "enol lactone"),
        ("CC(=O)OC(=O)CC", "two different acyl groups"),
        ("O=C1C(=O)c2ccccc2-c2ccccc21", "ortho-quinone"),
        ("O=C1c2ccccc2C(=O)c2ccccc12", "anthraquinone"),
        ("O=C1C(Cl)=C(Cl)C(=O)C(Cl)=C1Cl", "halogenated quinone"),
        ("ClCC1CO1", "an alkylating group and a three-membered ring"),
        ("BrCCC1CO1", "an alkylating group and a three-membered ring"),
        ("CC(=O)C1CO1", "a three-membered ring and a ketone"),
        ("CCC1OC1C", "two carbons are equally substituted"),
        ("CSSc1ccccc1", "two different sides"),
        ("S1SSSSSSS1", "elemental sulfur"),
        ("CCN(CC)Cl", "N-halo amine"),
        ("CC(=O)OI(OC(C)=O)c1ccccc1", "hypervalent iodine"),
        ("O=S(Cl)Cl", "halide of sulfur"),
        ("CS(=O)Cl", "halide of sulfur"),
        ("CN(C)Sc1ccccc1", "sulfenamide"),
        ("ClP(c1ccccc1)c1ccccc1", "phosphorus halide"),
        ("CCOC(=O)C=[N+]=[N-]", "diazo"),
        ("CC(=O)N=[N+]=[N-]", "acyl azide"),
        ("c1ccc(N=Nc2ccccc2)cc1", "azo compound"),
        ("CC(C)(C)N=O", "nitrosoalkane"),
        ("ClC=[N+](C)C", "chloroiminium"),
        ("N#CBr", "cyanogen halide"),
        ("C#CBr", "alkynyl halide"),
        ("CC(C)(C)OO", "peroxide"),
        ("C=CC(=O)O", "unsaturated acid"),
        ("CCOC=CC(C)=O", "heteroatom"),
        ("COC(C)Cl", "next to O, N or S"),
        ("ClCS(=O)(=O)c1ccccc1", "sulfone"),
        ("CCOC(=O)C(Br)C(=O)OCC", "between two acceptors"),
        ("ClC(Cl)Cl", "several halogens"),
        ("ClC(Cl)c1ccccc1", "several halogens"),
        ("FC(F)Cl", "several halogens"),
        ("O=Cc1ccc(CBr)cc1", "an alkylating group and an aldehyde"),
        (
            "BrCC=CC(=O)OC",
            "an alkylating group and a Michael acceptor",
        ),
        ("BrCCCI", "two different alkylating positions"),
        (
            "CCOC(=O)c1cccnc1Cl",
            "one ring nitrogen and a carbonyl group or imine",
        ),
        ("CC(=O)O", "carboxylic acid"),
        ("CC(=O)NC", "amide N–H"),
        ("CN(C)C(=O)N(C)C", "urea"),
        ("CC(C)(C)OC(=O)N(C)C", "carbamate"),
        ("CCOC(OCC)OCC", "orthoester"),
        ("CC#N", "nitrile"),
        ("C[N+](C)(C)C", "onium"),
        ("C[n+]1ccccc1", "azinium"),
        ("O=c1ccc2ccccc2o1", "coumarin"),
        ("CC(=S)c1ccccc1", "thioketone"),
        ("C1COC1", "oxetane"),
        ("CCOP(C)(=O)OCC", "phosphonate"),
        ("c1ccccc1", "no electrophilic group"),
        ("CCO", "no electrophilic group"),
    ];
    for (smiles, word) in cases {
        let reason = recognised(smiles).unwrap_err();
        assert!(reason.contains(word), "{smiles}: {reason}");
    }
}
