//! The tables of the fit and the page on their quality, as text.

use std::fmt::Write;

use enolattice_molecule::AnionClass;

use super::observations::Observed;
use super::validation::{CLASS_PRIOR_SITES, Held, LOOSER, class_errors, class_of};
use super::{Fit, FitError, Observation, Observations, Term, Validation, together};

/// `acidity_coefficients.tsv`.
pub(super) fn coefficients(terms: &[Term], fit: &Fit) -> String {
    let mut text = String::from(
        "# Coefficients of the acidity estimate (pKa in DMSO, 25 C), as fitted by `enolattice-calibration acidity`.\n\
         # source: where a term starts and why; `training_sites` says how many measured sites moved it from there.\n\
         name\trole\tvalue\tstandard_error\ttraining_sites\tunit\tsource\n",
    );
    for (i, term) in terms.iter().enumerate() {
        let _ = writeln!(
            text,
            "{}\t{}\t{:.4}\t{:.4}\t{}\t{}\t{}",
            term.name,
            term.role_text,
            fit.values[i],
            fit.standard_errors[i],
            fit.training_sites[i],
            term.unit,
            term.source
        );
    }
    text
}

/// `acidity_curvature.tsv`.
pub(super) fn curvature(fit: &Fit) -> String {
    let mut text = String::from(
        "# Inverse of the covariance of the coefficients of the acidity estimate: its lower triangle without zeros, in 1/unit^2.\n\
         # row, column: the coefficient's place in acidity_coefficients.tsv, from 0.\n\
         row\tcolumn\tvalue\n",
    );
    let n = fit.values.len();
    for row in 0..n {
        for column in 0..=row {
            let value = fit.curvature[row * n + column];
            if value != 0.0 {
                let _ = writeln!(text, "{row}\t{column}\t{value:.4}");
            }
        }
    }
    text
}

/// `acidity_seen.tsv`.
pub(super) fn seen(fit: &Fit, rows: &[Observation]) -> String {
    let mut text = String::from(
        "# Sites of the fit with what the group contributions leave unexplained (measured - estimated, pK units).\n\
         compound\tatom\tpka_dmso\tresidual\tdescriptors\n",
    );
    for (row, at) in rows.iter().zip(&fit.assigned) {
        if !matches!(row.observed, Observed::Acidity { .. }) {
            continue;
        }
        let candidate = &row.candidates[*at];
        let descriptors: Vec<String> = candidate
            .site
            .descriptors
            .iter()
            .map(|(name, value)| format!("{name}:{value:.4}"))
            .collect();
        let _ = writeln!(
            text,
            "{}\t{}\t{:.1}\t{:.4}\t{}",
            row.name,
            candidate.site.atom,
            row.value,
            row.value - candidate.contribution.value(&fit.values),
            descriptors.join("; ")
        );
    }
    text
}

/// Mean absolute, root mean square and largest error.
pub(super) struct Errors {
    pub(super) sites: usize,
    pub(super) mean_absolute: f64,
    pub(super) root_mean_square: f64,
    pub(super) largest: f64,
    pub(super) bias: f64,
}

pub(super) fn summary(errors: impl Iterator<Item = f64>) -> Errors {
    let errors: Vec<f64> = errors.collect();
    let n = errors.len().max(1) as f64;
    Errors {
        sites: errors.len(),
        mean_absolute: errors.iter().map(|e| e.abs()).sum::<f64>() / n,
        root_mean_square: (errors.iter().map(|e| e * e).sum::<f64>() / n).sqrt(),
        largest: errors
            .iter()
            .fold(0.0, |largest: f64, e| largest.max(e.abs())),
        bias: errors.iter().sum::<f64>() / n,
    }
}

/// `acidity_held_out.tsv`: errors of each measured site when it was held out.
pub(super) fn held_out(fit: &Fit, rows: &[Observation], validation: &Validation) -> String {
    let mut text = String::from(
        "# Errors (predicted - measured, pK units) of each measured compound when one in five, and when its scaffold group, was held out.\n\
         # sigma: what the model would have given it with its scaffold group held out; sigma_one_in_five: with one in five.\n\
         # in_scope: whether it is a C-H acid beside C=O, CN, NO2 or S(O)n.\n\
         compound\tatom\tone_in_five\tscaffold_group\tsigma\tsigma_one_in_five\tin_scope\n",
    );
    let mut five_fold = vec![None; rows.len()];
    for one in &validation.five_fold {
        five_fold[one.row] = Some((one.error, one.sigma));
    }
    let mut held: Vec<&Held> = validation.leave_group_out.iter().collect();
    held.sort_by_key(|one| one.row);
    for one in held {
        let (row, at) = (&rows[one.row], fit.assigned[one.row]);
        let (error, sigma) = five_fold[one.row].unwrap_or((one.error, one.sigma));
        let _ = writeln!(
            text,
            "{}\t{}\t{error:.2}\t{:.2}\t{:.2}\t{sigma:.2}\t{}",
            row.name,
            row.candidates[at].site.atom,
            one.error,
            one.sigma,
            if row.in_scope { "yes" } else { "no" }
        );
    }
    text
}

/// `acidity_errors.tsv`: mean error of an estimate by class of anion.
pub(super) fn errors(rows: &[Observation], validation: &Validation) -> String {
    let mut text = format!(
        "# Error of the acidity estimate for compounds it has not seen, by class of anion (one scaffold group held out).\n\
         # drawn: the mean absolute error drawn towards that of all by {CLASS_PRIOR_SITES} sites' weight.\n\
         class\tsites\tmean_absolute_error\tdrawn\n",
    );
    let held = &validation.leave_group_out;
    let all = summary(held.iter().map(|one| one.error));
    let mut line = |class: &str, errors: &Errors, drawn: f64| {
        let (sites, mean) = (errors.sites, errors.mean_absolute);
        let _ = writeln!(text, "{class}\t{sites}\t{mean:.2}\t{drawn:.2}");
    };
    line("any", &all, all.mean_absolute);
    let drawn = class_errors(rows, held);
    for (class, errors) in by_class(rows, held) {
        line(&format!("{class:?}"), &errors, drawn[&class]);
    }
    text
}

fn by_class(rows: &[Observation], held: &[Held]) -> Vec<(AnionClass, Errors)> {
    let mut classes: Vec<AnionClass> = held.iter().map(|one| class_of(rows, one)).collect();
    classes.sort_unstable();
    classes.dedup();
    classes
        .into_iter()
        .map(|wanted| {
            let errors = held
                .iter()
                .filter(|one| class_of(rows, one) == wanted)
                .map(|one| one.error);
            (wanted, summary(errors))
        })
        .collect()
}

/// The page on the quality of the fit.
pub(super) fn page(
    terms: &[Term],
    fit: &Fit,
    observations: &Observations,
    validation: &Validation,
) -> Result<String, FitError> {
    let rows = &observations.rows;
    let count = |wanted: fn(&Observation) -> bool| rows.iter().filter(|row| wanted(row)).count();
    let mut text = String::from("# The acidity estimate and how good it is\n\n");
    let _ = writeln!(
        text,
        "Written by `cargo run -p enolattice-calibration -- acidity`; do not edit.\n\n\
         pKa in DMSO at 25 °C of a site with all its equivalent hydrogens:\n\
         `pKa = p − Σ a·x + Σ_pairs κ·a_i·a_j/100 + Σ b·x`, fitted on {} measured sites, {} derived anchors and\n\
         {} enolate equilibria; {} coefficients, each drawn towards a chemically expected start.\n",
        count(|row| row.measured),
        count(|row| !row.measured && row.observed != Observed::Difference),
        count(|row| row.observed == Observed::Difference),
        terms.len()
    );
    quality(&mut text, rows, validation);
    uncertainty(&mut text, validation);
    together::section(&mut text, terms, fit, rows, validation)?;
    local_correction(&mut text, rows, validation);
    classes(&mut text, rows, validation);
    worst(&mut text, rows, validation);
    left_out(&mut text, observations);
    coefficient_list(&mut text, terms, fit);
    Ok(text)
}

fn left_out(text: &mut String, observations: &Observations) {
    text.push_str("\n## Measured but not used\n\n| compound | why |\n| --- | --- |\n");
    for (compound, why) in &observations.left_out {
        let _ = writeln!(text, "| `{compound}` | {why} |");
    }
}

fn quality(text: &mut String, rows: &[Observation], validation: &Validation) {
    let _ = writeln!(
        text,
        "## Compounds held out\n\n\
         In scope: C–H beside C=O, C≡N, NO2 or S(O)n. A compound's pKa is that of the site predicted to be most\n\
         acidic. Terms and starts were set by people who know this chemistry, hence many of these compounds, which\n\
         no holding out undoes; several terms were added for the worst errors of this very list, so that compounds nobody\n\
         has looked at are likely to come out worse than these figures. The rows with loose starts bind the coefficients {LOOSER} times less to them.\n\
         Outside: those for which the compounds kept have nothing alike.\n\n\
         | held out | compounds | n | MAE | RMSE | bias | worst |\n| --- | --- | --- | --- | --- | --- | --- |"
    );
    let ways = [
        ("one in five", &validation.five_fold),
        ("one scaffold group", &validation.leave_group_out),
        ("one in five, loose starts", &validation.five_fold_loose),
    ];
    for (way, held) in ways {
        let mut line = |compounds: &str, belongs: &dyn Fn(&Held) -> bool| {
            let e = summary(held.iter().filter(|one| belongs(one)).map(|one| one.error));
            let _ = writeln!(
                text,
                "| {way} | {compounds} | {} | {:.2} | {:.2} | {:+.2} | {:.1} |",
                e.sites, e.mean_absolute, e.root_mean_square, e.bias, e.largest
            );
        };
        let carbon = |one: &Held| rows[one.row].candidates[0].site.element == 6;
        line("C–H in scope", &|one| rows[one.row].in_scope);
        line("all C–H", &|one| carbon(one));
        line("O–H, N–H, S–H", &|one| !carbon(one));
        line("all, inside", &|one| !one.outside);
        line("all, outside", &|one| one.outside);
    }
}

/// How often the measured value lies within one and two σ of the estimate.
fn uncertainty(text: &mut String, validation: &Validation) {
    text.push_str(
        "\n## Uncertainty of each estimate\n\n\
         σ of a site comes from the errors that measured sites like it had when they were held out, weighted by\n\
         likeness, from the mean error of its class of anion, from the distance to the nearest measured site, and from the\n\
         standard errors of coefficients that rest on fewer than three sites. A normal distribution asks for 68 and 95 %.\n\
         Three parameters of σ (reach, weight of the class, growth with distance) were set on these same compounds.\n\n\
         | held out | compounds | n | mean σ | MAE | within 1 σ | within 2 σ |\n| --- | --- | --- | --- | --- | --- | --- |\n",
    );
    for (way, held) in [
        ("one in five", &validation.five_fold),
        ("one scaffold group", &validation.leave_group_out),
    ] {
        let mut sorted: Vec<&Held> = held.iter().collect();
        sorted.sort_by(|a, b| a.sigma.total_cmp(&b.sigma).then(a.row.cmp(&b.row)));
        let third = sorted.len() / 3;
        for (compounds, chosen) in [
            ("all", &sorted[..]),
            ("third with the least σ", &sorted[..third]),
            ("middle third", &sorted[third..2 * third]),
            ("third with the greatest σ", &sorted[2 * third..]),
        ] {
            let n = chosen.len().max(1) as f64;
            let within = |k: f64| {
                let inside = chosen.iter().filter(|one| one.error.abs() <= k * one.sigma);
                100.0 * inside.count() as f64 / n
            };
            let _ = writeln!(
                text,
                "| {way} | {compounds} | {} | {:.2} | {:.2} | {:.0} % | {:.0} % |",
                chosen.len(),
                chosen.iter().map(|one| one.sigma).sum::<f64>() / n,
                summary(chosen.iter().map(|one| one.error)).mean_absolute,
                within(1.0),
                within(2.0)
            );
        }
    }
}

/// What the residuals of the nearest measured sites would change, which the model leaves out.
fn local_correction(text: &mut String, rows: &[Observation], validation: &Validation) {
    text.push_str(
        "\n## A correction by the nearest measured sites, tried and not used\n\n\
         Added to the estimate: the mean residual of the nearest 25 sites that were kept, weighted by likeness and by\n\
         their own σ, drawn to zero where none is near. It lowers the error of C–H acids a little in both ways of holding\n\
         out, by about two standard errors, and not that of O–H, N–H and S–H acids with their scaffold held out. It was left\n\
         out, with these figures at hand, as too small a gain for a part of the estimate that no chemist can check.\n\n\
         | held out | compounds | MAE without | MAE with | difference | its standard error |\n| --- | --- | --- | --- | --- | --- |\n",
    );
    let carbon = |one: &Held| rows[one.row].candidates[0].site.element == 6;
    for (way, held) in [
        ("one in five", &validation.five_fold),
        ("one scaffold group", &validation.leave_group_out),
    ] {
        let mut line = |compounds: &str, belongs: &dyn Fn(&Held) -> bool| {
            let chosen = || held.iter().filter(|one| belongs(one));
            let without = summary(chosen().map(|one| one.error));
            let with = summary(chosen().map(|one| one.corrected_error));
            let change = |one: &Held| one.corrected_error.abs() - one.error.abs();
            let changes = summary(chosen().map(change));
            let variance = changes.root_mean_square.powi(2) - changes.bias.powi(2);
            let _ = writeln!(
                text,
                "| {way} | {compounds} | {:.3} | {:.3} | {:+.3} | {:.3} |",
                without.mean_absolute,
                with.mean_absolute,
                changes.bias,
                (variance.max(0.0) / changes.sites.max(1) as f64).sqrt()
            );
        };
        line("C–H in scope", &|one| rows[one.row].in_scope);
        line("all C–H", &|one| carbon(one));
        line("O–H, N–H, S–H", &|one| !carbon(one));
        line("all", &|_| true);
    }
}

fn classes(text: &mut String, rows: &[Observation], validation: &Validation) {
    text.push_str(
        "\n## By class of anion, one scaffold group held out\n\n\
         | class | n | MAE | bias | worst |\n| --- | --- | --- | --- | --- |\n",
    );
    for (class, e) in by_class(rows, &validation.leave_group_out) {
        let _ = writeln!(
            text,
            "| {class:?} | {} | {:.2} | {:+.2} | {:.1} |",
            e.sites, e.mean_absolute, e.bias, e.largest
        );
    }
}

fn worst(text: &mut String, rows: &[Observation], validation: &Validation) {
    text.push_str(
        "\n## The worst, one in five held out\n\n\
         | compound | measured | predicted − measured |\n| --- | --- | --- |\n",
    );
    let mut held: Vec<&Held> = validation.five_fold.iter().collect();
    held.sort_by(|a, b| {
        b.error
            .abs()
            .total_cmp(&a.error.abs())
            .then(a.row.cmp(&b.row))
    });
    for one in held.into_iter().take(30) {
        let row = &rows[one.row];
        let _ = writeln!(
            text,
            "| `{}` | {:.1} | {:+.1} |",
            row.name, row.value, one.error
        );
    }
}

fn coefficient_list(text: &mut String, terms: &[Term], fit: &Fit) {
    text.push_str(
        "\n## Coefficients\n\n\
         Each is drawn to its start by a normal prior whose spread stands in `acidity_terms.tsv`: a term that no measured site\n\
         has stays at its start, one on fewer than three moves part of the way, and its standard error goes into σ.\n\n\
         | term | role | start | fitted | standard error | sites | unit |\n| --- | --- | --- | --- | --- | --- | --- |\n",
    );
    for (i, term) in terms.iter().enumerate() {
        let _ = writeln!(
            text,
            "| {} | {} | {} | {:.2} | {:.2} | {} | {} |",
            term.name,
            term.role_text,
            term.start,
            fit.values[i],
            fit.standard_errors[i],
            fit.training_sites[i],
            term.unit
        );
    }
}
