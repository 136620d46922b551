//! What chemists know of each class of electrophile and kind of base (common practice, unless said otherwise).

use std::sync::Arc;

use enolattice_model::{Cell, Channel, Conditions, Explanation, Model};
use enolattice_molecule::Molecule;
use enolattice_reagents::Library;

struct Bench(Model);

impl Bench {
    fn new() -> Bench {
        Bench(Model::new(Arc::new(
            Library::builtin().expect("the library reads"),
        )))
    }

    /// A cell by SMILES and names at one temperature: 1.1 equivalents of base, 1.2 of electrophile, 0.2 mol/L, 16 h.
    fn cell(
        &self,
        substrate: &str,
        base: &str,
        electrophile: &str,
        solvent: &str,
        temperature_c: f64,
    ) -> Cell {
        let model = &self.0;
        let parse = |smiles: &str| Molecule::parse(smiles).expect("a structure");
        let library = model.library();
        let substrate = model.substrate(substrate, parse(substrate), None);
        let electrophile = model.electrophile(electrophile, parse(electrophile));
        Cell {
            pair: Arc::new(model.pair(&substrate, &electrophile)),
            substrate: Arc::new(substrate),
            base: Arc::new(model.base(library.base(base).expect("a base"))),
            electrophile: Arc::new(electrophile),
            solvent: Arc::new(model.solvent(library.solvent(solvent).expect("a solvent"))),
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
        }
    }

    fn explain(&self, cell: &Cell) -> Explanation {
        self.0.explain(cell, 0.5).expect("integrates")
    }

    fn expected_yield(&self, cell: &Cell) -> f64 {
        self.0
            .score(cell, 0.5, 0)
            .expected_yield
            .expect("the class is covered")
    }
}

const CYCLOHEXANONE: &str = "O=C1CCCCC1";
const MALONATE: &str = "CCOC(=O)CC(=O)OCC";

#[test]
fn silyl_chlorides_take_ketone_enolates_at_oxygen() {
    let bench = Bench::new();
    let cell = bench.cell(CYCLOHEXANONE, "LDA", "C[Si](C)(C)Cl", "THF", -78.0);
    let losses = bench.explain(&cell).losses;
    assert_eq!(losses[0].0, Channel::OAttack);
    assert!(losses[0].1 > 0.9, "{losses:?}");
}

#[test]
fn cyanoformates_acylate_at_carbon_where_acyl_chlorides_divide() {
    let bench = Bench::new();
    let share_at_oxygen = |electrophile: &str| {
        let cell = bench.cell(CYCLOHEXANONE, "LDA", electrophile, "THF", -78.0);
        let losses = bench.explain(&cell).losses;
        losses
            .into_iter()
            .find(|(channel, _)| *channel == Channel::OAttack)
            .map_or(0.0, |(_, share)| share)
    };
    let cyanoformate = share_at_oxygen("COC(=O)C#N");
    let chloride = share_at_oxygen("CC(=O)Cl");
    assert!(
        cyanoformate < 0.1 && chloride > 0.3,
        "{cyanoformate}, {chloride}"
    );
}

#[test]
fn carbonates_acylate_ketones_with_a_base_strong_enough_for_the_product() {
    let bench = Bench::new();
    let with = |base: &str| {
        let mut cell = bench.cell("CC(=O)c1ccccc1", base, "CCOC(=O)OCC", "toluene", 100.0);
        cell.conditions.base_equiv = 2.2;
        bench.expected_yield(&cell)
    };
    assert!(with("NaH") > 0.6);
    assert!(with("Et3N") < 0.05);
}

#[test]
fn a_claisen_product_without_an_acidic_hydrogen_does_not_form() {
    let bench = Bench::new();
    let with = |substrate: &str| {
        let benzoate = "CCOC(=O)c1ccccc1";
        bench.expected_yield(&bench.cell(substrate, "NaOEt", benzoate, "EtOH", 78.0))
    };
    let (quaternary, methyl_ketone) = (with("CCOC(=O)C(C)C"), with("CC(=O)c1ccccc1"));
    assert!(quaternary < 0.05, "{quaternary}");
    assert!(methyl_ketone > 0.3, "{methyl_ketone}");
}

#[test]
fn arenes_need_acceptors_to_be_substituted() {
    let bench = Bench::new();
    let with = |arene: &str| bench.expected_yield(&bench.cell(MALONATE, "NaH", arene, "DMF", 60.0));
    let activated = with("O=[N+]([O-])c1ccc(F)c([N+](=O)[O-])c1");
    let plain = with("Fc1ccccc1");
    assert!(activated > 0.3 && plain < 0.02, "{activated}, {plain}");
}

#[test]
fn sulfonyl_azides_give_the_diazo_compound_with_triethylamine() {
    let bench = Bench::new();
    let azide = "Cc1ccc(cc1)S(=O)(=O)N=[N+]=[N-]";
    let cell = bench.cell("CCOC(=O)CC(C)=O", "Et3N", azide, "MeCN", 25.0);
    let explanation = bench.explain(&cell);
    assert!(explanation.expected_yield.is_some_and(|y| y > 0.6));
    let diazo = Molecule::parse("CCOC(=O)C(=[N+]=[N-])C(C)=O").expect("a structure");
    assert_eq!(
        explanation.product_smiles.as_deref(),
        Some(diazo.canonical())
    );
}

#[test]
fn secondary_amines_condense_aldehydes_that_tertiary_ones_hardly_touch() {
    let bench = Bench::new();
    let with =
        |base: &str| bench.expected_yield(&bench.cell(MALONATE, base, "O=Cc1ccccc1", "EtOH", 60.0));
    let (secondary, tertiary) = (with("piperidine"), with("Et3N"));
    assert!(
        secondary > 2.0 * tertiary && secondary > 0.2,
        "{secondary}, {tertiary}"
    );
}

#[test]
fn grignard_reagents_add_to_ketones_and_metal_amides_ionise_them() {
    let bench = Bench::new();
    let with = |base: &str| bench.cell(CYCLOHEXANONE, base, "CI", "THF", 0.0);
    let losses = bench.explain(&with("EtMgBr")).losses;
    assert_eq!(losses[0].0, Channel::BaseAddsToSubstrate, "{losses:?}");
    assert!(bench.expected_yield(&with("LDA")) > 0.5);
}

#[test]
fn lithium_ester_enolates_are_methylated_in_the_cold() {
    let bench = Bench::new();
    let mut cell = bench.cell("COC(=O)C(C)C", "LDA", "CI", "THF", -78.0);
    cell.conditions.time_h = 3.0;
    assert!(bench.expected_yield(&cell) > 0.3);
}

#[test]
fn a_catalytic_quaternary_salt_carries_hydroxide_into_toluene() {
    let bench = Bench::new();
    let with = |additive: Option<&str>| {
        let mut cell = bench.cell("N#CCc1ccccc1", "KOH", "CCBr", "toluene", 40.0);
        let library = bench.0.library();
        cell.additive = additive.map(|name| {
            Arc::new(
                bench
                    .0
                    .additive(library.additive(name).expect("an additive")),
            )
        });
        cell.conditions.base_equiv = 4.0;
        cell.conditions.additive_equiv = 0.05;
        bench.expected_yield(&cell)
    };
    let (carried, alone) = (with(Some("TEBAC")), with(None));
    assert!(carried > 0.3 && alone < 0.1, "{carried}, {alone}");
}

#[test]
fn phosphonates_with_aldehydes_are_left_unknown() {
    let bench = Bench::new();
    let phosphonate = "CCOP(=O)(OCC)CC(=O)OCC";
    let cell = bench.cell(phosphonate, "NaH", "O=Cc1ccccc1", "THF", 25.0);
    assert_eq!(bench.0.score(&cell, 0.5, 0).expected_yield, None);
}

#[test]
fn magnesium_malonates_are_acylated_at_carbon() {
    // ethyl magnesium malonate with acyl chlorides (common practice)
    let bench = Bench::new();
    let cell = bench.cell(MALONATE, "TMPMgCl.LiCl", "CC(=O)Cl", "THF", 0.0);
    let explanation = bench.explain(&cell);
    let at_oxygen = explanation
        .losses
        .iter()
        .find(|(channel, _)| *channel == Channel::OAttack)
        .map_or(0.0, |(_, share)| *share);
    assert!(at_oxygen < 0.1, "{:?}", explanation.losses);
}
