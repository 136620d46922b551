//! The report of a plan.

mod answer;
mod masses;
mod plates;
mod stocks;
mod transfers;
mod wells;

use std::collections::BTreeMap;

use enolattice_plate::Plan;
use maud::{Markup, html};

use crate::cautions::{self, Told};
use crate::detail;
use crate::facts::{self, Source, Versions};
use crate::job::{ExplainedCell, patterns};
use crate::numbers::{count, counted, date, short};
use crate::page::{Page, Section, name, notice};
use crate::structure::Structures;

/// What the report of a plan is made from.
#[derive(Clone, Debug)]
pub struct PlanReport {
    /// The plan.
    pub plan: Plan,
    /// Cells in full.
    pub explained: Vec<ExplainedCell>,
    /// Sources of what occurs on the page.
    pub sources: Vec<Source>,
    /// Versions and fingerprints.
    pub versions: Versions,
}

/// Cautions that are listed.
const CAUTIONS: usize = 40;

/// The report of a plan as a page of HTML.
pub fn plan_report(report: &PlanReport) -> String {
    let plan = &report.plan;
    let mut structures = Structures::default();
    let mut sections = vec![
        Section::new("answer", "What is run, and why", answer::answer(report)),
        Section::new("plates", "Plates", plates::plates(report)),
        Section::new(
            "substrates",
            "Substrates on the plates",
            wells::substrates(plan, &mut structures),
        ),
        Section::new("wells", "Wells", wells::table(report)),
    ];
    if !report.explained.is_empty() {
        let details = detail::details(&report.explained, &mut structures);
        sections.push(Section::new("why", "Cells in full", details).on_screen_only());
    }
    sections.extend([
        Section::new("cautions", "Cautions", all_cautions(plan)),
        Section::new("stocks", "Stock sheet", stocks::sheet(plan)),
        Section::new("program", "Program", transfers::program(plan)),
        Section::new("transfers", "Transfers", transfers::transfers(plan)),
        Section::new("masses", "Masses to look for", masses::masses(plan)).on_screen_only(),
    ]);
    if !plan.left_out.is_empty() {
        sections.push(Section::new(
            "left-out",
            "Cells that could not be chosen",
            left_out(plan),
        ));
    }
    sections.push(Section::new(
        "notebook",
        "For the notebook",
        notebook(report),
    ));
    if !report.sources.is_empty() {
        let sources = facts::sources(&report.sources);
        sections.push(Section::new("sources", "Sources used", sources).on_screen_only());
    }
    let title = if plan.title.is_empty() {
        &plan.campaign
    } else {
        &plan.title
    };
    Page {
        kind: "report of a plan",
        title: title.clone(),
        lead: html! {
            p {
                @if !plan.id.is_empty() { "Plan " span.mono { (plan.id) } " · made " (date(plan.made_unix_ms)) " · " }
                "from job " span.mono { (plan.job) } " · " (name(&plan.campaign))
            }
        },
        notices: notices(plan),
        sections,
        structures: html! { (structures.symbols()) (patterns()) },
    }
    .render()
}

fn notices(plan: &Plan) -> Vec<Markup> {
    let mut by_category: BTreeMap<(std::cmp::Reverse<u8>, &str, &str), usize> = BTreeMap::new();
    for (_, well) in plan.wells() {
        let mut counted: Vec<(&str, &str)> = Vec::new();
        for caution in &well.cautions {
            let kind = (caution.severity.as_str(), caution.category.as_str());
            if caution.severity != "note" && !counted.contains(&kind) {
                counted.push(kind);
                let rank = std::cmp::Reverse(cautions::rank(Some(kind.0)));
                *by_category.entry((rank, kind.0, kind.1)).or_default() += 1;
            }
        }
    }
    let mut notices = Vec::new();
    for severity in ["stop", "warning"] {
        let of: Vec<_> = by_category
            .iter()
            .filter(|((_, known, _), _)| *known == severity)
            .collect();
        if !of.is_empty() {
            notices.push(notice(
                severity,
                html! {
                    (cautions::mark(Some(severity))) " "
                    @for (i, ((_, _, category), wells)) in of.iter().enumerate() {
                        @if i > 0 { ", " } (category) " in " (counted(**wells as u64, "well"))
                    }
                    ". " a href="#cautions" { "What they are" } "."
                },
            ));
        }
    }
    let findings: Vec<_> = plan
        .findings
        .iter()
        .filter(|finding| finding.severity == "warning")
        .collect();
    if !findings.is_empty() {
        notices.push(notice("warning", html! {
            strong { "Checks that warn" }
            ul { @for finding in &findings { li { strong { (finding.check) } ": " (finding.text) } } }
        }));
    }
    notices
}

fn all_cautions(plan: &Plan) -> Markup {
    let many = plan.plates.len() > 1;
    let told = plan.wells().flat_map(|(plate, well)| {
        let place = if many {
            format!("{} {}", plate.name, well.well)
        } else {
            well.well.to_string()
        };
        well.cautions.iter().map(move |caution| Told {
            severity: &caution.severity,
            category: &caution.category,
            text: &caution.text,
            source: &caution.source,
            place: place.clone(),
        })
    });
    let notes = plan
        .findings
        .iter()
        .filter(|finding| finding.severity != "warning");
    html! {
        (cautions::list(told, CAUTIONS))
        h3 { "Checks without a warning" }
        ul { @for finding in notes { li { strong { (finding.check) } ": " (finding.text) } } }
    }
}

fn left_out(plan: &Plan) -> Markup {
    html! {
        table.facts {
            tbody {
                @for left in &plan.left_out {
                    tr { td.num { (count(left.cells)) } td { (left.reason) } }
                }
            }
        }
    }
}

fn notebook(report: &PlanReport) -> Markup {
    let plan = &report.plan;
    let request = &plan.request;
    let mut rows = vec![
        ("plan", plan.id.clone()),
        ("job", plan.job.clone()),
        ("campaign", plan.campaign.clone()),
        (
            "plates",
            format!("{} of {}", plan.plates.len(), request.plates.wells),
        ),
        (
            "volume of a reaction",
            format!("{} uL", short(plan.volume_ul)),
        ),
        ("seed", request.seed.to_string()),
        ("cells only where", request.choice.only.clone()),
        ("joint draws", plan.gains.draws.to_string()),
        ("quench", request.well.quench.clone()),
        ("diluent", request.well.diluent.clone()),
        ("internal standard", request.well.internal_standard.clone()),
    ];
    rows.extend(report.versions.rows());
    facts::notebook(&rows)
}
