//! Plans of a small campaign: nothing is lost, limits hold, the same request gives the same plan.

use std::collections::{BTreeMap, BTreeSet};
use std::sync::{Arc, LazyLock};

use enolattice_grid::{
    AxisSpec, Campaign, CampaignSpec, CellId, ConditionsSpec, Entry, Grid, SubstrateEntry,
};
use enolattice_model::{Draw, Model};
use enolattice_plate::{
    Candidate, Content, Controls, Deck, EdgeWells, Form, Ground, Plan, PlanRequest, PlateFormat,
    Plates, Quota, Role, plan,
};
use enolattice_reagents::Library;
use proptest::prelude::*;

/// Molar masses by hand, g/mol: cyclohexanone C6H10O, sodium hydride, potassium carbonate.
const CYCLOHEXANONE: f64 = 98.145;
const SODIUM_HYDRIDE: f64 = 23.998;
const POTASSIUM_CARBONATE: f64 = 138.205;

fn named(names: &[&str]) -> AxisSpec {
    let entry = |name: &&str| Entry {
        name: (*name).to_owned(),
        ..Entry::default()
    };
    AxisSpec {
        all: false,
        entries: names.iter().map(entry).collect(),
    }
}

struct Screened {
    grid: Grid,
    draws: Vec<Draw>,
    candidates: Vec<Candidate>,
}

/// 3 × 2 × 4 × 3 × 2 cells, each solved in sixteen draws.
static SCREENED: LazyLock<Screened> = LazyLock::new(|| {
    let model = Arc::new(Model::new(Arc::new(
        Library::builtin().expect("the tables are sound"),
    )));
    let substrate = |(name, smiles): (&str, &str)| SubstrateEntry {
        name: name.into(),
        smiles: smiles.into(),
        ..SubstrateEntry::default()
    };
    let spec = CampaignSpec {
        title: "small".into(),
        substrates: [
            ("cyclohexanone", "O=C1CCCCC1"),
            ("diethyl malonate", "CCOC(=O)CC(=O)OCC"),
            ("phenylacetonitrile", "N#CCc1ccccc1"),
        ]
        .map(substrate)
        .to_vec(),
        bases: named(&["LDA", "NaH", "K2CO3", "DBU"]),
        electrophiles: named(&["MeI", "BnBr"]),
        solvents: named(&["THF", "DMF", "EtOH"]),
        conditions: ConditionsSpec {
            temperature_c: vec![0.0, 25.0],
            ..ConditionsSpec::default()
        },
        ..CampaignSpec::default()
    };
    let campaign = Campaign::new(&spec, &model).expect("a sound campaign");
    let grid = Grid::new(campaign, model.clone()).expect("a grid");
    let draws: Vec<Draw> = (1..=16).map(|number| model.draw(1, number)).collect();
    let candidate = |cell: u64| {
        let id = CellId(cell);
        let yields = model.yields(&grid.cell(id)?, &draws)?;
        Some(Candidate {
            cell,
            digits: grid.digits(id)?,
            yields: yields.iter().map(|y| *y as f32).collect(),
            eligible: true,
        })
    };
    let candidates = (0..grid.cells()).filter_map(candidate).collect();
    Screened {
        grid,
        draws,
        candidates,
    }
});

fn deck() -> Deck {
    Deck {
        inert: true,
        ..Deck::default()
    }
}

fn planned(request: &PlanRequest, quotas: Vec<Quota>) -> Result<Plan, String> {
    let Screened {
        grid,
        draws,
        candidates,
    } = &*SCREENED;
    let all: Vec<usize> = (0..candidates.len()).collect();
    let ground = Ground {
        grid,
        job: "a job".into(),
        request,
        candidates: candidates.clone(),
        draws,
        top_list: all.clone(),
        random: all,
        quotas,
        left_out: Vec::new(),
    };
    plan(&ground).map_err(|faults| {
        faults
            .iter()
            .map(ToString::to_string)
            .collect::<Vec<_>>()
            .join("\n")
    })
}

/// What must hold of any plan.
fn sound(plan: &Plan) -> Result<(), TestCaseError> {
    let deck = &plan.request.deck;
    let mut places = BTreeSet::new();
    let mut of_stock: BTreeMap<usize, f64> = BTreeMap::new();
    for (plate, well) in plan.wells() {
        prop_assert!(
            places.insert((plate.name.clone(), well.well)),
            "two reactions in one well"
        );
        prop_assert!(plan.request.plates.wells.has(well.well));
        let mut reaction_ul = 0.0;
        for dose in &well.doses {
            let stock = &plan.stocks[dose.stock];
            *of_stock.entry(dose.stock).or_default() += dose.volume_nl / 1000.0;
            if !matches!(stock.role, Role::Quench | Role::Diluent) {
                reaction_ul += dose.volume_nl / 1000.0;
            }
        }
        // all rounded doses together, and what is too small to fill up with
        let slack = (4.0 * deck.step_nl + deck.smallest_nl) / 1000.0;
        prop_assert!(
            (reaction_ul - plan.volume_ul).abs() <= slack,
            "{reaction_ul} uL in {}",
            well.well
        );
        for (role, reagent) in [
            (Role::Substrate, &well.substrate),
            (Role::Base, &well.base),
            (Role::Electrophile, &well.electrophile),
        ] {
            let dosed: f64 = well
                .doses
                .iter()
                .filter(|dose| plan.stocks[dose.stock].role == role)
                .map(|dose| {
                    let stock = &plan.stocks[dose.stock];
                    match stock.form {
                        // mg over g/mol is mmol
                        Form::Solid => {
                            dose.mass_mg * stock.purity / stock.molar_mass_g_mol.unwrap_or(1.0)
                                * 1000.0
                        }
                        _ => dose.volume_nl / 1000.0 * stock.concentration_m,
                    }
                })
                .sum();
            let wanted = reagent.as_ref().map_or(0.0, |reagent| reagent.amount_umol);
            let strongest = plan
                .stocks
                .iter()
                .map(|stock| stock.concentration_m)
                .fold(0.0, f64::max);
            let slack = deck.step_nl / 1000.0 * strongest + 1e-9;
            prop_assert!(
                (dosed - wanted).abs() <= slack,
                "{role:?}: {dosed} for {wanted} umol"
            );
        }
        let settings = (plate.temperature_c, plate.time_h);
        prop_assert_eq!(settings.1, 16.0);
    }
    let mut moved: BTreeMap<usize, f64> = BTreeMap::new();
    for transfer in &plan.transfers {
        prop_assert!(transfer.volume_nl <= deck.largest_nl + 1e-6);
        if let Some(stock) = transfer.stock {
            *moved.entry(stock).or_default() += transfer.volume_nl / 1000.0;
        }
    }
    for (stock, used_ul) in &of_stock {
        if *used_ul > 0.0 {
            prop_assert!((moved[stock] - used_ul).abs() < 1e-6 * used_ul.max(1.0));
        }
        for source in &plan.stocks[*stock].sources {
            let left = source.filled_ul - source.taken_ul;
            prop_assert!(
                left >= deck.source_dead_ul - 1e-6,
                "{left} uL left of {}",
                plan.stocks[*stock].label
            );
            prop_assert!(source.filled_ul <= deck.source_capacity_ul + 1e-6);
        }
    }
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(6))]

    #[test]
    fn plans_keep_volumes_limits_and_the_deck(
        seed in 0u64..1000,
        format in 0usize..3,
        count in 1u32..3,
        replicates in 1u32..3,
        edges in 0usize..3,
        least in 0usize..3,
        most in 3usize..9,
        volume in proptest::option::of(50.0f64..400.0),
        slurries in any::<bool>(),
    ) {
        let request = PlanRequest {
            seed,
            plates: Plates {
                wells: PlateFormat::ALL[format],
                count,
                edge_wells: [EdgeWells::Use, EdgeWells::Empty, EdgeWells::ControlsOnly][edges],
                columns_by: None,
            },
            choice: enolattice_plate::ChoiceRequest { replicates, ..Default::default() },
            well: enolattice_plate::WellRequest { volume_ul: volume, ..Default::default() },
            deck: Deck { slurries, solids: !slurries, smallest_mass_mg: 0.01, ..deck() },
            controls: Controls { positive: 1, no_base: 1, no_electrophile: 1, deuterium: 0, solvent_only: 0 },
            ..PlanRequest::default()
        };
        let quota = |value: u32| Quota {
            axis: 0,
            value,
            least,
            most,
            name: format!("substrate {value}"),
            reason: "asked for".into(),
        };
        match planned(&request, (0..3).map(quota).collect()) {
            Ok(made) => {
                sound(&made)?;
                for substrate in ["cyclohexanone", "diethyl malonate", "phenylacetonitrile"] {
                    let cells: BTreeSet<u64> = made
                        .wells()
                        .filter(|(_, well)| well.content == Content::Cell)
                        .filter(|(_, well)| well.substrate.as_ref().is_some_and(|s| s.name == substrate))
                        .map(|(_, well)| well.cell)
                        .collect();
                    prop_assert!((least..=most).contains(&cells.len()), "{substrate}: {} cells", cells.len());
                }
                prop_assert_eq!(planned(&request, (0..3).map(quota).collect()), Ok(made));
            }
            // every refusal names a field and says what to do
            Err(refusal) => prop_assert!(refusal.contains(';') && refusal.contains(':'), "{refusal}"),
        }
    }
}

fn one_base(base: &str, deck: Deck) -> Plan {
    let grid = &SCREENED.grid;
    let digit = grid
        .campaign()
        .bases
        .iter()
        .position(|known| known.record.name == base);
    let others = (0..4)
        .filter(|other| Some(*other as usize) != digit)
        .map(|other| Quota {
            axis: 2,
            value: other,
            least: 0,
            most: 0,
            name: format!("base {other}"),
            reason: "asked for".into(),
        });
    let request = PlanRequest {
        plates: Plates {
            wells: PlateFormat::Wells24,
            ..Plates::default()
        },
        well: enolattice_plate::WellRequest {
            volume_ul: Some(100.0),
            ..Default::default()
        },
        controls: Controls {
            positive: 0,
            no_base: 1,
            no_electrophile: 1,
            deuterium: 1,
            solvent_only: 1,
        },
        deck,
        ..PlanRequest::default()
    };
    planned(&request, others.collect()).unwrap_or_else(|refusal| panic!("{refusal}"))
}

/// 0.2 mol/L in 100 uL are 20 umol; 1.1 equivalents are 22 umol, which 11 uL of 2.0 mol/L hold.
#[test]
fn a_bought_solution_is_dosed_by_its_titre() {
    let plan = one_base("LDA", deck());
    let stock = plan
        .stocks
        .iter()
        .position(|stock| stock.reagent == "LDA")
        .expect("a stock of LDA");
    assert_eq!(
        (plan.stocks[stock].form, plan.stocks[stock].concentration_m),
        (Form::Bought, 2.0)
    );
    for (_, well) in plan.wells() {
        let doses = well.doses.iter().filter(|dose| dose.stock == stock);
        let dosed: f64 = doses.map(|dose| dose.volume_nl).sum();
        let wanted = if well.content.holds(Role::Base) {
            11_000.0
        } else {
            0.0
        };
        assert_eq!(dosed, wanted, "{} {:?}", well.well, well.content);
    }
    // the solvent that it brings is in the medium: 11 of 100 uL are THF at least
    let (_, in_dmf) = plan
        .wells()
        .find(|(_, well)| well.solvent == "DMF" && well.content == Content::Cell)
        .expect("a cell in DMF");
    let thf = in_dmf
        .medium
        .iter()
        .find(|(name, _)| name == "THF")
        .map(|(_, share)| *share);
    assert!(
        (thf.expect("some THF") - 0.11).abs() < 1e-3,
        "{:?}",
        in_dmf.medium
    );
    assert!(in_dmf.yield_as_dosed.is_some());
}

/// What is weighed of a 60 % dispersion is 1/0.6 of the hydride that the volume made holds.
#[test]
fn dispersions_and_solids_are_weighed_for_what_is_made() {
    for (base, molar_mass, purity) in [
        ("NaH", SODIUM_HYDRIDE, 0.6),
        ("K2CO3", POTASSIUM_CARBONATE, 1.0),
    ] {
        let plan = one_base(base, deck());
        for stock in plan.stocks.iter().filter(|stock| stock.reagent == base) {
            let expected = stock.concentration_m * stock.made_ul / 1000.0 * molar_mass / purity;
            let weighed = stock.weigh_mg.expect("weighed");
            // the library's potassium carbonate brings some water, which is weighed with it
            assert!(
                (weighed / expected - 1.0).abs() < 5e-3,
                "{base}: {weighed} mg for {expected}"
            );
        }
        let substrates = plan
            .stocks
            .iter()
            .filter(|stock| stock.reagent == "cyclohexanone");
        for stock in substrates {
            let expected = stock.concentration_m * stock.made_ul / 1000.0 * CYCLOHEXANONE;
            let weighed = stock.weigh_mg.expect("weighed");
            assert!(
                (weighed / expected - 1.0).abs() < 1e-3,
                "{weighed} mg for {expected}"
            );
        }
    }
}

/// Potassium carbonate dissolves to 0.01 mol/L in DMF (the library), a well needs 22 umol: no deck without slurries and
/// solids can dose it.
#[test]
fn what_cannot_be_dosed_is_refused_with_the_way_out() {
    let request = PlanRequest {
        deck: Deck {
            slurries: false,
            solids: false,
            ..deck()
        },
        ..PlanRequest::default()
    };
    let only_carbonate = [0, 1, 3].map(|base| Quota {
        axis: 2,
        value: base,
        least: 0,
        most: 0,
        name: String::new(),
        reason: String::new(),
    });
    let refusal = planned(&request, only_carbonate.to_vec()).expect_err("cannot be dosed");
    for word in ["K2CO3", "deck.slurries", "soluble base"] {
        assert!(refusal.contains(word), "{refusal}");
    }
}

/// One cell of each of three substrates on a plate of 96 wells: that the rest stays empty is said.
#[test]
fn places_that_stay_empty_are_said() {
    let once = [0, 1, 2].map(|substrate| Quota {
        axis: 0,
        value: substrate,
        least: 0,
        most: 1,
        name: String::new(),
        reason: String::new(),
    });
    let request = PlanRequest {
        deck: deck(),
        ..PlanRequest::default()
    };
    let plan = planned(&request, once.to_vec()).expect("a plan");
    let found = plan
        .findings
        .iter()
        .find(|finding| finding.check == "empty places");
    // 96 less eight controls
    assert!(found.is_some_and(|finding| {
        finding
            .text
            .starts_with("3 cells were chosen for 88 places")
    }));
}

/// Sodium hydride gives hydrogen with ethanol: nobody makes a stock of it there. And with a carrier there is one stock of each
/// substrate, whatever the solvents.
#[test]
fn stocks_are_made_where_they_keep_and_a_carrier_makes_them_few() {
    let hydride = one_base("NaH", deck());
    for stock in hydride.stocks.iter().filter(|stock| stock.reagent == "NaH") {
        assert_ne!(stock.solvent, "EtOH");
        assert_eq!(stock.form, Form::Suspension);
    }
    let request = PlanRequest {
        well: enolattice_plate::WellRequest {
            carrier: Some("THF".into()),
            ..Default::default()
        },
        deck: deck(),
        ..PlanRequest::default()
    };
    let carried = planned(&request, Vec::new()).expect("a plan");
    sound(&carried).expect("sound");
    for substrate in ["cyclohexanone", "diethyl malonate", "phenylacetonitrile"] {
        let stocks = carried
            .stocks
            .iter()
            .filter(|stock| stock.reagent == substrate);
        assert_eq!(stocks.count(), 1, "{substrate}");
    }
}

/// A cell and its wells: a control lacks what its name says, and the quench with D2O is one of its own.
#[test]
fn controls_lack_what_they_are_controls_for() {
    let plan = one_base("LDA", deck());
    let of = |content: Content| {
        let mut wells = plan.wells().map(|(_, well)| well);
        wells
            .find(|well| well.content == content)
            .unwrap_or_else(|| panic!("no {content:?}"))
    };
    assert!(of(Content::NoBase).base.is_none() && of(Content::NoBase).electrophile.is_some());
    assert!(of(Content::NoElectrophile).electrophile.is_none());
    assert!(of(Content::SolventOnly).substrate.is_none());
    let quenched_with = |content: Content| {
        let doses = of(content)
            .doses
            .iter()
            .map(|dose| &plan.stocks[dose.stock]);
        let quench: Vec<&str> = doses
            .filter(|stock| stock.role == Role::Quench)
            .map(|stock| stock.reagent.as_str())
            .collect();
        quench
    };
    assert_eq!(quenched_with(Content::Deuterium), ["D2O"]);
    assert_ne!(quenched_with(Content::NoElectrophile), ["D2O"]);
}

/// Files are RFC 4180: every row has as many fields as the heading, also where a name holds commas and quotes.
#[test]
fn files_can_be_read_back() {
    let plan = one_base("LDA", deck());
    let files = plan.files().expect("files");
    for file in files.iter().filter(|file| file.name.ends_with(".csv")) {
        let mut reader = csv::Reader::from_reader(&file.bytes[..]);
        let columns = reader.headers().expect("a heading").len();
        for row in reader.records() {
            assert_eq!(row.expect("a row").len(), columns, "{}", file.name);
        }
    }
    let json = files
        .iter()
        .find(|file| file.name == "plan.json")
        .expect("JSON");
    let again: Plan = serde_json::from_slice(&json.bytes).expect("a plan");
    assert_eq!(again, plan);
}
