//! The plates: what stands in which well, and what is expected of it.

use std::collections::BTreeMap;

use enolattice_plate::{Content, PlannedWell, Plate, PlateFormat, Well};
use maud::{Markup, html};

use crate::PlanReport;
use crate::heat_map;
use crate::numbers::{bare_percent, counted, fixed, percent, short, temperatures};
use crate::{cautions, palette};

/// Numbers of the substrates on the plates, by name, from 1.
pub(super) fn numbered(report: &enolattice_plate::Plan) -> BTreeMap<&str, usize> {
    let substrates = report
        .wells()
        .filter_map(|(_, well)| well.substrate.as_ref());
    let mut numbers: BTreeMap<&str, usize> =
        substrates.map(|known| (known.name.as_str(), 0)).collect();
    for (i, number) in numbers.values_mut().enumerate() {
        *number = i + 1;
    }
    numbers
}

/// The letters of a control; a cell has none.
pub(super) fn letters(content: Content) -> &'static str {
    match content {
        Content::Cell => "",
        Content::Positive => "++",
        Content::NoBase => "\u{2212}B",
        Content::NoElectrophile => "\u{2212}E",
        Content::Deuterium => "D2",
        Content::SolventOnly => "so",
    }
}

/// Both maps of every plate.
pub(super) fn plates(report: &PlanReport) -> Markup {
    let plan = &report.plan;
    let format = plan.request.plates.wells;
    let numbers = numbered(plan);
    html! {
        (legend(report))
        @for plate in &plan.plates {
            article.plate {
                h3 { (plate.name) }
                p.conditions {
                    (temperatures(plate.formation_temperature_c, plate.temperature_c)) " for " (short(plate.time_h))
                    " h, electrophile within " (fixed(plate.dosing_min, 0)) " min · "
                    (counted(plate.wells.len() as u64, "well")) " · evenness of the layout " (fixed(plate.balance.balance, 2))
                }
                p.conditions { (plate_cautions(plate)) }
                div.plates {
                    figure {
                        figcaption { "Expected yield, %" }
                        div.scroll { (map(plate, format, "expected yield", &|well| Shown {
                            class: palette::class(well.expected_yield),
                            text_class: palette::text_class(well.expected_yield),
                            text: bare_percent(well.expected_yield),
                        })) }
                    }
                    figure {
                        figcaption { "Substrates by number" }
                        div.scroll { (map(plate, format, "substrates", &|well| Shown {
                            class: "plain",
                            text_class: "tp".to_owned(),
                            text: well.substrate.as_ref().and_then(|known| numbers.get(known.name.as_str()))
                                .map_or(String::new(), usize::to_string),
                        })) }
                    }
                }
            }
        }
    }
}

fn legend(report: &PlanReport) -> Markup {
    let used = |content: Content| report.plan.wells().any(|(_, well)| well.content == content);
    let controls = [
        Content::Positive,
        Content::NoBase,
        Content::NoElectrophile,
        Content::Deuterium,
        Content::SolventOnly,
    ];
    html! {
        (heat_map::legend())
        p.legend {
            span.key.round {} span.label { "cell" }
            @for content in controls.into_iter().filter(|content| used(*content)) {
                span.key.square { (letters(content)) } span.label { (content.name()) }
            }
            span.key.dot { "·" } span.label { "empty" }
            span.key.ring {} span.label { "outer ring, where wells dry and warm first" }
        }
    }
}

fn plate_cautions(plate: &Plate) -> Markup {
    let mut counts: BTreeMap<(std::cmp::Reverse<u8>, &str), usize> = BTreeMap::new();
    for well in &plate.wells {
        if let Some(worst) = well.cautions.first() {
            let rank = std::cmp::Reverse(cautions::rank(Some(&worst.severity)));
            *counts.entry((rank, worst.severity.as_str())).or_default() += 1;
        }
    }
    html! {
        "Severest caution: "
        @if counts.is_empty() { "none known of any well" }
        @for (i, ((_, severity), wells)) in counts.iter().enumerate() {
            @if i > 0 { ", " } (cautions::mark(Some(severity))) " in " (counted(*wells as u64, "well"))
        }
    }
}

/// How a well with a cell is shown.
struct Shown {
    class: &'static str,
    text_class: String,
    text: String,
}

const LEFT: f64 = 26.0;
const TOP: f64 = 24.0;

/// A plate as it stands on the bench, row A at the back.
fn map(
    plate: &Plate,
    format: PlateFormat,
    of: &str,
    show: &dyn Fn(&PlannedWell) -> Shown,
) -> Markup {
    let (rows, columns) = (format.rows(), format.columns());
    let pitch = match columns {
        0..=12 => 46.0,
        13..=24 => 30.0,
        _ => 17.0,
    };
    let (width, height) = (
        LEFT + pitch * f64::from(columns) + 8.0,
        TOP + pitch * f64::from(rows) + 8.0,
    );
    let wells: BTreeMap<Well, &PlannedWell> =
        plate.wells.iter().map(|well| (well.well, well)).collect();
    let (x, y) = (
        |column: u8| LEFT + pitch * (f64::from(column) + 0.5),
        |row: u8| TOP + pitch * (f64::from(row) + 0.5),
    );
    let size = if columns > 12 { "dense" } else { "airy" };
    html! {
        svg.plate.(size) width=(width) height=(height) viewBox={ "0 0 " (width) " " (height) } role="img"
            aria-label={ (plate.name) ", " (of) } {
            rect.rim x=(LEFT - 3.0) y=(TOP - 3.0) width=(pitch * f64::from(columns) + 6.0)
                height=(pitch * f64::from(rows) + 6.0) rx="8" {}
            rect.inner x=(LEFT + pitch) y=(TOP + pitch) width=(pitch * f64::from(columns - 2))
                height=(pitch * f64::from(rows - 2)) rx="4" {}
            @for column in 0..columns {
                text.label x=(x(column)) y=(TOP - 9.0) text-anchor="middle" { (column + 1) }
            }
            @for row in 0..rows {
                text.label x=(LEFT - 8.0) y=(y(row) + 4.0) text-anchor="end" { (row_name(row)) }
                @for column in 0..columns {
                    (well(wells.get(&Well::new(row, column)).copied(), Well::new(row, column), [x(column), y(row)], pitch, show))
                }
            }
        }
    }
}

fn row_name(row: u8) -> String {
    let name = Well::new(row, 0).to_string();
    name.trim_end_matches(|c: char| c.is_ascii_digit())
        .to_owned()
}

fn well(
    planned: Option<&PlannedWell>,
    at: Well,
    [x, y]: [f64; 2],
    pitch: f64,
    show: &dyn Fn(&PlannedWell) -> Shown,
) -> Markup {
    let radius = 0.43 * pitch;
    let Some(planned) = planned else {
        return html! { circle.empty cx=(x) cy=(y) r="1.6" {} };
    };
    let shown = show(planned);
    let written = pitch > 20.0;
    html! {
        g {
            title { (told(planned, at)) }
            @if planned.content == Content::Cell {
                circle.well.(shown.class) cx=(x) cy=(y) r=(format!("{radius:.1}")) {}
                @if written {
                    text.(shown.text_class) x=(x) y=(format!("{:.1}", y + 0.11 * pitch)) text-anchor="middle" { (shown.text) }
                }
            } @else {
                rect.control x=(format!("{:.1}", x - radius)) y=(format!("{:.1}", y - radius))
                    width=(format!("{:.1}", 2.0 * radius)) height=(format!("{:.1}", 2.0 * radius)) rx="3" {}
                @if written {
                    text.tc x=(x) y=(format!("{:.1}", y + 0.11 * pitch)) text-anchor="middle" { (letters(planned.content)) }
                }
            }
        }
    }
}

fn told(planned: &PlannedWell, at: Well) -> String {
    let name = |reagent: &Option<enolattice_plate::Reagent>| {
        reagent
            .as_ref()
            .map_or("none".to_owned(), |known| known.name.clone())
    };
    format!(
        "{at}: {}, {} + {}, {}, {}, expected {}",
        planned.content.name(),
        name(&planned.substrate),
        name(&planned.electrophile),
        name(&planned.base),
        planned.solvent,
        percent(planned.expected_yield),
    )
}
