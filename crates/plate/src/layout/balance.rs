//! How evenly the values of the axes are spread over the zones of a plate.

use std::collections::BTreeMap;

use serde::{Deserialize, Serialize};

use super::LayoutItem;
use super::arrangement::Arrangement;
use crate::{PlateFormat, Well};

/// What is spread over a plate.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub enum BalancedAxis {
    /// An axis of the items, by its index.
    Group(usize),
    /// Replicates of one another, as far as items have any.
    Replicates,
    /// Controls against all others.
    Controls,
    /// The kinds of controls.
    ControlKinds,
}

/// How evenly one axis is spread.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct AxisBalance {
    /// What is spread.
    pub axis: BalancedAxis,
    /// Over the rows that are used.
    pub rows: Spread,
    /// Over the columns that are used.
    pub columns: Spread,
    /// Over the four quarters of the plate.
    pub quadrants: Spread,
    /// Over the outer ring and the wells within it.
    pub ring: Spread,
}

/// Evenness of the values of one axis over zones of one kind.
///
/// `χ² = Σ (c − e)² / e` over values and zones, `c` the number of wells of a value in a zone and
/// `e = (wells of the value) · (wells of the zone) / (wells of the plate)`, over the wells that are used.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Spread {
    /// χ² of this layout.
    pub chi_square: f64,
    /// A bound from below: χ² when every value by itself is spread as evenly as whole wells allow.
    pub least: f64,
    /// Mean of χ² over all arrangements, N/(N − 1) · (values − 1) · (zones − 1), which is exact for
    /// given numbers of wells of each value and zone (Haldane 1940, from memory).
    pub at_random: f64,
}

/// Below this, all arrangements are as even as one another.
const NO_DIFFERENCE: f64 = 1e-9;

impl Spread {
    /// 1 the most even that can be, 0 as arrangements are on average, below 0 worse;
    /// none where all arrangements are equally even, as with values that occur once.
    pub fn evenness(&self) -> Option<f64> {
        let range = self.at_random - self.least;
        (range > NO_DIFFERENCE).then(|| 1.0 - (self.chi_square - self.least) / range)
    }
}

/// Counts and χ² of every axis and kind of zone, kept up to date while items change places.
#[derive(Clone, Debug)]
pub(super) struct Balances {
    /// The axes that have more than one value on the plate.
    axes: Vec<BalancedAxis>,
    /// For every axis the value of each item.
    values: Vec<Vec<usize>>,
    /// For every kind of zone the zone of each slot.
    zones: [Vec<usize>; 4],
    tables: Vec<Table>,
}

/// One axis over one kind of zones.
#[derive(Clone, Debug)]
struct Table {
    axis: usize,
    kind: usize,
    zones: usize,
    counts: Vec<u32>,
    /// N / (wells of the value · wells of the zone).
    weights: Vec<f64>,
    spread: Spread,
    /// 1 / (at random − least), or 0 where arrangements do not differ.
    scale: f64,
}

impl Balances {
    pub(super) fn new(
        format: PlateFormat,
        items: &[&LayoutItem],
        arrangement: &Arrangement,
    ) -> Balances {
        let (axes, values): (Vec<_>, Vec<_>) = axes_of(items).into_iter().unzip();
        let zones = zone_kinds(format).map(|zone_of| {
            let zones = arrangement.wells().iter().map(|well| zone_of(*well));
            numbered(zones)
        });
        let mut tables = Vec::new();
        for (axis, values) in values.iter().enumerate() {
            for (kind, zones) in zones.iter().enumerate() {
                tables.push(Table::new(axis, kind, values, zones, arrangement));
            }
        }
        Balances {
            axes,
            values,
            zones,
            tables,
        }
    }

    /// Mean evenness of the tables that can differ; 1 where none can.
    pub(super) fn evenness(&self) -> f64 {
        1.0 - self.cost()
    }

    /// 0 the most even that can be, 1 as by chance.
    pub(super) fn cost(&self) -> f64 {
        let differing = self.tables.iter().filter(|table| table.scale > 0.0);
        let (mut sum, mut number) = (0.0, 0.0);
        for table in differing {
            sum += (table.spread.chi_square - table.spread.least) * table.scale;
            number += 1.0;
        }
        if number > 0.0 { sum / number } else { 0.0 }
    }

    /// Notes that two items have changed places; returns by how much the sum of the terms of the
    /// cost changed.
    pub(super) fn swapped(&mut self, arrangement: &Arrangement, one: usize, other: usize) -> f64 {
        let mut change = 0.0;
        for table in &mut self.tables {
            if table.scale == 0.0 {
                continue;
            }
            let (a, b) = (self.values[table.axis][one], self.values[table.axis][other]);
            let zones = &self.zones[table.kind];
            // where they stand now
            let (x, y) = (
                zones[arrangement.slot_of(one)],
                zones[arrangement.slot_of(other)],
            );
            if a != b && x != y {
                let by = table.moved(a, y, x) + table.moved(b, x, y);
                table.spread.chi_square += by;
                change += by * table.scale;
            }
        }
        change
    }

    /// How many terms the cost has.
    pub(super) fn terms(&self) -> usize {
        let differing = self.tables.iter().filter(|table| table.scale > 0.0);
        differing.count()
    }

    pub(super) fn by_axis(&self) -> Vec<AxisBalance> {
        let axes = self.axes.iter().zip(self.tables.chunks_exact(4));
        axes.map(|(axis, tables)| AxisBalance {
            axis: *axis,
            rows: tables[0].spread,
            columns: tables[1].spread,
            quadrants: tables[2].spread,
            ring: tables[3].spread,
        })
        .collect()
    }

    /// Counts everything anew, so that rounding does not add up over many swaps.
    pub(super) fn recount(&mut self, arrangement: &Arrangement) {
        for table in &mut self.tables {
            table.count(
                &self.values[table.axis],
                &self.zones[table.kind],
                arrangement,
            );
        }
    }
}

impl Table {
    fn new(
        axis: usize,
        kind: usize,
        values: &[usize],
        zones: &[usize],
        arrangement: &Arrangement,
    ) -> Table {
        let of_values = sizes(values);
        let of_zones = sizes(zones);
        let wells = arrangement.len() as f64;
        let weight = |value: &f64, zone: &f64| wells / (value * zone);
        let weights = of_values
            .iter()
            .flat_map(|value| of_zones.iter().map(move |zone| weight(value, zone)));
        let least = of_values
            .iter()
            .map(|value| least_chi_square(*value, &of_zones, wells))
            .sum();
        let freedom = (of_values.len() as f64 - 1.0) * (of_zones.len() as f64 - 1.0);
        let at_random = wells / (wells - 1.0).max(1.0) * freedom;
        let mut table = Table {
            axis,
            kind,
            zones: of_zones.len(),
            counts: Vec::new(),
            weights: weights.collect(),
            spread: Spread {
                chi_square: 0.0,
                least,
                at_random,
            },
            scale: 0.0,
        };
        if at_random - least > NO_DIFFERENCE {
            table.scale = 1.0 / (at_random - least);
        }
        table.count(values, zones, arrangement);
        table
    }

    fn count(&mut self, values: &[usize], zones: &[usize], arrangement: &Arrangement) {
        self.counts = vec![0; self.weights.len()];
        for (item, value) in values.iter().enumerate() {
            self.counts[value * self.zones + zones[arrangement.slot_of(item)]] += 1;
        }
        // Σ (c − e)²/e = Σ c²/e − N
        let squares = self.counts.iter().zip(&self.weights);
        let sum: f64 = squares
            .map(|(count, weight)| f64::from(count * count) * weight)
            .sum();
        self.spread.chi_square = sum - arrangement.len() as f64;
    }

    /// Moves one well of a value from one zone to another; returns the change of χ².
    fn moved(&mut self, value: usize, from: usize, to: usize) -> f64 {
        let (from, to) = (value * self.zones + from, value * self.zones + to);
        self.counts[from] -= 1;
        let change = self.weights[to] * f64::from(2 * self.counts[to] + 1)
            - self.weights[from] * f64::from(2 * self.counts[from] + 1);
        self.counts[to] += 1;
        change
    }
}

/// The least share of one value in χ²: its wells are dealt out one by one to the zone where one more
/// adds least, which is the optimum of a sum of convex terms.
fn least_chi_square(of_value: f64, of_zones: &[f64], wells: f64) -> f64 {
    let mut counts = vec![0.0; of_zones.len()];
    let mut dealt = 0.0;
    while dealt < of_value {
        let added = |zone: usize| (2.0 * counts[zone] + 1.0) / of_zones[zone];
        let best = (1..of_zones.len()).fold(0, |best, zone| {
            if added(zone) < added(best) {
                zone
            } else {
                best
            }
        });
        counts[best] += 1.0;
        dealt += 1.0;
    }
    let squares = counts.iter().zip(of_zones);
    let sum: f64 = squares
        .map(|(count, zone)| count * count * wells / (of_value * zone))
        .sum();
    sum - of_value
}

/// The axes that have more than one value, with the value of each item.
fn axes_of(items: &[&LayoutItem]) -> Vec<(BalancedAxis, Vec<usize>)> {
    let groups = items.first().map_or(0, |item| item.groups.len());
    let mut axes: Vec<(BalancedAxis, Vec<usize>)> = (0..groups)
        .map(|axis| {
            let values = items.iter().map(|item| item.groups[axis]);
            (BalancedAxis::Group(axis), numbered(values))
        })
        .collect();
    let replicates = items.iter().map(|item| item.replicates);
    let is_control = items.iter().map(|item| item.control.is_some());
    let control = items.iter().map(|item| item.control);
    axes.push((BalancedAxis::Replicates, numbered(replicates)));
    axes.push((BalancedAxis::Controls, numbered(is_control)));
    axes.push((BalancedAxis::ControlKinds, numbered(control)));
    axes.retain(|(_, values)| values.iter().any(|value| *value > 0));
    axes
}

/// Rows, columns, quadrants, ring.
fn zone_kinds(format: PlateFormat) -> [Box<dyn Fn(Well) -> usize>; 4] {
    let (half_rows, half_columns) = (format.rows() / 2, format.columns() / 2);
    [
        Box::new(|well| well.row.into()),
        Box::new(|well| well.column.into()),
        Box::new(move |well| {
            2 * usize::from(well.row >= half_rows) + usize::from(well.column >= half_columns)
        }),
        Box::new(move |well| usize::from(format.is_edge(well))),
    ]
}

/// Numbers things from 0 in the order in which they first appear.
fn numbered<T: Ord>(things: impl Iterator<Item = T>) -> Vec<usize> {
    let mut numbers = BTreeMap::new();
    things
        .map(|thing| {
            let next = numbers.len();
            *numbers.entry(thing).or_insert(next)
        })
        .collect()
}

/// How often each number occurs.
fn sizes(numbers: &[usize]) -> Vec<f64> {
    let most = numbers.iter().max().map_or(0, |most| most + 1);
    let mut sizes = vec![0.0; most];
    for number in numbers {
        sizes[*number] += 1.0;
    }
    sizes
}
