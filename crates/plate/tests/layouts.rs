//! Layouts over random items.

use std::collections::BTreeSet;

use enolattice_plate::{
    BalancedAxis, EdgeWells, LayoutError, LayoutItem, LayoutOptions, PlateFormat, Well, WellOrder,
    lay_out,
};
use proptest::prelude::*;

fn options(format: PlateFormat, seed: u64, edges: EdgeWells, order: WellOrder) -> LayoutOptions {
    LayoutOptions {
        format,
        seed,
        edges,
        order,
    }
}

/// A full grid of three axes, every cell `replicates` times, with controls of two kinds.
fn grid(levels: [u32; 3], replicates: u32, controls: u32) -> Vec<LayoutItem> {
    let mut items = Vec::new();
    for cell in 0..levels.iter().product() {
        let groups = vec![
            Some(cell % levels[0]),
            Some(cell / levels[0] % levels[1]),
            Some(cell / levels[0] / levels[1]),
        ];
        for _ in 0..replicates {
            items.push(LayoutItem {
                groups: groups.clone(),
                replicates: (replicates > 1).then_some(cell),
                ..LayoutItem::default()
            });
        }
    }
    for control in 0..controls {
        items.push(LayoutItem {
            groups: vec![Some(control % levels[0]), None, Some(control % levels[2])],
            control: Some(control % 2),
            ..LayoutItem::default()
        });
    }
    items
}

fn quadrant(format: PlateFormat, well: Well) -> (bool, bool) {
    (
        well.row < format.rows() / 2,
        well.column < format.columns() / 2,
    )
}

#[test]
fn a_full_plate_of_96_is_nearly_as_even_as_can_be() {
    let items = grid([4, 4, 3], 2, 0);
    assert_eq!(items.len(), 96);
    let format = PlateFormat::Wells96;
    let layout = lay_out(
        &items,
        &options(format, 7, EdgeWells::Use, WellOrder::Randomised),
    )
    .unwrap();
    let plate = &layout.plates[0];
    assert!(plate.balance > 0.9, "{plate:#?}");
    // replicates of a cell: never in one row or column, never neighbours
    for pair in layout.wells.chunks_exact(2) {
        let (one, other) = (pair[0], pair[1]);
        assert!(
            one.row != other.row && one.column != other.column,
            "{one} {other}"
        );
        let rows = one.row.abs_diff(other.row);
        let columns = one.column.abs_diff(other.column);
        assert!(rows.max(columns) >= 2, "{one} {other}");
    }
    let quadrants = plate.axes.iter().map(|axis| axis.quadrants);
    assert!(quadrants.clone().count() >= 3);
    for spread in quadrants {
        assert!(
            spread.chi_square - spread.least < 0.35 * spread.at_random,
            "{spread:?}"
        );
    }
}

/// The mean of χ² over random arrangements is an identity of contingency tables with fixed margins;
/// the starts of many seeds must scatter around 0, where the figure of evenness has its zero.
#[test]
fn starts_are_as_even_as_chance_on_average() {
    let items = grid([3, 2, 2], 2, 0);
    let format = PlateFormat::Wells24;
    let starts: Vec<f64> = (0..400)
        .map(|seed| {
            let options = options(format, seed, EdgeWells::Use, WellOrder::Randomised);
            lay_out(&items, &options).unwrap().plates[0].balance_at_start
        })
        .collect();
    let mean = starts.iter().sum::<f64>() / starts.len() as f64;
    let variance = starts.iter().map(|b| (b - mean).powi(2)).sum::<f64>() / starts.len() as f64;
    let error = (variance / starts.len() as f64).sqrt();
    assert!(mean.abs() < 4.0 * error, "{mean} ± {error}");
}

#[test]
fn columns_share_a_source_and_say_what_it_costs() {
    let items = grid([12, 8, 1], 1, 0);
    let format = PlateFormat::Wells96;
    let by_column = options(format, 1, EdgeWells::Use, WellOrder::Columns { axis: 0 });
    let layout = lay_out(&items, &by_column).unwrap();
    let cost = layout.plates[0].columns.unwrap();
    // twelve sources of eight wells each: a column each
    assert_eq!((cost.column_fills, cost.mixed_columns), (12, 0));
    assert!(cost.column_fills_randomised > 60, "{cost:?}");
    assert!(
        layout.plates[0].balance < cost.balance_randomised,
        "{cost:?}"
    );
    let mut columns = BTreeSet::new();
    for (item, well) in items.iter().zip(&layout.wells) {
        columns.insert((item.groups[0], well.column));
    }
    assert_eq!(columns.len(), 12);
    // 8 sources of 12 wells: a whole column and half of another each
    let by_column = options(format, 1, EdgeWells::Use, WellOrder::Columns { axis: 1 });
    let cost = lay_out(&items, &by_column).unwrap().plates[0]
        .columns
        .unwrap();
    assert_eq!((cost.column_fills, cost.mixed_columns), (16, 4));
}

#[test]
fn fixed_items_stay_and_edges_are_obeyed() {
    let mut items = grid([4, 4, 3], 1, 12);
    items[5].fixed = Some("C4".parse().unwrap());
    items[50].fixed = Some("H12".parse().unwrap());
    let format = PlateFormat::Wells96;
    for order in [WellOrder::Randomised, WellOrder::Columns { axis: 1 }] {
        let layout = lay_out(&items, &options(format, 3, EdgeWells::ControlsOnly, order)).unwrap();
        assert_eq!(layout.wells[5].to_string(), "C4");
        assert_eq!(layout.wells[50].to_string(), "H12");
        for (item, well) in items.iter().zip(&layout.wells) {
            assert_eq!(format.is_edge(*well), item.control.is_some(), "{well}");
        }
    }
}

#[test]
fn what_cannot_be_is_refused_with_counts() {
    let format = PlateFormat::Wells24;
    let use_all = options(format, 0, EdgeWells::Use, WellOrder::Randomised);
    let refused =
        |items: &[LayoutItem], options: &LayoutOptions| lay_out(items, options).unwrap_err();
    let items = grid([5, 5, 1], 1, 0);
    let error = refused(&items, &use_all);
    assert!(
        error.to_string().contains("25 items for 24 usable wells"),
        "{error}"
    );
    let empty = LayoutOptions {
        edges: EdgeWells::Empty,
        ..use_all
    };
    let error = refused(&items[..9], &empty).to_string();
    assert!(error.contains("9 items for 8 usable wells"), "{error}");
    let controls_only = LayoutOptions {
        edges: EdgeWells::ControlsOnly,
        ..use_all
    };
    let error = refused(&items[..9], &controls_only).to_string();
    assert!(
        error.contains("9 items that are no controls for 8 inner"),
        "{error}"
    );

    let mut fixed = items[..3].to_vec();
    fixed[0].fixed = Some(Well::new(0, 0));
    fixed[1].fixed = Some(Well::new(0, 0));
    let taken = LayoutError::WellTaken {
        plate: 0,
        well: Well::new(0, 0),
    };
    assert_eq!(refused(&fixed, &use_all), taken);
    fixed[1].fixed = Some(Well::new(4, 0));
    assert!(matches!(
        refused(&fixed, &use_all),
        LayoutError::NoSuchWell { .. }
    ));
    fixed[1].fixed = None;
    assert!(matches!(
        refused(&fixed, &empty),
        LayoutError::EdgeNotAllowed { .. }
    ));
    fixed[1].groups.pop();
    assert!(matches!(
        refused(&fixed, &use_all),
        LayoutError::AxesDiffer {
            item: 1,
            axes: 2,
            expected: 3
        }
    ));
    let no_axis = LayoutOptions {
        order: WellOrder::Columns { axis: 3 },
        ..use_all
    };
    assert!(matches!(
        refused(&items[..3], &no_axis),
        LayoutError::NoSuchAxis { axis: 3, axes: 3 }
    ));
}

#[test]
fn nothing_and_little_are_laid_out() {
    for order in [WellOrder::Randomised, WellOrder::Columns { axis: 0 }] {
        let options = options(PlateFormat::Wells96, 0, EdgeWells::Use, order);
        assert!(lay_out(&[], &options).unwrap().wells.is_empty());
        for items in 1..4 {
            let layout = lay_out(&grid([1, 1, 1], items, 0), &options).unwrap();
            assert_eq!(layout.wells.len(), items as usize);
        }
    }
}

#[test]
fn a_layout_is_stored_and_read_back() {
    let items = grid([2, 3, 2], 1, 2);
    let options = options(
        PlateFormat::Wells24,
        5,
        EdgeWells::Use,
        WellOrder::Columns { axis: 2 },
    );
    let layout = lay_out(&items, &options).unwrap();
    let text = serde_json::to_string(&layout).unwrap();
    assert!(text.contains(&format!("\"{}\"", layout.wells[0])), "{text}");
    let read: enolattice_plate::Layout = serde_json::from_str(&text).unwrap();
    assert_eq!(read.wells, layout.wells);
}

fn formats() -> impl Strategy<Value = PlateFormat> {
    prop_oneof![
        Just(PlateFormat::Wells24),
        Just(PlateFormat::Wells96),
        Just(PlateFormat::Wells384),
    ]
}

fn edges() -> impl Strategy<Value = EdgeWells> {
    prop_oneof![
        Just(EdgeWells::Use),
        Just(EdgeWells::Empty),
        Just(EdgeWells::ControlsOnly),
    ]
}

fn orders() -> impl Strategy<Value = WellOrder> {
    prop_oneof![
        Just(WellOrder::Randomised),
        (0usize..3).prop_map(|axis| WellOrder::Columns { axis }),
    ]
}

prop_compose! {
    /// Items for up to two plates, never more than fit.
    fn some_items()(format in formats(), edges in edges(), order in orders(), seed in any::<u64>())
        (
            rows in prop::collection::vec(
                (0u32..2, prop::collection::vec(prop::option::weighted(0.95, 0u32..6), 3),
                 prop::option::weighted(0.1, 0u32..3), prop::option::weighted(0.3, 0u32..40)),
                0..format.wells().min(200)),
            format in Just(format), edges in Just(edges), order in Just(order), seed in Just(seed),
        ) -> (Vec<LayoutItem>, LayoutOptions) {
        let inner = format.by_columns().filter(|well| !format.is_edge(*well)).count();
        let most = if edges == EdgeWells::Use { format.wells() } else { inner };
        let mut on_plate = [0, 0];
        let mut items = Vec::new();
        for (plate, groups, control, replicates) in rows {
            on_plate[plate as usize] += 1;
            if on_plate[plate as usize] <= most {
                items.push(LayoutItem { plate, groups, control, replicates, fixed: None });
            }
        }
        (items, options(format, seed, edges, order))
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(64))]

    #[test]
    fn every_item_has_a_well_of_its_own((items, options) in some_items()) {
        let layout = lay_out(&items, &options).unwrap();
        prop_assert_eq!(layout.wells.len(), items.len());
        let mut taken = BTreeSet::new();
        for (item, well) in items.iter().zip(&layout.wells) {
            prop_assert!(options.format.has(*well));
            prop_assert!(taken.insert((item.plate, *well)), "{} twice", well);
            let edge_allowed = match options.edges {
                EdgeWells::Use => true,
                EdgeWells::Empty => false,
                EdgeWells::ControlsOnly => item.control.is_some(),
            };
            prop_assert!(edge_allowed || !options.format.is_edge(*well));
        }
        for plate in &layout.plates {
            prop_assert!(plate.balance >= plate.balance_at_start - 1e-9, "{:?}", plate);
            prop_assert!(plate.balance <= 1.0 + 1e-9);
            for axis in &plate.axes {
                for spread in [axis.rows, axis.columns, axis.quadrants, axis.ring] {
                    prop_assert!(spread.chi_square >= spread.least - 1e-6, "{:?}", axis);
                }
            }
        }
    }

    #[test]
    fn the_seed_decides((items, options) in some_items()) {
        prop_assert_eq!(lay_out(&items, &options).unwrap(), lay_out(&items, &options).unwrap());
    }

    #[test]
    fn controls_are_spread_over_a_full_plate(seed in any::<u64>(), controls in 4u32..9, levels in 2u32..5) {
        let items = grid([levels, 4, 88 / levels / 4], 1, controls);
        let format = PlateFormat::Wells96;
        let layout = lay_out(&items, &options(format, seed, EdgeWells::Use, WellOrder::Randomised)).unwrap();
        let controls = items.iter().zip(&layout.wells).filter(|(item, _)| item.control.is_some());
        let quadrants: BTreeSet<_> = controls.map(|(_, well)| quadrant(format, *well)).collect();
        prop_assert!(quadrants.len() >= 3, "{:?}", quadrants);
        let spread = layout.plates[0].axes.iter().find(|axis| axis.axis == BalancedAxis::Controls);
        prop_assert!(spread.is_some());
    }
}
