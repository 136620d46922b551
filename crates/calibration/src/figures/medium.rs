//! Figures of the medium.

use std::collections::BTreeMap;
use std::fmt::Write;

use enolattice_model::Model;

use crate::medium::{Comparison, Errors, by_kind, compare};

/// RMS that is wanted of each set.
const WANTED: f64 = 1.0;

/// The figures of the medium, and what is interpolated.
pub(super) fn section(text: &mut String, model: &Model) -> Result<(), String> {
    let compared = compare(model)?;
    text.push_str(
        "\n## Medium, reference pairs\n\n\
         pKa of the same acid in DMSO and in another medium, the model against published values. The parameters rest on these\n\
         very pairs: `left out` has the RMS of acids foretold from all others, without those whose parameters rest on them alone.\n\n\
         | acids | medium | n | RMS | wanted | left out | worst |\n\
         | --- | --- | --- | --- | --- | --- | --- |\n",
    );
    let mut media: BTreeMap<&str, Vec<&Comparison>> = BTreeMap::new();
    for one in &compared {
        media.entry(&one.medium).or_default().push(one);
    }
    let mut line = |kind: &str, medium: &str, set: &[&Comparison]| {
        let errors = Errors::of(set);
        let _ = writeln!(
            text,
            "| {kind} | {medium} | {} | {:.2} | ≤ {WANTED:.1} | {} | {:.1} |",
            errors.n,
            errors.rms,
            errors.left_out_text(),
            errors.worst.abs()
        );
    };
    for (medium, set) in &media {
        line("all", medium, set);
    }
    for ((kind, medium), set) in &by_kind(&compared) {
        line(kind, medium, set);
    }
    text.push_str(
        "\nFluorenes stay out of reach: carbanions spread over arenes are held by the polarisable DMSO, and the model has no class of\n\
         anion for them. [medium.md](medium.md) has the residuals.\n",
    );
    interpolated(text, model, &media);
    Ok(())
}

/// The solvents of the library without a reference pair.
fn interpolated(text: &mut String, model: &Model, media: &BTreeMap<&str, Vec<&Comparison>>) {
    let without: Vec<&str> = model
        .library()
        .solvents()
        .iter()
        .map(|solvent| solvent.name.as_str())
        .filter(|name| *name != "DMSO" && !media.keys().any(|medium| medium.starts_with(name)))
        .collect();
    let _ = writeln!(
        text,
        "\nInterpolated by permittivity and by the Kamlet–Taft constants α and β, no reference pair: {}.",
        without.join(", ")
    );
}
