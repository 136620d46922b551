//! The program of each plate, and the transfers of its steps.

use enolattice_plate::{Plan, Transfer, Well};
use maud::{Markup, html};

use crate::numbers::{count, fixed, short};
use crate::page::{boxed, name};

/// The steps in their order.
pub(super) fn program(plan: &Plan) -> Markup {
    let many = plan.plates.len() > 1;
    boxed(
        "Program",
        html! {
            table.data.sheet {
                thead {
                    tr {
                        th scope="col" { "done" } @if many { th scope="col" { "plate" } }
                        th scope="col" { "group" } th scope="col" { "step" } th.num scope="col" { "block" } th.num scope="col" { "then wait" }
                    }
                }
                tbody {
                    @for step in &plan.program {
                        tr {
                            td.tick { input type="checkbox" aria-label={ (step.plate) ": " (step.what) }; }
                            @if many { td { (step.plate) } }
                            td { @if let Some(group) = step.group { (group) } @else { "—" } }
                            td { (step.what) }
                            td.num { (short(step.temperature_c)) " °C" }
                            td.num { (wait(step.wait_min)) }
                        }
                    }
                }
            }
        },
    )
}

fn wait(minutes: f64) -> String {
    match minutes {
        0.0 => "—".to_owned(),
        m if m >= 120.0 => format!("{} h", short(m / 60.0)),
        m => format!("{} min", short(m)),
    }
}

/// Transfers that differ in nothing but the well they go to.
struct Round<'a> {
    first: &'a Transfer,
    wells: Vec<Well>,
}

/// All transfers: a row for what comes from one source in one volume to one plate.
pub(super) fn transfers(plan: &Plan) -> Markup {
    let moves = plan.movements;
    let rounds = rounds(&plan.transfers);
    let table = html! {
        table.data.long {
            thead {
                tr {
                    th.num scope="col" { "group" } th scope="col" { "from" } th scope="col" { "liquid" }
                    th scope="col" { "to" } th.num scope="col" { "each, nL" } th.num scope="col" { "wells" }
                    th scope="col" { "which" }
                }
            }
            tbody {
                @for round in &rounds {
                    tr {
                        td.num { (round.first.group) }
                        td.place { (round.first.source_plate) " " strong { (round.first.source_well) } }
                        td {
                            @if let Some(stock) = round.first.stock.and_then(|index| plan.stocks.get(index)) { strong { (stock.label) } " " }
                            (name(&round.first.liquid))
                        }
                        td { (round.first.plate) }
                        td.num { (fixed(round.first.volume_nl, 0)) }
                        td.num { (round.wells.len()) }
                        td.wells { @for (i, well) in round.wells.iter().enumerate() { @if i > 0 { " " } (well) } }
                    }
                }
            }
        }
    };
    html! {
        p.aside {
            (count(moves.transfers as u64)) " transfers in " (count(rounds.len() as u64)) " rows: "
            (count(moves.uptakes as u64)) " uptakes where one serves many wells, "
            (count(moves.deliveries as u64)) " deliveries of the head. The file of transfers has them one by one. "
            "Samples go from each well to the same well of the analysis plate and are not listed here."
        }
        (boxed("Transfers", table))
    }
}

fn rounds(transfers: &[Transfer]) -> Vec<Round<'_>> {
    let same = |a: &Transfer, b: &Transfer| {
        (a.group, &a.source_plate, a.source_well, &a.plate)
            == (b.group, &b.source_plate, b.source_well, &b.plate)
            && a.volume_nl == b.volume_nl
            && a.liquid == b.liquid
    };
    let mut rounds: Vec<Round<'_>> = Vec::new();
    let mut begun = 0;
    for transfer in transfers.iter().filter(|transfer| transfer.stock.is_some()) {
        if rounds.get(begun).is_none_or(|first| {
            first.first.group != transfer.group
                || first.first.source_well != transfer.source_well
                || first.first.source_plate != transfer.source_plate
        }) {
            begun = rounds.len();
        }
        match rounds[begun..]
            .iter_mut()
            .find(|round| same(round.first, transfer))
        {
            Some(round) => round.wells.push(transfer.well),
            None => rounds.push(Round {
                first: transfer,
                wells: vec![transfer.well],
            }),
        }
    }
    rounds
}
