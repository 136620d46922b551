//! What a plan is asked to be, written with every value.

use enolattice_model::Category;
use enolattice_plate::{
    Aim, ChoiceRequest, Controls, Deck, Limit, NamedCell, PlanRequest, Plates, WellRequest,
};

use crate::convert::numbers;
use crate::v1;

impl From<&PlanRequest> for v1::PlanRequest {
    fn from(request: &PlanRequest) -> Self {
        let PlanRequest {
            title,
            seed,
            plates,
            choice,
            controls,
            well,
            deck,
        } = request;
        v1::PlanRequest {
            title: title.clone(),
            seed: *seed,
            plates: Some(plates_message(plates)),
            choice: Some(choice_message(choice)),
            controls: Some(controls_message(controls)),
            well: Some(well_message(well)),
            deck: Some(deck_message(deck)),
        }
    }
}

fn plates_message(plates: &Plates) -> v1::PlatesRequest {
    v1::PlatesRequest {
        wells: Some(u16::from(plates.wells).into()),
        count: count_message(plates.count),
        edge_wells: v1::EdgeWells::from(plates.edge_wells).into(),
        columns_by: plates
            .columns_by
            .map_or(v1::Axis::Unspecified, Into::into)
            .into(),
    }
}

fn choice_message(choice: &ChoiceRequest) -> v1::ChoiceRequest {
    let category = |name: &String| {
        Category::ALL
            .into_iter()
            .find(|category| category.name() == name)
            .map(|category| v1::CautionCategory::from(category).into())
    };
    let aim = match choice.aim {
        Aim::Word(word) => v1::Aim {
            word: v1::AimWord::from(word).into(),
            ..Default::default()
        },
        Aim::Numbers(weights) => v1::Aim {
            word: v1::AimWord::Unspecified.into(),
            hits: Some(weights.hits),
            information: Some(weights.information),
            spread: Some(weights.spread),
        },
    };
    v1::ChoiceRequest {
        aim: Some(aim),
        hits_of: v1::HitsOf::from(choice.hits_of).into(),
        design: choice
            .design
            .map_or(v1::DesignKind::Unspecified, Into::into)
            .into(),
        replicates: count_message(choice.replicates),
        shortlist: count_message(choice.shortlist),
        draws: count_message(choice.draws),
        only: choice.only.clone(),
        pin: choice.pin.iter().map(cell_message).collect(),
        veto: choice.veto.iter().map(cell_message).collect(),
        limits: choice.limits.iter().map(limit_message).collect(),
        only_in_stock: choice.only_in_stock,
        // names that are none are a fault of the request and were refused before
        allow_stop: choice.allow_stop.iter().filter_map(category).collect(),
    }
}

fn cell_message(named: &NamedCell) -> v1::NamedCell {
    v1::NamedCell {
        cell: numbers::to_wire(named.cell),
        note: named.note.clone(),
    }
}

fn limit_message(limit: &Limit) -> v1::AxisLimit {
    v1::AxisLimit {
        axis: v1::Axis::from(limit.axis).into(),
        value: limit.value.clone(),
        least: numbers::index_to_wire(limit.least as usize),
        most: limit.most.and_then(count_message),
    }
}

fn controls_message(controls: &Controls) -> v1::ControlsRequest {
    let Controls {
        no_base,
        no_electrophile,
        solvent_only,
        positive,
        deuterium,
    } = *controls;
    v1::ControlsRequest {
        no_base: count_message(no_base),
        no_electrophile: count_message(no_electrophile),
        solvent_only: count_message(solvent_only),
        positive: count_message(positive),
        deuterium: count_message(deuterium),
    }
}

fn well_message(well: &WellRequest) -> v1::WellRequest {
    let WellRequest {
        volume_ul,
        carrier,
        quench,
        quench_share,
        diluent,
        internal_standard,
        sample_ul,
        diluent_ul,
    } = well.clone();
    v1::WellRequest {
        volume_ul,
        carrier,
        quench: Some(quench),
        quench_share: Some(quench_share),
        diluent: Some(diluent),
        internal_standard: Some(internal_standard),
        sample_ul: Some(sample_ul),
        diluent_ul: Some(diluent_ul),
    }
}

fn deck_message(deck: &Deck) -> v1::Deck {
    let Deck {
        lowest_temperature_c,
        highest_temperature_c,
        inert,
        pyrophoric_wells,
        stirred,
        sealed,
        head_space_ul,
        holds_bar,
        material,
        smallest_nl,
        largest_nl,
        step_nl,
        channels,
        seconds_per_transfer,
        source_wells,
        source_capacity_ul,
        source_dead_ul,
        excess_percent,
        slurries,
        solids,
        smallest_mass_mg,
    } = deck.clone();
    v1::Deck {
        lowest_temperature_c,
        highest_temperature_c,
        inert,
        pyrophoric_wells: count_message(pyrophoric_wells),
        stirred: Some(stirred),
        sealed: Some(sealed),
        head_space_ul,
        holds_bar: Some(holds_bar),
        material: Some(material),
        smallest_nl: Some(smallest_nl),
        largest_nl: Some(largest_nl),
        step_nl: Some(step_nl),
        channels: count_message(channels),
        seconds_per_transfer: Some(seconds_per_transfer),
        source_wells: Some(u16::from(source_wells).into()),
        source_capacity_ul: Some(source_capacity_ul),
        source_dead_ul: Some(source_dead_ul),
        excess_percent: Some(excess_percent),
        slurries: Some(slurries),
        solids,
        smallest_mass_mg: Some(smallest_mass_mg),
    }
}

/// A count for the wire; those beyond its reach are out of every range and refused all the same.
fn count_message(count: u32) -> Option<i32> {
    Some(numbers::index_to_wire(count as usize))
}
