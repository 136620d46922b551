//! The wells in a table, and the substrates that they hold.

use std::collections::BTreeMap;

use enolattice_model::Channel;
use enolattice_plate::{Content, Plan, PlannedWell, Reagent, WellMasses};
use maud::{Markup, html};

use crate::PlanReport;
use crate::cards::share;
use crate::cautions;
use crate::cell::{End, Share, is_left};
use crate::charts::{bar, bar_words};
use crate::numbers::{count, counted, percent};
use crate::page::{boxed, name};
use crate::plan::plates::{letters, numbered};
use crate::structure::Structures;

/// The substrates with their numbers on the maps, structures and wells.
pub(super) fn substrates(plan: &Plan, structures: &mut Structures) -> Markup {
    let mut wells: BTreeMap<&str, (&Reagent, u64)> = BTreeMap::new();
    for (_, well) in plan.wells() {
        if let Some(substrate) = &well.substrate {
            wells.entry(&substrate.name).or_insert((substrate, 0)).1 += 1;
        }
    }
    let numbers = numbered(plan);
    html! {
        div.gallery {
            @for (called, (substrate, wells)) in &wells {
                figure {
                    div.scheme { (structures.show(&substrate.smiles, called)) }
                    figcaption {
                        span.key.round { (numbers.get(called).copied().unwrap_or_default()) } " " (name(called))
                        span.words { (counted(*wells, "well")) }
                    }
                }
            }
        }
    }
}

/// Every well: what is in it, what is expected, where the substrate ends, what to beware of.
pub(super) fn table(report: &PlanReport) -> Markup {
    let plan = &report.plan;
    let many = plan.plates.len() > 1;
    let shown = |reagent: &Option<Reagent>| html! { @if let Some(known) = reagent { (name(&known.name)) } @else { "—" } };
    let table = html! {
        table.data.long.filled data-tools="" {
            thead {
                tr {
                    th scope="col" { "well" } th scope="col" { "substrate" } th scope="col" { "electrophile" }
                    th scope="col" { "base" } th scope="col" { "solvent" } th.num scope="col" { "expected yield" }
                    th.num scope="col" { "p_hit" } th.num scope="col" { "as dosed" }
                    th.wide scope="col" { "where the substrate ends" } th scope="col" { "cautions" }
                }
            }
            tbody {
                @for (at, (plate, well)) in plan.wells().enumerate() {
                    tr {
                        td data-v=(at) {
                            strong { (well.well) } @if many { span.n { " " (plate.name) } }
                            span.words { "cell " (count(well.cell)) }
                        }
                        td { (shown(&well.substrate)) @if well.content.is_control() { " " span.key.square { (letters(well.content)) } } }
                        td { (shown(&well.electrophile)) }
                        td { (shown(&well.base)) }
                        td { (name(&well.solvent)) @if let Some(additive) = &well.additive { " + " (name(&additive.name)) } }
                        @if well.content.runs() { (share(well.expected_yield)) (share(well.p_hit)) (as_dosed(well)) }
                        @else { td.num data-v="-2" { "—" } td.num data-v="-2" { "—" } td.num data-v="-2" { "—" } }
                        @if well.content.runs() {
                            @let shares = shares(&well.masses);
                            td.wide { (bar(&shares)) span.words { (bar_words(&shares, 2)) } }
                        } @else {
                            td.wide { (well.content.name()) }
                        }
                        td.cautions data-v=(cautions::rank(well.cautions.first().map(|known| known.severity.as_str()))) {
                            (cautions_of(well))
                            @if !well.note.is_empty() { span.words dir="auto" { (well.note) } }
                        }
                    }
                }
            }
        }
    };
    html! {
        p.aside {
            "Bars: solid is wanted product, empty is substrate left, hatched is lost, dotted is not told. "
            "As dosed: the expected yield in the solvents that the stocks bring."
        }
        (boxed("Wells", table))
    }
}

/// Where the substrate of a well ends, from what the LC-MS may find; what the plan gives no share of is not told.
fn shares(masses: &WellMasses) -> Vec<Share> {
    let of = |wanted: &dyn Fn(&str) -> bool| -> f64 {
        let species = masses
            .species
            .iter()
            .filter(|species| wanted(&species.name));
        species.map(|species| species.share).sum()
    };
    let product = of(&|name| name == "wanted product");
    let lost = Channel::ALL
        .into_iter()
        .filter(|channel| !is_left(*channel));
    let losses: Vec<(Channel, f64)> = lost
        .map(|channel| (channel, of(&|name| name == channel.name())))
        .filter(|(_, share)| *share > 0.0)
        .collect();
    let left = Share {
        end: End::Left(None),
        share: of(&|name| name == "substrate"),
    };
    let mut shares = Share::of(product, &losses);
    shares.push(left);
    match shares.iter().any(|share| share.share > 0.0) {
        true => shares,
        // the reference gave up on it
        false => Vec::new(),
    }
}

fn as_dosed(well: &PlannedWell) -> Markup {
    match well.yield_as_dosed {
        Some(_) => share(well.yield_as_dosed),
        None if well.content == Content::Cell => {
            html! { td.num data-v=(well.expected_yield.unwrap_or(-1.0)) title=(percent(well.expected_yield)) { "same" } }
        }
        None => html! { td.num data-v="-2" { "—" } },
    }
}

fn cautions_of(well: &PlannedWell) -> Markup {
    let kinds: Vec<(String, String)> = well
        .cautions
        .iter()
        .map(|caution| (caution.severity.clone(), caution.category.clone()))
        .collect();
    cautions::line(&kinds)
}
