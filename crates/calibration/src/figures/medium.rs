//! Figures of the medium.

use std::collections::BTreeMap;
use std::fmt::Write;

use enolattice_model::Model;

use crate::medium::{Comparison, compare};

/// RMS that is wanted of each set.
const WANTED: f64 = 1.0;

fn rms(errors: &[f64]) -> f64 {
    (errors.iter().map(|error| error * error).sum::<f64>() / errors.len().max(1) as f64).sqrt()
}

/// The figures of the medium, and what is interpolated.
pub(super) fn section(text: &mut String, model: &Model) -> Result<(), String> {
    let compared = compare(model)?;
    text.push_str(
        "\n## Medium, reference pairs\n\n\
         pKa of the same acid in DMSO and in another medium, the model against published values. Several parameters rest on these\n\
         very pairs.\n\n\
         | acids | medium | n | RMS | wanted | worst |\n\
         | --- | --- | --- | --- | --- | --- |\n",
    );
    let mut sets: BTreeMap<(&str, &str), Vec<f64>> = BTreeMap::new();
    let mut media: BTreeMap<&str, Vec<f64>> = BTreeMap::new();
    for Comparison {
        kind,
        medium,
        model,
        published,
        ..
    } in &compared
    {
        let error = model - published;
        sets.entry((kind, medium)).or_default().push(error);
        media.entry(medium).or_default().push(error);
    }
    let mut line = |kind: &str, medium: &str, errors: &[f64]| {
        let worst = errors.iter().fold(0.0_f64, |w, e| w.max(e.abs()));
        let _ = writeln!(
            text,
            "| {kind} | {medium} | {} | {:.2} | ≤ {WANTED:.1} | {worst:.1} |",
            errors.len(),
            rms(errors)
        );
    };
    for (medium, errors) in &media {
        line("all", medium, errors);
    }
    for ((kind, medium), errors) in &sets {
        line(kind, medium, errors);
    }
    interpolated(text, model, &media);
    Ok(())
}

/// The solvents of the library without a reference pair.
fn interpolated(text: &mut String, model: &Model, media: &BTreeMap<&str, Vec<f64>>) {
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
