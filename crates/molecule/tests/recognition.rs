//! What a chemist says of 200 molecules, one a line: which group reacts, and at which atom.

use enolattice_molecule::{ElectrophileKind as K, Molecule, recognise};

/// The kind in words, with what decides its rate.
fn said(kind: K) -> String {
    let flag = |on: bool, word: &str| {
        if on {
            format!(" {word}")
        } else {
            String::new()
        }
    };
    match kind {
        K::Alkyl { group, leaving, .. } => format!("alkyl {group:?} {leaving:?}"),
        K::Michael {
            acceptor,
            further_acceptors,
            ..
        } => format!(
            "michael {acceptor:?}{}",
            flag(further_acceptors > 0, "twice")
        ),
        K::Aldehyde {
            aromatic,
            activated,
            ..
        } => format!(
            "aldehyde{}{}",
            flag(aromatic, "aromatic"),
            flag(activated, "activated")
        ),
        K::Ketone {
            aromatic,
            activated,
            ..
        } => format!(
            "ketone{}{}",
            flag(aromatic, "aromatic"),
            flag(activated, "activated")
        ),
        K::Imine {
            nitrogen,
            is_ketimine,
            ..
        } => format!("imine {nitrogen:?}{}", flag(is_ketimine, "of a ketone")),
        K::Acyl {
            donor,
            alpha_hydrogens,
            branches,
        } => format!("acyl {donor:?} {alpha_hydrogens}H {branches}"),
        K::Ring {
            heteroatom,
            degree,
            activated,
        } => format!(
            "ring {heteroatom:?} {degree}{}",
            flag(activated, "activated")
        ),
        K::Cumulene { cumulene } => format!("cumulene {cumulene:?}"),
        K::Aryl {
            leaving,
            nitro,
            acceptors,
            ring_nitrogens,
            halogens,
        } => format!("aryl {leaving:?} {nitro} {acceptors} {ring_nitrogens} {halogens}"),
        K::Transfer { donor } => format!("transfer {donor:?}"),
        K::Silyl { leaving, bulk } => format!("silyl {leaving:?} {bulk}"),
        K::Inert { .. } => "inert".to_owned(),
    }
}

/// Every line that differs is shown.
fn check(cases: &[(&str, &str, usize)]) {
    let mut wrong = Vec::new();
    for (smiles, expected, atom) in cases {
        let molecule = Molecule::parse_salt(smiles).unwrap().molecule;
        match recognise(&molecule) {
            Ok(group) if said(group.kind) == *expected && group.atom == *atom => {}
            Ok(group) => wrong.push(format!("{smiles}: {} at {}", said(group.kind), group.atom)),
            Err(reason) => wrong.push(format!("{smiles}: {reason}")),
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn alkylating_agents_beyond_the_common_ones() {
    check(&[
        ("COCCl", "alkyl AlphaHetero Chloride", 2),
        ("C[Si](C)(C)CCOCCl", "alkyl AlphaHetero Chloride", 7),
        ("CC(C)(C)C(=O)OCCl", "alkyl AlphaHetero Chloride", 7),
        ("BrCSCc1ccccc1", "alkyl AlphaHetero Bromide", 1),
        ("O=C1c2ccccc2C(=O)N1CBr", "alkyl AlphaHetero Bromide", 11),
        ("ICI", "alkyl Halomethyl Iodide", 1),
        ("ClCBr", "alkyl Halomethyl Bromide", 1),
        ("O=S1(=O)CCCO1", "alkyl Primary Mesylate", 5),
        ("O=S1(=O)OCCO1", "alkyl Primary Sulfate", 4),
        ("C[O+](C)C.F[B-](F)(F)F", "alkyl Methyl Ether", 0),
        ("CC[O+](CC)CC.F[P-](F)(F)(F)(F)F", "alkyl Ethyl Ether", 1),
        ("COP(=O)(OC)OC", "alkyl Methyl Phosphate", 0),
    ]);
}

#[test]
fn michael_acceptors_beyond_the_common_ones() {
    check(&[
        ("C=CC(=O)SCC", "michael Thioester", 0),
        ("C=CS(=O)c1ccccc1", "michael Sulfoxide", 0),
        ("C=CP(=O)(OCC)OCC", "michael Phosphonate", 0),
        ("C=CS(=O)(=O)N(C)C", "michael Sulfonate", 0),
        ("C=CS(=O)(=O)F", "michael Sulfonate", 0),
        ("C=Cc1ccccn1", "michael Pyridyl", 0),
        ("C=Cc1ccncc1", "michael Pyridyl", 0),
        ("C=Cc1cnccn1", "michael Pyridyl", 0),
        ("C=CC(=O)N1CCOC1=O", "michael Imide", 0),
        ("O=C1C=CC(=O)N1c1ccccc1", "michael Imide", 2),
        ("O=C1C=CC(=O)C=C1", "michael Quinone", 2),
        ("CC1=CC(=O)C=CC1=O", "michael Quinone", 5),
        ("O=C1C=CC(=O)c2ccccc12", "michael Quinone", 2),
        ("CC1=CC(=O)c2ccccc2C1=O", "michael Quinone", 2),
        (
            "CC(C)(C)C1=CC(=Cc2ccccc2)C=C(C(C)(C)C)C1=O",
            "michael QuinoneMethide",
            7,
        ),
        ("C=C1C=CC=CC1=O", "michael QuinoneMethide", 0),
        ("C#CC(=O)OCC", "michael Ester", 0),
        ("COC(=O)C#CC(=O)OC", "michael Ester", 4),
        ("C#CC(C)=O", "michael Ketone", 0),
        ("CC#CC=O", "michael Aldehyde", 1),
        ("C=C1CCOC1=O", "michael Ester", 0),
        ("CCOC(=O)C(C#N)=Cc1ccccc1", "michael Ester twice", 8),
        ("CC1(C)OC(=O)C(=Cc2ccccc2)C(=O)O1", "michael Ester twice", 7),
        ("N#CC(C#N)=Cc1ccccc1", "michael Nitrile twice", 5),
        ("O=C(C=Cc1ccccc1)c1ccccc1", "michael Ketone", 3),
        ("C=CC(=O)c1ccc(Cl)cc1", "michael Ketone", 0),
        ("C=CC(=O)N(C)OC", "michael Amide", 0),
    ]);
}

#[test]
fn carbonyl_compounds_and_imines() {
    check(&[
        ("O=CC(=O)OCC", "aldehyde activated", 1),
        ("O=CC(=O)c1ccccc1", "aldehyde activated", 1),
        ("O=CC(Cl)(Cl)Cl", "aldehyde activated", 1),
        ("CCOC(=O)CC=O", "aldehyde", 6),
        ("O=Cc1c(F)c(F)c(F)c(F)c1F", "aldehyde aromatic", 1),
        ("CC(C)=O", "ketone", 1),
        ("CC(=O)c1ccccc1", "ketone aromatic", 1),
        ("O=C1CCC1", "ketone", 1),
        ("CC(=O)C(F)(F)F", "ketone activated", 1),
        ("CC(=O)C(=O)OCC", "ketone activated", 1),
        ("CN1C(=O)C(=O)c2ccccc21", "ketone aromatic activated", 4),
        ("CC(=O)c1ccc(Br)cc1", "ketone aromatic", 1),
        ("CC(=O)CCC(=O)OCC", "ketone", 1),
        ("O=C(c1ccc(F)cc1)c1ccccc1", "ketone aromatic", 1),
        ("Cc1ccc(S(=O)(=O)N=Cc2ccccc2)cc1", "imine Sulfonyl", 9),
        ("CC(C)(C)OC(=O)N=Cc1ccccc1", "imine Acyl", 8),
        ("CC(C)(C)S(=O)N=Cc1ccccc1", "imine Phosphinoyl", 7),
        ("O=P(N=Cc1ccccc1)(c1ccccc1)c1ccccc1", "imine Phosphinoyl", 3),
        ("COc1ccc(N=CC(=O)OCC)cc1", "imine Plain", 7),
        ("CC(C)=NC", "imine Plain of a ketone", 1),
        ("[I-].C=[N+](C)C", "imine Iminium", 0),
        (
            "C(c1ccccc1)=[N+]1CCCCC1.[O-]Cl(=O)(=O)=O",
            "imine Iminium",
            0,
        ),
        (
            "CN1C(=O)C(=NC(=O)OC(C)(C)C)c2ccccc21",
            "imine Acyl of a ketone",
            4,
        ),
    ]);
}

#[test]
fn acyl_and_sulfonyl_donors() {
    check(&[
        ("CC(=O)Cl", "acyl Halide 3H 0", 1),
        ("CC(=O)Br", "acyl Halide 3H 0", 1),
        ("O=C(F)c1ccccc1", "acyl Halide 0H 0", 1),
        ("CC(C)(C)C(=O)Cl", "acyl Halide 0H 2", 4),
        ("C=CC(=O)Cl", "acyl Halide 0H 0", 2),
        ("ClCC(=O)Cl", "acyl Halide 2H 0", 2),
        ("COC(=O)CCC(=O)Cl", "acyl Halide 2H 0", 6),
        ("O=C(Cl)c1ccc(CBr)cc1", "acyl Halide 0H 0", 1),
        ("CC(=O)OC(C)=O", "acyl Anhydride 3H 0", 1),
        ("CC(C)COC(=O)OC(=O)c1ccccc1", "acyl Anhydride 0H 0", 8),
        ("CC(C)(C)C(=O)OC(=O)c1ccccc1", "acyl Anhydride 0H 0", 7),
        ("O=C1CCC(=O)O1", "acyl Anhydride 2H 0", 1),
        ("O=C1OC(=O)c2ccccc12", "acyl Anhydride 0H 0", 1),
        ("FC(F)(F)C(=O)OC(=O)C(F)(F)F", "acyl Anhydride 0H 0", 4),
        ("O=COC(C)=O", "acyl Anhydride 0H 0", 1),
        ("CC(=O)n1ccnc1", "acyl Azole 3H 0", 1),
        ("CC(=O)n1nnc2ccccc12", "acyl Azole 3H 0", 1),
        ("O=C(n1ccnc1)n1ccnc1", "acyl Azole 0H 0", 1),
        ("COC(=O)n1ccnc1", "acyl Azole 0H 0", 2),
        ("COC(=O)C#N", "acyl Cyanide 0H 0", 2),
        ("CC(=O)C#N", "acyl Cyanide 3H 0", 1),
        ("CCOC(=O)Cl", "acyl Chloroformate 0H 0", 3),
        ("ClCOC(=O)Cl", "acyl Chloroformate 0H 0", 3),
        ("ClC(=O)OCc1ccccc1", "acyl Chloroformate 0H 0", 1),
        ("CC(C)(C)OC(=O)OC(=O)OC(C)(C)C", "acyl Dicarbonate 0H 0", 5),
        ("CN(C)C(=O)Cl", "acyl CarbamoylChloride 0H 0", 3),
        ("O=C(Oc1ccccc1)Oc1ccccc1", "acyl ActiveEster 0H 0", 1),
        ("CC(=O)Oc1ccc([N+](=O)[O-])cc1", "acyl ActiveEster 3H 0", 1),
        ("CC(=O)OC=C", "acyl ActiveEster 3H 0", 1),
        ("CC(=O)OCC(F)(F)F", "acyl ActiveEster 3H 0", 1),
        ("CC(=O)ON1C(=O)CCC1=O", "acyl ActiveEster 3H 0", 1),
        ("CC(=O)Oc1c(F)c(F)c(F)c(F)c1F", "acyl ActiveEster 3H 0", 1),
        ("O=C1CCO1", "acyl ActiveEster 2H 0", 1),
        ("CC(=O)N1CCOC1=O", "acyl ActiveEster 3H 0", 1),
        ("CCOC(=O)C(F)(F)F", "acyl Oxalate 0H 0", 3),
        ("CCOC(=O)C(=O)OCC", "acyl Oxalate 0H 0", 3),
        ("CCOC=O", "acyl Formate 0H 0", 3),
        ("CC(=O)SCC", "acyl Thioester 3H 0", 1),
        ("CCOC(C)=O", "acyl Ester 3H 0", 3),
        ("CC(C)C(=O)OC", "acyl Ester 1H 1", 3),
        ("COC(=O)c1ccccc1", "acyl Ester 0H 0", 2),
        ("COC(=O)c1cccnc1", "acyl Ester 0H 0", 2),
        ("O=C1CCCO1", "acyl Ester 2H 0", 1),
        ("CC(=O)OC(C)(C)C", "acyl TertAlkylEster 3H 0", 1),
        ("COC(=O)OC", "acyl Carbonate 0H 0", 2),
        ("O=C1OCCO1", "acyl Carbonate 0H 0", 1),
        ("CON(C)C(C)=O", "acyl ChelatingAmide 3H 0", 4),
        ("CC(=O)N1CC1", "acyl ChelatingAmide 3H 0", 1),
        ("CN(C)C=O", "acyl Amide 0H 0", 3),
        ("O=CN1CCOCC1", "acyl Amide 0H 0", 1),
        ("CN1CCCC1=O", "acyl Amide 2H 0", 5),
        ("CS(=O)(=O)Cl", "acyl Sulfonyl 3H 0", 1),
        ("Cc1ccc(S(=O)(=O)Cl)cc1", "acyl Sulfonyl 0H 0", 5),
        (
            "O=S(=O)(OS(=O)(=O)C(F)(F)F)C(F)(F)F",
            "acyl Sulfonyl 0H 0",
            1,
        ),
        (
            "O=S(=O)(N(c1ccccc1)S(=O)(=O)C(F)(F)F)C(F)(F)F",
            "acyl Sulfonyl 0H 0",
            1,
        ),
    ]);
}

#[test]
fn rings_cumulenes_and_silyl_groups() {
    check(&[
        ("C1CO1", "ring Oxygen 0", 0),
        ("CC1CO1", "ring Oxygen 0", 2),
        ("CC1(C)CO1", "ring Oxygen 0", 3),
        ("C1OC1c1ccccc1", "ring Oxygen 0", 0),
        ("c1ccc(C2OC2c2ccccc2)cc1", "ring Oxygen 1 activated", 4),
        ("CC1OC1c1ccccc1", "ring Oxygen 1 activated", 3),
        ("C1CCC2OC2C1", "ring Oxygen 1", 3),
        ("CCOC(=O)C1CO1", "ring Oxygen 0", 6),
        ("Cc1ccc(S(=O)(=O)N2CC2C)cc1", "ring ActivatedNitrogen 0", 9),
        ("CC(C)(C)OC(=O)N1CC1", "ring ActivatedNitrogen 0", 8),
        ("C1CN1Cc1ccccc1", "ring Nitrogen 0", 0),
        ("C1CS1", "ring Sulfur 0", 0),
        ("O=C=O", "cumulene CarbonDioxide", 1),
        ("S=C=S", "cumulene CarbonDisulfide", 1),
        ("O=C=S", "cumulene CarbonylSulfide", 1),
        ("O=C=Nc1ccccc1", "cumulene Isocyanate", 1),
        ("O=C=NS(=O)(=O)Cl", "cumulene Isocyanate", 1),
        ("ClCCN=C=O", "cumulene Isocyanate", 4),
        ("S=C=Nc1ccccc1", "cumulene Isothiocyanate", 1),
        ("CC(C)N=C=NC(C)C", "cumulene Carbodiimide", 4),
        ("O=C=C(c1ccccc1)c1ccccc1", "cumulene Ketene", 1),
        ("C[Si](C)(C)Cl", "silyl Chloride 0", 1),
        ("C[Si](C)(C)I", "silyl Iodide 0", 1),
        ("C[Si](C)(C)OS(=O)(=O)C(F)(F)F", "silyl Triflate 0", 1),
        ("CC[Si](CC)(CC)Cl", "silyl Chloride 1", 2),
        ("CC(C)(C)[Si](C)(C)Cl", "silyl Chloride 2", 4),
        ("CC(C)[Si](Cl)(C(C)C)C(C)C", "silyl Chloride 3", 3),
        ("CC(C)(C)[Si](Cl)(c1ccccc1)c1ccccc1", "silyl Chloride 3", 4),
        ("C[Si](C)(Cl)CCl", "silyl Chloride 1", 1),
    ]);
}

#[test]
fn aryl_halides() {
    check(&[
        ("O=[N+]([O-])c1ccc(F)cc1", "aryl Fluoride 1 0 0 0", 6),
        ("O=[N+]([O-])c1ccccc1Cl", "aryl Chloride 1 0 0 0", 8),
        ("O=[N+]([O-])c1cccc(F)c1", "inert", 7),
        (
            "O=[N+]([O-])c1ccc(Cl)c([N+](=O)[O-])c1",
            "aryl Chloride 2 0 0 0",
            6,
        ),
        ("N#Cc1ccc(Cl)c([N+](=O)[O-])c1", "aryl Chloride 1 1 0 0", 5),
        ("Clc1ncccn1", "aryl Chloride 0 0 2 0", 1),
        ("Clc1ncnc2ccccc12", "aryl Chloride 0 0 2 0", 1),
        ("COc1cc2ncnc(Cl)c2cc1OC", "aryl Chloride 0 0 2 0", 8),
        ("Clc1ccccn1", "aryl Chloride 0 0 1 0", 1),
        ("Clc1ccnc2ccccc12", "aryl Chloride 0 0 1 0", 1),
        ("Clc1nc2ccccc2s1", "aryl Chloride 0 0 1 0", 1),
        ("Clc1cccnc1", "inert", 1),
        ("Fc1c(F)c(F)c(F)c(F)c1F", "aryl Fluoride 0 0 0 5", 1),
        ("N#Cc1ccc(F)cc1", "aryl Fluoride 0 1 0 0", 5),
        (
            "CC(=O)c1ccc(Cl)c([N+](=O)[O-])c1",
            "aryl Chloride 1 1 0 0",
            6,
        ),
        ("CC(C)(C)OC(=O)c1ccc(Cl)nc1", "aryl Chloride 0 1 1 0", 10),
        ("CCOC(=O)c1ccc(F)cc1", "acyl Ester 0H 0", 3),
        ("Clc1ccccc1", "inert", 1),
        ("C=CBr", "inert", 1),
    ]);
}

#[test]
fn transfer_reagents() {
    check(&[
        ("II", "transfer Halogen(53, Element)", 0),
        ("BrBr", "transfer Halogen(35, Element)", 0),
        ("ClI", "transfer Halogen(53, Element)", 1),
        ("O=C1CCC(=O)N1Br", "transfer Halogen(35, Imide)", 7),
        ("O=C1CCC(=O)N1I", "transfer Halogen(53, Imide)", 7),
        ("CC(=O)NBr", "transfer Halogen(35, Imide)", 4),
        (
            "CC1(C)N(Br)C(=O)N(Br)C1=O",
            "transfer Halogen(35, Imide)",
            4,
        ),
        (
            "O=C1N(Cl)C(=O)N(Cl)C(=O)N1Cl",
            "transfer Halogen(17, Imide)",
            3,
        ),
        (
            "O=S(=O)(N(F)S(=O)(=O)c1ccccc1)c1ccccc1",
            "transfer Halogen(9, Sulfonimide)",
            4,
        ),
        (
            "F[N+]12CC[N+](CCl)(CC1)CC2.F[B-](F)(F)F.F[B-](F)(F)F",
            "transfer Halogen(9, Ammonium)",
            0,
        ),
        (
            "F[n+]1ccccc1.[O-]S(=O)(=O)C(F)(F)F",
            "transfer Halogen(9, Ammonium)",
            0,
        ),
        ("CC(C)(C)OCl", "transfer Halogen(17, Hypohalite)", 5),
        ("[Na+].[O-]Cl", "transfer Halogen(17, Hypohalite)", 1),
        ("BrC(Br)(Br)Br", "transfer Halogen(35, Polyhaloalkane)", 0),
        ("ClC(Cl)(Cl)Cl", "transfer Halogen(17, Polyhaloalkane)", 0),
        (
            "ClC(Cl)(Cl)C(Cl)(Cl)Cl",
            "transfer Halogen(17, Polyhaloalkane)",
            0,
        ),
        (
            "ClC(Cl)(Br)C(Cl)(Cl)Br",
            "transfer Halogen(35, Polyhaloalkane)",
            3,
        ),
        ("FC(F)(F)I", "transfer Halogen(53, Polyhaloalkane)", 4),
        (
            "O=S(=O)(Cl)C(F)(F)F",
            "transfer Halogen(17, SulfonylHalide)",
            3,
        ),
        ("O=S(=O)(Cl)Cl", "transfer Halogen(17, SulfonylHalide)", 3),
        ("CSSC", "transfer Chalcogen(16, Dichalcogenide)", 1),
        ("CSS(C)(=O)=O", "transfer Chalcogen(16, Thiosulfonate)", 1),
        ("ClSc1ccccc1", "transfer Chalcogen(16, Halide)", 1),
        ("O=C1CCC(=O)N1Sc1ccccc1", "transfer Chalcogen(16, Imide)", 7),
        (
            "O=C1c2ccccc2C(=O)N1SC(F)(F)F",
            "transfer Chalcogen(16, Imide)",
            11,
        ),
        ("Cl[Se]c1ccccc1", "transfer Chalcogen(34, Halide)", 1),
        ("Br[Se]c1ccccc1", "transfer Chalcogen(34, Halide)", 1),
        (
            "c1ccc([Se][Se]c2ccccc2)cc1",
            "transfer Chalcogen(34, Dichalcogenide)",
            4,
        ),
        (
            "O=C1c2ccccc2C(=O)N1[Se]c1ccccc1",
            "transfer Chalcogen(34, Imide)",
            11,
        ),
        ("CCOC(=O)N=NC(=O)OCC", "transfer Azo", 5),
        ("O=C1N=NC(=O)N1c1ccccc1", "transfer Azo", 2),
        ("O=Nc1ccccc1", "transfer Nitroso", 1),
        ("CC(C)(C)ON=O", "transfer Nitrite", 5),
        ("ClN=O", "transfer Nitrite", 1),
        ("N#[N+]c1ccccc1.F[B-](F)(F)F", "transfer Diazonium", 0),
        (
            "Cc1ccc(S(=O)(=O)N=[N+]=[N-])cc1",
            "transfer SulfonylAzide",
            10,
        ),
        (
            "CC(=O)Nc1ccc(S(=O)(=O)N=[N+]=[N-])cc1",
            "transfer SulfonylAzide",
            13,
        ),
        ("O=S(=O)(N1OC1c1ccccc1)c1ccccc1", "transfer Oxaziridine", 4),
    ]);
}

/// Groups that look reactive and are not, or wait for a faster one.
#[test]
fn spectators_stay_spectators() {
    check(&[
        ("CCOC(=O)c1ccc(CBr)cc1", "alkyl Benzyl Bromide", 9),
        ("CCOC(=O)CBr", "alkyl AlphaCarbonyl Bromide", 5),
        ("O=C(CBr)Nc1ccccc1", "alkyl AlphaCarbonyl Bromide", 2),
        ("O=C(CBr)c1ccc(F)cc1", "alkyl AlphaCarbonyl Bromide", 2),
        ("N#CCCBr", "alkyl Primary Bromide", 3),
        ("BrCCCN1C(=O)c2ccccc2C1=O", "alkyl Primary Bromide", 1),
        ("BrCC1OCCO1", "alkyl Isobutyl Bromide", 1),
        ("BrCCCC(C)=O", "alkyl Primary Bromide", 1),
        ("BrCCSSCCBr", "alkyl Primary Bromide", 1),
        ("BrCc1ccc([N+](=O)[O-])c(F)c1", "alkyl Benzyl Bromide", 1),
        ("BrCCOC(C)=O", "alkyl Primary Bromide", 1),
        ("BrCCNC(=O)OC(C)(C)C", "alkyl Primary Bromide", 1),
        ("O=Cc1ccc(Cl)nc1", "aldehyde aromatic", 1),
        ("O=Cc1ccc(Cl)cc1", "aldehyde aromatic", 1),
        ("O=Cc1ccccc1C(=O)OC", "aldehyde aromatic", 1),
        ("CC(=O)c1ccc(C=O)cc1", "aldehyde aromatic", 7),
        ("O=CC1CO1", "aldehyde", 1),
        ("O=C1C=CCCC1", "michael Ketone", 3),
        ("COC(=O)C=Cc1ccc(F)cc1", "michael Ester", 5),
        ("O=[N+]([O-])C=Cc1ccc(C(=O)OC)cc1", "michael Nitro", 4),
        ("CCOC(=O)c1ccc(Cl)cc1", "acyl Ester 0H 0", 3),
        ("COC(=O)c1ccc(C#N)cc1", "acyl Ester 0H 0", 2),
        ("N(=C(c1ccccc1)c1ccccc1)CC(=O)OCC", "acyl Ester 2H 0", 15),
        ("CC(=O)NCC(=O)OCC", "acyl Ester 2H 0", 5),
        ("CC(=O)CNC(=O)OC(C)(C)C", "ketone", 1),
        ("OC(=O)CCC(C)=O", "ketone", 5),
    ]);
}
