//! The products that an explanation names: atoms are kept, shares are those of the losses, masses are RDKit's.

use std::sync::Arc;

use enolattice_model::{Cell, Channel, Conditions, ExplainedProduct, Explanation, Model};
use enolattice_molecule::Molecule;
use enolattice_reagents::Library;

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

/// Electrophile and the mass of what leaves it with a hydrogen, Da (RDKit).
const ELECTROPHILES: [(&str, f64); 6] = [
    ("CI", 127.912_30),
    ("CC(C)Br", 79.926_16),
    ("CC(=O)Cl", 35.976_68),
    ("C=CC(=O)OC", 0.0),
    ("O=Cc1ccccc1", 0.0),
    ("C[Si](C)(C)Cl", 35.976_68),
];

/// Bases with a solvent each.
const MEDIA: [(&str, &str); 4] = [
    ("LDA", "THF"),
    ("NaOEt", "EtOH"),
    ("DBU", "MeCN"),
    ("nBuLi", "THF"),
];

const WATER_DA: f64 = 18.010_56;
const ETHANOL_DA: f64 = 46.041_86;

fn molecule(smiles: &str) -> Molecule {
    Molecule::parse(smiles).unwrap()
}

fn explained(model: &Model, reagents: [&str; 4], temperature_c: f64) -> Explanation {
    let [substrate, base, electrophile, solvent] = reagents;
    let library = model.library();
    let substrate = Arc::new(model.substrate("substrate", molecule(substrate), None));
    let electrophile = Arc::new(model.electrophile("electrophile", molecule(electrophile)));
    let cell = Cell {
        pair: Arc::new(model.pair(&substrate, &electrophile)),
        substrate,
        electrophile,
        base: Arc::new(model.base(library.base(base).unwrap())),
        solvent: Arc::new(model.solvent(library.solvent(solvent).unwrap())),
        additive: None,
        conditions: Conditions {
            temperature_c,
            formation_temperature_c: temperature_c,
            base_equiv: 1.1,
            electrophile_equiv: 1.2,
            additive_equiv: 0.0,
            concentration_m: 0.2,
            time_h: 16.0,
            dosing_min: 10.0,
            addition: None,
        },
    };
    model.explain(&cell, 0.5).unwrap()
}

fn model() -> Model {
    Model::new(Arc::new(Library::builtin().unwrap()))
}

/// Masses that a channel of substrate and electrophile can lead to.
fn possible(channel: Option<Channel>, substrate: f64, electrophile: f64, leaving: f64) -> Vec<f64> {
    let bound = electrophile - leaving;
    match channel {
        None | Some(Channel::OtherSite | Channel::OAttack | Channel::HeteroatomAttack) => {
            vec![substrate + bound, substrate + bound - WATER_DA]
        }
        Some(Channel::OverAlkylation) => vec![substrate + 2.0 * bound],
        Some(Channel::SelfCondensation) => [0.0, WATER_DA, ETHANOL_DA]
            .map(|lost| 2.0 * substrate - lost)
            .into_iter()
            .chain([3.0 * substrate])
            .collect(),
        Some(Channel::Elimination) => vec![electrophile - leaving],
        _ => Vec::new(),
    }
}

/// Every product of substrate and electrophile has the mass that its channel says, and the shares of a channel
/// add up to its loss.
#[test]
fn masses_and_shares_are_those_of_the_channels() {
    let model = model();
    let (mut seen, mut compared) = (0, 0);
    for (i, substrate) in SUBSTRATES.into_iter().enumerate() {
        for (j, (electrophile, leaving)) in ELECTROPHILES.into_iter().enumerate() {
            let (base, solvent) = MEDIA[(i + j) % MEDIA.len()];
            let told = explained(&model, [substrate, base, electrophile, solvent], 25.0);
            let what = format!("{substrate} {base} {electrophile}");
            let masses = [substrate, electrophile].map(|s| molecule(s).exact_mass());
            for product in &told.products {
                assert_eq!(molecule(&product.smiles).canonical(), product.smiles);
                let masses = possible(product.channel, masses[0], masses[1], leaving);
                let mass = product.monoisotopic_mass;
                let is_possible = masses.iter().any(|m| (m - mass).abs() < 1e-4);
                assert!(masses.is_empty() || is_possible, "{what}: {product:?}");
                seen += usize::from(is_possible);
            }
            compared += compare_with_losses(&told, &what);
        }
    }
    assert!(seen > 250 && compared > 60, "{seen} {compared}");
}

/// How many channels were compared.
fn compare_with_losses(told: &Explanation, what: &str) -> usize {
    let of = |channel| {
        let mut lines = told.products.iter().filter(|p| p.channel == channel);
        lines.try_fold(0.0, |sum, line| Some(sum + line.fraction?))
    };
    let mut expected: Vec<(Option<Channel>, f64)> = told
        .losses
        .iter()
        .filter(|(channel, _)| {
            use Channel::*;
            matches!(
                channel,
                OtherSite | OAttack | HeteroatomAttack | OverAlkylation | SelfCondensation
            )
        })
        .map(|(channel, share)| (Some(*channel), *share))
        .collect();
    expected.extend(told.reference_yield.map(|share| (None, share)));
    expected
        .into_iter()
        .filter(|(channel, share)| {
            let found = of(*channel);
            let same = found.is_none_or(|found| (found - share).abs() < 1e-6);
            assert!(same, "{what} {channel:?}: {found:?} instead of {share}");
            found.is_some()
        })
        .count()
}

/// What is expected by hand of cells that lose substrate or electrophile in a known way; masses by RDKit.
#[test]
fn side_products_are_those_of_the_textbook() {
    use Channel::*;
    let model = model();
    for (reagents, channel, smiles, mass) in [
        (
            ["CC(=O)c1ccccc1", "nBuLi", "CI", "THF"],
            BaseAddsToSubstrate,
            "CCCCC(C)(O)c1ccccc1",
            178.13577,
        ),
        (
            ["CN(C)C(=O)Cc1ccccc1", "nBuLi", "CI", "THF"],
            BaseAddsToSubstrate,
            "CCCCC(=O)Cc1ccccc1",
            176.12012,
        ),
        (
            ["COC(=O)Cc1ccc(Br)cc1", "nBuLi", "CI", "THF"],
            BaseAddsToSubstrate,
            "COC(=O)Cc1ccccc1",
            150.06808,
        ),
        (
            ["CCOC(=O)Cc1ccccc1", "NaOH", "BrCc1ccccc1", "water"],
            BaseAddsToSubstrate,
            "O=C(O)Cc1ccccc1",
            136.05243,
        ),
        (
            ["CCOC(=O)CC(=O)OCC", "NaOMe", "CI", "MeOH"],
            BaseAddsToSubstrate,
            "CCOC(=O)CC(=O)OC",
            146.05791,
        ),
        (
            ["CC(=O)CC(C)=O", "Et3N", "BrCc1ccccc1", "MeCN"],
            BaseConsumedByElectrophile,
            "CC[N+](CC)(CC)Cc1ccccc1",
            192.17468,
        ),
        (
            ["CC(C)=O", "NaOH", "CCC=O", "EtOH"],
            BaseConsumedByElectrophile,
            "CCC=C(C)C=O",
            98.07316,
        ),
        (
            ["CCOC(=O)CC(=O)OCC", "NaOEt", "CC(C)Br", "EtOH"],
            Elimination,
            "C=CC",
            42.04695,
        ),
        (
            ["CCOC(=O)CC(=O)OCC", "NaOEt", "BrCc1ccccc1", "EtOH"],
            Solvolysis,
            "CCOCc1ccccc1",
            136.08882,
        ),
        (
            ["CCC=O", "NaOH", "O=Cc1ccccc1", "EtOH"],
            SelfCondensation,
            "CCC=C(C)C=O",
            98.07316,
        ),
        (
            ["CC(C)C=O", "NaH", "CI", "THF"],
            SelfCondensation,
            "CC(C)C(=O)OCC(C)(C)C(O)C(C)C",
            216.17254,
        ),
        (
            ["CC(=O)CCOC(C)=O", "NaOEt", "BrCc1ccccc1", "EtOH"],
            Elimination,
            "C=CC(C)=O",
            70.04186,
        ),
        (
            ["CC(=O)OC(C)(C)C", "LDA", "O=C1C=CCCC1", "THF"],
            OtherSite,
            "CC(C)(C)OC(=O)CC1(O)C=CCCC1",
            212.14124,
        ),
        (
            ["CC(C(C)=O)C(C)=O", "DBU", "C=CC(=O)OC", "MeCN"],
            OtherSite,
            "COC(=O)CCCC(=O)C(C)C(C)=O",
            200.10486,
        ),
    ] {
        let told = explained(&model, reagents, 25.0);
        let wanted = |product: &&ExplainedProduct| {
            product.channel == Some(channel) && product.smiles == smiles
        };
        let found = told.products.iter().find(wanted);
        let found = found.unwrap_or_else(|| panic!("{reagents:?}: {:#?}", told.products));
        assert!((found.monoisotopic_mass - mass).abs() < 1e-4, "{smiles}");
    }
}

/// The halohydrin of an α-chloro ester closes to the epoxide where the alkoxide is not held by lithium; masses by RDKit.
#[test]
fn darzens_products_are_epoxides() {
    let model = model();
    let reagents = ["CCOC(=O)CCl", "KOtBu", "O=Cc1ccccc1", "tBuOH"];
    let told = explained(&model, reagents, 25.0);
    let wanted = |p: &&ExplainedProduct| p.channel.is_none() && p.fraction > Some(0.01);
    let wanted: Vec<_> = told.products.iter().filter(wanted).collect();
    let [epoxide] = wanted[..] else {
        panic!("{wanted:?}");
    };
    assert_eq!(
        epoxide.smiles,
        molecule("CCOC(=O)C1OC1c1ccccc1").canonical()
    );
    assert!((epoxide.monoisotopic_mass - 192.07864).abs() < 1e-4);
}

/// Largest first, those without a share last; nothing is said of a cell that is not covered.
#[test]
fn the_order_is_that_of_the_shares() {
    let model = model();
    let reagents = ["COC(=O)Cc1ccc(Br)cc1", "nBuLi", "CCC(C)Br", "THF"];
    let told = explained(&model, reagents, 25.0);
    let shares: Vec<f64> = told
        .products
        .iter()
        .map(|product| product.fraction.unwrap_or(-1.0))
        .collect();
    assert!(shares.is_sorted_by(|a, b| a >= b), "{shares:?}");
    assert!(shares.contains(&-1.0), "ketone and carbinol share a loss");

    let uncovered = explained(&model, ["CC(C)=O", "LDA", "O=S(Cl)Cl", "THF"], 25.0);
    assert!(uncovered.products.is_empty());
}
