//! The medium against published pKa of the same acid in several solvents.

mod fit;
mod pairs;

use std::collections::BTreeMap;
use std::fmt::Write;

use enolattice_model::Model;

use fit::Fit;
use pairs::{Pair, pairs};

/// One acid, as published and as the model has it.
#[derive(Clone, Debug)]
pub struct Comparison {
    /// The acid.
    pub name: String,
    /// Solvent and counter-ion.
    pub medium: String,
    /// Kind of the acid.
    pub kind: &'static str,
    /// pKa in DMSO.
    pub pka_dmso: f64,
    /// Published pKa in the solvent.
    pub published: f64,
    /// The model's, on the solvent's own scale.
    pub model: f64,
    /// Model less published with the parameters fitted to all other acids; `None` where these say nothing of it.
    pub left_out: Option<f64>,
}

impl Comparison {
    /// Model less published.
    pub fn error(&self) -> f64 {
        self.model - self.published
    }
}

/// A parameter of the medium: its mean in the model, and what the pairs say.
#[derive(Clone, Debug)]
pub struct FittedParameter {
    /// Name.
    pub name: String,
    /// Mean in the model.
    pub mean: f64,
    /// Standard uncertainty in the model.
    pub sigma: f64,
    /// Fitted to the pairs.
    pub fitted: f64,
    /// Standard error of the fit.
    pub standard_error: f64,
}

/// Errors of one kind of acid in one medium.
pub(crate) struct Errors {
    pub(crate) n: usize,
    pub(crate) rms: f64,
    pub(crate) mean: f64,
    pub(crate) worst: f64,
    /// RMS of acids left out, and of how many.
    pub(crate) left_out: Option<(usize, f64)>,
}

impl Errors {
    pub(crate) fn of(compared: &[&Comparison]) -> Errors {
        let errors: Vec<f64> = compared.iter().map(|one| one.error()).collect();
        let left: Vec<f64> = compared.iter().filter_map(|one| one.left_out).collect();
        let n = errors.len().max(1) as f64;
        Errors {
            n: errors.len(),
            rms: rms(&errors),
            mean: errors.iter().sum::<f64>() / n,
            worst: errors
                .iter()
                .fold(0.0, |a: f64, &b| if b.abs() > a.abs() { b } else { a }),
            left_out: (!left.is_empty()).then(|| (left.len(), rms(&left))),
        }
    }

    /// The RMS of acids left out, for a table; of how many, where not of all.
    pub(crate) fn left_out_text(&self) -> String {
        match self.left_out {
            Some((n, rms)) if n == self.n => format!("{rms:.2}"),
            Some((n, rms)) => format!("{rms:.2} (n = {n})"),
            None => "none".to_owned(),
        }
    }
}

fn rms(errors: &[f64]) -> f64 {
    (errors.iter().map(|error| error * error).sum::<f64>() / errors.len().max(1) as f64).sqrt()
}

/// Ion-pair acidities are relative to each other: their zero is put where the errors have no mean.
fn centre(pairs: &[Pair], errors: &mut [f64]) {
    let relative = || pairs.iter().map(Pair::is_relative);
    let n = relative().filter(|is| *is).count().max(1) as f64;
    let sum: f64 = relative()
        .zip(errors.iter())
        .filter_map(|(is, error)| is.then_some(error))
        .sum();
    for (error, is) in errors.iter_mut().zip(relative()) {
        *error -= if is { sum / n } else { 0.0 };
    }
}

/// All acids of the table.
///
/// # Errors
/// A sentence that names a row which cannot be used.
pub fn compare(model: &Model) -> Result<Vec<Comparison>, String> {
    let pairs = pairs(model)?;
    let fit = Fit::new(model, &pairs)?;
    let mut errors = pairs
        .iter()
        .map(|pair| {
            let pka = pair.predicted(model, &[]);
            pka.map(|pka| pka - pair.published)
                .ok_or_else(|| format!("{}: {} has no scale", pair.name, pair.medium))
        })
        .collect::<Result<Vec<_>, _>>()?;
    centre(&pairs, &mut errors);
    let all = pairs.into_iter().zip(errors).zip(fit.left_out);
    Ok(all
        .map(|((pair, error), left_out)| Comparison {
            name: pair.name,
            medium: pair.medium,
            kind: pair.kind,
            pka_dmso: pair.pka_dmso,
            published: pair.published,
            model: pair.published + error,
            left_out,
        })
        .collect())
}

/// The parameters that the pairs settle.
///
/// # Errors
/// As [`compare`], and a sentence that names a term which is no parameter of the model.
pub fn parameters(model: &Model) -> Result<Vec<FittedParameter>, String> {
    let fit = Fit::new(model, &pairs(model)?)?;
    let of_model = |name: &str| model.parameters().iter().find(|one| one.name == name);
    fit.values
        .into_iter()
        .map(|(name, fitted, standard_error)| {
            let one = of_model(&name).ok_or_else(|| format!("{name}: no such parameter"))?;
            Ok(FittedParameter {
                mean: one.mean,
                sigma: one.sigma,
                name,
                fitted,
                standard_error,
            })
        })
        .collect()
}

/// The comparisons of each kind of acid in each medium.
pub(crate) fn by_kind(compared: &[Comparison]) -> BTreeMap<(&str, &str), Vec<&Comparison>> {
    let mut sets: BTreeMap<(&str, &str), Vec<&Comparison>> = BTreeMap::new();
    for one in compared {
        let key = (one.kind, one.medium.as_str());
        sets.entry(key).or_default().push(one);
    }
    sets
}

/// The page: RMS by solvent and kind, then every acid.
///
/// # Errors
/// As [`parameters`].
pub fn page(model: &Model) -> Result<String, String> {
    let compared = compare(model)?;
    let mut page = String::from(
        "# The medium and how good it is\n\n\
         Written by `cargo run -p enolattice-calibration -- medium`; do not edit.\n\n\
         pKa of the same acid in other solvents from its pKa in DMSO, on the scale of each solvent, against\n\
         published values (`crates/calibration/data/medium_pairs.tsv`, from memory). The parameters of the medium rest on\n\
         these very pairs; `left out` has the RMS of acids foretold with the parameters fitted to all others. It is missing where an acid's\n\
         parameters rest on it alone.\n\
         Acidities of lithium ion pairs are relative to each other: their zero is put where the errors have no mean.\n\
         Other solvents have no published scale here; the model interpolates them by permittivity and by the Kamlet–Taft\n\
         constants α and β.\n\n\
         Out of reach: fluorenes. Carbanions spread over arenes are held by the polarisable DMSO: in water and MeCN they are weaker\n\
         acids than the class of their acceptor says. A class of anion of their own would mend it; no base or electrophile\n\
         of the library is one, and other acids of the kind were not measured outside DMSO.\n\n\
         | acids | solvent | n | RMS | left out | mean error | worst |\n\
         | --- | --- | --- | --- | --- | --- | --- |\n",
    );
    for ((kind, medium), set) in &by_kind(&compared) {
        let errors = Errors::of(set);
        let _ = writeln!(
            page,
            "| {kind} | {medium} | {} | {:.2} | {} | {:+.2} | {:+.2} |",
            errors.n,
            errors.rms,
            errors.left_out_text(),
            errors.mean,
            errors.worst
        );
    }
    page.push_str("\n| acid | DMSO | solvent | published | model | error | left out |\n| --- | --- | --- | --- | --- | --- | --- |\n");
    for one in &compared {
        let left_out = one.left_out.map(|error| format!("{error:+.1}"));
        let _ = writeln!(
            page,
            "| {} | {:.1} | {} | {:.1} | {:.1} | {:+.1} | {} |",
            one.name,
            one.pka_dmso,
            one.medium,
            one.published,
            one.model,
            one.error(),
            left_out.unwrap_or_default()
        );
    }
    fitted_parameters(&mut page, model)?;
    Ok(page)
}

fn fitted_parameters(page: &mut String, model: &Model) -> Result<(), String> {
    page.push_str(
        "\n## Parameters\n\n\
         Fitted to all pairs, each drawn to a start from elsewhere (`crates/calibration/data/medium_terms.tsv`); a test holds the model's\n\
         means within one standard uncertainty of the fit.\n\n\
         | parameter | model | σ | fitted | standard error |\n| --- | --- | --- | --- | --- |\n",
    );
    for one in parameters(model)? {
        let _ = writeln!(
            page,
            "| {} | {} | {} | {:.2} | {:.2} |",
            one.name, one.mean, one.sigma, one.fitted, one.standard_error
        );
    }
    Ok(())
}
