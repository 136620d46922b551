//! The report of a job.

use std::collections::BTreeMap;

use enolattice_model::{Channel, Explanation};
use maud::{Markup, html};

use crate::cautions::{self, Told};
use crate::cell::{End, ShownCell};
use crate::facts::{self, AxisValues, Source, Versions};
use crate::heat_map::{self, HeatMap};
use crate::numbers::{count, counted, date, percent};
use crate::page::{Page, Section, name, notice};
use crate::structure::Structures;
use crate::{Histogram, cards, charts, detail};

/// What the report of a job is made from.
#[derive(Clone, Debug, Default)]
pub struct JobReport {
    /// Id.
    pub job: String,
    /// Title of the campaign.
    pub title: String,
    /// State in a word.
    pub state: String,
    /// Why it failed; empty otherwise.
    pub failure: String,
    /// When it was submitted, milliseconds since 1970-01-01 UTC.
    pub submitted_unix_ms: u64,
    /// When it ended; none while it has not.
    pub ended_unix_ms: Option<u64>,
    /// Cells of the campaign.
    pub cells: u64,
    /// Cells that are screened.
    pub cells_done: u64,
    /// Yield that makes a hit, 0–1.
    pub target: f64,
    /// What was changed of the campaign on the way in.
    pub warnings: Vec<String>,
    /// Axes with their values.
    pub axes: Vec<AxisValues>,
    /// What the cells come to.
    pub counts: Counts,
    /// The surest cell of each substrate that carries no caution of severity `stop`, best first.
    pub best: Vec<ShownCell>,
    /// Substrates of which no cell may be run or is known.
    pub without: Vec<String>,
    /// The best of the ranking.
    pub top: Vec<ShownCell>,
    /// Cells in full.
    pub explained: Vec<ExplainedCell>,
    /// Maps of two axes.
    pub maps: Vec<HeatMap>,
    /// Distribution of the expected yields.
    pub histogram: Option<Histogram>,
    /// Sources of what occurs on the page.
    pub sources: Vec<Source>,
    /// Versions and fingerprints.
    pub versions: Versions,
}

/// What the cells of a job come to.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Counts {
    /// Cells with p_hit of at least a half and no caution of severity `stop`.
    pub likely: u64,
    /// Cells with a caution of severity `stop`.
    pub stopped: u64,
    /// Cells that the model does not cover.
    pub unknown: u64,
    /// Substrates.
    pub substrates: u64,
}

/// A cell with everything about it.
#[derive(Clone, Debug)]
pub struct ExplainedCell {
    /// The cell.
    pub cell: ShownCell,
    /// Where it stands: its well; empty where it has none.
    pub place: String,
    /// Everything about it.
    pub explanation: Explanation,
}

/// Cards that are shown; all other substrates stand in the table.
const CARDS: usize = 24;
/// Cautions that are listed.
const CAUTIONS: usize = 24;

/// The report of a job as a page of HTML.
pub fn job_report(report: &JobReport) -> String {
    let mut structures = Structures::default();
    let mut sections = vec![Section::new(
        "answer",
        "What to run, and why",
        answer(report),
    )];
    if !report.best.is_empty() {
        let shown = report.best.len().min(CARDS);
        let cards = cards::cards(&report.best[..shown], &mut structures);
        sections.push(Section::new(
            "best",
            "Best conditions of each substrate",
            best(report, cards),
        ));
    }
    if !report.explained.is_empty() {
        let details = detail::details(&report.explained, &mut structures);
        sections.push(Section::new("why", "Cells in full", details));
    }
    if !report.maps.is_empty() {
        sections.push(Section::new("maps", "Maps", maps(report)));
    }
    if let Some(histogram) = report.histogram.as_ref().filter(|known| known.total() > 0) {
        sections.push(Section::new(
            "distribution",
            "Distribution of the expected yields",
            distribution(report, histogram),
        ));
    }
    if !report.top.is_empty() {
        let top = html! {
            p.aside { "The ranking by expected yield, cautions or not. Its top is often one reaction in many variants; the best of each substrate is above." }
            (cards::table("Top of the ranking", &report.top))
        };
        sections.push(Section::new("ranking", "Top of the ranking", top));
    }
    if !report.best.is_empty() {
        sections.push(Section::new(
            "cautions",
            "Cautions of the cells shown",
            all_cautions(report),
        ));
    }
    sections.push(Section::new("campaign", "The campaign", campaign(report)));
    sections.push(Section::new(
        "notebook",
        "For the notebook",
        notebook(report),
    ));
    if !report.sources.is_empty() {
        let sources = facts::sources(&report.sources);
        sections.push(Section::new("sources", "Sources used", sources).on_screen_only());
    }
    Page {
        kind: "report of a job",
        title: report.title.clone(),
        lead: html! {
            p {
                "Job " span.mono { (report.job) } " · submitted " (date(report.submitted_unix_ms))
                @if let Some(ended) = report.ended_unix_ms { " · " (report.state) " " (date(ended)) }
                @else { " · " (report.state) }
            }
        },
        notices: notices(report),
        sections,
        structures: html! { (structures.symbols()) (patterns()) },
    }
    .render()
}

/// The patterns of bars and of the unknown, once a page.
pub(crate) fn patterns() -> Markup {
    html! {
        svg.symbols width="0" height="0" aria-hidden="true" focusable="false" { defs { (charts::bar_patterns()) } }
    }
}

fn notices(report: &JobReport) -> Vec<Markup> {
    let mut notices = Vec::new();
    if report.cells_done < report.cells {
        notices.push(notice("warning", html! {
            strong { "Not all is screened. " }
            "The job is " (report.state) "; " (count(report.cells_done)) " of " (counted(report.cells, "cell"))
            " are done. What is missing may be better than what is shown."
        }));
    }
    if !report.failure.is_empty() {
        notices.push(notice(
            "warning",
            html! { strong { "The job failed. " } (name(&report.failure)) },
        ));
    }
    if report.counts.stopped > 0 {
        notices.push(notice("stop", html! {
            (cautions::mark(Some("stop"))) " "
            (counted(report.counts.stopped, "cell")) " carry a caution of this severity. None of them is proposed here; "
            "no plan takes one unless it is named."
        }));
    }
    notices
}

fn answer(report: &JobReport) -> Markup {
    let counts = &report.counts;
    let hits = report
        .best
        .iter()
        .filter(|cell| cell.p_hit.is_some_and(|p_hit| p_hit >= 0.5))
        .count() as u64;
    if report.cells_done == 0 {
        return html! { p.verdict { "No cell has been screened yet: there is nothing to run." } };
    }
    if report.best.is_empty() {
        return html! {
            p.verdict { "There is nothing to propose: no screened cell is both covered by the model and free of cautions of severity stop." }
            (figures(report))
        };
    }
    html! {
        p.verdict {
            @if hits > 0 {
                "For " strong { (count(hits)) " of " (counted(counts.substrates, "substrate")) }
                " a cell is more likely than not to reach " (percent(Some(report.target))) ". Run the cells below, the surest first."
            } @else {
                "No substrate has a cell that is more likely than not to reach " (percent(Some(report.target)))
                ". The cells below are the best that there are."
            }
        }
        (figures(report))
        ol.answer {
            @for cell in report.best.iter().take(5) {
                li {
                    strong { (name(&cell.substrate)) " + " (name(&cell.electrophile)) } ": "
                    (cell.conditions()) " — expected " strong { (percent(cell.expected_yield)) }
                    ", p_hit " (percent(cell.p_hit)) ". " (cautions::mark(cell.severest()))
                }
            }
        }
        (limits(report))
        @if !report.without.is_empty() {
            p {
                strong { "Without a cell to propose: " }
                @for (i, called) in report.without.iter().take(40).enumerate() { @if i > 0 { ", " } (name(called)) }
                @if report.without.len() > 40 { " and " (report.without.len() - 40) " more" }
                ". Their cells are not covered by the model or carry a caution of severity stop."
            }
        }
    }
}

fn figures(report: &JobReport) -> Markup {
    let counts = &report.counts;
    html! {
        dl.figures {
            div { dt { "cells screened" } dd { (count(report.cells_done)) } }
            div { dt { "more likely to hit than not" } dd { (count(counts.likely)) } }
            div { dt { "target" } dd { (percent(Some(report.target))) } }
            div { dt { "not covered by the model" } dd { (count(counts.unknown)) } }
        }
    }
}

/// What most often limits the best cells, and which of them are in doubt.
fn limits(report: &JobReport) -> Markup {
    let mut counts: BTreeMap<Channel, usize> = BTreeMap::new();
    for cell in &report.best {
        let losses = cell.shares.iter().filter(|share| share.share >= 0.02);
        let losses = losses.filter_map(|share| match share.end {
            End::Lost(channel) | End::Left(Some(channel)) => Some((channel, share.share)),
            _ => None,
        });
        if let Some((channel, _)) = losses.max_by(|a, b| a.1.total_cmp(&b.1)) {
            *counts.entry(channel).or_default() += 1;
        }
    }
    let mut losses: Vec<(Channel, usize)> = counts.into_iter().collect();
    losses.sort_by_key(|(channel, n)| (std::cmp::Reverse(*n), *channel));
    let doubtful: Vec<&ShownCell> = report
        .best
        .iter()
        .filter(|cell| cell.p_hit.is_some_and(|p_hit| (0.2..0.8).contains(&p_hit)))
        .collect();
    html! {
        p {
            @if losses.is_empty() {
                "No loss takes more than 2 % of the substrate in any of the best cells. "
            } @else {
                "What most often limits the best cells: "
                @for (i, (name, n)) in losses.iter().take(3).enumerate() { @if i > 0 { ", " } (name.name()) " (" (n) ")" }
                ". "
            }
            @if doubtful.is_empty() {
                "None of them is an open question."
            } @else {
                "Open questions, with p_hit between 20 % and 80 %: "
                @for (i, cell) in doubtful.iter().take(6).enumerate() {
                    @if i > 0 { ", " } (name(&cell.substrate)) " (" (percent(cell.p_hit)) ")"
                }
                @if doubtful.len() > 6 { " and " (doubtful.len() - 6) " more" }
                "."
            }
        }
    }
}

fn best(report: &JobReport, cards: Markup) -> Markup {
    html! {
        p.aside {
            "The surest cell of each substrate without a caution of severity stop. Bars: solid is wanted product, empty is substrate left, hatched is lost."
        }
        (cards)
        @if report.best.len() > 1 {
            h3 { "All of them in one table" }
            (cards::table("Best cell of each substrate", &report.best))
        }
    }
}

fn maps(report: &JobReport) -> Markup {
    html! {
        (heat_map::legend())
        @for map in &report.maps { (map.tables()) }
    }
}

fn distribution(report: &JobReport, histogram: &Histogram) -> Markup {
    html! {
        p.aside {
            "Of " (counted(histogram.total(), "cell")) ", " (count(histogram.unknown))
            " have no yield, because the model does not cover them; they are not zero."
        }
        div.scroll { (histogram.picture(report.target)) }
    }
}

fn all_cautions(report: &JobReport) -> Markup {
    let told = report.explained.iter().flat_map(|explained| {
        let cell = explained.cell.cell;
        explained
            .explanation
            .cautions
            .iter()
            .map(move |caution| Told {
                severity: caution.severity.name(),
                category: caution.category.name(),
                text: &caution.text,
                source: &caution.source,
                place: format!("cell {cell}"),
            })
    });
    html! {
        p.aside { "Of the cells in full; `explain` gives those of any other." }
        (cautions::list(told, CAUTIONS))
    }
}

fn campaign(report: &JobReport) -> Markup {
    html! {
        (facts::axes(&report.axes))
        @if !report.warnings.is_empty() {
            h3 { "What was noted of it" }
            ul { @for warning in &report.warnings { li dir="auto" { (warning) } } }
        }
    }
}

fn notebook(report: &JobReport) -> Markup {
    let mut rows = vec![
        ("job", report.job.clone()),
        ("state", report.state.clone()),
        ("submitted", date(report.submitted_unix_ms)),
        ("ended", report.ended_unix_ms.map(date).unwrap_or_default()),
        (
            "cells",
            format!("{} of {}", count(report.cells_done), count(report.cells)),
        ),
    ];
    rows.extend(report.versions.rows());
    facts::notebook(&rows)
}
