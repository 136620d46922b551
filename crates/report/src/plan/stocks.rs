//! The stock sheet, to be printed and ticked off.

use std::collections::BTreeMap;

use enolattice_plate::{Form, Plan, Role, Stock};
use maud::{Markup, html};

use crate::numbers::{fixed, short};
use crate::page::{boxed, name};

/// Roles in the order of the sheet.
const ROLES: [Role; 7] = [
    Role::Substrate,
    Role::Additive,
    Role::Base,
    Role::Electrophile,
    Role::Solvent,
    Role::Quench,
    Role::Diluent,
];

/// The sheet, role by role, with a box to tick in front of every stock.
pub(super) fn sheet(plan: &Plan) -> Markup {
    let repeated = repeated(plan);
    let table = html! {
        table.data.sheet.flasks {
            thead {
                tr {
                    th scope="col" { "done" } th scope="col" { "stock" } th scope="col" { "of" }
                    th scope="col" { "weigh or take" } th scope="col" { "make" } th scope="col" { "place" }
                    th.num scope="col" { "wells" } th scope="col" { "lasts, kept" } th scope="col" { "hazard statements" } th scope="col" { "see" }
                }
            }
            @for role in ROLES {
                @let stocks: Vec<&Stock> = plan.stocks.iter().filter(|stock| stock.role == role).collect();
                @if !stocks.is_empty() {
                    tbody {
                        tr.group { th colspan="10" scope="rowgroup" { (plural(role)) } }
                        @for stock in stocks { (row(stock, &repeated)) }
                    }
                }
            }
        }
    };
    html! {
        p.aside {
            "A stock lasts until a twentieth of it is lost at room temperature. Hazard statements are GHS; "
            q { "unknown" } " means that none are known to the library, not that there are none."
        }
        @if !repeated.is_empty() {
            p.aside { @for (note, letter) in &repeated { strong { (letter) } " " (note) ". " } }
        }
        (boxed("Stock sheet", table))
    }
}

/// Stocks from which on a note is said once, above the sheet.
const REPEATED: usize = 4;

/// Letters of what is noted of many stocks.
fn repeated(plan: &Plan) -> BTreeMap<&str, char> {
    let mut stocks: BTreeMap<&str, usize> = BTreeMap::new();
    for note in plan.stocks.iter().flat_map(noted) {
        *stocks.entry(note).or_default() += 1;
    }
    let many = stocks.into_iter().filter(|(_, stocks)| *stocks >= REPEATED);
    many.map(|(note, _)| note).zip('a'..='z').collect()
}

/// How it is kept, and all else that is noted of it.
fn noted(stock: &Stock) -> impl Iterator<Item = &str> {
    let all = std::iter::once(&stock.keep).chain(&stock.notes);
    all.map(String::as_str).filter(|note| !note.is_empty())
}

fn row(stock: &Stock, repeated: &BTreeMap<&str, char>) -> Markup {
    let mut letters: Vec<char> = noted(stock)
        .filter_map(|note| repeated.get(note).copied())
        .collect();
    letters.sort_unstable();
    html! {
        tr {
            td.tick { input type="checkbox" aria-label={ "stock " (stock.label) " is made" }; }
            td { strong { (stock.label) } }
            td { (name(&stock.reagent)) span.words { (stock.form.name()) } }
            td { (taken(stock)) }
            td { (made(stock)) }
            td { (place(stock)) }
            td.num { (stock.wells) }
            td {
                (stock.lasts_h.map_or("unknown".to_owned(), |hours| format!("{} h", short((10.0 * hours).round() / 10.0))))
                @if !stock.keep.is_empty() && !repeated.contains_key(stock.keep.as_str()) { span.words { (stock.keep) } }
            }
            td {
                (stock.hazards)
                @for note in stock.notes.iter().filter(|note| !repeated.contains_key(note.as_str())) { span.words { (note) } }
            }
            td { @for (i, letter) in letters.iter().enumerate() { @if i > 0 { " " } strong { (letter) } } }
        }
    }
}

fn plural(role: Role) -> &'static str {
    match role {
        Role::Substrate => "Substrates",
        Role::Additive => "Additives",
        Role::Base => "Bases",
        Role::Electrophile => "Electrophiles",
        Role::Solvent => "Solvents",
        Role::Quench => "Quench",
        Role::Diluent => "Diluent",
    }
}

fn taken(stock: &Stock) -> Markup {
    html! {
        @match (stock.weigh_mg, stock.take) {
            (Some(mg), _) => {
                (fixed(mg, 1)) " mg"
                @if stock.purity < 1.0 { span.words { "of " (fixed(100.0 * stock.purity, 0)) " % content" } }
            }
            (None, Some((volume_ul, molar))) => {
                (fixed(volume_ul / 1000.0, 2)) " mL of " (short(molar)) " mol/L"
            }
            (None, None) => "—",
        }
    }
}

fn made(stock: &Stock) -> Markup {
    let in_solvent = !matches!(stock.form, Form::Liquid | Form::Solid);
    html! {
        @if stock.made_ul > 0.0 { (fixed(stock.made_ul / 1000.0, 2)) " mL" } @else { "into the wells" }
        @if in_solvent {
            span.words {
                @if stock.concentration_m > 0.0 { (short(stock.concentration_m)) " mol/L " }
                "in " (name(&stock.solvent))
            }
        }
    }
}

fn place(stock: &Stock) -> String {
    match &stock.sources[..] {
        [] => "into the wells".to_owned(),
        [one] => format!("{} {}", one.plate, one.well),
        [first, .., last] => format!("{} {} to {}", first.plate, first.well, last.well),
    }
}
