//! How a data directory is, and what a copy of it holds.

use std::path::Path;

use enolattice_engine::{Copied, Health};
use indicatif::BinaryBytes;

use super::numbers::count;

/// A page on a data directory; `looked`: nothing was changed.
pub(crate) fn health_page(health: &Health, looked: bool) -> String {
    let mut lines = vec![format!(
        "{} ({} unfinished), {}, {} of {}",
        counted(health.jobs, "job"),
        count(health.jobs_unfinished),
        counted(health.plans, "plan"),
        counted(health.blocks, "block"),
        counted(health.cells, "cell"),
    )];
    if health.is_sound() {
        lines.push("nothing is wrong".to_owned());
    } else if looked {
        lines.push("nothing was changed; mending would do and say this:".to_owned());
    }
    if let Some(said) = &health.format_damaged {
        lines.push(format!(
            "- the file `format` was damaged (it said `{said}`); it was written anew"
        ));
    }
    let sentences = health.report.sentences();
    lines.extend(sentences.iter().map(|sentence| format!("- {sentence}")));
    lines.extend(remarks(health, looked));
    lines.join("\n")
}

/// What is no fault.
fn remarks(health: &Health, looked: bool) -> Vec<String> {
    let report = &health.report;
    let mut remarks = Vec::new();
    if report.blocks_of_no_job > 0 {
        remarks.push(format!(
            "{} of scores of jobs without a record that can be read: kept",
            counted(report.blocks_of_no_job, "block")
        ));
    }
    if !report.leftovers.is_empty() {
        let files = counted(report.leftovers.len() as u64, "file");
        remarks.push(match looked {
            true => format!("{files} that a crash left unfinished would be removed"),
            false => format!("{files} that a crash left unfinished removed"),
        });
    }
    for aside in &health.set_aside {
        remarks.push(format!(
            "`{}` ({}) was set aside; remove it when nobody wants to look at it",
            aside.path.display(),
            BinaryBytes(aside.bytes)
        ));
    }
    if health.jobs_unfinished > 0 {
        remarks.push(format!(
            "unfinished jobs go on with `enolattice serve`, or one by one with `enolattice watch JOB`: {}",
            count(health.jobs_unfinished)
        ));
    }
    remarks
}

/// What a copy holds, in a line.
pub(crate) fn copied_line(copied: &Copied, to: &Path) -> String {
    format!(
        "copied {}, {}, {} of {} to {} ({})",
        counted(copied.jobs, "job"),
        counted(copied.plans, "plan"),
        counted(copied.blocks, "block"),
        counted(copied.cells, "cell"),
        to.display(),
        BinaryBytes(copied.bytes)
    )
}

fn counted(number: u64, noun: &str) -> String {
    match number {
        1 => format!("1 {noun}"),
        _ => format!("{} {noun}s", count(number)),
    }
}
