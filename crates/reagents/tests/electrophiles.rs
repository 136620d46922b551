//! What each electrophile of the library does, as a chemist would say it.

use std::collections::BTreeMap;

use enolattice_molecule::{Donor, ElectrophileKind as K, Molecule, recognise};
use enolattice_reagents::Library;

/// The class in one or two words.
fn class(kind: K) -> String {
    let written = |debug: String| debug.to_lowercase();
    match kind {
        K::Alkyl { group, .. } => format!("alkyl {}", written(format!("{group:?}"))),
        K::Michael { acceptor, .. } => format!("michael {}", written(format!("{acceptor:?}"))),
        K::Aldehyde { .. } => "aldehyde".to_owned(),
        K::Ketone { .. } => "ketone".to_owned(),
        K::Imine { nitrogen, .. } => format!("imine {}", written(format!("{nitrogen:?}"))),
        K::Acyl { donor, .. } => format!("acyl {}", written(format!("{donor:?}"))),
        K::Ring { heteroatom, .. } => format!("ring {}", written(format!("{heteroatom:?}"))),
        K::Cumulene { .. } => "cumulene".to_owned(),
        K::Aryl { .. } => "aryl".to_owned(),
        K::Silyl { .. } => "silyl".to_owned(),
        K::Inert { .. } => "inert".to_owned(),
        K::Transfer { donor } => match donor {
            Donor::Halogen(9, _) => "fluorine".to_owned(),
            Donor::Halogen(17, _) => "chlorine".to_owned(),
            Donor::Halogen(35, _) => "bromine".to_owned(),
            Donor::Halogen(..) => "iodine".to_owned(),
            Donor::Chalcogen(16, _) => "sulfur".to_owned(),
            Donor::Chalcogen(..) => "selenium".to_owned(),
            other => written(format!("{other:?}")),
        },
    }
}

/// Every name once, under what it does.
const EXPECTED: &[(&str, &str)] = &[
    ("acyl activeester", "phenyl acetate; beta-propiolactone"),
    ("acyl amide", "DMF; N-formylmorpholine"),
    (
        "acyl anhydride",
        "Ac2O; TFAA; succinic anhydride; phthalic anhydride",
    ),
    ("acyl azole", "N-acetylimidazole; CDI"),
    ("acyl carbamoylchloride", "dimethylcarbamoyl chloride"),
    ("acyl carbonate", "dimethyl carbonate; diethyl carbonate"),
    ("acyl chelatingamide", "N-methoxy-N-methylacetamide"),
    (
        "acyl chloroformate",
        "methyl chloroformate; ethyl chloroformate; CbzCl",
    ),
    ("acyl cyanide", "methyl cyanoformate"),
    ("acyl dicarbonate", "Boc2O"),
    (
        "acyl ester",
        "ethyl acetate; methyl benzoate; ethyl benzoate; gamma-butyrolactone",
    ),
    ("acyl formate", "methyl formate; ethyl formate"),
    (
        "acyl halide",
        "AcCl; propionyl chloride; isobutyryl chloride; PivCl; BzCl; \
         chloroacetyl chloride",
    ),
    ("acyl oxalate", "diethyl oxalate; ethyl trifluoroacetate"),
    ("acyl sulfonyl", "TsCl; MsCl; Tf2O; PhNTf2"),
    (
        "aldehyde",
        "benzaldehyde; 4-nitrobenzaldehyde; 4-chlorobenzaldehyde; anisaldehyde; \
         furfural; isobutyraldehyde; pivaldehyde; acetaldehyde; propanal; hexanal; \
         formaldehyde; ethyl glyoxylate; phenylglyoxal; chloral; phenylacetaldehyde; \
         cyclohexanecarbaldehyde; 4-methylbenzaldehyde; pyridine-3-carbaldehyde",
    ),
    (
        "alkyl allyl",
        "allyl bromide; allyl chloride; prenyl bromide; cinnamyl bromide; allyl iodide; \
         methallyl chloride; crotyl bromide",
    ),
    (
        "alkyl alphacarbonyl",
        "methyl bromoacetate; ethyl bromoacetate; tert-butyl bromoacetate; \
         bromoacetonitrile; phenacyl bromide; chloroacetonitrile; chloroacetone; \
         methyl chloroacetate; ethyl iodoacetate; 2-bromo-N,N-dimethylacetamide",
    ),
    ("alkyl alphahetero", "MOMCl; BOMCl; SEMCl; POMCl"),
    ("alkyl benzyl", "BnBr; BnCl; 4-nitrobenzyl bromide; PMBCl"),
    ("alkyl cyclohexyl", "cyclohexyl bromide"),
    ("alkyl ethyl", "EtI; EtBr; diethyl sulfate; EtOTs; Et3OBF4"),
    ("alkyl halomethyl", "CH2I2; CH2Br2"),
    ("alkyl isobutyl", "iBuI; iBuBr"),
    (
        "alkyl methyl",
        "MeI; dimethyl sulfate; MeOTf; MeOTs; methyl mesylate; trimethyl phosphate; \
         Me3OBF4",
    ),
    ("alkyl neopentyl", "neopentyl bromide"),
    (
        "alkyl primary",
        "nBuI; nBuBr; nBuCl; nPrI; nPrBr; nHexI; 1,4-dibromobutane; \
         1-bromo-3-chloropropane; 2-phenylethyl bromide; nBuOTs; 1,3-propanesultone",
    ),
    ("alkyl propargyl", "propargyl bromide"),
    ("alkyl secondary", "iPrI; iPrBr; sBuBr; cyclopentyl bromide"),
    (
        "alkyl secondaryactivated",
        "1-phenylethyl bromide; ethyl 2-bromopropionate",
    ),
    ("alkyl tertiary", "tBuBr"),
    (
        "aryl",
        "DNFB; DNCB; 4-fluoronitrobenzene; 2-fluoronitrobenzene; 4-chloronitrobenzene; \
         2-chloropyrimidine; 2-chloropyridine; 4-chloroquinazoline; cyanuric chloride; \
         hexafluorobenzene; pentafluoropyridine; 4-fluorobenzonitrile",
    ),
    ("azo", "DEAD; DIAD; DBAD"),
    (
        "bromine",
        "Br2; NBS; N-bromoacetamide; DBDMH; CBr4; BrCCl3; (CBrCl2)2",
    ),
    ("chlorine", "NCS; TCCA; tBuOCl; CCl4; C2Cl6; TfCl; SO2Cl2"),
    (
        "cumulene",
        "CO2; CS2; COS; PhNCO; EtNCO; PhNCS; MeNCS; DIC; diphenylketene",
    ),
    (
        "diazonium",
        "PhN2BF4; 4-nitrobenzenediazonium tetrafluoroborate",
    ),
    ("fluorine", "NFSI; F-TEDA-BF4; N-fluoropyridinium triflate"),
    ("imine acyl", "N-Boc-benzaldimine"),
    ("imine iminium", "CH2=NMe2 I"),
    ("imine plain", "N-benzylideneaniline"),
    ("imine sulfonyl", "N-tosylbenzaldimine"),
    ("iodine", "I2; ICl; NIS; CF3I"),
    (
        "ketone",
        "acetone; cyclohexanone; cyclopentanone; cyclobutanone; acetophenone; \
         benzophenone; trifluoroacetophenone; ethyl pyruvate; N-methylisatin",
    ),
    (
        "michael aldehyde",
        "acrolein; cinnamaldehyde; crotonaldehyde",
    ),
    ("michael amide", "dimethylacrylamide"),
    (
        "michael ester",
        "methyl acrylate; ethyl acrylate; tert-butyl acrylate; ethyl crotonate; \
         methyl crotonate; methyl cinnamate; ethyl cinnamate; diethyl maleate; \
         diethyl fumarate; diethyl benzylidenemalonate; methyl methacrylate; \
         alpha-methylene-gamma-butyrolactone; methyl propiolate; ethyl propiolate; DMAD",
    ),
    ("michael imide", "N-methylmaleimide; N-phenylmaleimide"),
    (
        "michael ketone",
        "MVK; cyclohexenone; cyclopentenone; chalcone; phenyl vinyl ketone; \
         ethyl vinyl ketone; benzylideneacetone; butynone",
    ),
    (
        "michael nitrile",
        "acrylonitrile; crotononitrile; fumaronitrile; benzylidenemalononitrile",
    ),
    ("michael nitro", "nitrostyrene; nitroethylene"),
    ("michael phosphonate", "diethyl vinylphosphonate"),
    ("michael pyridyl", "2-vinylpyridine; 4-vinylpyridine"),
    ("michael quinone", "1,4-benzoquinone; 1,4-naphthoquinone"),
    (
        "michael quinonemethide",
        "4-benzylidene-2,6-di-tert-butylcyclohexadienone",
    ),
    ("michael sulfonate", "ethenesulfonyl fluoride"),
    (
        "michael sulfone",
        "phenyl vinyl sulfone; methyl vinyl sulfone; divinyl sulfone",
    ),
    ("michael sulfoxide", "phenyl vinyl sulfoxide"),
    ("nitrite", "tBuONO; isoamyl nitrite"),
    ("nitroso", "nitrosobenzene"),
    ("oxaziridine", "2-phenylsulfonyl-3-phenyloxaziridine"),
    ("ring activatednitrogen", "N-tosylaziridine"),
    (
        "ring oxygen",
        "ethylene oxide; propylene oxide; 1,2-epoxybutane; styrene oxide; \
         cyclohexene oxide",
    ),
    ("ring sulfur", "thiirane"),
    ("selenium", "PhSeCl; PhSeBr; Ph2Se2; N-PSP"),
    ("silyl", "TMSCl; TMSOTf; TESCl; TBSCl; TBSOTf; TIPSCl"),
    ("sulfonylazide", "TsN3; p-ABSA"),
    (
        "sulfur",
        "Me2S2; Ph2S2; MMTS; S-phenyl benzenethiosulfonate; N-(phenylthio)phthalimide; \
         PhSCl",
    ),
];

#[test]
fn every_electrophile_of_the_library_does_what_it_is_bought_for() {
    let library = Library::builtin().unwrap();
    let mut found: BTreeMap<String, Vec<&str>> = BTreeMap::new();
    for electrophile in library.electrophiles() {
        let molecule = Molecule::parse_salt(&electrophile.smiles).unwrap().molecule;
        let group =
            recognise(&molecule).unwrap_or_else(|reason| panic!("{}: {reason}", electrophile.name));
        found
            .entry(class(group.kind))
            .or_default()
            .push(&electrophile.name);
    }
    let expected: BTreeMap<String, Vec<&str>> = EXPECTED
        .iter()
        .map(|(class, names)| ((*class).to_owned(), names.split("; ").collect()))
        .collect();
    assert_eq!(found, expected);
}
