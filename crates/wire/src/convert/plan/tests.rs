//! Plans through messages and back.

use enolattice_plate::{
    AxisBalance, BalancedAxis, ClashKind, ColumnCost, Content, Detection, Dose, Finding, Form,
    Gains, Ion, IonKind, IsotopePeak, LeftOut, Liquid, MassClash, Movements, PRECEDENCE, Plan,
    PlanRequest, PlannedWell, Plate, PlateBalance, ProgramStep, Reagent, Role, SeenBy, Source,
    SpeciesMasses, Spread, Stock, Strength, Transfer, Well, WellCaution, WellMasses, Worth,
};
use prost::Message;

use super::{Assembly, stock_parts, transfer_parts, well_parts};
use crate::convert::ConversionError;
use crate::{MAX_MESSAGE_BYTES, MAX_TRANSFERS_OF_A_PART, PART_BYTES, v1};

/// Every list has members of each kind, every optional value is there once and missing once.
fn plan() -> Plan {
    let plates = vec![plate(0, Some(cost())), plate(1, None)];
    let transfers: Vec<Transfer> = (0..2 * MAX_TRANSFERS_OF_A_PART + 1).map(transfer).collect();
    Plan {
        precedence: PRECEDENCE.to_owned(),
        id: "06f3k8a5zr0q7".into(),
        made_unix_ms: 1_764_583_200_123,
        title: "Invented esters".into(),
        job: "06f3k8a5zr0q2".into(),
        campaign: "Invented campaign".into(),
        model: "ab".repeat(32),
        request: PlanRequest::default(),
        target: 0.7,
        volume_ul: 100.0,
        plates,
        gains: gains(),
        left_out: vec![LeftOut {
            reason: "colder than the block".into(),
            cells: 1 << 40,
        }],
        stocks: vec![stock(Some(0.5)), stock(None)],
        program: [Some(3), None].map(step).into(),
        movements: Movements {
            uptakes: 40,
            deliveries: 300,
            transfers: transfers.len(),
        },
        transfers,
        findings: ["warning", "note"].map(finding).into(),
    }
}

fn plate(number: u32, columns: Option<ColumnCost>) -> Plate {
    let spread = |chi_square| Spread {
        chi_square,
        least: 0.5,
        at_random: 11.25,
    };
    let axis = |axis| AxisBalance {
        axis,
        rows: spread(1.0),
        columns: spread(2.0),
        quadrants: spread(3.0),
        ring: spread(4.0),
    };
    let contents = [
        Content::Cell,
        Content::Positive,
        Content::NoBase,
        Content::NoElectrophile,
        Content::Deuterium,
        Content::SolventOnly,
    ];
    Plate {
        name: format!("plate {}", number + 1),
        temperature_c: -20.0,
        formation_temperature_c: -10.0,
        time_h: 16.0,
        dosing_min: 10.0,
        wells: (0..1536)
            .map(|i| well(i, contents[usize::from(i % 6)]))
            .collect(),
        balance: PlateBalance {
            plate: number,
            balance: 0.9,
            balance_at_start: -0.1,
            axes: vec![
                axis(BalancedAxis::Group(4)),
                axis(BalancedAxis::Replicates),
                axis(BalancedAxis::Controls),
                axis(BalancedAxis::ControlKinds),
            ],
            columns,
        },
    }
}

fn cost() -> ColumnCost {
    ColumnCost {
        column_fills: 12,
        column_fills_randomised: 60,
        mixed_columns: 3,
        balance_randomised: 0.95,
    }
}

fn well(i: u16, content: Content) -> PlannedWell {
    let known = i.is_multiple_of(2);
    let reagent = |name: &str| Reagent {
        name: name.into(),
        smiles: "CCOC(=O)Cc1ccccc1".into(),
        amount_umol: 10.0,
        equiv: 1.1,
    };
    PlannedWell {
        well: Well::new((i / 48) as u8, (i % 48) as u8),
        content,
        cell: (1 << 46) + u64::from(i),
        replicate: 2,
        substrate: known.then(|| reagent("ester 1")),
        base: known.then(|| reagent("LDA")),
        electrophile: known.then(|| reagent("MeI")),
        additive: (!known).then(|| reagent("LiCl")),
        solvent: "THF".into(),
        addition: "substrate into base".into(),
        doses: vec![Dose {
            stock: 1,
            volume_nl: 2_500.0,
            mass_mg: 0.25,
        }],
        medium: vec![("THF".into(), 0.9), ("hexane".into(), 0.1)],
        expected_yield: known.then_some(0.81),
        p_hit: known.then_some(0.5),
        yield_as_dosed: known.then_some(0.8),
        reference_yield: known.then_some(0.0),
        water_per_base: known.then_some(0.01),
        cautions: vec![WellCaution {
            severity: "stop".into(),
            category: "acutely toxic".into(),
            text: "an invented reason".into(),
            source: "common practice".into(),
        }],
        masses: masses(),
        note: "asked for".into(),
    }
}

/// As much as a real well has.
fn masses() -> WellMasses {
    let seen = |strength| SeenBy {
        strength,
        group: "ester".into(),
    };
    let kinds = [
        IonKind::Protonated,
        IonKind::Sodiated,
        IonKind::Ammoniated,
        IonKind::Deprotonated,
        IonKind::Cation,
        IonKind::Anion,
    ];
    let species = |name: &str, uv, other_method: Option<&str>| SpeciesMasses {
        name: name.into(),
        smiles: "CCOC(=O)[C@H](C)c1ccccc1".into(),
        smiles_flat: "CCOC(=O)C(C)c1ccccc1".into(),
        share: 0.8,
        formula: "C11H14O2".into(),
        monoisotopic_da: 178.099_379_7,
        ions: kinds
            .map(|kind| Ion {
                kind,
                mz: 179.106_656,
            })
            .into(),
        isotopes: vec![
            IsotopePeak {
                offset: -1,
                height: 0.01,
            },
            IsotopePeak {
                offset: 0,
                height: 1.0,
            },
        ],
        detection: Detection {
            uv,
            positive: Some(seen(Strength::Weak)),
            negative: None,
            other_method: other_method.map(str::to_owned),
        },
    };
    let clash = |other, kind| MassClash {
        one: 0,
        other,
        kind,
    };
    WellMasses {
        species: vec![
            species("wanted product", Some(seen(Strength::Strong)), None),
            species("substrate", None, Some("GC, for want of a chromophore")),
        ],
        clashes: vec![
            clash(1, ClashKind::SameCompound),
            clash(2, ClashKind::SameFormula),
            clash(
                3,
                ClashKind::SameMz {
                    ion_of_one: IonKind::Protonated,
                    ion_of_other: IonKind::Cation,
                    difference_ppm: -1.5,
                },
            ),
        ],
    }
}

fn gains() -> Gains {
    let worth = |units_with_hit| Worth {
        units_with_hit,
        cells_that_hit: 30.5,
        mean_yield: 0.4,
        information_nats: 12.0,
        spread: 0.7,
    };
    Gains {
        chosen: worth(9.0),
        unlimited: worth(9.5),
        top_list: worth(4.0),
        random: worth(1.0),
        relative: [1.05, 0.6, 0.3],
        at_least_of_best: 0.93,
        shortlist: 4_000,
        draws: 64,
        exchanged: 7,
    }
}

fn stock(known: Option<f64>) -> Stock {
    Stock {
        label: "B2".into(),
        role: Role::Base,
        reagent: "LDA".into(),
        solvent: "THF".into(),
        form: Form::Bought,
        concentration_m: 0.5,
        made_ul: 1_500.0,
        weigh_mg: known,
        molar_mass_g_mol: known,
        purity: 0.97,
        take: known.map(|volume_ul| (volume_ul, 2.0)),
        wells: 40,
        sources: vec![Source {
            plate: "sources 1".into(),
            well: Well::new(7, 11),
            filled_ul: 900.0,
            taken_ul: 850.0,
        }],
        liquid: known.map(|viscosity_mpa_s| Liquid {
            viscosity_mpa_s,
            density_g_ml: 0.89,
            vapour_pressure_kpa: 21.6,
            boiling_c: 66.0,
        }),
        lasts_h: known,
        keep: "below 0 °C, under inert gas".into(),
        hazards: "unknown".into(),
        notes: vec!["titrate before use".into()],
    }
}

fn step(group: Option<u32>) -> ProgramStep {
    ProgramStep {
        plate: "plate 1".into(),
        group,
        what: "bring the block to temperature".into(),
        temperature_c: -20.0,
        wait_min: 15.0,
    }
}

fn finding(severity: &str) -> Finding {
    Finding {
        severity: severity.into(),
        check: "volume balance".into(),
        text: "every source holds what is taken".into(),
    }
}

fn transfer(i: usize) -> Transfer {
    Transfer {
        group: (i / 9_999) as u32,
        source_plate: "sources 1".into(),
        source_well: Well::new(7, 11),
        plate: format!("plate {}", i % 2 + 1),
        well: Well::new(31, 47),
        volume_nl: 2_500.0,
        liquid: "LDA".into(),
        stock: (i > 0).then_some(1),
    }
}

/// The plan as a client puts it together.
fn received(plan: &Plan) -> Result<Plan, ConversionError> {
    let mut assembly = Assembly::new(plan.into())?;
    for part in well_parts(plan) {
        assembly.add_wells(part)?;
    }
    for part in stock_parts(plan) {
        assembly.add_stocks(part)?;
    }
    for part in transfer_parts(plan) {
        assembly.add_transfers(&part)?;
    }
    assembly.finish()
}

#[test]
fn plans_come_back_whole() {
    let plan = plan();
    assert_eq!(received(&plan), Ok(plan));
}

#[test]
fn a_draft_stays_without_id_and_time() {
    let draft = Plan {
        id: String::new(),
        made_unix_ms: 0,
        transfers: Vec::new(),
        movements: Movements {
            transfers: 0,
            ..plan().movements
        },
        ..plan()
    };
    assert_eq!(v1::Plan::from(&draft).create_time, None);
    assert_eq!(received(&draft), Ok(draft));
}

#[test]
fn a_plan_of_which_a_part_is_lost_is_refused() {
    let plan = plan();
    let mut assembly = Assembly::new((&plan).into()).expect("a head");
    for part in well_parts(&plan).into_iter().skip(1) {
        assembly.add_wells(part).expect("wells");
    }
    let field = "StreamWellsResponse.wells";
    assert_eq!(assembly.finish(), Err(ConversionError::Missing { field }));
}

#[test]
fn every_message_of_a_large_plan_is_small() {
    let plan = plan();
    let largest_well = 8 << 10;
    for part in well_parts(&plan) {
        assert!(part.encoded_len() < PART_BYTES + largest_well);
    }
    let whole: usize = well_parts(&plan).iter().map(Message::encoded_len).sum();
    assert!(
        whole > MAX_MESSAGE_BYTES / 2,
        "large enough to need parts: {whole} bytes"
    );
    assert!(v1::Plan::from(&plan).encoded_len() < 16 << 10);
    let transfers = transfer_parts(&plan);
    assert_eq!(transfers.len(), 3);
    // a column of volumes takes 8 bytes a transfer, the nine others few more together
    let bytes = transfers[0].encoded_len();
    assert!(bytes < 32 * MAX_TRANSFERS_OF_A_PART, "{bytes}");
}
