//! Plans of random campaigns on random decks: volumes balance, limits and the deck are obeyed, nothing that must be stopped is
//! on a plate, the same request gives the same plan.

use std::collections::{BTreeMap, BTreeSet};

use enolattice_engine::{Engine, EngineConfig, EngineError};
use enolattice_grid::{CampaignSpec, ConditionsSpec, InputError, TargetSpec};
use enolattice_plate::{
    Content, Controls, Deck, EdgeWells, Limit, LimitAxis, Plan, PlanRequest, PlateFormat, Role,
};
use proptest::prelude::*;
use proptest::sample::subsequence;

use crate::campaigns::{library, submission, substrates};
use crate::plans::unstamped;

const SUBSTRATES: [&str; 8] = [
    "CCOC(=O)Cc1ccccc1",
    "O=C1CCCCC1",
    "CCOC(=O)CC(=O)OCC",
    "CC(=O)CC(C)=O",
    "N#CCc1ccccc1",
    "CCC=O",
    "CC[N+](=O)[O-]",
    "CC(=O)c1ccccc1",
];
const BASES: [&str; 7] = ["LDA", "NaH", "KOtBu", "DBU", "K2CO3", "Et3N", "nBuLi"];
const ELECTROPHILES: [&str; 6] = ["MeI", "BnBr", "PhCHO", "AcCl", "NBS", "methyl acrylate"];
const SOLVENTS: [&str; 6] = ["THF", "DMF", "DMSO", "EtOH", "toluene", "MeCN"];
const TEMPERATURES_C: [f64; 4] = [-78.0, 0.0, 25.0, 60.0];

fn campaign() -> impl Strategy<Value = CampaignSpec> {
    (
        subsequence(&SUBSTRATES, 2..=4),
        subsequence(&BASES, 2..=4),
        subsequence(&ELECTROPHILES, 1..=3),
        subsequence(&SOLVENTS, 1..=3),
        subsequence(&TEMPERATURES_C, 1..=2),
        0.2f64..0.7,
    )
        .prop_map(
            |(smiles, bases, electrophiles, solvents, temperatures, hit)| CampaignSpec {
                title: "random".into(),
                substrates: substrates(&smiles),
                bases: library(&bases),
                electrophiles: library(&electrophiles),
                solvents: library(&solvents),
                conditions: ConditionsSpec {
                    temperature_c: temperatures,
                    ..ConditionsSpec::default()
                },
                target: TargetSpec {
                    yield_at_least: Some(hit),
                },
                ..CampaignSpec::default()
            },
        )
}

fn request() -> impl Strategy<Value = PlanRequest> {
    (
        any::<u64>(),
        prop_oneof![Just(PlateFormat::Wells24), Just(PlateFormat::Wells96)],
        0usize..3,
        1u32..3,
        any::<[bool; 3]>(),
        prop_oneof![Just(-100.0), Just(-20.0), Just(10.0)],
        (0u32..2, 3u32..12),
        prop_oneof![Just(10_000.0), Just(50_000.0), Just(1_000_000.0)],
    )
        .prop_map(
            |(
                seed,
                wells,
                edges,
                replicates,
                [inert, slurries, controls],
                lowest_c,
                (least, most),
                largest_nl,
            )| {
                let mut request = PlanRequest {
                    seed,
                    controls: Controls {
                        positive: u32::from(controls),
                        no_base: u32::from(controls),
                        ..Controls::default()
                    },
                    deck: Deck {
                        inert,
                        slurries,
                        solids: !slurries,
                        smallest_mass_mg: 0.01,
                        lowest_temperature_c: Some(lowest_c),
                        largest_nl,
                        ..Deck::default()
                    },
                    ..PlanRequest::default()
                };
                request.plates.wells = wells;
                request.plates.edge_wells =
                    [EdgeWells::Use, EdgeWells::Empty, EdgeWells::ControlsOnly][edges];
                request.choice.draws = 16;
                request.choice.replicates = replicates;
                request.choice.limits = vec![Limit {
                    axis: LimitAxis::Substrate,
                    value: None,
                    least,
                    most: Some(most),
                }];
                request
            },
        )
}

/// What each source gives and each well gets, and that no source gives what it does not hold.
fn balanced(plan: &Plan) -> Result<(), TestCaseError> {
    let deck = &plan.request.deck;
    let mut given: BTreeMap<(String, String), f64> = BTreeMap::new();
    let mut got: BTreeMap<(String, String, usize), f64> = BTreeMap::new();
    for transfer in &plan.transfers {
        prop_assert!(transfer.volume_nl <= deck.largest_nl + 1e-6);
        if let Some(stock) = transfer.stock {
            let from = (
                transfer.source_plate.clone(),
                transfer.source_well.to_string(),
            );
            *given.entry(from).or_default() += transfer.volume_nl / 1000.0;
            // a diluent goes to the analysis plate of the same number
            let plate = transfer.plate.replace("analysis", "plate");
            let to = (plate, transfer.well.to_string(), stock);
            *got.entry(to).or_default() += transfer.volume_nl;
        }
    }
    for stock in &plan.stocks {
        for source in &stock.sources {
            let from = (source.plate.clone(), source.well.to_string());
            let taken = given.remove(&from).unwrap_or(0.0);
            prop_assert!((taken - source.taken_ul).abs() < 1e-6, "{}", stock.label);
            let left = source.filled_ul - taken;
            prop_assert!(
                left >= deck.source_dead_ul - 1e-6,
                "{}: {left}",
                stock.label
            );
            prop_assert!(source.filled_ul <= deck.source_capacity_ul + 1e-6);
        }
    }
    prop_assert!(given.is_empty(), "taken from nowhere: {given:?}");
    for (plate, well) in plan.wells() {
        let mut reaction_ul = 0.0;
        for dose in &well.doses {
            let to = (plate.name.clone(), well.well.to_string(), dose.stock);
            let got = got.remove(&to).unwrap_or(0.0);
            prop_assert!((got - dose.volume_nl).abs() < 1e-6, "{}", well.well);
            let role = plan.stocks[dose.stock].role;
            if !matches!(role, Role::Quench | Role::Diluent) {
                reaction_ul += dose.volume_nl / 1000.0;
            }
        }
        let slack = (4.0 * deck.step_nl + deck.smallest_nl) / 1000.0;
        prop_assert!(
            (reaction_ul - plan.volume_ul).abs() <= slack,
            "{}",
            well.well
        );
    }
    prop_assert!(got.is_empty(), "given to nobody: {got:?}");
    Ok(())
}

fn obedient(plan: &Plan) -> Result<(), TestCaseError> {
    let deck = &plan.request.deck;
    let limit = &plan.request.choice.limits[0];
    let mut cells: BTreeMap<&str, BTreeSet<u64>> = BTreeMap::new();
    let mut copies: BTreeMap<u64, u32> = BTreeMap::new();
    for (plate, well) in plan.wells() {
        for temperature_c in [plate.temperature_c, plate.formation_temperature_c] {
            prop_assert!(temperature_c >= deck.lowest_temperature_c.unwrap_or(f64::MIN));
        }
        let stops = well
            .cautions
            .iter()
            .filter(|caution| caution.severity == "stop");
        prop_assert_eq!(stops.count(), 0, "{}", well.well);
        let base = well.base.as_ref().map(|base| base.name.as_str());
        if !deck.inert {
            prop_assert!(
                !matches!(base, Some("LDA" | "nBuLi")),
                "{base:?} without inert gas"
            );
        }
        if well.content == Content::Cell {
            let substrate = well
                .substrate
                .as_ref()
                .map_or("", |substrate| &substrate.name);
            cells.entry(substrate).or_default().insert(well.cell);
            *copies.entry(well.cell).or_default() += 1;
        }
    }
    let most = limit.most.unwrap_or(u32::MAX) as usize;
    for (substrate, cells) in cells {
        let n = cells.len();
        prop_assert!(
            (limit.least as usize..=most).contains(&n),
            "{substrate}: {n}"
        );
    }
    let replicates = plan.request.choice.replicates;
    prop_assert!(copies.values().all(|copies| *copies == replicates));
    Ok(())
}

async fn plans(campaign: CampaignSpec, request: PlanRequest) -> [Result<Plan, EngineError>; 2] {
    let data = tempfile::tempdir().expect("a directory");
    let config = EngineConfig {
        data_dir: data.path().to_owned(),
        threads: 2,
        library: Vec::new(),
    };
    let engine = Engine::open(config).await.expect("opens");
    let job = engine
        .submit(submission(campaign))
        .await
        .expect("a job")
        .job;
    let mut states = engine.watch(&job).await.expect("is watched");
    while states.changed().await.is_ok() {}
    [
        engine.draft_plan(job.clone(), request.clone()).await,
        engine.draft_plan(job, request).await,
    ]
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(6))]

    #[test]
    fn plans_of_random_campaigns_are_sound(campaign in campaign(), request in request()) {
        let runtime = tokio::runtime::Runtime::new().expect("a runtime");
        match runtime.block_on(plans(campaign, request)) {
            [Ok(plan), Ok(again)] => {
                balanced(&plan)?;
                obedient(&plan)?;
                prop_assert_eq!(unstamped(&plan), unstamped(&again));
            }
            [Err(EngineError::Input(faults)), Err(EngineError::Input(again))] => {
                prop_assert_eq!(&faults, &again);
                let told = |fault: &InputError| !fault.place.field.is_empty() && !fault.remedy.is_empty();
                prop_assert!(faults.iter().all(told), "{faults:?}");
                // such a case tells nothing of plans: another takes its place
                return Err(TestCaseError::reject("there is no such plan"));
            }
            [one, other] => prop_assert!(false, "{one:?} and {other:?}"),
        }
    }
}
