//! Campaigns checked against the library, as they come over the wire.

use std::sync::Arc;

use enolattice_grid::{
    AxisSpec, Campaign, CampaignSpec, CellId, ConditionsSpec, Entry, Grid, InputError, Place,
    Stock, SubstrateEntry,
};
use enolattice_model::{Addition, Model};
use enolattice_reagents::Library;

fn model() -> Arc<Model> {
    Arc::new(Model::new(Arc::new(
        Library::builtin().expect("the tables are sound"),
    )))
}

fn named(names: &[&str]) -> AxisSpec {
    let entries = names
        .iter()
        .map(|name| Entry {
            name: (*name).to_owned(),
            ..Entry::default()
        })
        .collect();
    AxisSpec {
        all: false,
        entries,
    }
}

fn substrate(name: &str, smiles: &str) -> SubstrateEntry {
    SubstrateEntry {
        name: name.into(),
        smiles: smiles.into(),
        ..SubstrateEntry::default()
    }
}

fn small() -> CampaignSpec {
    CampaignSpec {
        title: "small".into(),
        substrates: vec![
            substrate("acetophenone", "CC(=O)c1ccccc1"),
            substrate("", "CCOC(=O)CC(=O)OCC"),
        ],
        bases: named(&["LDA", "K2CO3"]),
        electrophiles: named(&["MeI", "benzyl bromide"]),
        solvents: named(&["THF", "DMF"]),
        ..CampaignSpec::default()
    }
}

/// Dichloromethane and water separate, ethanol and water do not (common practice).
#[test]
fn mixtures_that_separate_are_said() {
    let mut spec = small();
    spec.solvents = named(&["DCM/water 1:1", "EtOH/water 1:1"]);
    let campaign = Campaign::new(&spec, &model()).expect("a sound spec");
    let said = |name: &str| campaign.warnings.iter().any(|text| text.contains(name));
    assert!(said("`DCM/water 1:1`"), "{:?}", campaign.warnings);
    assert!(!said("`EtOH/water 1:1`"), "{:?}", campaign.warnings);
}

fn faults(spec: &CampaignSpec) -> Vec<(String, &'static str)> {
    let refused: Vec<InputError> = Campaign::new(spec, &model()).expect_err("a spec at fault");
    refused
        .into_iter()
        .map(|fault| (fault.place.field, fault.code))
        .collect()
}

#[test]
fn a_campaign_spelled_out_is_the_same_campaign() {
    let model = model();
    let all = AxisSpec {
        all: true,
        ..named(&["LDA"])
    };
    let short = CampaignSpec {
        bases: all.clone(),
        electrophiles: AxisSpec {
            entries: Vec::new(),
            ..all.clone()
        },
        solvents: AxisSpec {
            entries: Vec::new(),
            ..all
        },
        ..small()
    };
    let long = short.clone().spelled_out(model.library());
    assert!(!long.bases.all && !long.electrophiles.all && !long.solvents.all);
    assert_eq!(
        long.bases.entries.len(),
        model.library().bases().len() + 1,
        "what is named beside `all` stays"
    );
    let grid = |spec| {
        let campaign = Campaign::new(spec, &model).expect("a sound campaign");
        Grid::new(campaign, model.clone()).expect("a grid within limits")
    };
    let (short, long) = (grid(&short), grid(&long));
    assert_eq!(short.fingerprint(), long.fingerprint());
    assert_eq!(short.campaign().warnings, long.campaign().warnings);
}

#[test]
fn what_is_not_said_has_its_default() {
    let campaign = Campaign::new(&small(), &model()).expect("a sound campaign");
    assert_eq!(campaign.temperature_c, [25.0]);
    assert_eq!(campaign.formation_temperature_c, [None]);
    assert_eq!(campaign.base_equiv, [1.1]);
    assert_eq!(campaign.electrophile_equiv, [1.2]);
    assert_eq!(campaign.concentration_m, [0.2]);
    assert_eq!(campaign.time_h, [16.0]);
    assert_eq!(campaign.dosing_min, [10.0]);
    assert_eq!(campaign.addition, [None]);
    assert_eq!(campaign.yield_at_least, 0.5);
    assert_eq!(campaign.substrates[1].name, "CCOC(=O)CC(=O)OCC");
    assert_eq!(campaign.warnings, Vec::<String>::new());
}

#[test]
fn the_whole_library_and_synonyms_and_structures_are_found() {
    let model = model();
    let library = model.library();
    let all = AxisSpec {
        all: true,
        entries: Vec::new(),
    };
    let mut spec = CampaignSpec {
        bases: all.clone(),
        electrophiles: all.clone(),
        solvents: all,
        ..small()
    };
    let thf = library.solvent("THF").expect("the library has THF");
    spec.solvents.entries = named(&[&thf.cas]).entries;
    spec.electrophiles.entries = vec![Entry {
        smiles: "c1ccc(cc1)CBr".into(),
        ..Entry::default()
    }];
    let campaign = Campaign::new(&spec, &model).expect("a sound campaign");
    assert_eq!(campaign.bases.len(), library.bases().len());
    assert_eq!(campaign.solvents.len(), library.solvents().len());
    assert_eq!(campaign.electrophiles.len(), library.electrophiles().len());
    let merged = campaign
        .warnings
        .iter()
        .filter(|text| text.contains("given twice"))
        .count();
    assert_eq!(merged, 2, "{:?}", campaign.warnings);
}

#[test]
fn the_same_structure_twice_counts_once() {
    let mut spec = small();
    spec.substrates
        .push(substrate("phenyl methyl ketone", "c1ccccc1C(C)=O"));
    spec.conditions.temperature_c = vec![0.0, 25.0, -0.0];
    let campaign = Campaign::new(&spec, &model()).expect("a sound campaign");
    assert_eq!(campaign.substrates.len(), 2);
    assert_eq!(campaign.temperature_c, [0.0, 25.0]);
    let merged = "substrates: `phenyl methyl ketone` is the same as `acetophenone` and counts once, as `acetophenone`";
    assert!(
        campaign.warnings.iter().any(|text| text == merged),
        "{:?}",
        campaign.warnings
    );
}

#[test]
fn counter_ions_are_dropped_with_a_warning() {
    let mut spec = small();
    // the free ester, its hydrochloride, and a sodium enolate's acid as its salt
    let ester = "CCOC(=O)CN";
    spec.substrates = vec![
        substrate("ester hydrochloride", "CCOC(=O)CN.Cl"),
        substrate("ester", ester),
        substrate("", "[Na+].CCOC(=O)[CH-]C(=O)OCC"),
    ];
    let campaign = Campaign::new(&spec, &model()).expect("a sound campaign");
    let canonical: Vec<&str> = campaign
        .substrates
        .iter()
        .map(|known| known.molecule.canonical())
        .collect();
    assert_eq!(canonical, ["CCOC(=O)CN", "CCOC(=O)CC(=O)OCC"]);
    let told = |part: &str| campaign.warnings.iter().any(|text| text.contains(part));
    assert!(
        told("`ester` is the same as `ester hydrochloride`"),
        "{:?}",
        campaign.warnings
    );
    assert!(
        told("charge 1 equivalents of base more"),
        "{:?}",
        campaign.warnings
    );
    spec.substrates = vec![substrate("a mixture", "CCOC(=O)CN.CC(=O)c1ccccc1")];
    assert_eq!(
        faults(&spec),
        [("substrates[0].smiles".to_owned(), "STRUCTURE_INVALID")]
    );
}

#[test]
fn each_additive_is_a_value_in_each_of_its_amounts() {
    let model = model();
    let mut spec = small();
    spec.additives = named(&["none", "HMPA", "TMEDA"]);
    spec.additives.entries[2].equiv = Some(1.5);
    spec.conditions.additive_equiv = vec![2.0, 4.0];
    let grid = |spec: &CampaignSpec| {
        let campaign = Campaign::new(spec, &model).expect("a sound campaign");
        Grid::new(campaign, model.clone()).expect("a small grid")
    };
    let with = grid(&spec);
    assert_eq!(with.cells(), 4 * grid(&small()).cells());
    let found: std::collections::BTreeSet<String> = (0..with.cells())
        .map(|cell| {
            let cell = with.cell(CellId(cell)).expect("a cell");
            let name = cell
                .additive
                .as_ref()
                .map_or("none", |known| known.record.name.as_str());
            format!("{name} {}", cell.conditions.additive_equiv)
        })
        .collect();
    let expected = ["HMPA 2", "HMPA 4", "TMEDA 1.5", "none 0"];
    assert_eq!(found.into_iter().collect::<Vec<_>>(), expected);
}

#[test]
fn every_fault_has_the_field_of_the_request() {
    let mut spec = small();
    spec.substrates.push(substrate("broken", "C1CC"));
    spec.substrates.push(SubstrateEntry {
        pka_dmso: Some(f64::NAN),
        place: Place {
            field: "substrates[3].smiles".into(),
            ..Place::default()
        },
        ..substrate("odd", "CC#N")
    });
    spec.substrates.push(substrate("a\u{7}b", "CC#N"));
    spec.bases = named(&["LDA", "unobtainium amide"]);
    spec.solvents = named(&["THF/unobtainium 4:1"]);
    spec.electrophiles = AxisSpec::default();
    spec.additives = named(&["none", "unobtainium"]);
    spec.substrates[0].stock.price_per_g = Some(-1.0);
    spec.bases.entries[0].stock.currency = "Euro".into();
    spec.conditions = ConditionsSpec {
        temperature_c: vec![25.0, -200.0],
        base_equiv: vec![0.0],
        additive_equiv: vec![-1.0],
        concentration_m: vec![f64::INFINITY],
        addition: vec!["backwards".into()],
        ..ConditionsSpec::default()
    };
    spec.target.yield_at_least = Some(1.5);
    let expected = [
        ("substrates[0].price_per_g", "VALUE_OUT_OF_RANGE"),
        ("substrates[0].currency", "VALUE_MISSING"),
        ("substrates[2].smiles", "STRUCTURE_INVALID"),
        ("substrates[3].pka_dmso", "VALUE_OUT_OF_RANGE"),
        ("substrates[4].name", "VALUE_OUT_OF_RANGE"),
        ("bases[0].currency", "VALUE_UNKNOWN"),
        ("bases[1]", "REAGENT_UNKNOWN"),
        ("solvents[0]", "REAGENT_UNKNOWN"),
        ("additives[1]", "REAGENT_UNKNOWN"),
        ("electrophiles", "AXIS_EMPTY"),
        ("conditions.temperature_c[1]", "VALUE_OUT_OF_RANGE"),
        ("conditions.base_equiv[0]", "VALUE_OUT_OF_RANGE"),
        ("conditions.additive_equiv[0]", "VALUE_OUT_OF_RANGE"),
        ("conditions.concentration_m[0]", "VALUE_OUT_OF_RANGE"),
        ("conditions.addition[0]", "VALUE_UNKNOWN"),
        ("target.yield_at_least", "VALUE_OUT_OF_RANGE"),
    ];
    assert_eq!(
        faults(&spec),
        expected.map(|(field, code)| (field.to_owned(), code))
    );
}

#[test]
fn a_grid_beyond_the_numbers_is_refused() {
    let mut spec = small();
    let many = |low: f64, high: f64| -> Vec<f64> {
        (0..2000)
            .map(|i| low + (high - low) * f64::from(i) / 2000.0)
            .collect()
    };
    spec.conditions.temperature_c = many(-100.0, 200.0);
    spec.conditions.time_h = many(1.0, 100.0);
    spec.conditions.base_equiv = many(1.0, 3.0);
    spec.conditions.dosing_min = many(0.0, 60.0);
    assert_eq!(
        faults(&spec),
        [("campaign".to_owned(), "CAMPAIGN_TOO_LARGE")]
    );
}

#[test]
fn an_axis_of_conditions_beyond_all_need_is_not_looked_at() {
    let mut spec = small();
    spec.conditions.temperature_c = (0..500_000).map(|i| f64::from(i) / 5_000.0).collect();
    spec.conditions.additive_equiv = spec.conditions.temperature_c.clone();
    assert_eq!(
        faults(&spec),
        [
            ("conditions.temperature_c".to_owned(), "VALUE_OUT_OF_RANGE"),
            ("conditions.additive_equiv".to_owned(), "VALUE_OUT_OF_RANGE"),
        ]
    );
}

#[test]
fn a_fingerprint_is_of_the_content_and_of_nothing_else() {
    let model = model();
    let of = |spec: &CampaignSpec| {
        let campaign = Campaign::new(spec, &model).expect("a sound campaign");
        Grid::new(campaign, model.clone())
            .expect("a small grid")
            .fingerprint()
    };
    let first = of(&small());

    let mut same = small();
    same.title = "another title".into();
    same.substrates[0] = substrate("another name", "c1ccccc1C(=O)C");
    same.conditions.temperature_c = vec![25.0];
    same.target.yield_at_least = Some(0.5);
    same.bases.entries[0].name = "lda".into();
    same.bases.entries[0].stock = Stock {
        stock_ml: Some(100.0),
        supplied_concentration_m: Some(2.0),
        ..Stock::default()
    };
    same.substrates[1].stock.lot = "L7".into();
    same.notes = vec!["shelf.sdf: a data field was left out".into()];
    same.additives = named(&["none"]);
    same.conditions.additive_equiv = vec![3.0];
    assert_eq!(of(&same), first);

    let changes: [fn(&mut CampaignSpec); 11] = [
        |spec| spec.substrates.swap(0, 1),
        |spec| spec.substrates[0].pka_dmso = Some(24.7),
        |spec| spec.bases = named(&["LDA"]),
        |spec| spec.solvents = named(&["DMF", "THF"]),
        |spec| spec.solvents = named(&["THF", "THF/DMF 4:1"]),
        |spec| spec.additives = named(&["HMPA"]),
        |spec| spec.conditions.temperature_c = vec![25.0, 40.0],
        |spec| spec.conditions.formation_temperature_c = vec![25.0],
        |spec| spec.conditions.time_h = vec![10.0],
        |spec| spec.conditions.addition = vec![Addition::AllTogether.name().into()],
        |spec| spec.target.yield_at_least = Some(0.6),
    ];
    for (i, change) in changes.iter().enumerate() {
        let mut other = small();
        change(&mut other);
        assert_ne!(of(&other), first, "change {i}");
    }
}
