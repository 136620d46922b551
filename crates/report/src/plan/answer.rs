//! What a plan comes to, beside other choices of as many cells.

use enolattice_plate::{Content, HitsOf, Worth};
use maud::{Markup, html};

use crate::PlanReport;
use crate::numbers::{count, counted, fixed, percent, short};
use crate::page::boxed;

/// The answer in words and numbers.
pub(super) fn answer(report: &PlanReport) -> Markup {
    let plan = &report.plan;
    let (gains, worth) = (&plan.gains, &plan.gains.chosen);
    let cells = plan
        .wells()
        .filter(|(_, well)| well.content == Content::Cell)
        .count() as u64;
    let controls = plan
        .wells()
        .filter(|(_, well)| well.content.is_control())
        .count() as u64;
    let unit = match plan.request.choice.hits_of {
        HitsOf::Substrates => "substrates",
        HitsOf::Products => "different products",
    };
    html! {
        p.verdict {
            "Fill " strong { (counted(plan.plates.len() as u64, "plate")) " of " (plan.request.plates.wells) }
            ": " (counted(cells, "cell")) " and " (counted(controls, "control")) ". Expect a hit, a yield of at least "
            (percent(Some(plan.target))) ", of " strong { (fixed(worth.units_with_hit, 0)) " " (unit) } "."
        }
        dl.figures {
            div { dt { (unit) " with a hit" } dd { (fixed(worth.units_with_hit, 1)) } }
            div { dt { "cells that hit" } dd { (fixed(worth.cells_that_hit, 1)) } }
            div { dt { "mean expected yield" } dd { (percent(Some(worth.mean_yield))) } }
            div { dt { "volume of a reaction" } dd { (short(plan.volume_ul)) " uL" } }
        }
        p {
            "The cells were chosen as a set, for hits, for what the results would tell and for spread over the axes. "
            "The top of the ranking would find " (fixed(gains.top_list.units_with_hit, 1)) " " (unit)
            ", random cells " (fixed(gains.random.units_with_hit, 1)) "."
        }
        (table(report, unit))
        p.aside {
            "Chosen among " (counted(gains.shortlist as u64, "cell")) " in " (gains.draws) " joint draws; "
            (gains.exchanged) " exchanged. Worth at least " (percent(Some(gains.at_least_of_best)))
            " of the best set that there could be among them. " (count(gains.shortlist as u64))
            " cells were solved again in the draws."
        }
    }
}

/// A line of the table: its name, its value of a choice, how the value is written.
type Line<'a> = (String, &'a dyn Fn(&Worth) -> f64, &'a dyn Fn(f64) -> String);

fn table(report: &PlanReport, unit: &str) -> Markup {
    let gains = &report.plan.gains;
    let sets = [
        ("this plan", &gains.chosen),
        ("without limits", &gains.unlimited),
        ("top of the ranking", &gains.top_list),
        ("random cells", &gains.random),
    ];
    let one = |value: f64| fixed(value, 1);
    let lines: [Line<'_>; 5] = [
        (
            format!("{unit} with at least one hit"),
            &|worth| worth.units_with_hit,
            &one,
        ),
        (
            "cells that hit".to_owned(),
            &|worth| worth.cells_that_hit,
            &one,
        ),
        (
            "mean expected yield".to_owned(),
            &|worth| worth.mean_yield,
            &|value| percent(Some(value)),
        ),
        (
            "what the results would tell, nats".to_owned(),
            &|worth| worth.information_nats,
            &one,
        ),
        (
            "evenness over the axes, 0 to 1".to_owned(),
            &|worth| worth.spread,
            &|value| fixed(value, 2),
        ),
    ];
    boxed(
        "What the choice is worth",
        html! {
            table.worth {
                thead {
                    tr {
                        td {}
                        @for (name, _) in sets { th.num scope="col" { (name) } }
                    }
                }
                tbody {
                    @for (name, value, written) in &lines {
                        @let most = sets.iter().map(|(_, worth)| value(worth)).fold(1e-9, f64::max);
                        tr {
                            th scope="row" { (name) }
                            @for (_, worth) in sets {
                                td.num {
                                    (written(value(worth)))
                                    svg.bar viewBox="0 0 100 10" preserveAspectRatio="none" aria-hidden="true" {
                                        rect.w x="0" y="0" width=(format!("{:.1}", 100.0 * value(worth) / most)) height="10" {}
                                    }
                                }
                            }
                        }
                    }
                }
            }
        },
    )
}
